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

export async function queuedJobs(client: pg.ClientBase, limit: number): Promise<QueuedJob[]> {
  const { rows } = await client.query<QueuedJob>(
    `select id::text, task_identifier as task, key, attempts, max_attempts as "attemptsMax", run_at as "runAt",
            locked_at as "lockedAt", last_error as error
     from graphile_worker.jobs order by last_error is null, run_at limit $1`,
    [limit],
  );
  return rows;
}

/** Whether a worker has ever made its queue in this database. */
export async function queueExists(client: pg.ClientBase): Promise<boolean> {
  const { rows } = await client.query<{ there: boolean }>(
    `select to_regclass('graphile_worker.jobs') is not null as there`,
  );
  return rows[0]?.there ?? false;
}
