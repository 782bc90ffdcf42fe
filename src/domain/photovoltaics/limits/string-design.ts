import { checkModuleType } from '../module/datasheet';
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
      clause: 'NEC 690.7(A)(1), unit’s maximum input voltage according to the type entered',
      within: `One module gives ${figure(cold, 'V')} on the coldest day.`,
      exceeded: `One module gives ${figure(cold, 'V')} on the coldest day, above the unit’s input limit.`,
      remedy: 'Choose another unit or module.',
      certain:
        temperatures.coldest.from === 'estimated'
          ? {
              value: Math.max(...modules.map(({ type }) => type.vocRef)),
              because: 'The temperature is only an estimate from latitude and altitude.',
            }
          : undefined,
    }),
    ...currentFindings(design),
    ...shutdownFindings(design),
  ];
}
