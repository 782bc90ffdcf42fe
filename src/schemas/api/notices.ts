import { z } from 'zod';
import { HOWS, NOTICE_KINDS, type How, type NoticeKind } from '../../domain/notices/kinds';
import { id } from './now';
import { noticeFields } from '../../words/fields';

/** Notices of one person, and what that person has chosen. Times ISO 8601 in UTC. */

const time = z.iso.datetime();

export const noticesView = z.object({
  q: z.string().max(120).catch(''),
  show: z.enum(['all', 'unread']).catch('all'),
  kind: z.enum(['all', ...NOTICE_KINDS]).catch('all'),
  site: z.union([z.uuid(), z.literal('')]).catch(''),
  /** The notice after which the list goes on. */
  before: z.coerce.number().int().positive().optional().catch(undefined),
});
export type NoticesView = z.infer<typeof noticesView>;

export const noticeItem = z.object({
  id,
  /** Counts up: where a list goes on, and up to which all are read. */
  number: z.int(),
  kind: z.enum(NOTICE_KINDS),
  headline: z.string(),
  body: z.string(),
  href: z.string(),
  hazard: z.boolean(),
  /** How often it went and came back, in this one line. */
  came: z.int(),
  at: time,
  readAt: time.nullable(),
  overAt: time.nullable(), // what it tells of is over
  site: z.object({ id, name: z.string(), timeZone: z.string() }).nullable(),
});
export type NoticeItem = z.infer<typeof noticeItem>;

export interface NoticesPage {
  at: string;
  timeZone: string;
  items: NoticeItem[];
  /** Where the next page begins; null: this is the last. */
  next: number | null;
  unread: number;
  /** Not shutting down, unread and not over. */
  hazards: number;
  /** Kinds that this person is ever told of. */
  kinds: NoticeKind[];
  sites: { id: string; name: string }[];
}

export const readBodySchema = z.union([
  z.strictObject({ ids: z.array(id).min(1).max(500), read: z.boolean().default(true) }),
  z.strictObject({ upTo: z.int().positive() }),
]);

const minute = z.int().min(0).max(1439);
export const choiceBody = z
  .strictObject({
    rules: z.partialRecord(z.enum(NOTICE_KINDS), z.enum(HOWS)),
    /** null: every site that one sees. */
    sites: z.array(id).max(5000).nullable(),
    digestAt: minute,
    quiet: z.strictObject({ from: minute, to: minute }).nullable(),
    /** null: the organisation's. */
    timeZone: z.string().max(64).nullable(),
  })
  .check(({ value, issues }) => {
    if (value.quiet && value.quiet.from === value.quiet.to)
      issues.push({
        code: 'custom',
        path: ['quiet'],
        input: value.quiet,
        message: noticeFields.quietHoursEmpty,
      });
    if (value.sites?.length === 0)
      issues.push({
        code: 'custom',
        path: ['sites'],
        input: value.sites,
        message: noticeFields.chooseSite,
      });
  });
export type ChoiceBody = z.infer<typeof choiceBody>;

export interface ChoicesPage {
  at: string;
  email: string;
  kinds: {
    kind: NoticeKind;
    name: string;
    meaning: string;
    how: How;
    standard: How;
    /** Why it can't be chosen away; null: it can. */
    fixed: string | null;
  }[];
  sites: { id: string; name: string }[];
  chosenSites: string[] | null;
  digestAt: number;
  quiet: { from: number; to: number } | null;
  timeZone: string | null;
  organisationZone: string;
  timeZones: string[];
}
