/**
 * Runs the physics over openly licensed measured series that are not part of this repository. Prints one figure a line.
 *
 *   npm run check:open-data -- FOLDER
 *
 * FOLDER holds the series as CSV with a .meta.json beside each (origin, licence, what is known of it); unless said,
 * ../shared/reference/open beside this repository.
 */
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { judgeOutput } from '../../src/domain/output/low-output';
import { planeReference, type PlaneSeries } from '../../src/domain/output/plane-reference';
import { median, sigmaMad } from '../../src/domain/output/robust';
import { yields } from '../../src/domain/output/yields';
import {
  absoluteAirMass,
  pressureAtAltitude,
  relativeAirMass,
} from '../../src/domain/photovoltaics/irradiance/air-mass';
import { detectClearSky } from '../../src/domain/photovoltaics/irradiance/clear-detection';
import { ineichen } from '../../src/domain/photovoltaics/irradiance/clear-sky';
import { dniExtra } from '../../src/domain/photovoltaics/irradiance/extraterrestrial';
import { pvwattsDc } from '../../src/domain/photovoltaics/module/pvwatts';
import { solarPosition } from '../../src/domain/photovoltaics/sun/position';
import { dayOfYear } from '../../src/domain/photovoltaics/sun/time';

const folder = process.argv[2] ?? fileURLToPath(new URL('../../../shared/reference/open', import.meta.url));

type Row = Record<string, string>;

function rowsOf(name: string): Row[] {
  const path = join(folder, `${name}.csv`);
  if (!existsSync(path)) {
    process.stderr.write(`${path} isn't there: give the folder of the open series, as in\n`);
    process.stderr.write('  npm run check:open-data -- FOLDER\n');
    process.exit(2);
  }
  const lines = readFileSync(path, 'utf8')
    .split(/\r?\n/)
    .filter((line) => line !== '' && !line.startsWith('#'));
  const header = (lines[0] ?? '').split(',');
  return lines.slice(1).map((line) => {
    const cells = line.split(',');
    return Object.fromEntries(header.map((key, i) => [key, cells[i] ?? '']));
  });
}

const numberIn = (row: Row, key: string): number => {
  const text = row[key];
  return text === undefined || text === '' ? Number.NaN : Number(text);
};

const say = (line: string): void => void process.stdout.write(`${line}\n`);
const print = (name: string, value: number, unit: string): void => {
  process.stdout.write(`${name} ${Number(value.toPrecision(5))} ${unit}\n`);
};

/** Clear sky of the labelled series: Albuquerque, Linke turbidity as its meta file says. */
function clearGhi(epochMs: number): number {
  const altitude = 1619;
  const pressure = pressureAtAltitude(altitude);
  const sun = solarPosition(epochMs, { latitude: 35.04, longitude: -106.62, altitude }, { pressure });
  const relative = relativeAirMass(sun.apparentZenith);
  if (relative === null) return 0;
  return ineichen({
    apparentZenith: sun.apparentZenith,
    airMassAbsolute: absoluteAirMass(relative, pressure),
    linkeTurbidity: 2.658197,
    altitude,
    dniExtra: dniExtra(dayOfYear(epochMs)),
  }).ghi;
}

function labelledClearSky(name: string): void {
  const rows = rowsOf(name);
  const at = rows.map((row) => Date.parse(`${row['Time (UTC)']} UTC`));
  const { clear, scale } = detectClearSky(
    rows.map((row) => numberIn(row, 'GHI')),
    at.map(clearGhi),
    1,
  );
  const right = clear.filter((isClear, i) => isClear === (rows[i]?.['Clear or not'] === '1')).length;
  print(`${name}.labels_met`, right / rows.length, 'share');
  print(`${name}.scale`, scale, '1');
}

/** Against the verdict of another implementation of the same method on a whole day. */
function dayOfClearSky(): void {
  const rows = rowsOf('ghi_1min_day');
  const { clear, scale } = detectClearSky(
    rows.map((row) => numberIn(row, 'ghi_w_m2')),
    rows.map((row) => numberIn(row, 'ghi_clear_ineichen_tl2_1')),
    1,
  );
  const same = clear.filter((isClear, i) => isClear === (rows[i]?.clear_by_reno_hansen === '1')).length;
  print('ghi_1min_day.verdicts_met', same / rows.length, 'share');
  print('ghi_1min_day.clear_minutes', clear.filter(Boolean).length, 'min');
  print('ghi_1min_day.scale', scale, '1');
}

