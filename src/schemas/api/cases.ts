import { z } from 'zod';
import {
  CASE_KINDS,
  CASE_ORIGINS,
  CASE_STATES,
  CHECK_OUTCOMES,
  type CasePart,
  type CheckOutcome,
} from '../../domain/cases/cases';
import type { ChecklistLine } from '../../domain/cases/checklists';
import type { CaseFigures } from '../../domain/cases/figures';
import { id } from './now';
import { CASE_SORTS, TITLE_MAX, WHAT_MAX, COMMENT_MAX } from '../lists-and-limits';
import { caseFields } from '../../words/fields';

/** Cases that people work on. Times ISO 8601 in UTC, days as 2026-11-03 at the site. */

const time = z.iso.datetime();
const day = z.iso.date(caseFields.giveDay);
const person = z.object({ id, name: z.string() });

/** One line of the checklist as done. */
export interface ChecklistMark {
  key: string;
  done: boolean;
  by: string;
  at: string;
  note: string;
}

export const CASE_ENTRY_KINDS = [
  'opened',
  'comment',
  'change', // detail: {version, changes: [{field, from, to}]}
  'checklist', // detail: {key, check, done}
  'photo', // detail: {photo, name}
  'state', // detail: {version, from, to}
  'checked', // detail: {outcome, headline, lines}
  'reopened', // as checked
] as const;
export type CaseEntryKind = (typeof CASE_ENTRY_KINDS)[number];

export const caseItem = z.object({
  id,
  number: z.int(),
  title: z.string(),
  siteId: id,
  siteName: z.string(),
  timeZone: z.string(),
  kind: z.enum(CASE_KINDS),
  origin: z.enum(CASE_ORIGINS),
  state: z.enum(CASE_STATES),
  assignee: person.nullable(),
  dueOn: z.string().nullable(),
  overdue: z.boolean(), // by the site's own calendar; a closed case never is
  openedAt: time,
  openedBy: z.string(),
  changedAt: time,
  closedAt: time.nullable(),
  /** What Wakeline found when it looked again; null: not yet, or nothing was closed. */
  outcome: z.enum(CHECK_OUTCOMES).nullable(),
  strings: z.array(z.object({ id, name: z.string() })),
  units: z.int(),
  comments: z.int(),
  photos: z.int(),
  checked: z.int(), // lines of the checklist that are done
  version: z.int(),
});
export type CaseItem = z.infer<typeof caseItem>;

export const casesPage = z.object({
  at: time,
  /** Who looks. */
  me: id,
  cases: z.array(caseItem),
  /** Closed ones before this many days are left out; null: none is. */
  closedDays: z.int().nullable(),
  people: z.array(person),
  sites: z.array(z.object({ id, name: z.string() })),
});
export type CasesPage = z.infer<typeof casesPage>;

/** Closed cases this old leave the board. */
export const CLOSED_DAYS = 30;
/** The most cases that one list holds. */
export const CASES_MAX = 2000;

export const casesView = z.object({
  look: z.enum(['board', 'list']).catch('board'),
  q: z.string().max(80).catch(''),
  who: z.enum(['all', 'mine', 'unassigned']).catch('all'),
  due: z.enum(['all', 'overdue']).catch('all'),
  site: z.union([z.literal('all'), id]).catch('all'),
  kind: z.enum(['all', ...CASE_KINDS]).catch('all'),
  show: z.enum(['current', 'open', 'all']).catch('current'),
  sort: z.enum(CASE_SORTS).catch('changed'),
  dir: z.enum(['asc', 'desc']).catch('desc'),
});
export type CasesView = z.infer<typeof casesView>;

export interface CaseEntry {
  id: string;
  at: string;
  /** null: Wakeline itself. */
  person: string | null;
  kind: CaseEntryKind;
  body: string;
  mentions: string[];
  detail: Record<string, unknown>;
}

export interface CasePhoto {
  id: string;
  name: string;
  note: string;
  person: string;
  at: string;
}

/** One case with all that its page shows. */
export interface CasePage {
  at: string;
  me: { id: string; name: string };
  case: CaseItem & {
    what: string;
    cause: { id: string; headline: string; open: boolean } | null;
    parts: CasePart[];
    checklist: ChecklistMark[];
    /** The lines to go through, and those of another kind's list that somebody has ticked. */
    lines: ChecklistLine[];
    before: CaseFigures | null;
    after: (CaseFigures & { outcome: CheckOutcome }) | null;
    checkedAt: string | null;
  };
  entries: CaseEntry[];
  photos: CasePhoto[];
  people: { id: string; name: string }[];
  contact: { name: string; phone: string };
  strings: { id: string; name: string; units: number }[]; // of the site
}

