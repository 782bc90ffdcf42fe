import { EXCLUDED, type PlaneSeries, type StringSeries } from './plane-reference';

/** Plane-days made up for the tests of this folder: skies that wander, strings that differ, faults that are known. */

export function generator(seed: number): () => number {
  let a = seed >>> 0;
  return () => {
    a = (a + 0x6d2b79f5) >>> 0;
    let t = a;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  };
}

export type PlaneFault =
  | { kind: 'none' }
  | { kind: 'units_missing'; count: number }
  | { kind: 'bypassed_substring' }
  | { kind: 'shade'; from: number; to: number; depth: number }
  | { kind: 'current_low'; share: number };

export interface SampleOptions {
  strings: number;
  days: number;
  faults: ReadonlyMap<number, PlaneFault>;
  /** Quarters of a curtailed afternoon each day. */
  curtailed?: boolean;
  /** Share of quarters that are missing. */
  gaps?: number;
  shared?: boolean;
}

/**
 * Strings of 9 to 16 modules under one sky. The sky is a bounded random walk with passing clouds that each string meets
 * a little differently; currents follow the light a little less than linearly, voltages its logarithm and a cell
 * temperature that lags; modules differ by triangular tolerances and each inverter input measures with its own gain.
 */
export function samplePlane(random: () => number, options: SampleOptions): PlaneSeries {
  const triangular = (sd: number): number => (random() + random() - 1) * sd * Math.sqrt(6);
  const steps = options.days * 96;
  const dayOf = new Int16Array(steps).fill(-1);
  const poaGlobal = new Float64Array(steps);
  const temperatureCell = new Float64Array(steps);
  const sunAzimuth = new Float64Array(steps);
  let sky = 0.8;
  let cell = 15;
  for (let q = 0; q < steps; q++) {
    const hour = (q % 96) / 4 + 0.125;
    const up = Math.sin((Math.PI * (hour - 5.5)) / 13);
    sunAzimuth[q] = 180 + (hour - 12) * 15;
    if (q % 96 === 0) sky = 0.35 + 0.65 * random();
    sky = Math.min(1.05, Math.max(0.15, sky + triangular(0.08)));
    if (hour > 5.5 && hour < 18.5 && up > 0.02) {
      dayOf[q] = Math.floor(q / 96);
      poaGlobal[q] = 980 * Math.pow(up, 1.15) * sky;
    }
    cell += 0.5 * (14 + 6 * up + 0.03 * poaGlobal[q]! - cell);
    temperatureCell[q] = cell;
  }
  const strings = Array.from({ length: options.strings }, (_, k): StringSeries => {
    const units = 9 + Math.floor(8 * random());
    const fault = options.faults.get(k) ?? { kind: 'none' };
    const gainV = 1 + triangular(0.004);
    const gainI = 1 + triangular(0.006);
    const power = new Float64Array(steps).fill(NaN);
    const voltage = new Float64Array(steps).fill(NaN);
    const current = new Float64Array(steps).fill(NaN);
    const excluded = new Uint8Array(steps);
    const missing = fault.kind === 'units_missing' ? fault.count : 0;
    const bypassed = fault.kind === 'bypassed_substring' ? 1 / 3 : 0;
    for (let q = 0; q < steps; q++) {
      if (dayOf[q]! < 0 || random() < (options.gaps ?? 0)) continue;
      const own = poaGlobal[q]! * (1 + triangular(0.02));
      let light = own / 1000;
      const az = sunAzimuth[q]!;
      if (fault.kind === 'shade' && az >= fault.from && az < fault.to) light *= 1 - fault.depth;
      if (fault.kind === 'current_low') light *= 1 - fault.share;
      const perModule =
        34.2 * (1 - 0.0031 * (temperatureCell[q]! - 25)) * (1 + 0.022 * Math.log(Math.max(0.02, light)));
      const v = (units - missing - bypassed) * perModule - 0.5 * missing - 0.5 * (bypassed > 0 ? 1 : 0);
      const i = 10.6 * Math.pow(light, 1.01);
      voltage[q] = v * gainV * (1 + triangular(0.002));
      current[q] = i * gainI * (1 + triangular(0.003));
      power[q] = voltage[q]! * current[q]!;
      const afternoon = q % 96 > 52 && q % 96 < 60;
      if (options.curtailed === true && afternoon) {
        power[q]! *= 0.3;
        current[q]! *= 0.3;
        excluded[q] = EXCLUDED.curtailed;
      }
    }
    return {
      id: `s${k}`,
      name: `S${k}`,
      scope: options.shared === true ? 'input' : 'string',
      units,
      bypassGroups: 3,
      powerRef: units * 365,
      power,
      voltage,
      current,
      excluded,
      ownBaseline: null,
    };
  });
  return {
    stepH: 0.25,
    dayOf,
    days: options.days,
    poaGlobal,
    temperatureCell,
    sunAzimuth,
    gammaPmp: -0.0036,
    strings,
  };
}
