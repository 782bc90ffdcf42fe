import type { HeardItem } from '../../schemas/live';
import type { RollCallRun } from '../../schemas/api/roll-call';
import type { Tx } from '../db/transaction';
import { CHANNELS, tellSiteChanged } from './live-notices';

/** Reading and writing of roll calls. Every statement takes the site, which the caller found as the actor. */

interface RunRow {
  dbId: number;
  id: string;
  startedAt: Date;
  startedBy: string;
  personOnSite: string;
  stoppedAt: Date | null;
  stoppedBy: string | null;
}

const RUN = `select r.id as "dbId", r.ref as id, r.started_at as "startedAt", s.name as "startedBy", r.person_on_site as "personOnSite",
    r.stopped_at as "stoppedAt", e.name as "stoppedBy"
  from roll_call r join person s on s.id = r.started_by left join person e on e.id = r.stopped_by
  where r.site_id = ?`;

const toRun = (row: RunRow): RollCallRun => ({
  id: row.id,
  startedAt: row.startedAt.toISOString(),
  startedBy: row.startedBy,
  personOnSite: row.personOnSite,
  stoppedAt: row.stoppedAt?.toISOString() ?? null,
  stoppedBy: row.stoppedBy,
});

/** The open roll call of a site, else its last one. */
export async function latestRollCall(tx: Tx, siteId: number): Promise<RollCallRun | undefined> {
  const { rows } = await tx.raw<{ rows: RunRow[] }>(
    `${RUN} order by r.stopped_at is null desc, r.started_at desc limit 1`,
    [siteId],
  );
  return rows[0] && toRun(rows[0]);
}

/** Opens a roll call; undefined when one is open already, also when two people start at the same moment. */
export async function openRollCall(
  tx: Tx,
  opened: { siteId: number; personId: number; personOnSite: string },
): Promise<RollCallRun | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into roll_call (site_id, started_by, person_on_site) values (?, ?, ?)
     on conflict (site_id) where stopped_at is null do nothing returning id`,
    [opened.siteId, opened.personId, opened.personOnSite],
  );
  return rows[0] ? latestRollCall(tx, opened.siteId) : undefined;
}

/** Stops the open roll call; undefined when none is open. */
export async function closeRollCall(
  tx: Tx,
  closed: { siteId: number; personId: number },
): Promise<RollCallRun | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `update roll_call set stopped_at = greatest(now(), started_at), stopped_by = ?
     where site_id = ? and stopped_at is null returning id`,
    [closed.personId, closed.siteId],
  );
  return rows[0] ? latestRollCall(tx, closed.siteId) : undefined;
}

/**
 * Wakes the process that serves the site's loggers, and every page that shows the site; the notices leave when the
 * transaction commits.
 */
export async function announceRollCall(tx: Tx, siteId: number): Promise<void> {
  await tx.raw('select pg_notify(?, ?)', [CHANNELS.rollCall, String(siteId)]);
  await tellSiteChanged(tx, siteId);
}

export async function addRollCallEvent(
  tx: Tx,
  event: {
    organisationId: number;
    siteId: number;
    kind: 'roll_call_started' | 'roll_call_stopped';
    at: string;
    detail: Record<string, unknown>;
  },
): Promise<void> {
  await tx('event').insert({
    at: event.at,
    organisation_id: event.organisationId,
    site_id: event.siteId,
    kind: event.kind,
    detail: JSON.stringify(event.detail),
  });
}

/**
 * Each serial's first answer at the site, oldest first; where the unit sits now, if it is on the as-built. With
 * `serials` only theirs.
 */
export async function answersOf(tx: Tx, siteId: number, serials?: readonly string[]): Promise<HeardItem[]> {
  const { rows } = await tx.raw<{
    rows: (Omit<HeardItem, 'at'> & { at: Date })[];
  }>(
    `select h.serial, h.first_heard_at as at, st.ref as "stringId", sl.position, h.signal,
            coalesce(g.name, 'gateway ' || h.gateway_number) as gateway
     from heard h
     left join placement p on p.unit_id = h.unit_id and p.placed_to is null and p.site_id = h.site_id
     left join slot sl on sl.id = p.slot_id
     left join string st on st.id = sl.string_id
     left join gateway g on g.logger_id = h.logger_id and g.number = h.gateway_number
     where h.site_id = ? ${serials ? 'and h.serial = any (?::text[])' : ''}
     order by h.first_heard_at, h.serial`,
    serials ? [siteId, [...serials]] : [siteId],
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString() }));
}

/** A logger counts as connected while it has spoken within five of the site's report intervals. */
export async function loggersOf(
  tx: Tx,
  siteId: number,
  at: Date,
): Promise<{ serial: string; connected: boolean; lastSpokeAt: string | null }[]> {
  const { rows } = await tx.raw<{ rows: { serial: string; connected: boolean; lastSpokeAt: Date | null }[] }>(
    `select l.serial, l.last_spoke_at as "lastSpokeAt",
            coalesce(l.last_spoke_at > ?::timestamptz - make_interval(secs => 5 * site.report_interval_s), false) as connected
     from logger l join site on site.id = l.site_id
     where l.site_id = ? order by l.serial`,
    [at, siteId],
  );
  return rows.map((r) => ({ ...r, lastSpokeAt: r.lastSpokeAt?.toISOString() ?? null }));
}

/** How often the loggers of a site report, seconds. */
export async function reportIntervalOf(tx: Tx, siteId: number): Promise<number> {
  const { rows } = await tx.raw<{ rows: { s: number }[] }>(
    'select report_interval_s as s from site where id = ?',
    [siteId],
  );
  return rows[0]?.s ?? 60;
}

/** Names of the unit types at the site that pass full module voltage until they have answered. */
export async function typesPassingUntilHeard(tx: Tx, siteId: number): Promise<string[]> {
  const { rows } = await tx.raw<{ rows: { name: string }[] }>(
    `select distinct t.name from string s join unit_type t on t.id = s.unit_type_id
     where s.site_id = ? and t.out_of_box = 'passing' order by t.name`,
    [siteId],
  );
  return rows.map((r) => r.name);
}
