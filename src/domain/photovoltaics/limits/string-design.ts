import { unitVoltageSaid as said } from '../../../words/domain-photovoltaics-limits';
import { checkModuleType } from '../module/check-type';
import { wholeWithin } from '../range';
import { moduleCount, type StringDesign } from './design';
import { held, figure, type DesignFinding } from './design-finding';
import { currentFindings } from './string-current';
import { shutdownFindings } from './string-shutdown';
import { moduleVoltageCold, voltageFindings, windowFindings } from './string-voltage';

/**
 * A string's design held against the limits of modules, units and inverter and against NEC 690.7, 690.8, 690.9 and 690.12
 * (editions 2017 to 2023, as quoted by others; the authority having jurisdiction decides). A check of arithmetic, never
 * an approval.
 *
 * @throws RangeError naming the parameter
 */
export function checkStringDesign(design: StringDesign): DesignFinding[] {
  wholeWithin('modulesPerString', moduleCount(design.modules), 1, 63);
  wholeWithin('stringsOnInput', design.onInput.length, 1, 1000);
  for (const { type } of design.modules) checkModuleType(type);
  const { modules, temperatures, unit } = design;
  const cold = moduleVoltageCold(modules, temperatures.coldest.value);
  return [
    ...voltageFindings(design),
    ...windowFindings(design),
    held({
      check: 'unit_voltage_cold',
      value: cold,
      limit: unit.voltageInMax,
      unit: 'V',
      clause: said.clause,
      within: said.within(figure(cold, 'V')),
      exceeded: said.exceeded(figure(cold, 'V')),
      remedy: said.remedy,
      certain:
        temperatures.coldest.from === 'estimated'
          ? Math.max(...modules.map(({ type }) => type.vocRef))
          : undefined,
    }),
    ...currentFindings(design),
    ...shutdownFindings(design),
  ];
}
