import { z } from 'zod';
import { attachmentItem } from './attachments';
import { captureSnapshot } from './capture';
import { stepNow } from './commissioning';

/** The desk's pages of install checks and meter readings: what a phone keeps, and the photos. */
export const checksPage = z.object({
  sheet: captureSnapshot,
  files: z.array(attachmentItem),
  steps: z.array(stepNow),
});
export type ChecksPage = z.infer<typeof checksPage>;

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
