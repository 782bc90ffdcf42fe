import type { ModuleType } from '../../equipment/module-type';
import type { UnitType } from '../../equipment/unit-type';
import { type RuleSet, timeLimitOf } from '../../verdicts/context';
import { checkModuleType } from '../module/datasheet';
import { wholeWithin } from '../range';
import {
  VOLTAGE_INSIDE_ARRAY,
  VOLTAGE_OUTSIDE_ARRAY,
  circuitCurrents,
  mostUnitsInShutdown,
  stringSizing,
} from './string-sizing';

export const DESIGN_CHECKS = [
  'string_voltage_cold',
  'mppt_window_hot',
  'unit_voltage_cold',
  'unit_current',
  'input_current',
  'shutdown_inside_array',
  'shutdown_outside_array',
  'shutdown_time',
] as const;
export type DesignCheck = (typeof DESIGN_CHECKS)[number];

/** A design as drawn. Limits of the inverter that aren't known are null and give "can't tell". */
export interface StringDesign {
  module: ModuleType;
  unit: UnitType;
  modulesPerString: number;
  stringsOnInput: number;
  ruleSet: RuleSet;
  homeRunLeavesArray: boolean;
  /** Lowest expected ambient and hottest cell, °C. */
  temperatureMin: number;
  temperatureCellMax: number;
  /** V, A of the inverter's input; V of its MPPT window. */
  inputVoltageMax: number | null;
  inputCurrentMax: number | null;
  mpptMin: number | null;
  /** Relative, 1/K; without it gammaPmp − alphaIsc, a close estimate for silicon. */
  betaVmp?: number;
}

export interface DesignFinding {
  check: DesignCheck;
  outcome: 'within' | 'exceeded' | 'cannot_tell' | 'not_required';
  /** What the design has, in `unit`; null where it isn't defined. */
  value: number | null;
  /** What it is held against. */
  limit: number | null;
  unit: 'V' | 'A' | 's';
  /** Clause or document, and how well it is known. */
  source: string;
  /** One sentence: what follows. */
  remark: string;
}

const finding = (
  check: DesignCheck,
  unit: DesignFinding['unit'],
  value: number,
  limit: number | null,
  source: string,
  remark: { within: string; exceeded: string; cannotTell: string },
  bound: 'at_most' | 'at_least' = 'at_most',
): DesignFinding => {
  if (limit === null)
    return { check, outcome: 'cannot_tell', value, limit, unit, source, remark: remark.cannotTell };
  const slack = 1e-9 * Math.abs(limit);
  const holds = bound === 'at_most' ? value <= limit + slack : value >= limit - slack;
  return {
    check,
    outcome: holds ? 'within' : 'exceeded',
    value,
    limit,
    unit,
    source,
    remark: holds ? remark.within : remark.exceeded,
  };
};

/**
 * A string's design held against the limits of units and inverter and against NEC 690.7, 690.8 and 690.12 (editions 2017
 * to 2023, as quoted by others; the authority having jurisdiction decides). A check of arithmetic, not an approval.
 *
 * @throws RangeError naming the parameter
 */
export function checkStringDesign(design: StringDesign): DesignFinding[] {
  const { module, modulesPerString: n } = design;
  checkModuleType(module);
  wholeWithin('modulesPerString', n, 1, 63);
  wholeWithin('stringsOnInput', design.stringsOnInput, 1, 1000);
  const sizing = stringSizing({
    vocRef: module.vocRef,
    vmpRef: module.vmpRef,
    betaVoc: module.betaVoc,
    betaVmp: design.betaVmp ?? module.gammaPmp - module.alphaIsc,
    temperatureMin: design.temperatureMin,
    temperatureCellMax: design.temperatureCellMax,
    voltageMax: design.inputVoltageMax ?? 1500,
    mpptMin: design.mpptMin ?? 0,
  });
  const currents = circuitCurrents(module.iscRef, design.stringsOnInput);
  const byType = 'according to the type entered';
  return [
    ...voltageAndCurrent(design, sizing, currents.currentMax, byType),
    ...shutdownFindings(design, sizing.vocCold, byType),
  ];
}

