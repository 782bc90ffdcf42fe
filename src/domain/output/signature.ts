import { signatureCouldBe as couldBe, signatureSaid as said } from '../../words/domain-low-output';
import type { PlaneReference, PlaneSeries } from './plane-reference';
import { median, quantile } from './robust';

/** What a low string looks like: voltage, current, sun positions and days, each against its siblings. */

export type SignatureKind =
  'units_missing' | 'bypassed_substring' | 'shade' | 'soiling' | 'current_low' | 'everything' | 'unclear';

export interface Signature {
  kind: SignatureKind;
  words: string;
  /** Units missing or sub-strings bypassed, where the kind counts. */
  count: number | null;
  figures: {
    /** Voltage and current over the siblings'. */
    voltageRatio: number | null;
    currentRatio: number | null;
    /** Missing voltage in modules. */
    modulesMissing: number | null;
    /** Sun azimuths (degrees) at which the loss comes back, from and to. */
    shadeAzimuth: [number, number] | null;
    /** Change of the ratio a day between rains. */
    driftPerDay: number | null;
  };
  confidence: number;
  couldBe: string[];
}

/** A module's bypass path under load, as a share of its voltage: half a volt of some thirty. */
const BYPASS_SHARE = 0.015;
/** How far a ratio may be off and still count as unchanged. */
const UNCHANGED = 0.03;
/** Quarters with at least this share of STC power: enough for voltage and current to be told. */
const BRIGHT = 0.25;
/** Less than this share of what its siblings give is nothing: what is left is rounding. */
const NOTHING = 0.02;
const AZIMUTH_BIN = 10;
const SHADE_DEPTH = 0.1;

/** The signature of string `index` on the days `low`. */
export function signatureOf(
  plane: PlaneSeries,
  reference: PlaneReference,
  index: number,
  low: readonly number[],
): Signature {
  const s = plane.strings[index]!;
  const lowDays = new Set(low);
  const volts: number[] = [];
  const amps: number[] = [];
  const powers: number[] = [];
  const bins = new Map<number, { sum: number; n: number; deep: Map<number, boolean> }>();
  for (let q = 0; q < plane.dayOf.length; q++) {
    const d = plane.dayOf[q]!;
    const e = reference.specific[q]!;
    if (!lowDays.has(d) || s.excluded[q] !== 0 || !(e >= 0.08)) continue;
    const p = s.power[q]! / s.powerRef / e;
    if (Number.isNaN(p)) continue;
    const bin = Math.floor(plane.sunAzimuth[q]! / AZIMUTH_BIN);
    const b = bins.get(bin) ?? { sum: 0, n: 0, deep: new Map<number, boolean>() };
    b.sum += p;
    b.n++;
    bins.set(bin, b);
    if (e < BRIGHT) continue;
    powers.push(p);
    const v = s.voltage[q]! / s.units / reference.voltagePerModule(q);
    if (Number.isFinite(v)) volts.push(v);
    const i = (s.current[q]! * s.units) / s.powerRef / reference.currentPerWatt(q);
    if (Number.isFinite(i)) amps.push(i);
  }
  const alone = s.scope === 'string';
  const voltageRatio = alone && volts.length > 0 ? median(volts) : null;
  const currentRatio = amps.length > 0 ? median(amps) : null;
  const modulesMissing = voltageRatio === null ? null : (1 - voltageRatio) * s.units;
  const drift = driftOf(reference.ratio[index]!);
  const figures: Signature['figures'] = {
    voltageRatio,
    currentRatio,
    modulesMissing,
    shadeAzimuth: null,
    driftPerDay: drift?.perDay ?? null,
  };
  const made = (
    kind: SignatureKind,
    words: string,
    confidence: number,
    could: readonly string[],
    count: number | null = null,
  ): Signature => ({ kind, words, count, figures, confidence, couldBe: [...could] });

  if (powers.length > 0 && median(powers) < NOTHING)
    return made('current_low', said.noCurrent, 0.85, couldBe.noCurrent);
  const shade = shadeOf(bins, powers, plane, s.power, s.powerRef, reference.specific, low);
  if (shade !== null) {
    figures.shadeAzimuth = shade;
    return made('shade', said.shade(...shade), 0.85, couldBe.shade);
  }
  const currentRight = currentRatio !== null && Math.abs(1 - currentRatio) <= UNCHANGED;
  if (modulesMissing !== null && currentRight && modulesMissing > 0.2) {
    const groups = s.bypassGroups;
    const inGroups = modulesMissing * groups;
    const bypassed = Math.round(inGroups);
    const whole = Math.round(modulesMissing / (1 + BYPASS_SHARE));
    const offWhole = Math.abs(modulesMissing - whole * (1 + BYPASS_SHARE));
    const offGroup = Math.abs(modulesMissing - bypassed / groups);
    const near = 0.5 / groups;
    if (whole >= 1 && offWhole <= near && (bypassed % groups === 0 || offWhole < offGroup))
      return made('units_missing', said.unitsMissing(whole, s.units), 0.85, couldBe.unitsMissing, whole);
    if (bypassed >= 1 && offGroup <= near)
      return made('bypassed_substring', said.bypassed(bypassed, groups), 0.85, couldBe.bypassed, bypassed);
  }
  if (drift !== null && drift.steps && drift.perDay < -0.001)
    return made('soiling', said.soiling, 0.75, couldBe.soiling);
  const voltageRight = voltageRatio === null || Math.abs(1 - voltageRatio) <= UNCHANGED;
  if (currentRatio !== null && currentRatio < 1 - UNCHANGED && voltageRight)
    return alone
      ? made('current_low', said.currentLow, 0.7, couldBe.currentLow)
      : made('current_low', said.currentLow, 0.5, couldBe.currentLowOfInput);
  return made('unclear', said.unclear, 0.3, couldBe.unclear);
}

