import type { Knex } from 'knex';
import { processFigures, type ProcessHistory, type ProcessSample } from '../../schemas/api/processes';
import type { Tx } from '../db/transaction';

/** What processes measured of themselves: of the whole installation, not of one organisation. */

export interface SampledProcess {
  id: string;
  host: string;
  pid: number;
  roles: readonly string[];
  startedAt: Date;
}

export async function addSample(
  db: Knex,
  process: SampledProcess,
  sample: { at: Date; spanS: number; figures: ProcessSample['figures'] },
): Promise<void> {
  await db.raw(
    `insert into process_sample (process, at, span_s, host, pid, roles, started_at, figures)
     values (:id, :at, :spanS, :host, :pid, :roles::text[], :startedAt, :figures::jsonb)
     on conflict (process, at) do nothing`,
    {
      ...process,
      roles: [...process.roles],
      at: sample.at,
      spanS: sample.spanS,
      figures: JSON.stringify(sample.figures),
    },
  );
}

export async function forgetSamplesBefore(db: Knex, before: Date): Promise<number> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    'delete from process_sample where at < :before returning 1',
    { before },
  );
  return rows.length;
}

/** Every process that measured something since then, the youngest first; each with its samples in order of time. */
export async function processHistories(tx: Tx, since: Date): Promise<ProcessHistory[]> {
  interface Row {
    process: string;
    host: string;
    pid: number;
    roles: string[];
    startedAt: Date;
    samples: { at: number; spanS: number; figures: unknown }[];
  }
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select process, host, pid, roles, started_at as "startedAt",
            json_agg(json_build_object('at', extract(epoch from at)::int8, 'spanS', span_s, 'figures', figures) order by at) as samples
     from process_sample where at > :since
     group by process, host, pid, roles, started_at order by started_at desc, process`,
    { since },
  );
  return rows.map(({ startedAt, samples, ...row }) => ({
    ...row,
    startedAt: startedAt.toISOString(),
    samples: samples.map((s) => ({ ...s, figures: processFigures.parse(s.figures) })),
  }));
}

/** Names of the migrations that this database has. */
export async function migrationsDone(db: Knex): Promise<string[]> {
  const { rows } = await db.raw<{ rows: { name: string }[] }>('select name from knex_migrations');
  return rows.map((r) => r.name);
}
