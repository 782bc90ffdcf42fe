import { parseCronItem } from 'graphile-worker';
import type { FailingJob, JobKindLine, JobRun, JobsPage } from '../../schemas/api/jobs';
import type { Actor } from '../../domain/access/permissions';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { readQueue, retryJob } from '../jobs/queue';
import { JOBS, type JobKind } from '../jobs/tasks';
import type { QueuedJob } from '../queries/job-queue';
import { failedRuns, lastRuns, sitesByNumber, type RunRow } from '../queries/job-runs';
import { addAuditEntry } from '../queries/people';
import { jobRefusals } from '../../words/refusals-cases';

const QUEUE_MAX = 5000;
const FAILURES_MAX = 50;
const MINUTE_MS = 60_000;
/** Cron patterns look a year ahead at most. */
const LOOK_AHEAD_MIN = 366 * 1440;

/** The next minute that a cron pattern names, in UTC. */
export function nextRun(cron: string, at: Date): Date | null {
  const { match } = parseCronItem({ task: 'next', match: cron });
  const first = Math.floor(at.getTime() / MINUTE_MS) * MINUTE_MS;
  for (let k = 1; k <= LOOK_AHEAD_MIN; k++) {
    const d = new Date(first + k * MINUTE_MS);
    const digest = {
      min: d.getUTCMinutes(),
      hour: d.getUTCHours(),
      date: d.getUTCDate(),
      month: d.getUTCMonth() + 1,
      dow: d.getUTCDay(),
    };
    if (match(digest)) return d;
  }
  return null;
}

const nextOf = ({ cron }: JobKind, at: Date): string | null =>
  cron === null ? null : (nextRun(cron, at)?.toISOString() ?? null);

const kindOf = (task: string): JobKind | undefined => (JOBS as Record<string, JobKind | undefined>)[task];
const titleOf = (task: string): string => kindOf(task)?.title ?? task;

const runOf = (r: RunRow): JobRun => ({
  startedAt: r.startedAt.toISOString(),
  endedAt: r.endedAt?.toISOString() ?? null,
  ms: r.endedAt === null ? null : r.endedAt.getTime() - r.startedAt.getTime(),
  siteName: r.siteName,
  failed: r.failed,
  attempt: r.attempt,
  done: r.done,
});

/** A job of one site carries the site's number in its key. */
const siteOf = (job: Pick<QueuedJob, 'key'>): number | null => {
  const number = /^(?:causes|night):(\d+)/.exec(job.key ?? '')?.[1];
  return number === undefined ? null : Number(number);
};

/** Jobs of the queue that the actor may see, with their sites' names: those of foreign sites are left out. */
type SeenJob = QueuedJob & { siteName: string | null };
async function seenJobs(tx: Tx): Promise<{ jobs: SeenJob[] } | null> {
  const queue = await readQueue(QUEUE_MAX);
  if (!queue) return null;
  const names = await sitesByNumber(
    tx,
    queue.flatMap((j) => siteOf(j) ?? []),
  );
  return {
    jobs: queue.flatMap((j): SeenJob[] => {
      const site = siteOf(j);
      if (site === null) return [{ ...j, siteName: null }];
      const siteName = names.get(site);
      return siteName === undefined ? [] : [{ ...j, siteName }];
    }),
  };
}

/** Every kind of job, how it last went and when it runs next, what waits, and what failed. */
export async function jobsPage(tx: Tx, at: Date): Promise<JobsPage> {
  const seen = await seenJobs(tx);
  const jobs = seen?.jobs ?? [];
  const { last, counts } = await lastRuns(tx, at);
  const lastOf = new Map(last.map((r) => [r.task, r]));
  const countOf = new Map(counts.map((c) => [c.task, c]));
  const kinds = Object.entries(JOBS).map(([task, kind]): JobKindLine => {
    const own = jobs.filter((j) => j.task === task);
    const run = lastOf.get(task);
    const count = countOf.get(task);
    return {
      task,
      title: kind.title,
      last: run ? runOf(run) : null,
      next: nextOf(kind, at),
      due: run ? nextOf(kind, run.startedAt) : null,
      runs24h: count?.runs24h ?? 0,
      failed24h: count?.failed24h ?? 0,
      usualMs: count?.usualMs ?? null,
      waiting: own.filter((j) => j.lockedAt === null && j.error === null && j.runAt <= at).length,
      running: own.filter((j) => j.lockedAt !== null).length,
      failing: own.filter((j) => j.lockedAt === null && j.error !== null).length,
    };
  });
  const failing = jobs
    .filter((j) => j.error !== null && j.lockedAt === null)
    .map((j): FailingJob => ({
      id: j.id,
      task: j.task,
      title: titleOf(j.task),
      siteName: j.siteName,
      error: firstLine(j.error ?? ''),
      attempts: j.attempts,
      attemptsMax: j.attemptsMax,
      nextAt: j.attempts < j.attemptsMax ? j.runAt.toISOString() : null,
    }));
  return {
    at: at.toISOString(),
    kinds,
    failing,
    failures: (await failedRuns(tx, FAILURES_MAX)).map((r) => ({
      ...runOf(r),
      task: r.task,
      title: titleOf(r.task),
      failed: firstLine(r.failed ?? ''),
      times: r.times,
    })),
    noQueue: seen === null,
  };
}

const firstLine = (text: string): string => text.split('\n')[0]?.slice(0, 400) ?? '';

/**
 * Lets a failed job be tried at once.
 * @throws AppError not_found, or conflict when it runs or is done meanwhile
 */
export async function retryFailed(
  tx: Tx,
  by: { actor: Actor; address: string | null },
  job: string,
  at: Date,
): Promise<JobsPage> {
  const found = (await seenJobs(tx))?.jobs.find((j) => j.id === job);
  if (!found) throw new AppError('conflict', { message: jobRefusals.doneMeanwhile });
  if (found.error === null || !(await retryJob(job)))
    throw new AppError('conflict', { message: jobRefusals.running });
  await addAuditEntry(tx, {
    organisationId: by.actor.organisationId,
    personId: by.actor.personId,
    address: by.address,
    action: 'jobs.retry',
    subject: found.siteName === null ? `job ${found.task}` : `job ${found.task} of ${found.siteName}`,
    after: { job: found.task, error: firstLine(found.error) },
  });
  return jobsPage(tx, at);
}
