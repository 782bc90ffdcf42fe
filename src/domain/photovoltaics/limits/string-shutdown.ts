import { stringShutdownSaid as said } from '../../../words/domain-photovoltaics-limits';
import { timeLimitOf } from '../../verdicts/context';
import { moduleCount, type StringDesign } from './design';
import { figure, held, type DesignFinding } from './design-finding';
import { VOLTAGE_INSIDE_ARRAY, VOLTAGE_OUTSIDE_ARRAY, mostUnitsInShutdown } from './string-sizing';
import { moduleVoltageCold } from './string-voltage';

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
  clause: said.ruleSetClause,
  remedy: null,
  alternatives: [],
});

/** What remains after shutdown, and how soon, against the rule set: NEC 690.12 as quoted by others. */
export function shutdownFindings(design: StringDesign): DesignFinding[] {
  const { unit, ruleSet, modules, temperatures } = design;
  const cold = moduleVoltageCold(modules, temperatures.coldest.value);
  const inShutdown = moduleCount(modules) * unit.shutdownVoltage.max;
  if (ruleSet === 'none') {
    const words = said.noneAsked;
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
    return notRequired('shutdown_inside_array', 'V', cold, said.noLimitInside);
  if (ruleSet === 'hazard_control')
    return {
      ...notRequired('shutdown_inside_array', 'V', cold, ''),
      outcome: 'cannot_tell',
      clause: said.hazardControlClause,
      words: said.hazardControl,
      remedy: said.hazardControlRemedy,
    };
  const remain = [figure(cold, 'V'), figure(temperatures.coldest.value, '°C')] as const;
  return held({
    check: 'shutdown_inside_array',
    value: cold,
    limit: VOLTAGE_INSIDE_ARRAY,
    unit: 'V',
    clause: said.insideClause,
    within: said.insideWithin(...remain),
    exceeded: said.insideExceeded(...remain),
    remedy: said.lowerModule,
    alternatives: [said.useHazardControl],
    certain:
      temperatures.coldest.from === 'estimated'
        ? Math.max(...modules.map(({ type }) => type.vocRef))
        : undefined,
  });
}

function outside({ unit, modules, homeRunLeavesArray }: StringDesign, inShutdown: number): DesignFinding {
  if (!homeRunLeavesArray) return notRequired('shutdown_outside_array', 'V', inShutdown, said.staysInside);
  const { max } = unit.shutdownVoltage;
  const leave = [
    moduleCount(modules),
    figure(max, 'V'),
    figure(inShutdown, 'V'),
    max > 0 ? mostUnitsInShutdown(max) : null,
  ] as const;
  return held({
    check: 'shutdown_outside_array',
    value: inShutdown,
    limit: VOLTAGE_OUTSIDE_ARRAY,
    unit: 'V',
    clause: said.outsideClause,
    within: said.outsideWithin(...leave),
    exceeded: said.outsideExceeded(...leave),
    remedy: said.outsideRemedy,
    alternatives: [said.checkShutdownVoltage],
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
      words: said.holds,
      clause: source,
      remedy: said.holdsRemedy,
      alternatives: [said.checkSheet, said.testShows],
    };
  return held({
    check: 'shutdown_time',
    value: unit.commandLossAfterS,
    limit: timeLimitS,
    unit: 's',
    clause: source,
    within: said.timeWithin(figure(unit.commandLossAfterS, 's')),
    exceeded: said.timeExceeded(figure(unit.commandLossAfterS, 's')),
    remedy: said.timeRemedy,
    alternatives: [said.checkSheet],
  });
}
