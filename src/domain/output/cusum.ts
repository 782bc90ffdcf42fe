/** A two-sided cumulative sum chart. */
export interface Cusum {
  /** Sum of what lies above target + k, per value. */
  high: number[];
  /** Sum of what lies below target − k, per value. */
  low: number[];
  /** First index at which a sum exceeds h; null if none does. */
  firstSignal: number | null;
  /** Which sum exceeded h first. */
  side: 'high' | 'low' | null;
}

/**
 * Tabular CUSUM (E.S. Page, Biometrika 41 (1954) 100; D.C. Montgomery, Introduction to Statistical Quality Control):
 * finds a small lasting shift that no single value shows. Usual choice: k half the standard deviation, h four to five.
 *
 * @param k slack, in the unit of the values, 0 or more
 * @param h decision limit, above 0
 * @throws RangeError naming the parameter
 */
export function cusum(values: readonly number[], target: number, k: number, h: number): Cusum {
  if (!Number.isFinite(target)) throw new RangeError(`target must be finite, but is ${target}`);
  if (!(k >= 0 && Number.isFinite(k))) throw new RangeError(`k must be 0 or more, but is ${k}`);
  if (!(h > 0)) throw new RangeError(`h must be above 0, but is ${h}`);
  const high: number[] = [];
  const low: number[] = [];
  let above = 0;
  let below = 0;
  let firstSignal: number | null = null;
  let side: Cusum['side'] = null;
  values.forEach((value, index) => {
    if (!Number.isFinite(value)) throw new RangeError(`values[${index}] must be finite, but is ${value}`);
    above = Math.max(0, above + value - target - k);
    below = Math.max(0, below + target - k - value);
    high.push(above);
    low.push(below);
    if (firstSignal === null && (above > h || below > h)) {
      firstSignal = index;
      side = above > h ? 'high' : 'low';
    }
  });
  return { high, low, firstSignal, side };
}
