import type { WeakUnit } from './weak-unit';

/** Weak units over several days: one day's shadow or drop of dirt is no finding. */

/** What one day said: null where it had too little load to say anything. */
export type WeakDay = readonly WeakUnit[] | null;

/** Kinds that last: a unit held in shutdown and shade for part of a day are found elsewhere. */
const LASTING: readonly WeakUnit['kind'][] = ['bypassed_substring', 'low'];
const DAYS_LOOKED_AT = 3;
const DAYS_WEAK = 2;

/**
 * Units that were weak in the same way on two of the last three days that could tell, the newest among them.
 *
 * @param days oldest first
 */
export function lastingWeakUnits(days: readonly WeakDay[]): WeakUnit[] {
  const telling = days.filter((d): d is readonly WeakUnit[] => d !== null).slice(-DAYS_LOOKED_AT);
  const newest = telling.at(-1) ?? [];
  return newest.filter(
    (w) => LASTING.includes(w.kind) && telling.filter((d) => d.some((x) => same(x, w))).length >= DAYS_WEAK,
  );
}

/** A unit that was not weak on the two newest days that could tell is well; null: can't tell. */
export function isWell(days: readonly WeakDay[], unit: number): boolean | null {
  const telling = days.filter((d): d is readonly WeakUnit[] => d !== null).slice(-DAYS_WEAK);
  if (telling.length < DAYS_WEAK) return null;
  const weak = telling.filter((d) => d.some((w) => w.unit === unit && LASTING.includes(w.kind))).length;
  return weak === 0 ? true : weak === DAYS_WEAK ? false : null;
}

const same = (a: WeakUnit, b: WeakUnit): boolean =>
  a.unit === b.unit && a.kind === b.kind && a.count === b.count;
