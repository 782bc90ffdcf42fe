import type pg from 'pg';

/** The queue as the library keeps it (schema graphile_worker): read as the database's owner. */

export interface QueuedJob {
  id: string;
  task: string;
  key: string | null;
  attempts: number;
  attemptsMax: number;
  runAt: Date;
  lockedAt: Date | null;
  error: string | null;
}

/**
 * A job that ran when the next of its key was asked for: the library takes its key and its tries away, so that failed
 * then it is never done again. The one after it does what it left. Every job of ours has a key.
 */
const SUPERSEDED = 'key is null and attempts >= max_attempts and locked_at is null';

/** What waits, runs or failed; without those in whose place another has come. */
export async function queuedJobs(client: pg.ClientBase, limit: number): Promise<QueuedJob[]> {
  const { rows } = await client.query<QueuedJob>(
    `select id::text, task_identifier as task, key, attempts, max_attempts as "attemptsMax", run_at as "runAt",
            locked_at as "lockedAt", last_error as error
     from graphile_worker.jobs where not (${SUPERSEDED}) order by last_error is null, run_at limit $1`,
    [limit],
  );
  return rows;
}

/** Takes away failed jobs in whose place another has come. @returns how many */
export async function dropSuperseded(client: pg.ClientBase): Promise<number> {
  const { rows } = await client.query<{ n: number }>(
    `select count(*)::int as n
     from graphile_worker.complete_jobs(array(select id from graphile_worker.jobs where ${SUPERSEDED}))`,
  );
  return rows[0]?.n ?? 0;
}

/** Whether a worker has ever made its queue in this database. */
export async function queueExists(client: pg.ClientBase): Promise<boolean> {
  const { rows } = await client.query<{ there: boolean }>(
    `select to_regclass('graphile_worker.jobs') is not null as there`,
  );
  return rows[0]?.there ?? false;
}

/** A worker's sign of life: an advisory lock of this connection under its name, gone with the process. */
export async function holdLife(client: pg.ClientBase, worker: string): Promise<void> {
  await client.query('select pg_advisory_lock(727007, hashtext($1))', [worker]);
}

/** Workers that hold jobs and show no sign of life: their processes died in the middle. */
export async function deadWorkers(client: pg.ClientBase, own: string): Promise<string[]> {
  const { rows } = await client.query<{ worker: string }>(
    `select distinct locked_by as worker from graphile_worker.jobs where locked_by is not null and locked_by <> $1`,
    [own],
  );
  const dead: string[] = [];
  for (const { worker } of rows) {
    const taken = await client.query<{ free: boolean }>(
      'select pg_try_advisory_lock(727007, hashtext($1)) as free',
      [worker],
    );
    if (!taken.rows[0]?.free) continue;
    await client.query('select pg_advisory_unlock(727007, hashtext($1))', [worker]);
    dead.push(worker);
  }
  return dead;
}

/** Gives back what these workers held: their jobs are tried again at once, their queues go on. */
export async function freeJobsOf(client: pg.ClientBase, workers: readonly string[]): Promise<void> {
  await client.query('select graphile_worker.force_unlock_workers($1::text[])', [workers]);
}

/** For how long the job has waited that has been due longest and that nobody does, seconds; 0: none is due. */
export async function oldestDueS(client: pg.ClientBase): Promise<number> {
  const { rows } = await client.query<{ s: number }>(
    `select coalesce(extract(epoch from now() - min(run_at)), 0)::float8 as s
     from graphile_worker.jobs where run_at < now() and locked_at is null and attempts < max_attempts`,
  );
  return rows[0]?.s ?? 0;
}
