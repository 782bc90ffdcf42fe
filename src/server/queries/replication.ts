import type { Knex } from 'knex';

/** How far a streaming replica has come, asked of both servers: positions in the write-ahead log as PostgreSQL writes them. */

export async function primaryPosition(primary: Knex): Promise<string> {
  const { rows } = await primary.raw<{ rows: { lsn: string }[] }>(`select pg_current_wal_lsn()::text as lsn`);
  const [row] = rows;
  if (!row) throw new Error('the primary names no position');
  return row.lsn;
}

export interface ReplicaPosition {
  /** False: it is a primary by now, and goes its own way. */
  inRecovery: boolean;
  /** Whether it has replayed everything up to the primary's position. */
  caughtUp: boolean;
  /** Seconds since the newest commit that it has replayed; null: none yet since it started. */
  lastCommitAgoS: number | null;
}

export async function replicaPosition(replica: Knex, primaryLsn: string): Promise<ReplicaPosition> {
  const { rows } = await replica.raw<{ rows: ReplicaPosition[] }>(
    `select pg_is_in_recovery() as "inRecovery",
            coalesce(pg_last_wal_replay_lsn() >= ?::pg_lsn, false) as "caughtUp",
            extract(epoch from clock_timestamp() - pg_last_xact_replay_timestamp())::float8 as "lastCommitAgoS"`,
    [primaryLsn],
  );
  const [row] = rows;
  if (!row) throw new Error('the replica names no position');
  return row;
}
