import type { PlannedWorkItem } from '../../schemas/api/planned-works';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Planned works. Whoever calls has checked that the actor sees the site. */

type Row = Omit<PlannedWorkItem, 'startsAt' | 'endsAt' | 'state'> & { startsAt: Date; endsAt: Date };

const ITEM = `w.ref as id, w.starts_at as "startsAt", w.ends_at as "endsAt", w.reason,
  case when w.string_ids is null then null
       else array(select s.name from string s where s.id = any (w.string_ids) order by s.id) end as strings,
  p.name as by, e.name as "endedBy"`;

const itemOf = (row: Row, at: Date): PlannedWorkItem => ({
  ...row,
  startsAt: row.startsAt.toISOString(),
  endsAt: row.endsAt.toISOString(),
  state: row.endsAt <= at ? 'over' : row.startsAt > at ? 'to_come' : 'going_on',
});

/** The newest 500: those to come first. */
export async function plannedWorks(tx: Tx, siteId: number, at: Date): Promise<PlannedWorkItem[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select ${ITEM} from planned_work w join person p on p.id = w.created_by left join person e on e.id = w.ended_by
     where w.site_id = ? order by w.starts_at desc, w.id desc limit 500`,
    [siteId],
  );
  return rows.map((r) => itemOf(r, at));
}

/** The instants of two times by the clock of a site. A time that clocks skip is moved on, one that happens twice is the first. */
export async function instantsAt(
  tx: Tx,
  siteId: number,
  times: { from: string; to: string },
): Promise<{ from: Date; to: Date } | null> {
  const { rows } = await tx.raw<{ rows: { from: Date; to: Date }[] }>(
    `select :from::timestamp at time zone time_zone as "from", :to::timestamp at time zone time_zone as "to"
     from site where id = :siteId`,
    { siteId, ...times },
  );
  return rows[0] ?? null;
}

export async function localNow(tx: Tx, siteId: number, at: Date): Promise<string> {
  const { rows } = await tx.raw<{ rows: { now: string }[] }>(
    `select to_char(:at::timestamptz at time zone time_zone, 'YYYY-MM-DD"T"HH24:MI') as now from site where id = :siteId`,
    { siteId, at },
  );
  return rows[0]?.now ?? '';
}

export async function stringsOfSite(
  tx: Tx,
  siteId: number,
): Promise<{ number: number; id: string; name: string }[]> {
  const { rows } = await tx.raw<{ rows: { number: number; id: string; name: string }[] }>(
    `select id as number, ref as id, name from string where site_id = ? order by id`,
    [siteId],
  );
  return rows;
}

/** False: it is kept already. */
export async function addPlannedWork(
  tx: Tx,
  work: {
    ref: string;
    siteId: number;
    stringIds: number[] | null;
    from: Date;
    to: Date;
    reason: string;
    personId: number;
  },
): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `insert into planned_work (ref, site_id, string_ids, starts_at, ends_at, reason, created_by)
     values (:ref, :siteId, :stringIds::int4[], :from, :to, :reason, :personId)
     on conflict (ref) do nothing returning 1`,
    { ...work, stringIds: work.stringIds as number[] },
  );
  return rows.length > 0;
}

export interface PlannedWorkOne {
  siteId: number;
  siteRef: string;
  organisationId: number;
  reason: string;
  startsAt: Date;
  endsAt: Date;
}

/** Held until the transaction ends: two people end it at once, one of them does. */
export async function lockPlannedWork(tx: Tx, ref: string): Promise<PlannedWorkOne | undefined> {
  const { rows } = await tx.raw<{ rows: PlannedWorkOne[] }>(
    `select w.site_id as "siteId", site.ref as "siteRef", site.organisation_id as "organisationId", w.reason,
            w.starts_at as "startsAt", w.ends_at as "endsAt"
     from planned_work w join site on site.id = w.site_id where w.ref = :ref and ${SITE_VISIBLE} for update of w`,
    { ref },
  );
  return rows[0];
}

/** Ends it now; one that has not begun is taken back and never was. */
export async function endPlannedWork(tx: Tx, ref: string, at: Date, personId: number): Promise<void> {
  await tx.raw(
    `update planned_work set ends_at = greatest(:at::timestamptz, starts_at + interval '1 second'), ended_by = :personId
     where ref = :ref`,
    { ref, at, personId },
  );
}

export async function addPlannedWorkEvent(
  tx: Tx,
  siteId: number,
  at: Date,
  detail: Record<string, unknown>,
): Promise<void> {
  await tx.raw(
    `insert into event (at, organisation_id, site_id, kind, detail)
     select :at, site.organisation_id, site.id, 'planned_work', :detail::jsonb
     from site where site.id = :siteId and ${SITE_VISIBLE}`,
    { siteId, at, detail: JSON.stringify(detail) },
  );
}

/** What goes on or is to come at a site, soonest first: for its page. */
export async function worksAhead(tx: Tx, siteId: number, at: Date): Promise<PlannedWorkItem[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select ${ITEM} from planned_work w join person p on p.id = w.created_by left join person e on e.id = w.ended_by
     where w.site_id = :siteId and w.ends_at > :at and w.starts_at < :at::timestamptz + interval '7 days'
     order by w.starts_at, w.id`,
    { siteId, at },
  );
  return rows.map((r) => itemOf(r, at));
}
