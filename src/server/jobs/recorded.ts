import { randomUUID } from 'node:crypto';
import type { JobHelpers, Task } from 'graphile-worker';
import { z } from 'zod';
import { database } from '../db/pools';
import type { JobFailure } from '../../schemas/api/jobs';
import { failedWords } from '../../words/jobs-sentences';
import { AppError, isDatabaseAway } from '../errors';
import { log } from '../log';
import { meters } from '../observe/meters';
import { beginRun, endRun } from '../queries/job-runs';

/** This process, as the runs of its jobs name it. */
const WORKER = `${process.pid}-${randomUUID().slice(0, 8)}`;

const sitePayload = z.object({ siteId: z.int() });

/** What a job did, in counts; nothing worth counting: empty. */
export type Done = Record<string, number>;

/** Why a job failed, by what was thrown. */
export function failureOf(error: unknown): JobFailure {
  if (error instanceof AppError) return 'said';
  const code = (error as { code?: unknown } | null)?.code;
  if (code === '55P03' || code === '40P01') return 'locked';
  if (code === '57014') return 'too_long';
  if (code === '53100' || code === '53200') return 'full';
  return isDatabaseAway(error) ? 'away' : 'unforeseen';
}

/** What the page says of a failure: never what a library thinks of its own settings. */
const wordsOf = (error: unknown): string =>
  failedWords(failureOf(error), (error instanceof Error ? error.message : String(error)).slice(0, 1500));

/**
 * A task that writes down each of its runs: when it began, how it ended, what it did. A failure is written down and
 * thrown on, so that the queue tries again.
 */
export function recorded(task: string, work: (payload: unknown, helpers: JobHelpers) => Promise<Done>): Task {
  return async (payload, helpers) => {
    const db = database('ingest');
    const siteId = sitePayload.safeParse(payload).data?.siteId ?? null;
    const { attempts: attempt } = helpers.job;
    const id = await beginRun(db, { task, siteId, attempt, worker: WORKER, at: new Date() });
    let done: Done = {};
    const startedAtMs = performance.now();
    const timed = (outcome: string): void =>
      meters().jobs.observe((performance.now() - startedAtMs) / 1000, { kind: task, outcome });
    try {
      done = await work(payload, helpers);
      await endRun(db, id, { at: new Date(), failed: null, done });
      timed('done');
    } catch (error) {
      timed('failed');
      meters().jobsFailed.add(1, { kind: task });
      const failed = wordsOf(error);
      if (!isDatabaseAway(error)) log.error({ error, task }, 'a job failed; it is tried again');
      await endRun(db, id, { at: new Date(), failed, done }).catch(() => undefined);
      throw new Error(failed, { cause: error }); // the queue keeps its message
    }
    if (Object.values(done).some((n) => n > 0)) log.debug({ task, ...done }, 'a job did its work');
  };
}
