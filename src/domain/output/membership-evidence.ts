import { median, medianInPlace } from './robust';

/** How far a unit's current lies from a string's, drawn as evidence beside the judgement of membership. Amperes. */

export interface Apartness {
  /** Median of |unit / string − 1|. */
  share: number;
  /** Steps with enough current on both. */
  steps: number;
}

/** Median current of a string's units at each step, one of them left out; NaN where fewer than half report. */
export function typicalOf(currents: readonly Float64Array[], leftOut: number | null = null): Float64Array {
  const others = currents.filter((_, i) => i !== leftOut);
  const steps = currents[0]?.length ?? 0;
  const typical = new Float64Array(steps).fill(NaN);
  const values = new Float64Array(others.length);
  for (let q = 0; q < steps; q++) {
    let known = 0;
    for (const current of others) if (!Number.isNaN(current[q]!)) values[known++] = current[q]!;
    if (known > 0 && known * 2 >= others.length) typical[q] = medianInPlace(values, known);
  }
  return typical;
}

/** How far apart unit and string are; null where they never carried `currentMin` together. */
export function apartFrom(unit: Float64Array, string: Float64Array, currentMin = 0.5): Apartness | null {
  const shares: number[] = [];
  for (let q = 0; q < unit.length; q++)
    if (unit[q]! >= currentMin && string[q]! >= currentMin) shares.push(Math.abs(unit[q]! / string[q]! - 1));
  return shares.length === 0 ? null : { share: median(shares), steps: shares.length };
}

/** A unit that does not carry its own string's current. */
export interface Misfit {
  string: string;
  current: Float64Array;
  /** How far it lies from its own string. */
  apart: number;
}
/** Closer than this share of what parts a unit from its own string is a fit. */
const FITS = 1 / 3;

/**
 * The one misfit of another string that may stand in this one's place: each is close to the other's string, and no
 * other misfit is so too. null: none, or more than one. Other strings may fit as well: this is a hint, not a finding.
 */
export function counterpartOf<M extends Misfit>(
  misfit: M,
  misfits: readonly M[],
  typicals: ReadonlyMap<string, Float64Array>,
): M | null {
  const partners = (a: M): M[] => misfits.filter((b) => b.string !== a.string && close(a, b) && close(b, a));
  const close = (a: M, b: M): boolean => {
    const typical = typicals.get(b.string);
    const apart = typical && apartFrom(a.current, typical);
    return apart !== null && apart !== undefined && apart.share <= FITS * a.apart;
  };
  const [only, ...more] = partners(misfit);
  return only && more.length === 0 && partners(only).length === 1 ? only : null;
}
