import type { IsolationFinding, WatchedInput, WatchedUnit } from '../../domain/commissioning/isolation-watch';
import type { Tx } from '../db/transaction';
import { after, anyString, framesOf } from './frames';

/** Watches for the isolation of one string. Whoever calls has checked that the actor may see the site. */

export interface IsolationRow {
  dbId: number;
  id: string;
  stringDbId: number;
  stringId: string;
  stringName: string;
  startedAt: Date;
  startedBy: string;
  personOnSite: string;
  stoppedAt: Date | null;
  stoppedBy: string | null;
  finding: IsolationFinding | null;
}

const RUN = `select i.id as "dbId", i.ref as id, i.string_id as "stringDbId", s.ref as "stringId", i.string_name as "stringName",
    i.started_at as "startedAt", b.name as "startedBy", i.person_on_site as "personOnSite",
    i.stopped_at as "stoppedAt", e.name as "stoppedBy", i.finding
  from isolation i join string s on s.id = i.string_id join person b on b.id = i.started_by
  left join person e on e.id = i.stopped_by`;

/** The open watch and the last ended ones, newest first. */
export async function isolationsOf(tx: Tx, siteId: number, most = 30): Promise<IsolationRow[]> {
  const { rows } = await tx.raw<{ rows: IsolationRow[] }>(
    `${RUN} where i.site_id = ? order by i.stopped_at is null desc, i.started_at desc limit ?`,
    [siteId, most],
  );
  return rows;
}

export async function openIsolation(tx: Tx, siteId: number): Promise<IsolationRow | undefined> {
  const { rows } = await tx.raw<{ rows: IsolationRow[] }>(
    `${RUN} where i.site_id = ? and i.stopped_at is null`,
    [siteId],
  );
  return rows[0];
}

/** Begins a watch; undefined where one runs, also when two people start at the same moment. */
export async function insertIsolation(
  tx: Tx,
  watch: { siteId: number; stringId: number; personId: number; personOnSite: string; at: Date },
): Promise<IsolationRow | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into isolation (site_id, string_id, string_name, started_by, person_on_site, started_at)
     select s.site_id, s.id, s.name, :personId, :personOnSite, :at from string s
     where s.id = :stringId and s.site_id = :siteId
     on conflict (site_id) where stopped_at is null do nothing returning id`,
    watch,
  );
  return rows[0] ? openIsolation(tx, watch.siteId) : undefined;
}

/** Ends a watch with what it found; false where it has ended already. `personId` null: its time was up. */
export async function endIsolation(
  tx: Tx,
  ended: { id: number; at: Date; personId: number | null; finding: IsolationFinding },
): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `update isolation set stopped_at = greatest(:at::timestamptz, started_at), stopped_by = :personId, finding = :finding::jsonb
     where id = :id and stopped_at is null returning id`,
    { ...ended, finding: JSON.stringify(ended.finding) },
  );
  return rows.length > 0;
}

/** A string of the site by its public identifier, with how many of its units can tell a current. */
export async function isolableString(
  tx: Tx,
  siteId: number,
  ref: string,
): Promise<{ id: number; name: string } | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number; name: string }[] }>(
    'select id, name from string where site_id = ? and ref = ?',
    [siteId, ref],
  );
  return rows[0];
}

export async function reportIntervalOf(tx: Tx, siteId: number): Promise<number> {
  const { rows } = await tx.raw<{ rows: { s: number }[] }>(
    'select report_interval_s as s from site where id = ?',
    [siteId],
  );
  return rows[0]?.s ?? 60;
}

/** Reports of all units and inputs of a site in a span, by who sat where when it began. Amperes, epoch seconds. */
export async function watchedCurrents(
  tx: Tx,
  siteId: number,
  span: { from: Date; to: Date; began: Date },
): Promise<{ units: WatchedUnit[]; inputs: WatchedInput[] }> {
  const { rows: seats } = await tx.raw<{
    rows: { stringId: number; name: string; slots: { position: number; serial: string }[] }[];
  }>(
    `select s.id as "stringId", s.name,
            json_agg(json_build_object('position', sl.position, 'serial', u.serial) order by sl.position) as slots
     from string s join slot sl on sl.string_id = s.id
     join placement p on p.slot_id = sl.id and p.placed_from <= :began and (p.placed_to is null or p.placed_to > :began)
     join unit u on u.id = p.unit_id
     where s.site_id = :siteId and s.kind <> 'shutdown_only' group by s.id order by s.id`,
    { siteId, began: span.began },
  );
  const { rows: frames } = await tx.raw<{
    rows: { stringId: number; at: number; current: (number | null)[] }[];
  }>(
    `select string_id as "stringId", extract(epoch from f.at)::float8 as at, current
     from ${framesOf({ columns: ['current'], strings: anyString, from: ':from::timestamptz', to: after(':to') })} f
     order by f.at`,
    { ids: seats.map((s) => s.stringId), from: span.from, to: span.to },
  );
  const byString = new Map(seats.map((s) => [s.stringId, [] as typeof frames]));
  for (const f of frames) byString.get(f.stringId)?.push(f);
  const { rows: inputs } = await tx.raw<{
    rows: { name: string; strings: string[]; samples: { atS: number; current: number | null }[] }[];
  }>(
    `select inv.name || ', input ' || i.number as name,
            (select array_agg(s.name order by s.name) from string s where s.input_id = i.id) as strings,
            coalesce(json_agg(json_build_object('atS', extract(epoch from f.at)::float8, 'current', f.current / 100.0::float8)
              order by f.at) filter (where f.at is not null), '[]') as samples
     from input i join inverter inv on inv.id = i.inverter_id
     left join input_frame f on f.input_id = i.id and f.at >= :from and f.at <= :to
     where i.site_id = :siteId and exists (select from string s where s.input_id = i.id)
     group by i.id, inv.name order by inv.name, i.number`,
    { siteId, from: span.from, to: span.to },
  );
  return {
    units: seats.flatMap((s) =>
      s.slots.map(({ position, serial }) => ({
        serial,
        string: s.name,
        position,
        samples: (byString.get(s.stringId) ?? []).map((f) => {
          const mA = f.current[position - 1];
          return { atS: f.at, current: mA === null || mA === undefined ? null : mA / 1000 };
        }),
      })),
    ),
    inputs,
  };
}
