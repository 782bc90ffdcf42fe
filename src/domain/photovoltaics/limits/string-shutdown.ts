import { timeLimitOf } from '../../verdicts/context';
import { moduleCount, type StringDesign } from './design';
import { figure, held, type DesignFinding } from './design-finding';
import { VOLTAGE_INSIDE_ARRAY, VOLTAGE_OUTSIDE_ARRAY, mostUnitsInShutdown } from './string-sizing';
import { moduleVoltageCold } from './string-voltage';

const BY_TYPE = 'according to the type entered';

const notRequired = (
  check: DesignFinding['check'],
  unit: 'V' | 's',
  value: number,
  words: string,
): DesignFinding => ({
  check,
  outcome: 'not_required',
  value,
  limit: null,
  unit,
  safety: true,
  words,
  clause: 'Rule set of the site',
  remedy: null,
  alternatives: [],
});

/** What remains after shutdown, and how soon, against the rule set: NEC 690.12 as quoted by others. */
export function shutdownFindings(design: StringDesign): DesignFinding[] {
  const { unit, ruleSet, modules, temperatures } = design;
  const cold = moduleVoltageCold(modules, temperatures.coldest.value);
  const inShutdown = moduleCount(modules) * unit.shutdownVoltage.max;
  if (ruleSet === 'none') {
    const words = 'The site’s rule set asks for no rapid shutdown.';
    return [
      notRequired('shutdown_inside_array', 'V', cold, words),
      notRequired('shutdown_outside_array', 'V', inShutdown, words),
      notRequired('shutdown_time', 's', unit.commandLossAfterS, words),
    ];
  }
  return [inside(design, cold), outside(design, inShutdown), time(design)];
}

function inside({ ruleSet, temperatures, modules }: StringDesign, cold: number): DesignFinding {
  if (ruleSet === 'rapid_shutdown_10s')
    return notRequired(
      'shutdown_inside_array',
      'V',
      cold,
      'The 2014 edition sets no limit inside the array.',
    );
  if (ruleSet === 'hazard_control')
    return {
      ...notRequired('shutdown_inside_array', 'V', cold, ''),
      outcome: 'cannot_tell',
      clause: 'NEC 690.12(B)(2)(1), UL 3741',
      words: 'A listed hazard-control system stands in for the 80 V: its listing decides.',
      remedy: 'Follow the installation instructions of the listing.',
    };
  return held({
    check: 'shutdown_inside_array',
    value: cold,
    limit: VOLTAGE_INSIDE_ARRAY,
    unit: 'V',
    clause: 'NEC 690.12(B)(2): 80 V between any two conductors and to earth',
    within: `Behind one unit in shutdown, ${figure(cold, 'V')} remain on the coldest day (${figure(temperatures.coldest.value, '°C')}).`,
    exceeded: `Behind one unit in shutdown, ${figure(cold, 'V')} remain on the coldest day (${figure(temperatures.coldest.value, '°C')}): one module to a unit can’t meet the limit.`,
    remedy: 'Choose a module with a lower voltage.',
    alternatives: ['Use a listed hazard-control system (UL 3741) and set the site’s rule set to it.'],
    certain:
      temperatures.coldest.from === 'estimated'
        ? {
            value: Math.max(...modules.map(({ type }) => type.vocRef)),
            because: 'The temperature is only an estimate from latitude and altitude.',
          }
        : undefined,
  });
}

function outside({ unit, modules, homeRunLeavesArray }: StringDesign, inShutdown: number): DesignFinding {
  if (!homeRunLeavesArray)
    return notRequired(
      'shutdown_outside_array',
      'V',
      inShutdown,
      'The home run doesn’t leave the array boundary.',
    );
  const n = moduleCount(modules);
  const most =
    unit.shutdownVoltage.max > 0 ? String(mostUnitsInShutdown(unit.shutdownVoltage.max)) : 'any number';
  const each = `${n} units of ${figure(unit.shutdownVoltage.max, 'V')} at most`;
  return held({
    check: 'shutdown_outside_array',
    value: inShutdown,
    limit: VOLTAGE_OUTSIDE_ARRAY,
    unit: 'V',
    clause: `NEC 690.12(B)(1), units ${BY_TYPE}`,
    within: `In shutdown ${each} leave ${figure(inShutdown, 'V')} on the home run; ${most} would stay within.`,
    exceeded: `In shutdown ${each} leave ${figure(inShutdown, 'V')} on the home run; at most ${most} stay within.`,
    remedy: 'Shorten the string, or choose units with a lower shutdown voltage.',
    alternatives: ['Check the highest shutdown voltage on the unit’s sheet.'],
  });
}

function time({ unit, ruleSet }: StringDesign): DesignFinding {
  const { timeLimitS, source } = timeLimitOf(ruleSet);
  if (unit.onCommandLoss === 'holds')
    return {
      check: 'shutdown_time',
      outcome: 'exceeded',
      value: null,
      limit: timeLimitS,
      unit: 's',
      safety: true,
      words: `The unit holds its state when its command stops (${BY_TYPE}): it doesn’t shut down by itself.`,
      clause: source,
      remedy: 'Choose units that shut down when their command stops.',
      alternatives: [
        'Check the sheet: the entry may be wrong.',
        'The shutdown test shows what the units do.',
      ],
    };
  return held({
    check: 'shutdown_time',
    value: unit.commandLossAfterS,
    limit: timeLimitS,
    unit: 's',
    clause: source,
    within: `The unit shuts down ${figure(unit.commandLossAfterS, 's')} after its command stops (${BY_TYPE}).`,
    exceeded: `The unit shuts down only ${figure(unit.commandLossAfterS, 's')} after its command stops (${BY_TYPE}).`,
    remedy: 'Choose a faster unit.',
    alternatives: ['Check the sheet: the entry may be wrong.'],
  });
}
