import type { Knex } from 'knex';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** What background jobs did and when. The queue itself is the library's: queries/job-queue. */

/** A run begins: it is written down before it does anything, so that one that dies is seen too. */
export async function beginRun(
  db: Knex,
  run: { task: string; siteId: number | null; attempt: number; worker: string; at: Date },
): Promise<number> {
  const { rows } = await db.raw<{ rows: { id: number }[] }>(
    `insert into job_run (task, site_id, started_at, attempt, worker)
     select :task, site.id, :at, :attempt, :worker from (select) one
     left join site on site.id = :siteId returning id`,
    { ...run, siteId: run.siteId },
  );
  return rows[0]?.id ?? 0;
}

export async function endRun(
  db: Knex,
  id: number,
  end: { at: Date; failed: string | null; done: Record<string, number> },
): Promise<void> {
  await db.raw(
    `update job_run set ended_at = greatest(:at::timestamptz, started_at), failed = :failed, done = :done::jsonb where id = :id`,
    { id, at: end.at, failed: end.failed, done: JSON.stringify(end.done) },
  );
}

/** Forgets runs that began before this; of each task the newest stays. */
export async function forgetRunsBefore(db: Knex, before: Date): Promise<number> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `delete from job_run r where r.started_at < :before
       and exists (select from job_run n where n.task = r.task and n.started_at > r.started_at) returning id`,
    { before },
  );
  return rows.length;
}

export interface RunRow {
  task: string;
  siteRef: string | null;
  siteName: string | null;
  startedAt: Date;
  endedAt: Date | null;
  attempt: number;
  failed: string | null;
  done: Record<string, number>;
}

const RUN = `r.task, site.ref as "siteRef", site.name as "siteName", r.started_at as "startedAt", r.ended_at as "endedAt",
  r.attempt, r.failed, r.done`;

/** Runs of every site, and those of sites that the actor sees: the wall in the query, beside the policy. */
const SEEN = `(job_run.site_id is null or exists (select from site where site.id = job_run.site_id and ${SITE_VISIBLE}))`;

export interface TaskRuns {
  task: string;
  runs24h: number;
  failed24h: number;
  /** Median over the last day, ms; null: none ended. */
  usualMs: number | null;
}

/** Of each task the newest run that the actor may see, and counts of the last day. */
export async function lastRuns(tx: Tx, at: Date): Promise<{ last: RunRow[]; counts: TaskRuns[] }> {
  const last = await tx.raw<{ rows: RunRow[] }>(
    `select ${RUN} from (select distinct on (task) * from job_run where ${SEEN} order by task, started_at desc, id desc) r
     left join site on site.id = r.site_id`,
  );
  const counts = await tx.raw<{ rows: TaskRuns[] }>(
    `select task, count(*)::int as "runs24h", count(failed)::int as "failed24h",
            percentile_cont(0.5) within group (order by extract(epoch from ended_at - started_at) * 1000) as "usualMs"
     from job_run where ${SEEN} and started_at > :at::timestamptz - interval '24 hours' group by task`,
    { at },
  );
  return { last: last.rows, counts: counts.rows };
}

/** What failed and how often, the newest first: one row a task, site and error. */
export async function failedRuns(tx: Tx, limit: number): Promise<(RunRow & { times: number })[]> {
  const { rows } = await tx.raw<{ rows: (RunRow & { times: number })[] }>(
    `select ${RUN}, r.times
     from (select distinct on (task, site_id, failed) *, (count(*) over (partition by task, site_id, failed))::int as times
           from job_run where failed is not null and ${SEEN} order by task, site_id, failed, started_at desc) r
     left join site on site.id = r.site_id
     order by r.started_at desc limit ?`,
    [limit],
  );
  return rows;
}

/** Names of the sites of these numbers that the actor may see. */
export async function sitesByNumber(tx: Tx, numbers: readonly number[]): Promise<Map<number, string>> {
  if (numbers.length === 0) return new Map();
  const { rows } = await tx.raw<{ rows: { id: number; name: string }[] }>(
    `select site.id, site.name from site where site.id = any (:numbers::int4[]) and ${SITE_VISIBLE}`,
    { numbers: [...new Set(numbers)] },
  );
  return new Map(rows.map((r) => [r.id, r.name]));
}
