import { median, modifiedZ } from './robust';

/**
 * What the strings of one plane do together, quarter by quarter, so that each can be held against the others. Columns
 * over a common grid of quarters; NaN: not known. W, V, A, W/m², °C, degrees.
 */

/** Why a quarter of a string doesn't count, as bits. */
export const EXCLUDED = { clipped: 1, curtailed: 2, gridLost: 4, shutdown: 8, incomplete: 16 } as const;

export interface StringSeries {
  id: string;
  name: string;
  /** `input`: several strings share it and these are its sums. */
  scope: 'string' | 'input';
  units: number;
  bypassGroups: number;
  /** DC power of its modules at STC, W. */
  powerRef: number;
  power: Float64Array;
  voltage: Float64Array;
  current: Float64Array;
  excluded: Uint8Array;
  /** Share of expected output that it made in earlier, healthy days; null: not known. */
  ownBaseline: number | null;
}

export interface PlaneSeries {
  /** Hours of one step. */
  stepH: number;
  /** Day of each step, counted from 0; −1: night. */
  dayOf: Int16Array;
  days: number;
  poaGlobal: Float64Array;
  temperatureCell: Float64Array;
  sunAzimuth: Float64Array;
  /** Relative temperature coefficient of power, 1/K. */
  gammaPmp: number;
  strings: readonly StringSeries[];
}

/** Below this share of STC power a quarter says little. */
const SPECIFIC_MIN = 0.08;
/** A day counts with so many kWh/kWp (or kWh/m²) in the quarters that are left. */
export const SUN_ENOUGH = 1;
/** Fewer siblings than this: the model, not the median (Iglewicz & Hoaglin's score needs a spread). */
export const SIBLINGS_MIN = 5;

export interface PlaneReference {
  method: 'siblings' | 'model';
  /** Expected specific power, W per W, per step: median of the siblings, or the model. NaN: none. */
  specific: Float64Array;
  /** Median voltage a module, V, at a step; NaN: nobody reports. Worked out when asked: only low strings ask. */
  voltagePerModule: (step: number) => number;
  /** Median current, A per W of one module's power: strings of more modules carry the same current. */
  currentPerWatt: (step: number) => number;
  /** Per string and day: made over expected; NaN: the day doesn't count. */
  ratio: Float64Array[];
  /** Wh expected and made in the quarters used. */
  expectedWh: Float64Array[];
  madeWh: Float64Array[];
  /** Modified z of the ratio among the siblings of that day; NaN where it says nothing. */
  z: Float64Array[];
  /** Robust standard deviation of the ratios, over all days. */
  spread: number;
}

/** Worked out once for a plane; `judgeOutput` then takes one string after the other. */
export function planeReference(plane: PlaneSeries): PlaneReference {
  const steps = plane.dayOf.length;
  const { strings } = plane;
  const method = strings.length >= SIBLINGS_MIN ? 'siblings' : 'model';
  const specific = new Float64Array(steps).fill(NaN);
  const sorted = new Float64Array(strings.length);
  const perPower = strings.map((s) => 1 / s.powerRef);
  const perUnit = strings.map((s) => 1 / s.units);
  const perCurrent = strings.map((s) => s.units / s.powerRef);
  const power = strings.map((s) => s.power);
  const voltage = strings.map((s) => s.voltage);
  const current = strings.map((s) => s.current);
  const excluded = strings.map((s) => s.excluded);
  if (method === 'siblings') {
    for (let q = 0; q < steps; q++)
      if (plane.dayOf[q]! >= 0) specific[q] = middleAt(power, perPower, excluded, q, 3, sorted);
  } else
    for (let q = 0; q < steps; q++) {
      if (plane.dayOf[q]! < 0) continue;
      const cell = plane.temperatureCell[q]!;
      const warm = Number.isNaN(cell) ? 1 : 1 + plane.gammaPmp * (cell - 25);
      specific[q] = (plane.poaGlobal[q]! / 1000) * warm;
    }
  const voltagePerModule = (q: number): number => middleAt(voltage, perUnit, excluded, q, 1, sorted);
  const currentPerWatt = (q: number): number => middleAt(current, perCurrent, excluded, q, 1, sorted);
  const perString = plane.strings.map((s) => dayRatios(plane, s, specific));
  const z = plane.strings.map(() => new Float64Array(plane.days).fill(NaN));
  const all: number[] = [];
  for (let d = 0; d < plane.days; d++) {
    const known = perString.flatMap((r, i) => (Number.isNaN(r.ratio[d]!) ? [] : [i]));
    if (method === 'model' || known.length < SIBLINGS_MIN) continue;
    const ratios = known.map((i) => perString[i]!.ratio[d]!);
    const centre = median(ratios);
    for (const r of ratios) all.push(r - centre);
    const scores = modifiedZ(ratios, 'mean_deviation');
    known.forEach((i, k) => (z[i]![d] = scores[k] ?? 0));
  }
  return {
    method,
    specific,
    voltagePerModule,
    currentPerWatt,
    ratio: perString.map((r) => r.ratio),
    expectedWh: perString.map((r) => r.expectedWh),
    madeWh: perString.map((r) => r.madeWh),
    z,
    spread: all.length === 0 ? NaN : 1.4826 * median(all.map(Math.abs)),
  };
}

/** Median over the strings' values at step `q`, each times its scale; NaN where fewer than `least` count. */
function middleAt(
  columns: readonly Float64Array[],
  scale: readonly number[],
  excluded: readonly Uint8Array[],
  q: number,
  least: number,
  sorted: Float64Array,
): number {
  let n = 0;
  for (let i = 0; i < columns.length; i++) {
    const x = columns[i]![q]! * scale[i]!;
    if (Number.isNaN(x) || excluded[i]![q] !== 0) continue;
    let k = n++;
    while (k > 0 && sorted[k - 1]! > x) {
      sorted[k] = sorted[k - 1]!;
      k--;
    }
    sorted[k] = x;
  }
  if (n < least) return NaN;
  return n % 2 === 1 ? sorted[(n - 1) / 2]! : (sorted[n / 2 - 1]! + sorted[n / 2]!) / 2;
}

function dayRatios(
  plane: PlaneSeries,
  s: StringSeries,
  specific: Float64Array,
): { ratio: Float64Array; expectedWh: Float64Array; madeWh: Float64Array } {
  const expectedWh = new Float64Array(plane.days);
  const madeWh = new Float64Array(plane.days);
  for (let q = 0; q < specific.length; q++) {
    const d = plane.dayOf[q]!;
    const e = specific[q]!;
    const p = s.power[q]!;
    if (d < 0 || s.excluded[q] !== 0 || !(e >= SPECIFIC_MIN) || Number.isNaN(p)) continue;
    expectedWh[d]! += e * s.powerRef * plane.stepH;
    madeWh[d]! += p * plane.stepH;
  }
  const enough = SUN_ENOUGH * s.powerRef;
  const ratio = expectedWh.map((e, d) => (e >= enough ? madeWh[d]! / e : NaN));
  return { ratio, expectedWh, madeWh };
}
