import type { Knex } from 'knex';

/** Loggers as ingest sees them: who may speak, which process serves one, what was refused. */

/** How long a lease holds without being renewed, seconds. */
export const LEASE_S = 30;

export interface KnownLogger {
  id: number;
  siteId: number;
  organisationId: number;
  serial: string;
  /** The token that it came with. */
  tokenId: number;
}

/** The logger that a token's hash stands for. `ended`: the token was good once; the attempt counts at the logger. */
export async function loggerOfToken(
  db: Knex,
  hash: Buffer,
): Promise<(KnownLogger & { ended: boolean }) | undefined> {
  const { rows } = await db.raw<{ rows: (KnownLogger & { ended: boolean })[] }>(
    `select l.id, l.site_id as "siteId", s.organisation_id as "organisationId", l.serial, t.id as "tokenId",
       t.ended_at is not null and t.ended_at <= now() as ended
     from ingest_token t join logger l on l.id = t.logger_id join site s on s.id = l.site_id where t.hash = ?`,
    [hash],
  );
  return rows[0];
}

/**
 * Takes the lease of a logger for this process, from whichever process has it: the newer connection wins. The
 * notice tells the other process to let go.
 */
export async function takeLease(
  db: Knex,
  lease: { loggerId: number; process: string; address: string; firmware: string },
): Promise<void> {
  await db.raw(
    `with taken as (
       update logger set leased_by = :process, leased_until = now() + make_interval(secs => :lease),
         connected_at = now(), last_spoke_at = now(), last_address = :address, firmware = :firmware
       where id = :loggerId returning id, site_id, serial),
     told as (
       insert into event (at, organisation_id, site_id, kind, detail)
       select now(), s.organisation_id, s.id, 'logger_connected', jsonb_build_object('logger', taken.serial)
       from taken join site s on s.id = taken.site_id
       where (select e.kind from event e where e.site_id = s.id and e.kind in ('logger_connected', 'logger_lost')
                and e.detail ->> 'logger' = taken.serial order by e.id desc limit 1) is distinct from 'logger_connected'
       returning site_id)
     select pg_notify('leased', json_build_object('logger', id, 'by', :process::text)::text),
       pg_notify('changed', json_build_object('sites', json_build_array(site_id))::text) from taken`,
    { ...lease, lease: LEASE_S },
  );
}

/** Who holds the lease of a logger that reports by HTTPS: whichever process its next batch reaches. */
export const BY_HTTPS = 'https';

/**
 * A logger spoke by HTTPS: it counts as connected for `holdS` seconds. A WebSocket of it keeps its lease.
 */
export async function spokeByHttps(
  db: Knex,
  spoke: { loggerId: number; address: string; firmware: string | null; holdS: number },
): Promise<void> {
  await db.raw(
    `with before as (select id, coalesce(leased_until < now() or leased_by = :https, true) as free,
         coalesce(leased_until < now(), true) as away from logger where id = :loggerId for update),
     taken as (
       update logger l set last_spoke_at = now(), last_address = :address, firmware = coalesce(:firmware, firmware),
         connected_at = case when b.away then now() else connected_at end,
         leased_by = case when b.free then :https else leased_by end,
         leased_until = case when b.free then now() + make_interval(secs => :holdS) else leased_until end
       from before b where l.id = b.id returning l.site_id, l.serial, b.away),
     told as (
       insert into event (at, organisation_id, site_id, kind, detail)
       select now(), s.organisation_id, s.id, 'logger_connected', jsonb_build_object('logger', taken.serial)
       from taken join site s on s.id = taken.site_id
       where taken.away and (select e.kind from event e where e.site_id = s.id
           and e.kind in ('logger_connected', 'logger_lost') and e.detail ->> 'logger' = taken.serial
           order by e.id desc limit 1) is distinct from 'logger_connected'
       returning site_id)
     select pg_notify('changed', json_build_object('sites', json_build_array(site_id))::text) from taken where away`,
    { ...spoke, https: BY_HTTPS },
  );
}

/** Renews the leases of this process; gives back the loggers that it still has. */
export async function renewLeases(
  db: Knex,
  process: string,
  spoke: readonly { loggerId: number; spokeAt: Date }[],
): Promise<number[]> {
  const { rows } = await db.raw<{ rows: { id: number }[] }>(
    `update logger set leased_until = now() + make_interval(secs => ?), last_spoke_at = greatest(last_spoke_at, x.spoke)
     from unnest(?::int4[], ?::timestamptz[]) x(logger_id, spoke)
     where logger.id = x.logger_id and leased_by = ? returning logger.id`,
    [LEASE_S, spoke.map((s) => s.loggerId), spoke.map((s) => s.spokeAt.toISOString()), process],
  );
  return rows.map((r) => r.id);
}

export async function releaseLeases(db: Knex, process: string, loggerIds: readonly number[]): Promise<void> {
  await db.raw(
    `update logger set leased_by = null, leased_until = now() where leased_by = ? and id = any (?::int4[])`,
    [process, [...loggerIds]],
  );
}

/**
 * Loggers that were connected and are served by nobody for `graceS`: said once, whichever process looks first. Gives the
 * sites concerned.
 */
export function tellLostLoggers(db: Knex, graceS: number): Promise<number[]> {
  return db.transaction(async (tx) => {
    const turn = await tx.raw<{ rows: { mine: boolean }[] }>(
      'select pg_try_advisory_xact_lock(727011) as mine',
    );
    if (!turn.rows[0]?.mine) return [];
    const { rows } = await tx.raw<{ rows: { siteId: number }[] }>(
      `insert into event (at, organisation_id, site_id, kind, detail)
       select coalesce(l.last_spoke_at, now()), s.organisation_id, s.id, 'logger_lost', jsonb_build_object('logger', l.serial)
       from logger l join site s on s.id = l.site_id
       where l.leased_until < now() - make_interval(secs => ?)
         and (select e.kind from event e where e.site_id = s.id and e.kind in ('logger_connected', 'logger_lost')
                and e.detail ->> 'logger' = l.serial order by e.id desc limit 1) = 'logger_connected'
       returning site_id as "siteId"`,
      [graceS],
    );
    return rows.map((r) => r.siteId);
  });
}

/** Whether a roll call is open at each of these sites. */
export async function openRollCalls(db: Knex, siteIds: readonly number[]): Promise<Set<number>> {
  const { rows } = await db.raw<{ rows: { siteId: number }[] }>(
    `select site_id as "siteId" from roll_call where stopped_at is null and site_id = any (?::int4[])`,
    [[...siteIds]],
  );
  return new Set(rows.map((r) => r.siteId));
}

/** Loggers that another process serves now, each with when it last spoke (epoch s, some seconds late). */
export async function servedElsewhere(db: Knex, process: string): Promise<Map<number, number>> {
  const { rows } = await db.raw<{ rows: { id: number; spokeS: number }[] }>(
    `select id, extract(epoch from last_spoke_at)::int4 as "spokeS" from logger
     where leased_until > now() and leased_by is distinct from ? and last_spoke_at is not null`,
    [process],
  );
  return new Map(rows.map((r) => [r.id, r.spokeS]));
}
