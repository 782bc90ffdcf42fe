import { wholeWithin } from '../range';
import type { StringElement } from './elements';
import { powerPeaks, seriesString } from './series';

export interface PowerPoint {
  i: number;
  v: number;
  p: number;
}

export interface StringCurve {
  voc: number;
  isc: number;
  /** The maximum power point; null for a string that gives no power. */
  mpp: PowerPoint | null;
  /** Every local maximum, the highest first. */
  localMaxima: readonly PowerPoint[];
  /** From 0 A to isc, evenly in current, with the corners between. */
  points: readonly { i: number; v: number }[];
  /** Bypass groups that give power at the maximum power point. */
  groupsAtMpp: number;
}

/**
 * The whole curve of a series string; null where a lead is open.
 *
 * @param resistance Ω in series
 * @param count points besides the corners, 2 to 10 000
 * @throws RangeError naming the parameter
 */
export function stringCurveOf(
  elements: readonly StringElement[],
  resistance = 0,
  count = 100,
): StringCurve | null {
  wholeWithin('count', count, 2, 10_000);
  const string = seriesString(elements, resistance);
  if (!string) return null;
  const { isc, voc } = string;
  const inside = string.corners.filter((corner) => corner < isc);
  const localMaxima = powerPeaks([...inside, isc], (current) => current * string.voltageAt(current)).map(
    ({ at, value }) => ({ i: at, v: value / at, p: value }),
  );
  const mpp = localMaxima[0] ?? null;
  const currents = Array.from({ length: count }, (_, step) => (isc * step) / (count - 1));
  const points = [...new Set([...currents, ...inside])]
    .sort((a, b) => a - b)
    .map((i) => ({ i, v: string.voltageAt(i) }));
  return { voc, isc, mpp, localMaxima, points, groupsAtMpp: mpp ? string.groupsGivingPower(mpp.i) : 0 };
}

/** The maximum power point of a string; null for an open one and for one that gives no power. */
export function stringMaximumPowerPoint(
  elements: readonly StringElement[],
  resistance = 0,
): PowerPoint | null {
  return stringCurveOf(elements, resistance, 2)?.mpp ?? null;
}
