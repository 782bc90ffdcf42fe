import type { EventItem } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/**
 * What /live reads besides the present state. The cursor is a transaction number: every event of a transaction below
 * it was read. How far it may go is told by horizon.ts.
 */

export interface LiveEvent extends EventItem {
  xid: string;
  siteNumber: number;
  stringNumber: number | null;
}

interface EventRow extends Omit<LiveEvent, 'at' | 'recordedAt'> {
  at: Date;
  recordedAt: Date;
}
const EVENT = `select e.id::text as id, e.xid::text as xid, e.at, e.recorded_at as "recordedAt", e.site_id as "siteNumber",
    e.string_id as "stringNumber", site.ref as "siteId", site.name as "siteName", string.ref as "stringId",
    string.name as "stringName", e.kind, e.detail
  from event e join site on site.id = e.site_id left join string on string.id = e.string_id`;

const toEvent = (row: EventRow): LiveEvent => ({
  ...row,
  at: row.at.toISOString(),
  recordedAt: row.recordedAt.toISOString(),
});

/** Events in the order of their cursors. `leftOut`: the cursor of the newest of those that were left out; null: none. */
export interface Events {
  events: LiveEvent[];
  leftOut: string | null;
}

/** Events with `from` ≤ xid < `to`, oldest first; of a longer list the newest `limit`. */
export async function eventsBetween(
  tx: Tx,
  from: string,
  to: string,
  which: { siteIds: readonly number[]; stringId?: number | undefined },
  limit: number,
): Promise<Events> {
  const { rows } = await tx.raw<{ rows: EventRow[] }>(
    `${EVENT} where e.xid >= :from::text::xid8 and e.xid < :to::text::xid8 and e.site_id = any (:siteIds::int4[])
       and (:stringId::int4 is null or e.string_id = :stringId)
     order by e.xid desc, e.id desc limit :limit`,
    { from, to, siteIds: [...which.siteIds], stringId: which.stringId ?? null, limit: limit + 1 },
  );
  return { events: rows.slice(0, limit).map(toEvent).reverse(), leftOut: rows[limit]?.xid ?? null };
}

/** The newest events of a site or a string whose transactions are below `to`, oldest first. */
export async function newestEvents(
  tx: Tx,
  to: string,
  which: { siteId: number; stringId?: number | undefined },
  limit: number,
): Promise<LiveEvent[]> {
  const { rows } = await tx.raw<{ rows: EventRow[] }>(
    `${EVENT} where e.xid < :to::text::xid8 and e.site_id = :siteId and (:stringId::int4 is null or e.string_id = :stringId)
     order by e.at desc, e.id desc limit :limit`,
    { to, siteId: which.siteId, stringId: which.stringId ?? null, limit },
  );
  return rows.map(toEvent).reverse();
}

/** Sites of strings, by the database's numbers. */
export async function siteByString(tx: Tx, stringIds: readonly number[]): Promise<Map<number, number>> {
  const { rows } = await tx.raw<{ rows: { id: number; siteId: number }[] }>(
    'select id, site_id as "siteId" from string where id = any (:stringIds::int4[])',
    { stringIds: [...stringIds] },
  );
  return new Map(rows.map((r) => [r.id, r.siteId]));
}

/** The string of a public identifier with its site, if the actor may see it. */
export async function visibleStringNumbers(
  tx: Tx,
  ref: string,
): Promise<{ stringId: number; siteId: number } | undefined> {
  const { rows } = await tx.raw<{ rows: { stringId: number; siteId: number }[] }>(
    `select string.id as "stringId", site.id as "siteId" from string join site on site.id = string.site_id
     where string.ref = :ref and ${SITE_VISIBLE}`,
    { ref },
  );
  return rows[0];
}

/** Whether a roll call is open at a site. */
export async function rollCallOpen(tx: Tx, siteId: number): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    'select 1 from roll_call where site_id = ? and stopped_at is null',
    [siteId],
  );
  return rows.length > 0;
}

/** Whether the database answers: it throws, or hangs, where it doesn't. */
export async function readable(tx: Tx): Promise<void> {
  await tx.raw('select 1');
}
