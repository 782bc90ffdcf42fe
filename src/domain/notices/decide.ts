import type { Role } from '../access/permissions';
import { howOf, KINDS, type How, type NoticeKind } from './kinds';
import { nextAt, quietUntil, type QuietHours } from './person-clock';

/** Whether and how one person is told of one thing. */

export interface Choice {
  /** What differs from the role's defaults. */
  rules: Readonly<Partial<Record<string, How>>>;
  /** Sites to be told of; null: every site that the person sees. */
  sites: readonly number[] | null;
  /** Minute of the person's day at which the day's letter is written. */
  digestAt: number;
  quiet: QuietHours | null;
}
export interface Recipient {
  personId: number;
  role: Role;
  active: boolean;
  /** IANA zone of the person's day. */
  timeZone: string;
  /** Sites that the person may see. */
  sees: 'all' | readonly number[];
  choice: Choice;
}
export const DEFAULT_CHOICE: Choice = { rules: {}, sites: null, digestAt: 7 * 60, quiet: null };

export interface Matter {
  kind: NoticeKind;
  /** null: it is of no site. */
  siteId: number | null;
  /** Whoever did it knows it. */
  byPerson: number | null;
  inProductOnly: boolean;
}

/**
 * `now`: a letter of its own. `gathered`: a line in the letter that this person gets at `at`, the day's or the one after
 * quiet hours.
 */
export type Decision =
  { how: 'nothing' } | { how: 'in_product' } | { how: 'now' } | { how: 'gathered'; at: Date };

const NOTHING: Decision = { how: 'nothing' };

export function decide(matter: Matter, person: Recipient, now: Date): Decision {
  const { kind, siteId } = matter;
  const { choice, timeZone } = person;
  const seen = siteId === null || person.sees === 'all' || person.sees.includes(siteId);
  if (!person.active || !seen || matter.byPerson === person.personId) return NOTHING;
  const how = howOf(kind, person.role, choice.rules);
  const fixed = KINDS[kind].fixed !== undefined;
  const wanted = fixed || siteId === null || choice.sites === null || choice.sites.includes(siteId);
  if (how === 'nothing' || !wanted) return NOTHING;
  if (how === 'in_product' || matter.inProductOnly) return { how: 'in_product' };
  if (how === 'digest') return { how: 'gathered', at: nextAt(now, choice.digestAt, timeZone) };
  if (fixed) return { how: 'now' };
  const at = quietUntil(now, choice.quiet, timeZone);
  return at.getTime() > now.getTime() ? { how: 'gathered', at } : { how: 'now' };
}
