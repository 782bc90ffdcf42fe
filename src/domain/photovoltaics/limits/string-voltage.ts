import {
  designFindingSaid,
  mpptWindowSaid,
  stringVoltageSaid as said,
  type VoltageLimitOf,
} from '../../../words/domain-photovoltaics-limits';
import { temperatureCellNoct } from '../temperature/cell';
import { figure, held, type DesignFinding } from './design-finding';
import { moduleCount, type StringDesign, type Structure } from './design';
import { coldVoltageFactor, voltageAtTemperature } from './string-sizing';

/**
 * Highest DC voltage of a PV system by where it stands: NEC 690.7. 600 V on one- and two-family dwellings as quoted by
 * others; 1000 V for other buildings and 1500 V elsewhere from memory.
 */
export const BUILDING_VOLTAGE: Record<Structure, { limit: number }> = {
  one_or_two_family_dwelling: { limit: 600 },
  other_building: { limit: 1000 },
  not_on_building: { limit: 1500 },
};

const sum = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0);

/** V of the string on the coldest day, open circuit: by each datasheet's coefficient, and by Table 690.7(A). */
export function stringVoltageCold(
  modules: StringDesign['modules'],
  coldest: number,
): { byCoefficient: number; byTable: number | null } {
  const factor = coldVoltageFactor(coldest);
  return {
    byCoefficient: sum(
      modules.map(({ type, count }) => count * voltageAtTemperature(type.vocRef, type.betaVoc, coldest)),
    ),
    byTable: factor === null ? null : sum(modules.map(({ type, count }) => count * type.vocRef * factor)),
  };
}

/** V of one module of each type on the coldest day; the highest. */
export const moduleVoltageCold = (modules: StringDesign['modules'], coldest: number): number =>
  Math.max(...modules.map(({ type }) => voltageAtTemperature(type.vocRef, type.betaVoc, coldest)));

const degrees = (value: number): string => figure(Math.round(value), '°C');

/** Cold-day voltage held against everything on the string that has a limit. */
export function voltageFindings(design: StringDesign): DesignFinding[] {
  const { modules, temperatures, unit, inverter } = design;
  const n = moduleCount(modules);
  const coldest = temperatures.coldest.value;
  const { byCoefficient, byTable } = stringVoltageCold(modules, coldest);
  const atStc = sum(modules.map(({ type, count }) => count * type.vocRef));
  const each = byCoefficient / n;
  const certain = temperatures.coldest.from === 'estimated' ? atStc : undefined;
  if (unit.kind === 'optimizing')
    return [
      {
        check: 'string_voltage_inverter',
        outcome: 'cannot_tell',
        value: byCoefficient,
        limit: inverter?.voltageMax ?? null,
        unit: 'V',
        safety: true,
        words: said.optimizing(n),
        clause: said.optimizingClause,
        remedy: said.optimizingRemedy,
        alternatives: [],
      },
    ];
  const against = (
    check: DesignFinding['check'],
    whose: VoltageLimitOf,
    limit: number | null,
    remedy: string,
    missing?: string,
  ): DesignFinding => {
    const most = limit === null ? 0 : Math.floor(limit / each + 1e-9);
    const table = tableSentence(byTable, limit !== null && byCoefficient <= limit ? limit : Infinity);
    const gives = [degrees(coldest), n, figure(Math.round(byCoefficient), 'V'), most] as const;
    return held({
      check,
      value: byCoefficient,
      limit,
      unit: 'V',
      clause: said.clause[whose],
      remedy,
      ...(missing === undefined ? {} : { missing }),
      within: `${said.within(whose, ...gives)} ${table}`,
      exceeded: `${said.exceeded(whose, ...gives)} ${table}`,
      alternatives: [said.otherMethod],
      certain,
    });
  };
  const building = BUILDING_VOLTAGE[design.structure];
  const moduleLimit = Math.min(...modules.map(({ type }) => type.voltageSystemMax));
  return [
    against(
      'string_voltage_inverter',
      'inverter',
      inverter?.voltageMax ?? null,
      inverter ? said.shortenForInverter : designFindingSaid.giveInverterType,
      said.noInverterType,
    ),
    against(
      'string_voltage_building',
      design.structure,
      building.limit,
      said.shortenForBuilding(figure(building.limit, 'V'), design.structure),
    ),
    against('string_voltage_module', 'module', moduleLimit, said.shortenForModule),
    against('string_voltage_unit', 'unit', unit.voltageSystemMax, said.shortenForUnit),
  ];
}

/** What Table 690.7(A) makes of it; said besides where that alone is above `limit`. */
function tableSentence(byTable: number | null, limit: number): string {
  if (byTable === null) return said.tableEnds;
  const voltage = figure(Math.round(byTable), 'V');
  return byTable > limit ? said.byTableAbove(voltage) : said.byTable(voltage);
}

/** Voltage at maximum power on the hottest and on the coldest day against the inverter's window. */
export function windowFindings(design: StringDesign): DesignFinding[] {
  const { modules, temperatures, unit, inverter } = design;
  if (unit.kind === 'optimizing') return [];
  const n = moduleCount(modules);
  const atCell = (cellOf: (noct: number) => number) =>
    sum(
      modules.map(
        // betaVmp is rarely printed; gammaPmp − alphaIsc is a close estimate for silicon
        ({ type, count }) =>
          count *
          Math.max(0, voltageAtTemperature(type.vmpRef, type.gammaPmp - type.alphaIsc, cellOf(type.noct))),
      ),
    );
  const hottestAir = temperatures.hottest.value;
  const cell = temperatureCellNoct(1000, hottestAir, modules[0]?.type.noct ?? 45);
  const hot = atCell((noct) => temperatureCellNoct(1000, hottestAir, noct));
  const cold = atCell(() => temperatures.coldest.value);
  const fewest = inverter ? Math.ceil(inverter.mpptMin / (hot / n) - 1e-9) : 0;
  const works = [degrees(hottestAir), degrees(cell), figure(Math.round(hot), 'V'), fewest] as const;
  const atBest = [degrees(temperatures.coldest.value), figure(Math.round(cold), 'V')] as const;
  return [
    held({
      check: 'mppt_window_hot',
      value: hot,
      limit: inverter?.mpptMin ?? null,
      bound: 'at_least',
      unit: 'V',
      safety: false,
      clause: mpptWindowSaid.hotClause,
      missing: mpptWindowSaid.noInverterType,
      remedy: inverter ? mpptWindowSaid.lengthen(fewest) : designFindingSaid.giveInverterType,
      within: mpptWindowSaid.hotWithin(...works),
      exceeded: mpptWindowSaid.hotExceeded(...works),
      certain:
        temperatures.hottest.from === 'estimated'
          ? atCell((noct) => temperatureCellNoct(1000, 20, noct))
          : undefined,
    }),
    held({
      check: 'mppt_window_cold',
      value: cold,
      limit: inverter?.mpptMax ?? null,
      unit: 'V',
      safety: false,
      clause: mpptWindowSaid.coldClause,
      missing: mpptWindowSaid.noInverterType,
      remedy: inverter ? mpptWindowSaid.shorten : designFindingSaid.giveInverterType,
      within: mpptWindowSaid.coldWithin(...atBest),
      exceeded: mpptWindowSaid.coldExceeded(...atBest),
      certain: temperatures.coldest.from === 'estimated' ? atCell(() => STC_CELL) : undefined,
    }),
  ];
}

const STC_CELL = 25;
