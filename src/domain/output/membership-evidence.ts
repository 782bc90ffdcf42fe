import { median } from './robust';

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
  for (let q = 0; q < steps; q++) {
    const values = others.flatMap((c) => (Number.isNaN(c[q]!) ? [] : [c[q]!]));
    if (values.length > 0 && values.length * 2 >= others.length) typical[q] = median(values);
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

export interface Judged {
  string: string;
  unit: number;
  otherString: string | null;
}
/** The one unit of the other string that looks to belong here; null: none, or more than one. */
export function counterpartOf<J extends Judged>(suspect: J, elsewhere: readonly J[]): J | null {
  const there = elsewhere.filter((j) => j.string === suspect.otherString && j.otherString === suspect.string);
  const alike = elsewhere.filter((j) => j.string === suspect.string && j.otherString === suspect.otherString);
  return there.length === 1 && alike.length === 1 ? there[0]! : null;
}
