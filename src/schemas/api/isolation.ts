import { z } from 'zod';
import { id } from './now';
import { isolationFields } from '../../words/fields';

/** A person isolates one string and the page watches whose current goes to zero. Times ISO 8601 in UTC, amperes. */

const time = z.iso.datetime();
export const between = z.object({ after: time, by: time });

export const isolationFinding = z.object({
  outcome: z.enum(['watching', 'told', 'other_string', 'several_strings', 'input_only', 'cant_tell']),
  reason: z
    .enum(['no_current_before', 'no_reports', 'everything_stopped', 'too_little_current', 'nothing_beside'])
    .nullable(),
  strings: z.array(z.string()),
  dropped: between.nullable(),
  returned: between.nullable(),
  units: z.array(
    z.object({
      serial: z.string(),
      string: z.string(),
      position: z.int(),
      fate: z.enum(['member_dropped', 'member_kept', 'other_dropped', 'other_kept', 'not_told']),
      before: z.number().nullable(),
      during: z.number().nullable(),
      dropped: between.nullable(),
    }),
  ),
  inputs: z.array(
    z.object({
      name: z.string(),
      strings: z.array(z.string()),
      before: z.number().nullable(),
      during: z.number().nullable(),
      lost: z.number().nullable(),
    }),
  ),
});
export type IsolationFindingView = z.infer<typeof isolationFinding>;

export const isolationRun = z.object({
  id,
  stringId: id,
  stringName: z.string(),
  startedAt: time,
  startedBy: z.string(),
  personOnSite: z.string(),
  endsAt: time, // when it ends by itself
  stoppedAt: time.nullable(), // null: it runs
  /** null where its time was up. */
  stoppedBy: z.string().nullable(),
  finding: isolationFinding,
});
export type IsolationRun = z.infer<typeof isolationRun>;

/** Currents since a little before the start, to draw: one line a string (its median) and one a unit of interest. */
export const isolationCurrents = z.object({
  at: z.array(z.number()), // epoch seconds
  strings: z.array(z.object({ name: z.string(), current: z.array(z.number().nullable()) })),
  units: z.array(
    z.object({ label: z.string(), string: z.string(), current: z.array(z.number().nullable()) }),
  ),
});
export type IsolationCurrents = z.infer<typeof isolationCurrents>;

export const isolationPage = z.object({
  at: time,
  reportIntervalS: z.int(),
  open: isolationRun.nullable(),
  currents: isolationCurrents.nullable(), // of the open one, else of the newest while its frames are kept
  runs: z.array(isolationRun), // ended ones, newest first
});
export type IsolationPage = z.infer<typeof isolationPage>;

export const isolationStart = z.strictObject({
  string: z.uuid({ error: isolationFields.chooseString }),
  personOnSite: z
    .string({ error: isolationFields.nameIsolator })
    .trim()
    .min(2, { error: isolationFields.nameIsolator })
    .max(120, { error: isolationFields.nameTooLong }),
  caution: z.literal(true, { error: isolationFields.confirmDevice }),
});
export type IsolationStart = z.infer<typeof isolationStart>;