const GAMMA = -0.0045; // 1/K, as in the meta file of the series

/** Expected against measured DC power of two half-arrays on one inverter, and the days on which snow lay on them. */
function halfArrays(): void {
  const rows = rowsOf('two_half_arrays_15min')
    .map((row) => ({
      time: row.time_local ?? '',
      poa: numberIn(row, 'poa_global_w_m2'),
      temperature: numberIn(row, 'temperature_module_c'),
      power: numberIn(row, 'power_dc_w'),
      powerAc: numberIn(row, 'power_ac_w'),
      powerA: numberIn(row, 'v_dc_a_v') * numberIn(row, 'i_dc_a_a'),
      powerB: numberIn(row, 'v_dc_b_v') * numberIn(row, 'i_dc_b_a'),
    }))
    .filter((row) => row.poa >= 0 && row.poa <= 2000 && Number.isFinite(row.power));
  const clean = rows.filter(
    ({ time, poa }) => poa > 500 && time >= '2022-01-04T09:30' && time <= '2022-01-04T15:00',
  );
  const perWatt = clean.map(
    (row) => row.power / pvwattsDc(row.poa, row.temperature, { pdc0: 1, gammaPmp: GAMMA }),
  );
  const pdc0 = median(perWatt);
  print('two_half_arrays.clean_samples', clean.length, '1');
  print('two_half_arrays.effective_pdc0', pdc0, 'W');
  print('two_half_arrays.expected_against_measured_sd', sigmaMad(perWatt.map((w) => w / pdc0)), 'share');
  print('two_half_arrays.half_a_over_b', median(clean.map((row) => row.powerA / row.powerB)), '1');

  const days = [...new Set(rows.map((row) => row.time.slice(0, 10)))];
  for (const day of days) {
    const ofDay = rows.filter((row) => row.time.startsWith(day));
    const sunny = ofDay.filter((row) => row.poa > 400);
    const low = sunny.filter(
      (row) => row.power < 0.5 * pvwattsDc(row.poa, row.temperature, { pdc0, gammaPmp: GAMMA }),
    );
    print(`two_half_arrays.${day}.below_half_of_expected`, low.length / Math.max(1, sunny.length), 'share');
    const result = yields(
      ofDay.map((row) => ({
        poaGlobal: row.poa,
        temperatureModule: row.temperature,
        powerOut: row.powerAc,
        powerDc: row.power,
      })),
      { p0: pdc0, gammaPmp: GAMMA, intervalH: 0.25 },
    );
    print(`two_half_arrays.${day}.performance_ratio_stc`, result.performanceRatioStc ?? Number.NaN, '1');
  }
}

/** One string or combiner over days of quarters, as the judgement of output takes it. */
interface Measured {
  name: string;
  units: number;
  bypassGroups: number;
  /** W at STC. */
  powerRef: number;
  voltage: (row: Row) => number;
  current: (row: Row) => number;
}

/**
 * The judgement of output over every day of a series, whole and day by day, against the model: what it says in the end
 * and on which days it is low. The rule wants three low days of five; the days that are low are printed as they are.
 */
function lowOutputOf(
  name: string,
  gammaPmp: number,
  measured: readonly Measured[],
): Map<string, Set<string>> {
  const rows = rowsOf(name);
  const days = [...new Set(rows.map((row) => (row.time_local ?? '').slice(0, 10)))];
  const column = (of: (row: Row) => number): Float64Array => Float64Array.from(rows, of);
  const poaGlobal = column((row) => numberIn(row, 'poa_global_w_m2'));
  const plane: PlaneSeries = {
    stepH: 0.25,
    // a sensor off the scale says nothing, as at night
    dayOf: Int16Array.from(rows, (row, k) =>
      poaGlobal[k]! > 5 && poaGlobal[k]! < 1600 ? days.indexOf((row.time_local ?? '').slice(0, 10)) : -1,
    ),
    days: days.length,
    poaGlobal,
    temperatureCell: column((row) => numberIn(row, 'temperature_module_c')),
    sunAzimuth: new Float64Array(rows.length),
    gammaPmp,
    strings: measured.map((m) => ({
      id: m.name,
      name: m.name,
      scope: 'string',
      units: m.units,
      bypassGroups: m.bypassGroups,
      powerRef: m.powerRef,
      voltage: column(m.voltage),
      current: column(m.current),
      power: column((row) => m.voltage(row) * m.current(row)),
      excluded: new Uint8Array(rows.length),
      ownBaseline: null,
    })),
  };
  const reference = planeReference(plane);
  const lowOn = new Map<string, Set<string>>();
  measured.forEach((m, k) => {
    const finding = judgeOutput(plane, reference, k);
    const low = new Set<string>();
    days.forEach((day, d) => {
      const ratio = reference.ratio[k]![d]!;
      if (Number.isNaN(ratio)) say(`# ${name}.${m.name}.${day}: too little was reported to judge the day`);
      else print(`${name}.${m.name}.${day}.made_over_modelled`, ratio, 'share');
      if (ratio < finding.threshold.ratio) low.add(day);
    });
    lowOn.set(m.name, low);
    print(`${name}.${m.name}.low_below`, finding.threshold.ratio, 'share');
    say(
      `# ${name}.${m.name}: low on ${[...low].join(', ') || 'no day'}; judged ${finding.outcome}: ${finding.words}`,
    );
  });
  return lowOn;
}

