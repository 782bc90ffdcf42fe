import { temperatureCellNoct } from '../temperature/cell';
import { figure, held, type DesignFinding } from './design-finding';
import { moduleCount, type StringDesign, type Structure } from './design';
import { coldVoltageFactor, voltageAtTemperature } from './string-sizing';

/**
 * Highest DC voltage of a PV system by where it stands: NEC 690.7. 600 V on one- and two-family dwellings as quoted by
 * others; 1000 V for other buildings and 1500 V elsewhere from memory.
 */
export const BUILDING_VOLTAGE: Record<Structure, { limit: number; words: string; clause: string }> = {
  one_or_two_family_dwelling: {
    limit: 600,
    words: 'on a one- or two-family dwelling',
    clause: 'NEC 690.7, one- and two-family dwellings: 600 V',
  },
  other_building: {
    limit: 1000,
    words: 'on a building',
    clause: 'NEC 690.7, other buildings: 1000 V (from memory)',
  },
  not_on_building: {
    limit: 1500,
    words: 'away from buildings',
    clause: 'NEC 690.7, not on or in buildings: 1500 V (from memory)',
  },
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
const estimatedNote = 'The temperature is only an estimate from latitude and altitude.';

/** Cold-day voltage held against everything on the string that has a limit. */
export function voltageFindings(design: StringDesign): DesignFinding[] {
  const { modules, temperatures, unit, inverter } = design;
  const n = moduleCount(modules);
  const coldest = temperatures.coldest.value;
  const { byCoefficient, byTable } = stringVoltageCold(modules, coldest);
  const atStc = sum(modules.map(({ type, count }) => count * type.vocRef));
  const each = byCoefficient / n;
  const day = `On the coldest day (${degrees(coldest)})`;
  const certain =
    temperatures.coldest.from === 'estimated' ? { value: atStc, because: estimatedNote } : undefined;
  if (unit.kind === 'optimizing')
    return [
      {
        check: 'string_voltage_inverter',
        outcome: 'cannot_tell',
        value: byCoefficient,
        limit: inverter?.voltageMax ?? null,
        unit: 'V',
        safety: true,
        words: `Optimizing units: the inverter sets the string’s voltage, so ${n} times voc doesn’t apply.`,
        clause: 'NEC 690.7(B) (in part from memory)',
        remedy:
          'Take the shortest and longest string, and the string’s maximum voltage, from the unit maker’s instructions.',
        alternatives: [],
      },
    ];
  const against = (
    check: DesignFinding['check'],
    limit: number | null,
    whose: string,
    clause: string,
    remedy: string,
    missing?: string,
  ): DesignFinding => {
    const most = limit === null ? 0 : Math.floor(limit / each + 1e-9);
    const table =
      byTable === null
        ? 'Table 690.7(A) ends at −40 °C.'
        : `By Table 690.7(A) it would be ${figure(Math.round(byTable), 'V')}${limit !== null && byTable > limit && byCoefficient <= limit ? ', above the limit: the datasheet’s coefficient goes first where it is given' : ''}.`;
    return held({
      check,
      value: byCoefficient,
      limit,
      unit: 'V',
      clause,
      remedy,
      ...(missing === undefined ? {} : { missing }),
      within: `${day} ${n} modules give ${figure(Math.round(byCoefficient), 'V')}; ${most} would fit ${whose}. ${table}`,
      exceeded: `${day} ${n} modules give ${figure(Math.round(byCoefficient), 'V')}; at most ${most} fit ${whose}. ${table}`,
      alternatives: [
        'For systems of 100 kW or more NEC 690.7(A)(3) lets a licensed professional electrical engineer document another method.',
      ],
      certain,
    });
  };
  const building = BUILDING_VOLTAGE[design.structure];
  const moduleLimit = Math.min(...modules.map(({ type }) => type.voltageSystemMax));
  return [
    against(
      'string_voltage_inverter',
      inverter?.voltageMax ?? null,
      'the inverter',
      'NEC 690.7(A)(1), inverter’s maximum DC voltage',
      inverter
        ? 'Shorten the string, or choose an inverter for a higher voltage.'
        : 'Give the inverter its type.',
      'The inverter has no type, so its highest DC voltage isn’t known.',
    ),
    against(
      'string_voltage_building',
      building.limit,
      building.words,
      building.clause,
      `Shorten the string to stay at or below ${figure(building.limit, 'V')} ${building.words}.`,
    ),
    against(
      'string_voltage_module',
      moduleLimit,
      'the modules’ system voltage',
      'NEC 690.7(A)(1), modules’ maximum system voltage (IEC 61730)',
      'Shorten the string, or choose modules for a higher system voltage.',
    ),
    against(
      'string_voltage_unit',
      unit.voltageSystemMax,
      'the units’ system voltage',
      'NEC 690.7(A)(1), units’ maximum system voltage according to the type entered',
      'Shorten the string, or choose units for a higher system voltage.',
    ),
  ];
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
  const missing = 'The inverter has no type, so its MPPT window isn’t known.';
  const fewest = inverter ? Math.ceil(inverter.mpptMin / (hot / n) - 1e-9) : 0;
  const energy = 'It costs energy and is no hazard.';
  return [
    held({
      check: 'mppt_window_hot',
      value: hot,
      limit: inverter?.mpptMin ?? null,
      bound: 'at_least',
      unit: 'V',
      safety: false,
      clause: 'Inverter’s MPPT window; cell by NOCT (Ross 1981)',
      missing,
      remedy: inverter ? `Lengthen the string to ${fewest} modules or more.` : 'Give the inverter its type.',
      within: `On the hottest day (air ${degrees(hottestAir)}, cells ${degrees(cell)}) the string works at ${figure(Math.round(hot), 'V')}; ${fewest} modules would do.`,
      exceeded: `On the hottest day (air ${degrees(hottestAir)}, cells ${degrees(cell)}) the string works at ${figure(Math.round(hot), 'V')} and falls out of the window: it needs ${fewest} modules. ${energy}`,
      certain:
        temperatures.hottest.from === 'estimated'
          ? { value: atCell((noct) => temperatureCellNoct(1000, 20, noct)), because: estimatedNote }
          : undefined,
    }),
    held({
      check: 'mppt_window_cold',
      value: cold,
      limit: inverter?.mpptMax ?? null,
      unit: 'V',
      safety: false,
      clause: 'Inverter’s MPPT window',
      missing,
      remedy: inverter
        ? 'Shorten the string, or choose an inverter with a higher window.'
        : 'Give the inverter its type.',
      within: `On the coldest day (${degrees(temperatures.coldest.value)}) the string works at ${figure(Math.round(cold), 'V')} at most.`,
      exceeded: `On the coldest day (${degrees(temperatures.coldest.value)}) the string would work best at ${figure(Math.round(cold), 'V')}, above the window. ${energy}`,
      certain:
        temperatures.coldest.from === 'estimated'
          ? { value: atCell(() => STC_CELL), because: estimatedNote }
          : undefined,
    }),
  ];
}

const STC_CELL = 25;
