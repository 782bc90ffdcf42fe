import { z } from 'zod';
import { CHECK_KEYS } from '../../domain/commissioning/checks/definition';
import { BLOCK_KINDS } from '../../domain/commissioning/checks/sign-off';
import { CHECK_MARKS, STRING_STATUSES } from '../../domain/commissioning/checks/string-standing';
import { READING_STAGES } from '../../domain/commissioning/readings/stages';
import { attachmentItem } from './attachments';
import { captureSnapshot } from './capture';
import { stepNow } from './commissioning';
import { id } from './now';
import { readingFinding } from './readings';

/** What the desk's pages of install checks and meter readings share: what a phone keeps, and the photos. */
const deskPage = z.object({
  sheet: captureSnapshot,
  files: z.array(attachmentItem),
  steps: z.array(stepNow),
});
export type DeskPage = z.infer<typeof deskPage>;

/** The page of install checks: how each string stands, judged where the page is made. */
export const checksPage = deskPage.extend({
  checks: z.array(z.object({ key: z.enum(CHECK_KEYS), name: z.string() })),
  standings: z.array(
    z.object({
      stringId: id,
      status: z.enum(STRING_STATUSES),
      recorded: z.int(),
      asked: z.int(),
      /** In the order of `checks`. */
      marks: z.array(z.enum(CHECK_MARKS)),
      /** What blocks a signature, other than what is not recorded yet. */
      amiss: z.array(z.enum(BLOCK_KINDS)),
    }),
  ),
});
export type ChecksPage = z.infer<typeof checksPage>;

/** The page of meter readings: what was read of each string at each stage, judged where the page is made. */
export const readingsPage = deskPage.extend({
  stages: z.array(
    z.object({
      stringId: id,
      stage: z.enum(READING_STAGES),
      outcome: z.enum([...readingFinding.shape.outcome.options, 'unread']),
      headline: z.string(),
      /** What the two readings to earth say together; null: not both taken. */
      earth: readingFinding.shape.earth,
      /** Judged with what has been recorded since, where that says more than was known then; null: it does not. */
      now: readingFinding.pick({ outcome: true, headline: true, siblings: true }).nullable(),
    }),
  ),
});
export type ReadingsPage = z.infer<typeof readingsPage>;

/** What the matrix of checks shows, as its address says. */
export const checksView = z.object({
  find: z.string().max(80).catch(''),
  /** The string that lies open, by name. */
  string: z.string().max(40).catch(''),
  show: z.enum(['all', 'open', 'blocked', 'ready', 'signed']).catch('all'),
  sort: z.enum(['name', 'recorded', 'blocks']).catch('name'),
  order: z.enum(['up', 'down']).catch('up'),
});
export type ChecksView = z.infer<typeof checksView>;

/** What the list of readings shows, as its address says. */
export const readingsView = z.object({
  find: z.string().max(80).catch(''),
  string: z.string().max(40).catch(''),
  show: z.enum(['all', 'odd', 'unread']).catch('all'),
  /** `now`: the stage that is under way. */
  stage: z.enum(['now', 'all', 'before_energising', 'after_keep_alive', 'after_roll_call']).catch('now'),
  sort: z.enum(['name', 'outcome', 'at']).catch('name'),
  order: z.enum(['up', 'down']).catch('up'),
});
export type ReadingsView = z.infer<typeof readingsView>;
