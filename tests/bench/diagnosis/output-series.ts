import { solarPositionQuick } from '../../../src/domain/photovoltaics/sun/position-quick';
import { EXCLUDED, type PlaneSeries, type StringSeries } from '../../../src/domain/output/plane-reference';
import { frameOf, inputRows, inverterRows, radioOf, weatherRows } from '../../../simulator/logger/readings';
import type { SitePlant } from '../../../simulator/plant/site-plant';
import { build, Draw, moduleTypeOf, unitTypeOf } from './plants';
import { STEP_S, STEPS_A_DAY, type OutputRun } from './output-scenarios';

/** Several days of a plant as its logger reports them, every five minutes, and what a sound twin of it would give. */

const IN_A_QUARTER = 3;

export interface StringReports {
  name: string;
  /** V, A, per unit and step, as reported; NaN: not heard. */
  voltageOut: Float64Array[];
  voltageIn: Float64Array[];
  current: Float64Array[];
  /** Of its input, V; A. */
  inputV: Float64Array;
  inputA: Float64Array;
  excluded: Uint8Array;
  /** Wh a day that it gave and that its sound twin gave, in steps without limits. */
  gaveWh: Float64Array;
  twinWh: Float64Array;
}

export interface Reports {
  steps: number;
  days: number;
  strings: StringReports[];
  poaGlobal: Float64Array;
  temperatureCell: Float64Array;
  sunAzimuth: Float64Array;
  dayOf: Int16Array;
  /** kWh/m² of each day, as it truly shone. */
  insolation: Float64Array;
}

const nans = (n: number): Float64Array => new Float64Array(n).fill(NaN);

/** Lets plant and twin run and writes down what comes of it. */
export function reportsOf(run: OutputRun, n: number): Reports {
  const { plan, fromS } = run.drawn;
  const steps = run.days * STEPS_A_DAY;
  const units = plan.strings.map((s) => s.slots.length);
  const column = (k: number): Float64Array[] => Array.from({ length: units[k]! }, () => nans(steps));
  const strings = plan.strings.map((s, k): StringReports => ({
    name: s.name,
    voltageOut: column(k),
    voltageIn: column(k),
    current: column(k),
    inputV: nans(steps),
    inputA: nans(steps),
    excluded: new Uint8Array(steps),
    gaveWh: new Float64Array(run.days),
    twinWh: new Float64Array(run.days),
  }));
  const reports: Reports = {
    steps,
    days: run.days,
    strings,
    poaGlobal: nans(steps),
    temperatureCell: nans(steps),
    sunAzimuth: new Float64Array(steps),
    dayOf: new Int16Array(steps).fill(-1),
    insolation: new Float64Array(run.days),
  };
  const plant = build(run.drawn, [...run.faults, ...run.snow], fromS);
  const bare = { ...run.drawn, plan: { ...plan, obstacles: [] } };
  const twin = build(
    bare,
    run.snow.filter((f) => f.fault.kind === 'snow'),
    fromS,
  );
  const draw = new Draw(4_000_000 + n);
  const { cutOff } = run;
  plant.step(fromS);
  twin.step(fromS);
  for (let q = 1; q < steps; q++) {
    const atS = fromS + q * STEP_S;
    const { inverterLagS } = run;
    if (inverterLagS > 0) plant.step(atS - inverterLagS);
    const inputs =
      inverterLagS === 0 || plant.now.elevation < 0
        ? []
        : inputRows(plant, run.drawn.plan.loggers[0]!.serial);
    plant.step(atS);
    twin.step(atS);
    if (plant.now.elevation < 0) continue;
    const day = Math.floor(q / STEPS_A_DAY);
    reports.dayOf[q] = day;
    reports.sunAzimuth[q] = solarPositionQuick(atS * 1000, plan).azimuth;
    reports.insolation[day]! += ((plant.poaGlobal.get('Roof') ?? 0) * STEP_S) / 3.6e6;
    compare(plant, twin, reports, day);
    if (cutOff && !cutOff.keeps && q >= cutOff.fromStep && q < cutOff.toStep) continue;
    note(plant, run, draw, reports, q, inverterLagS > 0 ? inputs : null);
  }
  return reports;
}

const limited = (plant: SitePlant, inverter: string): boolean => {
  const i = plant.inverters.find((x) => x.plan.name === inverter)!;
  return i.status !== 'running' || i.acPower >= 0.99 * i.plan.acPowerMax;
};

function compare(plant: SitePlant, twin: SitePlant, reports: Reports, day: number): void {
  plant.strings.forEach((s, k) => {
    const other = twin.strings[k]!;
    if (limited(plant, s.plan.inverter) || limited(twin, s.plan.inverter)) return;
    reports.strings[k]!.gaveWh[day]! += (s.voltage * s.current * STEP_S) / 3600;
    reports.strings[k]!.twinWh[day]! += (other.voltage * other.current * STEP_S) / 3600;
  });
}

