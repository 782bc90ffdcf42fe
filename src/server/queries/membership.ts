import type { Tx } from '../db/transaction';
import { anyString, framesOf, oneString, packedFrames, singleFrames, SPAN } from './frames';

/** Currents of a site's units over time. Whoever calls has checked that the actor may see the site. */

export interface CurrentRows {
  strings: {
    id: number;
    ref: string;
    name: string;
    /** Placed units in order of position: index into the frames' arrays and who sits there. */
    slots: { position: number; serial: string }[];
    currentAccuracy: number;
  }[];
  /** One report of a string in a step: epoch seconds of the step, mA in slot order. */
  frames: { stringId: number; step: number; current: (number | null)[] }[];
}

/**
 * Of each step of `stepS` seconds the newest report of every string whose units tell their current. A unit that has
 * moved since the window began is read from its move on only.
 */
export async function unitCurrents(
  tx: Tx,
  siteId: number,
  window: { from: Date; to: Date; stepS: number },
): Promise<CurrentRows> {
  const { rows: strings } = await tx.raw<{ rows: CurrentRows['strings'] }>(
    `select s.id, s.ref, s.name, ut.current_accuracy::float8 as "currentAccuracy",
            coalesce(json_agg(json_build_object('position', sl.position, 'serial', u.serial) order by sl.position)
              filter (where u.id is not null), '[]') as slots
     from string s
     join unit_type ut on ut.id = s.unit_type_id
     join slot sl on sl.string_id = s.id
     left join placement p on p.slot_id = sl.id and p.placed_to is null
     left join unit u on u.id = p.unit_id
     where s.site_id = :siteId and s.kind <> 'shutdown_only'
     group by s.id, ut.current_accuracy order by s.id`,
    { siteId },
  );
  const { rows: frames } = await tx.raw<{ rows: CurrentRows['frames'] }>(
    `select f.string_id as "stringId", f.step, f.current
     from (select distinct on (f.string_id, f.step) f.string_id, f.step, f.current
           from (select string_id, at, current,
                        extract(epoch from date_bin(make_interval(secs => :stepS), at, timestamptz '2000-01-01 00:00Z'))::int8::float8 as step
                 from ${framesOf({ columns: ['current'], strings: anyString, ...SPAN })} r) f
           order by f.string_id, f.step, f.at desc) f
     order by f.step, f.string_id`,
    { ids: strings.map((s) => s.id), from: window.from, to: window.to, stepS: window.stepS },
  );
  return { strings, frames };
}

const OF_STRING = { columns: [], strings: oneString('s.id'), ...SPAN };

/** When the site's strings first reported within a window; null: not at all. */
export async function firstReport(
  tx: Tx,
  siteId: number,
  window: { from: Date; to: Date },
): Promise<Date | null> {
  const { rows } = await tx.raw<{ rows: { at: Date | null }[] }>(
    `select min(first.at) as at from string s
     cross join lateral (select min(f.at) as at from (${singleFrames(OF_STRING)}) f
       union all select min(f.at) from (${packedFrames(OF_STRING)}) f) first
     where s.site_id = :siteId and s.kind <> 'shutdown_only'`,
    { siteId, ...window },
  );
  return rows[0]?.at ?? null;
}

/** Since when each placed unit sits in its slot, where that began within the window: epoch seconds by serial. */
export async function movedSince(tx: Tx, siteId: number, from: Date): Promise<Map<string, number>> {
  const { rows } = await tx.raw<{ rows: { serial: string; sinceS: number }[] }>(
    `select u.serial, extract(epoch from p.placed_from)::float8 as "sinceS"
     from placement p join unit u on u.id = p.unit_id
     where p.site_id = :siteId and p.placed_to is null and p.placed_from > :from`,
    { siteId, from },
  );
  return new Map(rows.map((r) => [r.serial, r.sinceS]));
}

/** Units that report no current themselves. */
export async function muteUnits(tx: Tx, siteId: number): Promise<number> {
  const { rows } = await tx.raw<{ rows: { n: number }[] }>(
    `select count(*)::int as n from string s join slot sl on sl.string_id = s.id
     join placement p on p.slot_id = sl.id and p.placed_to is null
     where s.site_id = ? and s.kind = 'shutdown_only'`,
    [siteId],
  );
  return rows[0]?.n ?? 0;
}
