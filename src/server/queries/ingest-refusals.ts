import type { Knex } from 'knex';

/** What ingest refused, where people can see it. */
export interface Refusal {
  loggerId: number;
  /** Field and reason without their figures: what is counted together. */
  kind: string;
  /** Of the newest one. */
  field: string;
  reason: string;
  count: number;
  at: Date;
}

/** So many kinds are kept for a logger, the newest ones. */
const KINDS_KEPT = 40;
/** Addresses with wrong tokens that are kept, and for how long. */
const ADDRESSES_KEPT = 2000;
const ADDRESS_DAYS = 30;

/** Adds up what was refused: at the logger, and by what was wrong. */
export async function countRefusals(db: Knex, refusals: readonly Refusal[]): Promise<void> {
  const columns = [
    refusals.map((r) => r.loggerId),
    refusals.map((r) => r.kind),
    refusals.map((r) => r.field),
    refusals.map((r) => r.reason),
    refusals.map((r) => r.count),
    refusals.map((r) => r.at.toISOString()),
  ];
  await db.raw(
    `with x as materialized (
       select x.* from unnest(?::int4[], ?::text[], ?::text[], ?::text[], ?::int8[], ?::timestamptz[])
         x(logger_id, kind, field, reason, n, at) join logger on logger.id = x.logger_id),
     sums as (select logger_id, sum(n) as n, (array_agg(jsonb_build_object('at', at, 'field', field, 'reason', reason)
         order by at desc))[1] as last from x group by logger_id),
     counted as (update logger set refused_count = refused_count + sums.n, last_refusal = sums.last
       from sums where logger.id = sums.logger_id)
     insert into logger_refusal as l (logger_id, kind, field, reason, count, first_at, last_at)
     select logger_id, kind, field, reason, n, at, at from x order by logger_id, kind
     on conflict (logger_id, kind) do update set field = excluded.field, reason = excluded.reason,
       count = l.count + excluded.count, last_at = greatest(l.last_at, excluded.last_at)`,
    columns,
  );
  await db.raw(
    `delete from logger_refusal r using (
       select logger_id, kind, row_number() over (partition by logger_id order by last_at desc, kind) as n
       from logger_refusal where logger_id = any (?::int4[])) old
     where r.logger_id = old.logger_id and r.kind = old.kind and old.n > ?`,
    [[...new Set(refusals.map((r) => r.loggerId))], KINDS_KEPT],
  );
}

export interface WrongTokens {
  address: string;
  count: number;
  at: Date;
}

/** Adds up attempts with tokens that nobody knows, by address; old and too many ones go. */
export async function countWrongTokens(db: Knex, tried: readonly WrongTokens[]): Promise<void> {
  await db.raw(
    `insert into wrong_token as w (address, count, first_at, last_at)
     select address, n, at, at from unnest(?::text[], ?::int8[], ?::timestamptz[]) x(address, n, at) order by address
     on conflict (address) do update set count = w.count + excluded.count,
       last_at = greatest(w.last_at, excluded.last_at)`,
    [tried.map((t) => t.address), tried.map((t) => t.count), tried.map((t) => t.at.toISOString())],
  );
  await db.raw(
    `delete from wrong_token where last_at < now() - make_interval(days => ?)
       or address in (select address from wrong_token order by last_at desc offset ?)`,
    [ADDRESS_DAYS, ADDRESSES_KEPT],
  );
}
