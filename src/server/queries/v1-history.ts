import type { EventKind } from '../../domain/verdicts/codes';
import type { Tx } from '../db/transaction';
import { EVENT_HORIZON } from './horizon';
import { SITE_VISIBLE } from './visible-site';

/** What happened, as lists for other programs: from a key on, one row further than asked for. */

export interface EventRow {
  id: string;
  xid: string;
  at: Date;
  recordedAt: Date;
  kind: EventKind;
  siteId: string;
  siteName: string;
  stringId: string | null;
  stringName: string | null;
  detail: Record<string, unknown>;
  /** The instant to the microsecond, as the next page begins there. */
  key: string;
}
export interface EventFilter {
  site?: string | undefined;
  string?: string | undefined;
  kind?: string | undefined;
  from?: string | undefined;
  to?: string | undefined;
}
const EVENT = `select e.id::text as id, e.xid::text as xid, e.at, e.recorded_at as "recordedAt", e.kind, e.detail,
    site.ref as "siteId", site.name as "siteName", s.ref as "stringId", s.name as "stringName",
    (e.at at time zone 'UTC')::text as key
  from event e join site on site.id = e.site_id left join string s on s.id = e.string_id
  where ${SITE_VISIBLE} and (:site::uuid is null or site.ref = :site) and (:string::uuid is null or s.ref = :string)
    and (:kind::text is null or e.kind = :kind) and (:from::timestamptz is null or e.at >= :from)
    and (:to::timestamptz is null or e.at < :to)`;
const bound = (f: EventFilter) => ({
  site: f.site ?? null,
  string: f.string ?? null,
  kind: f.kind ?? null,
  from: f.from ?? null,
  to: f.to ?? null,
});

/** By when it happened, the newest first; what a later one supersedes is left out. */
export async function eventsNewestFirst(
  tx: Tx,
  filter: EventFilter,
  after: readonly [at: string, id: string] | null,
  rows: number,
): Promise<EventRow[]> {
  const found = await tx.raw<{ rows: EventRow[] }>(
    `${EVENT} and not exists (select from event later where later.supersedes = e.id)
       and (:at::text is null or (e.at, e.id) < (:at::timestamp at time zone 'UTC', :id::text::int8))
     order by e.at desc, e.id desc limit :rows`,
    { ...bound(filter), at: after?.[0] ?? null, id: after?.[1] ?? null, rows },
  );
  return found.rows;
}

/**
 * In the order in which they were recorded, for whoever follows: only those whose writers are all done, so that a
 * reader who goes on from a key misses none.
 */
export async function eventsAsRecorded(
  tx: Tx,
  filter: EventFilter,
  after: readonly [xid: string, id: string] | null,
  rows: number,
): Promise<EventRow[]> {
  const found = await tx.raw<{ rows: EventRow[] }>(
    `${EVENT} and e.xid < ${EVENT_HORIZON}
       and (:xid::text is null or (e.xid, e.id) > (:xid::text::xid8, :id::text::int8))
     order by e.xid, e.id limit :rows`,
    { ...bound(filter), xid: after?.[0] ?? null, id: after?.[1] ?? null, rows },
  );
  return found.rows;
}

export interface RollCallRow {
  id: string;
  siteId: string;
  siteName: string;
  startedAt: Date;
  startedBy: string;
  personOnSite: string;
  stoppedAt: Date | null;
  stoppedBy: string | null;
  heard: number;
  key: string;
}
export async function rollCallsFrom(
  tx: Tx,
  filter: { site?: string | undefined; open?: boolean | undefined },
  after: readonly [at: string, id: string] | null,
  rows: number,
): Promise<RollCallRow[]> {
  const found = await tx.raw<{ rows: RollCallRow[] }>(
    `select r.ref as id, site.ref as "siteId", site.name as "siteName", r.started_at as "startedAt",
            b.name as "startedBy", r.person_on_site as "personOnSite", r.stopped_at as "stoppedAt", e.name as "stoppedBy",
            (select count(*)::int from heard h where h.roll_call_id = r.id) as heard,
            (r.started_at at time zone 'UTC')::text as key
     from roll_call r
     join site on site.id = r.site_id
     join person b on b.id = r.started_by
     left join person e on e.id = r.stopped_by
     where ${SITE_VISIBLE} and (:site::uuid is null or site.ref = :site)
       and (:open::boolean is null or (r.stopped_at is null) = :open)
       and (:at::text is null or (r.started_at, r.ref) < (:at::timestamp at time zone 'UTC', :id::text::uuid))
     order by r.started_at desc, r.ref desc limit :rows`,
    {
      site: filter.site ?? null,
      open: filter.open ?? null,
      at: after?.[0] ?? null,
      id: after?.[1] ?? null,
      rows,
    },
  );
  return found.rows;
}

export interface ShutdownTestRow {
  id: string;
  siteId: string;
  siteName: string;
  zone: string | null;
  at: Date;
  madeBy: string;
  result: 'passed' | 'failed' | 'consistent' | 'not_witnessed';
  signed: boolean;
  inForce: boolean;
  strings: { id: string; name: string; result: string }[];
  key: string;
}
export async function shutdownTestsFrom(
  tx: Tx,
  filter: { site?: string | undefined; test?: string | undefined; result?: string | undefined },
  after: readonly [at: string, id: string] | null,
  rows: number,
): Promise<ShutdownTestRow[]> {
  const found = await tx.raw<{ rows: ShutdownTestRow[] }>(
    `select t.ref as id, site.ref as "siteId", site.name as "siteName", z.name as zone, t.at, t.made_by as "madeBy",
            t.result, t.signed_by is not null as signed, t.superseded_by is null as "inForce",
            coalesce((select json_agg(json_build_object('id', s.ref, 'name', s.name, 'result', ts.result) order by s.name)
              from shutdown_test_string ts join string s on s.id = ts.string_id where ts.test_id = t.id), '[]') as strings,
            (t.at at time zone 'UTC')::text as key
     from shutdown_test t
     join site on site.id = t.site_id
     left join zone z on z.id = t.zone_id
     where ${SITE_VISIBLE} and (:site::uuid is null or site.ref = :site) and (:test::uuid is null or t.ref = :test)
       and (:result::text is null or t.result = :result)
       and (:at::text is null or (t.at, t.ref) < (:at::timestamp at time zone 'UTC', :id::text::uuid))
     order by t.at desc, t.ref desc limit :rows`,
    {
      site: filter.site ?? null,
      test: filter.test ?? null,
      result: filter.result ?? null,
      at: after?.[0] ?? null,
      id: after?.[1] ?? null,
      rows,
    },
  );
  return found.rows;
}
