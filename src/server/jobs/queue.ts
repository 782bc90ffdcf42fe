import { makeWorkerUtils, type WorkerUtils } from 'graphile-worker';
import { config } from '../config';
import { dropSuperseded, queuedJobs, queueExists, type QueuedJob } from '../queries/job-queue';
import { logger } from './logger';

/** The queue from outside the worker: what waits in it, and trying again. */

async function withUtils<T>(work: (utils: WorkerUtils) => Promise<T>): Promise<T> {
  const utils = await makeWorkerUtils({ connectionString: config().DATABASE_URL, logger, maxPoolSize: 2 });
  try {
    return await work(utils);
  } finally {
    await utils.release();
  }
}

/** Jobs that wait, run or failed; null: no worker ever ran against this database. */
export function readQueue(limit: number): Promise<QueuedJob[] | null> {
  return withUtils((utils) =>
    utils.withPgClient(async (client) => ((await queueExists(client)) ? queuedJobs(client, limit) : null)),
  );
}

/** Takes away failed jobs in whose place another has come. @returns how many */
export const forgetSuperseded = (): Promise<number> =>
  withUtils((utils) => utils.withPgClient((client) => dropSuperseded(client)));

/** Lets a failed job be tried at once, with all its attempts before it. False: it is not there, or runs now. */
export async function retryJob(id: string): Promise<boolean> {
  const jobs = await withUtils((utils) => utils.rescheduleJobs([id], { runAt: new Date(), attempts: 0 }));
  return jobs.length > 0;
}