const clean = (text: string) => !/[^\P{C}\n\r\t]/u.test(text);
const CONTROL = caseFields.noControlCharacters;
const title = z
  .string({ error: caseFields.giveTitle })
  .trim()
  .min(1, caseFields.giveTitle)
  .max(TITLE_MAX, caseFields.titleTooLong(TITLE_MAX))
  .refine((t) => !/\p{C}/u.test(t), CONTROL);
const what = z.string().trim().max(WHAT_MAX, caseFields.whatTooLong(WHAT_MAX)).refine(clean, CONTROL);
const kind = z.enum(CASE_KINDS, { error: caseFields.chooseKind });
const part = z.strictObject({ string: id, position: z.int().min(1).max(63).nullable() });
const parts = z.array(part).max(400, caseFields.tooManyUnits);
const strings = z.array(id).max(400, caseFields.tooManyStrings);
const note = z.string().trim().max(2000, caseFields.noteTooLong).refine(clean, CONTROL);

export const newCaseView = z.object({
  cause: id.optional().catch(undefined),
  string: id.optional().catch(undefined),
  site: id.optional().catch(undefined),
  position: z.coerce.number().int().min(1).max(63).optional().catch(undefined),
});

/** What the form for a new case begins with. */
export interface CaseDraft {
  at: string;
  sites: { id: string; name: string }[];
  people: { id: string; name: string }[];
  site: string | null;
  /** Strings of that site. */
  strings: { id: string; name: string; units: number }[];
  origin: 'cause' | 'string' | 'hand';
  cause: { id: string; headline: string } | null;
  /** The case that this cause has already. */
  existing: { id: string; number: number; title: string } | null;
  title: string;
  what: string;
  kind: (typeof CASE_KINDS)[number];
  chosen: string[];
  parts: { string: string; position: number | null }[];
}

export const newCase = z.strictObject({
  ref: id, // made where it is typed: sent twice is opened once
  site: id,
  origin: z.enum(['cause', 'string', 'hand']),
  title,
  what: what.default(''),
  kind,
  cause: id.nullable().default(null),
  strings: strings.default([]),
  parts: parts.default([]),
  assignee: id.nullable().default(null),
  dueOn: day.nullable().default(null),
});
export type NewCaseBody = z.infer<typeof newCase>;

export const caseReport = z.strictObject({
  ref: id,
  what: what.min(3, caseFields.sayWhatLooksWrong),
});
export type CaseReport = z.infer<typeof caseReport>;

/** A case as the customer who reported it sees it: the own words and how it stands. */
export const reportedCase = z.object({
  id,
  number: z.int(),
  what: z.string(),
  state: z.enum(CASE_STATES),
  at: time,
  closedAt: time.nullable(),
});
export type ReportedCase = z.infer<typeof reportedCase>;

export const caseChange = z.discriminatedUnion('act', [
  z.strictObject({
    act: z.literal('facts'),
    version: z.int(),
    title: title.optional(),
    what: what.optional(),
    kind: kind.optional(),
    assignee: id.nullable().optional(),
    dueOn: day.nullable().optional(),
    strings: strings.optional(),
    parts: parts.optional(),
  }),
  z.strictObject({
    act: z.literal('state'),
    version: z.int(),
    state: z.enum(CASE_STATES),
    note: note.default(''),
  }),
  z.strictObject({
    act: z.literal('check'),
    key: z.string().max(60),
    done: z.boolean(),
    note: note.default(''),
    /** When the line was last changed, as the person saw it; null: never. */
    seen: time.nullable(),
  }),
]);
export type CaseChangeBody = z.infer<typeof caseChange>;

export const caseComment = z.strictObject({
  ref: id,
  body: z
    .string()
    .trim()
    .min(1, caseFields.writeSomething)
    .max(COMMENT_MAX, caseFields.commentTooLong(COMMENT_MAX))
    .refine(clean, CONTROL),
  mentions: z.array(id).max(40, caseFields.tooManyPeople).default([]),
});
export type CaseCommentBody = z.infer<typeof caseComment>;

export const casePhotoQuery = z.strictObject({
  ref: id,
  name: z.string().trim().min(1, caseFields.nameFile).max(200, caseFields.fileNameTooLong),
  note: z.string().trim().max(2000, caseFields.fileNoteTooLong).default(''),
  at: time,
});

export const caseParams = z.strictObject({ case: id });
