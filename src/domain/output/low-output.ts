import { lowOutputSaid } from '../../words/domain-low-output';
import { EXCLUDED, type PlaneReference, type PlaneSeries, type StringSeries } from './plane-reference';
import { median } from './robust';
import { signatureOf, type Signature } from './signature';

/** Does a string make less than it should, since when, how much is lost, and what does it look like? */

export interface OutputFinding {
  outcome: 'low' | 'as_expected' | 'cant_tell';
  words: string;
  method: PlaneReference['method'];
  /** The days that decided, newest last. */
  days: { day: number; ratio: number; z: number | null; low: boolean }[];
  threshold: { z: number | null; ratio: number; source: string };
  /** Share of the expected output that is missing on the low days, with the middle 90 %. */
  loss: { share: number; low: number; high: number } | null;
  /** Over the days that decided, kWh with the middle 90 %, and money where a price was given. */
  lossKWh: { value: number; low: number; high: number } | null;
  lossMoney: { value: number; low: number; high: number } | null;
  signature: Signature | null;
  /** Quarters left out, by reason. */
  excluded: Record<keyof typeof EXCLUDED, number>;
  confidence: number;
}

/** Modified z above which a value is an outlier: Iglewicz & Hoaglin 1993. */
export const Z_LIMIT = 3.5;
/**
 * On a day on which the strings differ much, so far out is enough if it is `Z_LIMIT` by the spread of all days: the
 * spread of some ten strings on one day is itself uncertain by a quarter. From experience.
 */
const Z_LIMIT_OF_DAY = 2;
/** Less than this is within what modules differ by: IEC 62446-1 compares strings to 5 %. */
export const LOSS_MIN = 0.05;
export const DAYS_LOOKED_AT = 5;
export const DAYS_LOW = 3;
/** Standard deviation of made over modelled output: without and with its own past to compare to. From experience. */
const MODEL_SD = { fresh: 0.05, withPast: 0.02 } as const;
/** DC output over poaGlobal × power × temperature on a sound string. From experience: dirt, mismatch, cables, tracking. */
const MODEL_USUAL = 0.93;
const NINETY = 1.645;

/**
 * Judges string `index` of a plane over its last five days with enough sun, three of which must be low: among at least
 * five siblings by the modified z-score of each day's ratio (by that day's spread, or by that of all days), otherwise against the model with a wide band.
 * Days before `untilDay` (exclusive) count. `lossMin` (share) and `daysLow` (of five) may be set by an organisation.
 */
export function judgeOutput(
  plane: PlaneSeries,
  reference: PlaneReference,
  index: number,
  options: { untilDay?: number; pricePerKWh?: number; lossMin?: number; daysLow?: number } = {},
): OutputFinding {
  const { lossMin = LOSS_MIN, daysLow = DAYS_LOW } = options;
  const s = plane.strings[index]!;
  const ratio = reference.ratio[index]!;
  const z = reference.z[index]!;
  const looked: number[] = [];
  for (let d = Math.min(plane.days, options.untilDay ?? plane.days) - 1; d >= 0; d--) {
    if (looked.length === DAYS_LOOKED_AT) break;
    if (!Number.isNaN(ratio[d]!) && (reference.method === 'model' || !Number.isNaN(z[d]!))) looked.unshift(d);
  }
  const bySiblings = reference.method === 'siblings';
  const usual = bySiblings ? 1 : (s.ownBaseline ?? MODEL_USUAL);
  const sd = bySiblings
    ? Math.max(reference.spread, 0.005)
    : s.ownBaseline === null
      ? MODEL_SD.fresh
      : MODEL_SD.withPast;
  const limit = bySiblings ? 1 - lossMin : usual - Math.max(lossMin, Z_LIMIT * sd);
  const isOut = (d: number): boolean =>
    z[d]! < -Z_LIMIT || (z[d]! < -Z_LIMIT_OF_DAY && ratio[d]! - 1 < -Z_LIMIT * reference.spread);
  const isLow = (d: number): boolean => ratio[d]! < limit && (!bySiblings || isOut(d));
  const low = looked.filter(isLow);
  const base = {
    method: reference.method,
    days: looked.map((d) => ({
      day: d,
      ratio: ratio[d]!,
      z: bySiblings ? z[d]! : null,
      low: isLow(d),
    })),
    threshold: {
      z: bySiblings ? -Z_LIMIT : null,
      ratio: limit,
      source: bySiblings
        ? lowOutputSaid.sourceSiblings(lossMin, lossMin === LOSS_MIN, daysLow)
        : lowOutputSaid.sourceModel(daysLow),
    },
    excluded: countExcluded(plane, s),
  };
  const none = { loss: null, lossKWh: null, lossMoney: null, signature: null };
  if (looked.length < daysLow)
    return {
      ...base,
      ...none,
      outcome: 'cant_tell',
      words: lowOutputSaid.tooFewDays(s.name, looked.length, daysLow),
      confidence: 0,
    };
  if (low.length < daysLow)
    return {
      ...base,
      ...none,
      outcome: 'as_expected',
      words:
        low.length === 0
          ? lowOutputSaid.makesWhatItShould(s.name)
          : lowOutputSaid.lowOnTooFew(s.name, low.length, looked.length, daysLow),
      confidence: low.length === 0 ? 0.95 : 0.8,
    };

  const share = usual - median(low.map((d) => ratio[d]!));
  const half = NINETY * sd;
  const expectedKWh = looked.reduce((sum, d) => sum + reference.expectedWh[index]![d]!, 0) / 1000;
  const madeKWh = looked.reduce((sum, d) => sum + reference.madeWh[index]![d]!, 0) / 1000;
  const value = Math.max(0, expectedKWh * usual - madeKWh);
  const uncertain = half * expectedKWh;
  const lossKWh = { value, low: Math.max(0, value - uncertain), high: value + uncertain };
  const price = options.pricePerKWh;
  const signature = signatureOf(plane, reference, index, low);
  return {
    ...base,
    outcome: 'low',
    words: lowOutputSaid.makesLess(s.name, share, bySiblings, signature.words),
    loss: { share, low: Math.max(0, share - half), high: share + half },
    lossKWh,
    lossMoney:
      price === undefined
        ? null
        : { value: value * price, low: lossKWh.low * price, high: lossKWh.high * price },
    signature,
    confidence: bySiblings ? 0.95 : 0.75,
  };
}

function countExcluded(plane: PlaneSeries, s: StringSeries): OutputFinding['excluded'] {
  const counts = { clipped: 0, curtailed: 0, gridLost: 0, shutdown: 0, incomplete: 0 };
  for (let q = 0; q < s.excluded.length; q++) {
    const e = s.excluded[q]!;
    if (e === 0 || plane.dayOf[q]! < 0) continue; // nearly always
    for (const reason of REASONS) if (e & EXCLUDED[reason]) counts[reason]++;
  }
  return counts;
}
const REASONS = Object.keys(EXCLUDED) as (keyof typeof EXCLUDED)[];
