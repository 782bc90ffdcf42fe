import { listed, percent } from '../../drawings/numbers';
import type { MembershipSuspect } from '../../schemas/api/membership';

/** Units whose current is another string's: in pairs where two look exchanged, and in words. */

export const unitName = (u: { string: string; position: number }): string => `${u.string}-${u.position}`;

/** Suspects in pairs that look exchanged, and those that stand alone. */
export function groupsOf(suspects: readonly MembershipSuspect[]): [MembershipSuspect, MembershipSuspect?][] {
  const taken = new Set<string>();
  return suspects.flatMap((s): [MembershipSuspect, MembershipSuspect?][] => {
    if (taken.has(s.serial)) return [];
    const pair = s.counterpart && suspects.find((o) => o.serial === s.counterpart?.serial);
    taken.add(s.serial);
    if (!pair) return [[s]];
    taken.add(pair.serial);
    return [[s, pair]];
  });
}

/** "each carries the other string's current (0.4 % apart over 22 reports, against 6 % from its own)". */
export function suspectWords([a, b]: [MembershipSuspect, MembershipSuspect?]): string {
  if (a.outcome === 'fits_none')
    return `${unitName(a)} carries the current of no string here (${percent(a.apartOwn, 1)} from its own over ${a.steps} reports). Its measurement may be wrong.`;
  const figures = (s: MembershipSuspect) =>
    `${percent(s.apartOther, 1)} apart over ${s.steps} reports, against ${percent(s.apartOwn, 1)} from its own`;
  const certain = a.outcome === 'elsewhere' && (!b || b.outcome === 'elsewhere');
  const alike = certain ? '' : ' Other strings fit alike: only isolating one decides.';
  if (b)
    return `${unitName(a)} and ${unitName(b)} ${certain ? 'look' : 'may be'} exchanged: each carries a current like the other string’s (${figures(a)}; ${figures(b)}).${alike}`;
  return a.outcome === 'elsewhere'
    ? `${unitName(a)} carries the current of ${a.otherString} (${figures(a)}). Which unit belongs there the currents don’t say.`
    : `${unitName(a)} does not carry the current of ${a.string} (${percent(a.apartOwn, 1)} apart over ${a.steps} reports). ${listed(a.undecidedWith)} and maybe others fit alike: only isolating a string decides.`;
}
