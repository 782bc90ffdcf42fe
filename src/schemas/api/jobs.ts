import { z } from 'zod';
import { jobFields } from '../../words/fields';

/** Background jobs. Times ISO 8601 in UTC. */

export const retryBody = z.object({ job: z.string().regex(/^\d{1,18}$/, jobFields.noSuchJob) });
export type RetryBody = z.infer<typeof retryBody>;

/** Why a job failed; `said`: in words that were written for people. */
export type JobFailure = 'said' | 'locked' | 'too_long' | 'full' | 'away' | 'unforeseen';

export interface JobRun {
  startedAt: string;
  /** null: it runs, or its process died. */
  endedAt: string | null;
  ms: number | null;
  siteName: string | null;
  failed: string | null;
  attempt: number;
  done: Record<string, number>;
}

export interface JobKindLine {
  task: string;
  title: string;
  last: JobRun | null;
  /** null: only when something asks for it. */
  next: string | null;
  /** When it was to run after its last run; null: no run yet, or nothing but asking makes it run. */
  due: string | null;
  runs24h: number;
  failed24h: number;
  usualMs: number | null;
  /** Due and not begun; running now; to be tried again after a failure. */
  waiting: number;
  running: number;
  failing: number;
}

export interface FailingJob {
  id: string;
  task: string;
  title: string;
  siteName: string | null;
  error: string;
  attempts: number;
  attemptsMax: number;
  /** When it is tried next; null: it was given up. */
  nextAt: string | null;
}

export interface JobsPage {
  at: string;
  kinds: JobKindLine[];
  failing: FailingJob[];
  failures: (JobRun & { task: string; title: string; times: number })[];
  /** The queue could not be read: no worker ever ran against this database. */
  noQueue: boolean;
}
