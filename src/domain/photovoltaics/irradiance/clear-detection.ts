import { positive, within } from '../range';

/** What a window of measurements may differ from the clear sky by and still count as clear. */
export interface ClearLimits {
  /** Minutes. */
  windowMinutes: number;
  /** W/m², of the window's mean and of its maximum. */
  meanDifference: number;
  maxDifference: number;
  /** Length of the curve over the window (W/m² against minutes): how much shorter or longer than the clear sky's. */
  lineLengthBelow: number;
  lineLengthAbove: number;
  /** Standard deviation of the slope over the mean, 1/min. */
  slopeSpread: number;
  /** W/m² between the steps of both curves. */
  slopeDifference: number;
}

/** For ghi each minute: M.J. Reno, C.W. Hansen, Renewable Energy 90 (2016) 520. */
export const CLEAR_LIMITS: ClearLimits = {
  windowMinutes: 10,
  meanDifference: 75,
  maxDifference: 75,
  lineLengthBelow: -5,
  lineLengthAbove: 10,
  slopeSpread: 0.005,
  slopeDifference: 8,
};

export interface ClearDetection {
  /** Per sample: part of at least one window that passes every test. */
  clear: boolean[];
  /** What the clear-sky curve had to be scaled by to fit the clear samples. */
  scale: number;
}

const MAX_ROUNDS = 20;

/** Of each window: mean, maximum, spread of slope, and of two curves the length and the largest step between them. */
function windowIsClear(
  measured: readonly number[],
  clearSky: readonly number[],
  scale: number,
  first: number,
  size: number,
  intervalMinutes: number,
  limits: ClearLimits,
): boolean {
  let sum = 0;
  let sumClear = 0;
  let most = -Infinity;
  let mostClear = -Infinity;
  for (let i = first; i < first + size; i += 1) {
    sum += measured[i]!;
    sumClear += clearSky[i]!;
    most = Math.max(most, measured[i]!);
    mostClear = Math.max(mostClear, clearSky[i]!);
  }
  if (sumClear === 0 || sum === 0) return false;
  if (!(Math.abs(sum - scale * sumClear) / size < limits.meanDifference)) return false;
  if (!(Math.abs(most - scale * mostClear) < limits.maxDifference)) return false;
  let length = 0;
  let lengthClear = 0;
  let slopes = 0;
  let slopesSquared = 0;
  for (let i = first; i < first + size - 1; i += 1) {
    const step = measured[i + 1]! - measured[i]!;
    const stepClear = scale * (clearSky[i + 1]! - clearSky[i]!);
    if (!(Math.abs(step - stepClear) < limits.slopeDifference)) return false;
    length += Math.hypot(step, intervalMinutes);
    lengthClear += Math.hypot(stepClear, intervalMinutes);
    slopes += step / intervalMinutes;
    slopesSquared += (step / intervalMinutes) ** 2;
  }
  const longer = length - lengthClear;
  if (!(longer > limits.lineLengthBelow && longer < limits.lineLengthAbove)) return false;
  const count = size - 1;
  const variance = Math.max(0, slopesSquared - (slopes * slopes) / count) / (count - 1);
  return Math.sqrt(variance) / (sum / size) < limits.slopeSpread;
}

/**
 * Which samples of an evenly spaced series were measured under a clear sky: M.J. Reno, C.W. Hansen, "Identification of
 * periods of clear sky irradiance in time series of GHI measurements", Renewable Energy 90 (2016) 520. Compares windows
 * of the series with a clear-sky curve and scales the curve to the samples found until the scale settles.
 *
 * A window that holds a gap (null) or no light is never clear.
 *
 * @param measured W/m², null where nothing was measured
 * @param clearSky W/m², of the same length
 * @param intervalMinutes between samples, above 0 to 60
 * @throws RangeError naming the parameter
 */
export function detectClearSky(
  measured: readonly (number | null)[],
  clearSky: readonly number[],
  intervalMinutes: number,
  limits: ClearLimits = CLEAR_LIMITS,
): ClearDetection {
  positive('intervalMinutes', intervalMinutes, 60, 'min');
  if (measured.length !== clearSky.length) {
    throw new RangeError(
      `clearSky must be as long as measured (${measured.length}), but holds ${clearSky.length} values`,
    );
  }
  const size = Math.round(limits.windowMinutes / intervalMinutes);
  within('samples per window', size, 3, 1000, '');
  clearSky.forEach((value, i) => within(`clearSky[${i}]`, value, 0, 2000, 'W/m²'));
  // NaN fails every comparison of a window, which is what a gap should do
  const values = measured.map((value, i) => {
    if (value === null) return NaN;
    within(`measured[${i}]`, value, -50, 3000, 'W/m²');
    return value;
  });

  let scale = 1;
  let clear: boolean[] = [];
  for (let round = 0; round < MAX_ROUNDS; round += 1) {
    clear = values.map(() => false);
    for (let first = 0; first + size <= values.length; first += 1) {
      if (windowIsClear(values, clearSky, scale, first, size, intervalMinutes, limits)) {
        clear.fill(true, first, first + size);
      }
    }
    let product = 0;
    let square = 0;
    clear.forEach((isClear, i) => {
      if (!isClear) return;
      product += values[i]! * clearSky[i]!;
      square += clearSky[i]! ** 2;
    });
    const next = square > 0 ? product / square : scale;
    const settled = Math.round(next * 1e4) === Math.round(scale * 1e4);
    scale = next;
    if (settled) break;
  }
  return { clear, scale };
}