/** Sun azimuths at which the string is low day after day, while it is well elsewhere; null: no such pattern. */
function shadeOf(
  bins: ReadonlyMap<number, { sum: number; n: number; deep: Map<number, boolean> }>,
  powers: readonly number[],
  plane: PlaneSeries,
  power: Float64Array,
  powerRef: number,
  specific: Float64Array,
  low: readonly number[],
): [number, number] | null {
  if (powers.length < 12 || bins.size < 4) return null;
  const well = quantile(powers, 0.75);
  if (well < 1 - UNCHANGED) return null;
  const deepBins = [...bins].filter(([, b]) => b.sum / b.n < well - SHADE_DEPTH).map(([bin]) => bin);
  if (deepBins.length === 0 || deepBins.length > 0.6 * bins.size) return null;
  // it must come back: on most of the days on which the sun stood there
  const deep = new Set(deepBins);
  const seen = new Map<number, [deep: number, all: number]>();
  for (let q = 0; q < plane.dayOf.length; q++) {
    const d = plane.dayOf[q]!;
    const e = specific[q]!;
    if (!low.includes(d) || !(e >= 0.08) || !deep.has(Math.floor(plane.sunAzimuth[q]! / AZIMUTH_BIN)))
      continue;
    const p = power[q]! / powerRef / e;
    if (Number.isNaN(p)) continue;
    const tally = seen.get(d) ?? [0, 0];
    tally[1]++;
    if (p < well - SHADE_DEPTH / 2) tally[0]++;
    seen.set(d, tally);
  }
  const back = [...seen.values()].filter(([k, n]) => k >= 0.5 * n).length;
  if (back < 0.7 * low.length) return null;
  return [Math.min(...deepBins) * AZIMUTH_BIN, (Math.max(...deepBins) + 1) * AZIMUTH_BIN];
}

/** Slow fall of the daily ratio, with steps back up; needs ten days. */
function driftOf(ratio: Float64Array): { perDay: number; steps: boolean } | null {
  const known = [...ratio].filter((r) => !Number.isNaN(r));
  if (known.length < 10) return null;
  const steps = known.slice(1).map((r, i) => r - known[i]!);
  const perDay = median(steps);
  const spread = 1.4826 * median(steps.map((x) => Math.abs(x - perDay)));
  return { perDay, steps: steps.some((x) => x > Math.max(0.03, 5 * spread)) };
}
