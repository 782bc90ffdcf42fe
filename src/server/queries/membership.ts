import type { Heard } from '../../domain/output/membership-moments';
import type { Tx } from '../db/transaction';
import { anyString, framesOf, SPAN } from './frames';

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
  /** One report of a string in a moment: epoch seconds where that begins, mA in slot order. */
  frames: { stringId: number; moment: number; current: (number | null)[] }[];
}

const telling = (id: string): string =>
  `${id} in (select s.id from string s where s.site_id = :siteId and s.kind <> 'shutdown_only')`;

/** The beginning of the moment of `:lengthS` seconds that `at` lies in, epoch seconds. */
const MOMENT = `(floor(extract(epoch from at)::float8 / :lengthS::float8) * :lengthS::float8)`;

/** The moments within a window in which strings reported whose units tell their current, ascending. */
export async function heardMoments(
  tx: Tx,
  siteId: number,
  window: { from: Date; to: Date; lengthS: number },
): Promise<Heard[]> {
  const { rows } = await tx.raw<{ rows: Heard[] }>(
    `select ${MOMENT} as "atS", count(distinct string_id)::int as strings
     from ${framesOf({ columns: [], strings: telling, ...SPAN })} r group by 1 order by 1`,
    { siteId, ...window },
  );
  return rows;
}

/**
 * At each of these moments the newest report of every string whose units tell their current. A unit that has moved
 * since the window began is read from its move on only.
 */
export async function unitCurrents(
  tx: Tx,
  siteId: number,
  window: { from: Date; to: Date; lengthS: number },
  moments: readonly number[],
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
    `select f.string_id as "stringId", f.moment, f.current
     from (select distinct on (f.string_id, f.moment) f.string_id, f.moment, f.current
           from (select string_id, at, current, ${MOMENT} as moment
                 from ${framesOf({ columns: ['current'], strings: anyString, ...SPAN })} r) f
           where f.moment = any (:moments::float8[])
           order by f.string_id, f.moment, f.at desc) f
     order by f.moment, f.string_id`,
    { ids: strings.map((s) => s.id), moments: [...moments], ...window },
  );
  return { strings, frames };
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
