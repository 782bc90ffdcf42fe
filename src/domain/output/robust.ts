/**
 * Statistics that a few wild values don't move, for comparing like with like: strings of a plane, units of a string.
 * Every function takes finite numbers and throws a RangeError for an empty set or one that holds NaN or infinities.
 */

/** Normal consistency of the median absolute deviation, 1/Φ⁻¹(0.75). */
const MAD_TO_SIGMA = 1.4826;
const Z_FACTOR = 0.6745;
/** Normal consistency of the mean absolute deviation, √(π/2). */
const MEAN_DEVIATION_TO_SIGMA = 1.253314;

function copied(values: readonly number[] | Float64Array): Float64Array {
  if (values.length === 0) throw new RangeError('values must hold at least one number');
  const copy = new Float64Array(values.length);
  for (let i = 0; i < copy.length; i++) {
    const value = values[i]!;
    if (!Number.isFinite(value)) throw new RangeError('values must hold finite numbers only');
    copy[i] = value;
  }
  return copy;
}

const sorted = (values: readonly number[] | Float64Array): Float64Array => copied(values).sort();

function quantileOfSorted(ordered: Float64Array, share: number): number {
  const place = (ordered.length - 1) * share;
  const below = Math.floor(place);
  const low = ordered[below]!;
  const high = ordered[Math.min(below + 1, ordered.length - 1)]!;
  return low + (high - low) * (place - below);
}

/** Linear interpolation between order statistics (Hyndman & Fan 1996, type 7); `share` 0 to 1. */
export function quantile(values: readonly number[], share: number): number {
  if (!(share >= 0 && share <= 1)) throw new RangeError(`share must be between 0 and 1, but is ${share}`);
  return quantileOfSorted(sorted(values), share);
}

/** Below this many numbers putting them in order is the quickest way to the one in the middle. */
const FEW = 12;

/**
 * The number of rank `rank` (0 for the least) among the first `count` of `values`, as if they were in order; they are
 * moved so that none before it is greater and none after it less (C.A.R. Hoare, Algorithm 65: Find, 1961). Finite
 * numbers only.
 */
export function ranked(values: Float64Array, rank: number, count: number = values.length): number {
  let low = 0;
  let high = count - 1;
  while (high - low >= FEW) {
    const [first, middle, last] = [values[low]!, values[(low + high) >> 1]!, values[high]!];
    const pivot = Math.max(Math.min(first, middle), Math.min(Math.max(first, middle), last));
    let i = low;
    let j = high;
    while (i <= j) {
      while (values[i]! < pivot) i++;
      while (values[j]! > pivot) j--;
      if (i > j) break;
      const moved = values[i]!;
      values[i++] = values[j]!;
      values[j--] = moved;
    }
    if (rank <= j) high = j;
    else if (rank >= i) low = i;
    else return values[rank]!;
  }
  for (let i = low + 1; i <= high; i++) {
    const value = values[i]!;
    let k = i - 1;
    for (; k >= low && values[k]! > value; k--) values[k + 1] = values[k]!;
    values[k + 1] = value;
  }
  return values[rank]!;
}

/** The median of the first `count` numbers of a set that may be put in another order. Finite numbers only. */
export function medianInPlace(values: Float64Array, count: number = values.length): number {
  const middle = count >> 1;
  const upper = ranked(values, middle, count);
  if (count % 2 === 1) return upper;
  let lower = -Infinity; // what stands before it is no greater
  for (let i = 0; i < middle; i++) if (values[i]! > lower) lower = values[i]!;
  return (lower + upper) / 2;
}

export const median = (values: readonly number[] | Float64Array): number => medianInPlace(copied(values));

/** Median absolute deviation from the median, unscaled. */
export function mad(values: readonly number[], centre: number = median(values)): number {
  return median(values.map((value) => Math.abs(value - centre)));
}

/** The standard deviation that the median absolute deviation stands for in normal data. */
export function sigmaMad(values: readonly number[]): number {
  return MAD_TO_SIGMA * mad(values);
}

export function mean(values: readonly number[]): number {
  if (values.length === 0) throw new RangeError('values must hold at least one number');
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Sample standard deviation (n − 1); 0 for a single value. */
export function standardDeviation(values: readonly number[]): number {
  if (values.length === 1) return 0;
  const centre = mean(values);
  const squares = values.reduce((sum, value) => sum + (value - centre) ** 2, 0);
  return Math.sqrt(squares / (values.length - 1));
}

/**
 * Modified z-scores 0.6745 (x − median)/MAD: B. Iglewicz, D. Hoaglin, How to Detect and Handle Outliers, ASQC 1993.
 *
 * Where more than half of the values are equal the MAD is 0 and says nothing: `whenMadIsZero` then gives null for each
 * (`undefined`), or takes the mean absolute deviation in its place (`mean_deviation`, our rule), with 0 for all where
 * every value is the same.
 */
export function modifiedZ(
  values: readonly number[],
  whenMadIsZero: 'undefined' | 'mean_deviation' = 'undefined',
): (number | null)[] {
  const centre = median(values);
  const spread = mad(values, centre);
  if (spread > 0) return values.map((value) => (Z_FACTOR * (value - centre)) / spread);
  if (whenMadIsZero === 'undefined') return values.map(() => null);
  const meanDeviation = mean(values.map((value) => Math.abs(value - centre)));
  if (meanDeviation === 0) return values.map(() => 0);
  return values.map((value) => (value - centre) / (MEAN_DEVIATION_TO_SIGMA * meanDeviation));
}

const indexesWhere = (values: readonly number[], wanted: (value: number) => boolean): number[] =>
  values.flatMap((value, index) => (wanted(value) ? [index] : []));

/** Indexes with |modified z| above the limit (Iglewicz & Hoaglin: 3.5); none where the MAD is 0. */
export function outliersByModifiedZ(values: readonly number[], limit = 3.5): number[] {
  return modifiedZ(values).flatMap((z, index) => (z !== null && Math.abs(z) > limit ? [index] : []));
}

/** Indexes further than `factor` scaled MADs from the median (Hampel identifier); none where the MAD is 0. */
export function outliersByHampel(values: readonly number[], factor = 3): number[] {
  const centre = median(values);
  const reach = factor * MAD_TO_SIGMA * mad(values, centre);
  return reach === 0 ? [] : indexesWhere(values, (value) => Math.abs(value - centre) > reach);
}

export interface Fences {
  q1: number;
  q3: number;
  low: number;
  high: number;
}

/** Quartiles and the fences beyond them (J.W. Tukey 1977: 1.5 interquartile ranges). */
export function boxplotFences(values: readonly number[], factor = 1.5): Fences {
  const ordered = sorted(values);
  const q1 = quantileOfSorted(ordered, 0.25);
  const q3 = quantileOfSorted(ordered, 0.75);
  return { q1, q3, low: q1 - factor * (q3 - q1), high: q3 + factor * (q3 - q1) };
}

export function outliersByBoxplot(values: readonly number[], factor = 1.5): number[] {
  const { low, high } = boxplotFences(values, factor);
  return indexesWhere(values, (value) => value < low || value > high);
}

/** Indexes further than `factor` standard deviations from the mean: blind where the outliers swell the deviation. */
export function outliersBySigma(values: readonly number[], factor = 3): number[] {
  const centre = mean(values);
  const reach = factor * standardDeviation(values);
  return indexesWhere(values, (value) => Math.abs(value - centre) > reach);
}