/** Days on which snow lay on the half-arrays, by the meta file: a morning, and a whole day. */
const SNOW_DAYS = ['2022-01-02', '2022-01-06'];

function snowOnHalfArrays(): void {
  // half of what the clean window shows, over what the model expects of sound modules
  const half = (side: 'a' | 'b'): Measured => ({
    name: side,
    units: 10,
    bypassGroups: 3,
    powerRef: 5927.5 / 2 / 0.93,
    voltage: (row) => numberIn(row, `v_dc_${side}_v`),
    current: (row) => numberIn(row, `i_dc_${side}_a`),
  });
  const low = lowOutputOf('two_half_arrays_15min', GAMMA, [half('a'), half('b')]);
  for (const [name, days] of low) {
    print(`two_half_arrays.${name}.snow_days_found`, SNOW_DAYS.filter((d) => days.has(d)).length, 'of 2');
    print(
      `two_half_arrays.${name}.other_days_called_low`,
      [...days].filter((d) => !SNOW_DAYS.includes(d)).length,
      'of 3',
    );
  }
}

/** From here on that implementation takes what light comes through for a roof without snow. */
const CLEAR_TRANSMISSION = 0.598;

/** Four strings of 18 modules in snow, with another implementation's verdict for each quarter (modes of the meta file). */
function snowOnCombiner(): void {
  const name = 'combiner_snow_15min';
  const powerRef = 4 * 18 * 37.88508962264151 * 8.895117736670294;
  const gammaPmp = -0.1337 / 37.88508962264151 - 0.0004;
  lowOutputOf(name, gammaPmp, [
    {
      name: 'combiner',
      units: 18,
      bypassGroups: 3,
      powerRef,
      voltage: (row) => numberIn(row, 'v_dc_string_v'),
      current: (row) => numberIn(row, 'i_dc_combiner_a'),
    },
  ]);
  const tally = { snow: 0, snowLow: 0, clear: 0, clearLow: 0 };
  for (const row of rowsOf(name)) {
    const poa = numberIn(row, 'poa_global_w_m2');
    const mode = numberIn(row, 'mode');
    const power = numberIn(row, 'v_dc_string_v') * numberIn(row, 'i_dc_combiner_a');
    if (!(mode >= 0) || !(poa > 200) || Number.isNaN(power)) continue;
    const cell = numberIn(row, 'temperature_module_c');
    const low = power < CLEAR_TRANSMISSION * 0.93 * pvwattsDc(poa, cell, { pdc0: powerRef, gammaPmp });
    if (mode === 4) {
      tally.clear++;
      if (low) tally.clearLow++;
    } else {
      tally.snow++;
      if (low) tally.snowLow++;
    }
  }
  print(`${name}.quarters_with_snow`, tally.snow, '1');
  print(`${name}.quarters_with_snow_low`, tally.snowLow / tally.snow, 'share');
  print(`${name}.quarters_without_snow`, tally.clear, '1');
  print(`${name}.quarters_without_snow_low`, tally.clearLow / tally.clear, 'share');
}

labelledClearSky('detect_clearsky_data');
labelledClearSky('detect_clearsky_threshold_data');
dayOfClearSky();
halfArrays();
snowOnHalfArrays();
snowOnCombiner();
