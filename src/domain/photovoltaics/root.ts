/**
 * Root of a falling function between `low` (where it is not below zero) and `high` (where it is not above), by false
 * position with Illinois weighting, halved where that is slow. Where a stretch is zero, its lower end.
 */
export function fallingRoot(f: (x: number) => number, low: number, high: number, tolerance = 1e-13): number {
  let left = low;
  let right = high;
  let atLeft = f(left);
  let atRight = f(right);
  if (atLeft <= 0) return left;
  if (atRight > 0) return right;
  let kept = 0;
  for (let step = 0; step < 200 && right - left > tolerance * Math.max(Math.abs(right), 1e-6); step += 1) {
    const width = right - left;
    const weighted = left + (width * atLeft) / (atLeft - atRight);
    const x = step % 3 === 2 || atRight === 0 ? (left + right) / 2 : weighted;
    const value = f(x);
    if (value > 0) {
      left = x;
      atLeft = value;
      if (kept === 1) atRight /= 2;
      kept = 1;
    } else {
      right = x;
      atRight = value;
      if (kept === -1) atLeft /= 2;
      kept = -1;
    }
  }
  return right;
}

const GOLDEN = (3 - Math.sqrt(5)) / 2;

/** Where a function with one peak between `low` and `high` has it (R.P. Brent 1973: golden section with parabolas). */
export function peakOf(f: (x: number) => number, low: number, high: number): { at: number; value: number } {
  let left = low;
  let right = high;
  let x = left + GOLDEN * (right - left);
  let w = x;
  let v = x;
  let fx = f(x);
  let fw = fx;
  let fv = fx;
  let step = 0;
  let before = 0;
  for (let round = 0; round < 100; round += 1) {
    const middle = (left + right) / 2;
    const tolerance = 1e-9 * Math.abs(x) + 1e-12;
    if (Math.abs(x - middle) <= 2 * tolerance - (right - left) / 2) break;
    let golden = true;
    if (Math.abs(before) > tolerance) {
      const r = (x - w) * (fx - fv);
      const q = (x - v) * (fx - fw);
      let p = (x - v) * q - (x - w) * r;
      let divisor = 2 * (q - r);
      if (divisor > 0) p = -p;
      divisor = Math.abs(divisor);
      if (
        Math.abs(p) < Math.abs((divisor * before) / 2) &&
        p > divisor * (left - x) &&
        p < divisor * (right - x)
      ) {
        before = step;
        step = p / divisor;
        golden = false;
      }
    }
    if (golden) {
      before = x < middle ? right - x : left - x;
      step = GOLDEN * before;
    }
    const next = x + (Math.abs(step) >= tolerance ? step : Math.sign(step || 1) * tolerance);
    const value = f(next);
    if (value >= fx) {
      if (next < x) right = x;
      else left = x;
      v = w;
      fv = fw;
      w = x;
      fw = fx;
      x = next;
      fx = value;
    } else {
      if (next < x) left = next;
      else right = next;
      if (value >= fw || w === x) {
        v = w;
        fv = fw;
        w = next;
        fw = value;
      } else if (value >= fv || v === x || v === w) {
        v = next;
        fv = value;
      }
    }
  }
  return { at: x, value: fx };
}
