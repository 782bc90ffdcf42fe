import type { CauseNow } from '../../schemas/api/now';
import { sharedCausesWords } from '../../words/shared-causes';

/** Gravest first: the order of every list of causes. */
export const GRAVITY: readonly CauseNow['verdict'][] = [
  'not_shutting_down',
  'stuck',
  'unconfirmed',
  'silent',
];

/** Gravest first, then oldest first. */
export function byGravity(a: CauseNow, b: CauseNow): number {
  return GRAVITY.indexOf(a.verdict) - GRAVITY.indexOf(b.verdict) || a.since.localeCompare(b.since);
}

/** A cause after which somebody could touch what is live, believing that it is not. */
export const isHazard = (cause: Pick<CauseNow, 'verdict'>): boolean => cause.verdict === 'not_shutting_down';

/** What to treat as live; null where the cause says nothing about live conductors. */
export function treatAsLive(cause: Pick<CauseNow, 'verdict'>): string | null {
  if (cause.verdict === 'not_shutting_down') return sharedCausesWords.treatEveryStringThere;
  if (cause.verdict === 'unconfirmed') return sharedCausesWords.nothingShowsThatThese;
  if (cause.verdict === 'silent') return sharedCausesWords.whetherTheseUnitsFollow;
  return null;
}

/** What kind of part, as it stands in a sentence: "transmitter T4". */
export const partInWords = (part: NonNullable<CauseNow['sharedPart']>): string => {
  const name = part.name.trim();
  return name.toLowerCase().startsWith(part.kind) ? name : `${part.kind} ${name}`;
};

/** "the unit is defective or a loose connector at the unit": what else it could be, in one clause. */
export function alternativesInWords(alternatives: readonly string[]): string {
  // a name in capitals keeps them
  const inside = alternatives.map((a) =>
    /^([A-Z][a-z]|A )/.test(a) ? a.charAt(0).toLowerCase() + a.slice(1) : a,
  );
  const last = inside.pop() ?? '';
  return inside.length === 0 ? last : sharedCausesWords.insideOrLast(inside.join(', '), last);
}