function voltageAndCurrent(
  { module, unit, modulesPerString: n, ...design }: StringDesign,
  sizing: ReturnType<typeof stringSizing>,
  inputCurrent: number,
  byType: string,
): DesignFinding[] {
  const optimizing = unit.kind === 'optimizing';
  const table =
    sizing.mostByTable === null
      ? 'Table 690.7(A) ends at −40 °C.'
      : `By Table 690.7(A) at most ${sizing.mostByTable}.`;
  const cold = finding(
    'string_voltage_cold',
    'V',
    n * sizing.vocCold,
    design.inputVoltageMax,
    'NEC 690.7(A)(1), inverter maximum',
    {
      within: `On the coldest day ${sizing.most} modules would fit. ${table}`,
      exceeded: `On the coldest day at most ${sizing.most} modules fit. ${table}`,
      cannotTell: 'The inverter’s highest DC voltage isn’t entered.',
    },
  );
  const hot = finding(
    'mppt_window_hot',
    'V',
    n * sizing.vmpHot,
    design.mpptMin,
    'inverter MPPT window',
    {
      within: 'On the hottest day the string stays in the window.',
      exceeded: `On the hottest day the string needs at least ${sizing.fewest} modules.`,
      cannotTell: 'The inverter’s MPPT window isn’t entered.',
    },
    'at_least',
  );
  const setByInverter = (entry: DesignFinding): DesignFinding => ({
    ...entry,
    outcome: 'cannot_tell',
    source: 'NEC 690.7(B)',
    remark:
      'Optimizing units: the inverter sets the string’s voltage; follow the instructions of the units’ maker.',
  });
  return [
    optimizing ? setByInverter(cold) : cold,
    optimizing ? setByInverter(hot) : hot,
    finding('unit_voltage_cold', 'V', sizing.vocCold, unit.voltageInMax, `unit limit ${byType}`, {
      within: 'One module on the coldest day stays within the unit’s input limit.',
      exceeded:
        'One module on the coldest day is above the unit’s input limit: choose another unit or module.',
      cannotTell: '',
    }),
    finding(
      'unit_current',
      'A',
      1.25 * module.iscRef,
      unit.currentMax,
      `NEC 690.8(A)(1), unit limit ${byType}`,
      {
        within: '125 % of isc stays within the unit’s limit.',
        exceeded: '125 % of isc is above the unit’s limit: ask the unit’s maker how the limit is meant.',
        cannotTell: '',
      },
    ),
    finding('input_current', 'A', inputCurrent, design.inputCurrentMax, 'NEC 690.8(A)(1), inverter maximum', {
      within: '125 % of isc of all strings stays within the input’s limit.',
      exceeded:
        '125 % of isc of all strings is above the input’s limit: spread the strings over more inputs.',
      cannotTell: 'The input’s highest current isn’t entered.',
    }),
  ];
}

function shutdownFindings(design: StringDesign, vocCold: number, byType: string): DesignFinding[] {
  const { unit, ruleSet, modulesPerString: n } = design;
  const notRequired = (
    check: DesignCheck,
    unitOf: 'V' | 's',
    value: number,
    remark: string,
  ): DesignFinding => ({
    check,
    outcome: 'not_required',
    value,
    limit: null,
    unit: unitOf,
    source: 'rule set of the site',
    remark,
  });
  const inShutdown = n * unit.shutdownVoltage.max;
  if (ruleSet === 'none') {
    const remark = 'The site’s rule set asks for no rapid shutdown.';
    return [
      notRequired('shutdown_inside_array', 'V', vocCold, remark),
      notRequired('shutdown_outside_array', 'V', inShutdown, remark),
      notRequired('shutdown_time', 's', unit.commandLossAfterS, remark),
    ];
  }
  const inside =
    ruleSet === 'rapid_shutdown_10s'
      ? notRequired('shutdown_inside_array', 'V', vocCold, 'The 2014 edition sets no limit inside the array.')
      : ruleSet === 'hazard_control'
        ? {
            ...notRequired('shutdown_inside_array', 'V', vocCold, ''),
            outcome: 'cannot_tell' as const,
            source: 'NEC 690.12(B)(2)(1), UL 3741',
            remark: 'A listed hazard-control system stands in for the 80 V: its listing decides.',
          }
        : finding('shutdown_inside_array', 'V', vocCold, VOLTAGE_INSIDE_ARRAY, 'NEC 690.12(B)(2)', {
            within:
              'Behind one unit the coldest day stays within the limit between any two conductors and to earth.',
            exceeded:
              'Behind one unit the coldest day is above the limit: one module to a unit can’t meet it.',
            cannotTell: '',
          });
  const outside = design.homeRunLeavesArray
    ? finding(
        'shutdown_outside_array',
        'V',
        inShutdown,
        VOLTAGE_OUTSIDE_ARRAY,
        `NEC 690.12(B)(1), ${byType}`,
        {
          within: `${mostUnits(unit)} units in shutdown would stay within the limit.`,
          exceeded: `At most ${mostUnits(unit)} units in shutdown stay within the limit.`,
          cannotTell: '',
        },
      )
    : notRequired('shutdown_outside_array', 'V', inShutdown, 'The home run doesn’t leave the array.');
  const { timeLimitS, source } = timeLimitOf(ruleSet);
  const time: DesignFinding =
    unit.onCommandLoss === 'holds'
      ? {
          check: 'shutdown_time',
          outcome: 'exceeded',
          value: null,
          limit: timeLimitS,
          unit: 's',
          source,
          remark: `The unit holds its state when its command stops (${byType}): it doesn’t shut down by itself.`,
        }
      : finding('shutdown_time', 's', unit.commandLossAfterS, timeLimitS, source, {
          within: `The unit shuts down in time after its command stops (${byType}).`,
          exceeded: `The unit takes longer than the limit after its command stops (${byType}).`,
          cannotTell: '',
        });
  return [inside, outside, time];
}

function mostUnits(unit: UnitType): number | 'Any number of' {
  return unit.shutdownVoltage.max > 0 ? mostUnitsInShutdown(unit.shutdownVoltage.max) : 'Any number of';
}