function note(
  plant: SitePlant,
  run: OutputRun,
  draw: Draw,
  reports: Reports,
  q: number,
  lagging: ReturnType<typeof inputRows> | null,
): void {
  const logger = plant.plan.loggers[0]!.serial;
  const radio = radioOf(plant, logger);
  const weather = weatherRows(plant, logger)[0];
  if (weather?.irradiance != null) reports.poaGlobal[q] = weather.irradiance;
  if (weather?.temperatureModule != null) reports.temperatureCell[q] = weather.temperatureModule / 10 + 1.5;
  const inputs = lagging ?? inputRows(plant, logger);
  const inverters = new Map(inverterRows(plant, logger).map((r) => [r.inverter, r]));
  plant.plan.strings.forEach((s, k) => {
    const out = reports.strings[k]!;
    const row = inputs.find((r) => r.inverter === s.inverter && r.input === s.input);
    out.inputV[q] = (row?.voltage ?? NaN) / 10;
    out.inputA[q] = (row?.current ?? NaN) / 100;
    const inverter = inverters.get(s.inverter)!;
    const most = plant.plan.inverters.find((i) => i.name === s.inverter)!.acPowerMax;
    out.excluded[q] =
      inverter.status === 'curtailed'
        ? EXCLUDED.curtailed
        : inverter.status === 'grid_lost'
          ? EXCLUDED.gridLost
          : inverter.status === 'derated' || (inverter.acPower ?? 0) >= 0.99 * most
            ? EXCLUDED.clipped
            : 0;
    if (s.kind === 'shutdown_only' || draw.next() < run.lost) return;
    const frame = frameOf(
      plant,
      radio,
      s.slots.map((slot) => slot.serial),
    );
    if (!frame) return;
    for (let u = 0; u < s.slots.length; u++) {
      if (frame.state[u] === null) continue;
      out.voltageOut[u]![q] = (frame.voltageOut?.[u] ?? NaN) / 100;
      out.voltageIn[u]![q] = (frame.voltageIn?.[u] ?? NaN) / 100;
      out.current[u]![q] = (frame.current?.[u] ?? NaN) / 1000;
    }
  });
}

/** Median of what is known at step `q`; NaN where less than half is. */
export function typicalAt(columns: readonly Float64Array[], q: number): number {
  const known = columns.flatMap((c) => (Number.isNaN(c[q]!) ? [] : [c[q]!])).sort((a, b) => a - b);
  return known.length < columns.length / 2 ? NaN : known[Math.floor(known.length / 2)]!;
}

/** Sum of the outputs; NaN unless all are known. */
export const sumAt = (columns: readonly Float64Array[], q: number): number =>
  columns.reduce((sum, c) => sum + c[q]!, 0);

/** Mean over each quarter of an hour of what is known in it, if at least two of three are. */
export function quarters(column: Float64Array): Float64Array {
  const out = nans(column.length / IN_A_QUARTER);
  for (let k = 0; k < out.length; k++) {
    let sum = 0;
    let known = 0;
    for (let j = 0; j < IN_A_QUARTER; j++) {
      const x = column[k * IN_A_QUARTER + j]!;
      if (Number.isNaN(x)) continue;
      sum += x;
      known++;
    }
    if (known >= 2) out[k] = sum / known;
  }
  return out;
}

/** The plane in quarters, as the judgement of output takes it. */
export function planeOf(run: OutputRun, reports: Reports): PlaneSeries {
  const { plan } = run.drawn;
  const module = moduleTypeOf(plan);
  const silent = unitTypeOf(plan).kind === 'shutdown_only';
  const steps = reports.steps / IN_A_QUARTER;
  const first = (k: number): number => k * IN_A_QUARTER + 1;
  const strings = plan.strings.map((s, k): StringSeries => {
    const r = reports.strings[k]!;
    const voltage = nans(reports.steps);
    const current = nans(reports.steps);
    const power = nans(reports.steps);
    for (let q = 0; q < reports.steps; q++) {
      if (reports.dayOf[q]! < 0) continue;
      voltage[q] = silent ? r.inputV[q]! : sumAt(r.voltageOut, q);
      current[q] = silent ? r.inputA[q]! : typicalAt(r.current, q);
      power[q] = voltage[q]! * current[q]!;
    }
    const excluded = new Uint8Array(steps);
    for (let q = 0; q < reports.steps; q++) excluded[Math.floor(q / IN_A_QUARTER)]! |= r.excluded[q]!;
    return {
      id: s.name,
      name: s.name,
      scope: 'string',
      units: s.slots.length,
      bypassGroups: module.bypassGroups,
      powerRef: s.slots.length * module.vmpRef * module.impRef,
      power: quarters(power),
      voltage: quarters(voltage),
      current: quarters(current),
      excluded,
      ownBaseline: null,
    };
  });
  return {
    stepH: 0.25,
    dayOf: Int16Array.from({ length: steps }, (_, k) => reports.dayOf[first(k)]!),
    days: run.days,
    poaGlobal: quarters(reports.poaGlobal),
    temperatureCell: quarters(reports.temperatureCell),
    sunAzimuth: Float64Array.from({ length: steps }, (_, k) => reports.sunAzimuth[first(k)]!),
    gammaPmp: module.gammaPmp,
    strings,
  };
}

/** The plane as it was known at the end of day `day`: what a logger that is cut off keeps is not there yet. */
export function planeUntil(plane: PlaneSeries, day: number, cutOff: OutputRun['cutOff']): PlaneSeries {
  const end = (day + 1) * 96;
  const missing =
    cutOff?.keeps === true && cutOff.toStep > (day + 1) * STEPS_A_DAY
      ? Math.floor(cutOff.fromStep / IN_A_QUARTER)
      : end;
  const known = (column: Float64Array): Float64Array =>
    missing >= end ? column.subarray(0, end) : column.slice(0, end).fill(NaN, missing);
  return {
    ...plane,
    days: day + 1,
    dayOf: plane.dayOf.subarray(0, end),
    poaGlobal: known(plane.poaGlobal),
    temperatureCell: known(plane.temperatureCell),
    sunAzimuth: plane.sunAzimuth.subarray(0, end),
    strings: plane.strings.map((s) => ({
      ...s,
      power: known(s.power),
      voltage: known(s.voltage),
      current: known(s.current),
      excluded: s.excluded.subarray(0, end),
    })),
  };
}
