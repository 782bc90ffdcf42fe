import { listed } from '../../drawings/numbers';
import type { MembershipSuspect } from '../../schemas/api/membership';
import { placementsSuspects } from '../../words/placements';

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
    return placementsSuspects.carriesTheCurrentOf(unitName(a), a.apartOwn, a.steps);
  const figures = (s: MembershipSuspect) =>
    placementsSuspects.apartOverReportsAgainst(s.apartOther, s.steps, s.apartOwn);
  const certain = a.outcome === 'elsewhere' && (!b || b.outcome === 'elsewhere');
  const alike = certain ? '' : placementsSuspects.otherStringsFitAlike;
  if (b)
    return placementsSuspects.andExchangedEachCarries(
      unitName(a),
      unitName(b),
      certain,
      figures(a),
      figures(b),
      alike,
    );
  return a.outcome === 'elsewhere'
    ? placementsSuspects.carriesTheCurrentOfWhich(unitName(a), a.otherString, figures(a))
    : placementsSuspects.doesNotCarryThe(unitName(a), a.string, a.apartOwn, a.steps, listed(a.undecidedWith));
}
