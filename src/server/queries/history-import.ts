import type { KnownSubjects, Layout } from '../../domain/history-import/layout';
import type { HistoryImportView } from '../../schemas/api/history-import';
import type { Tx } from '../db/transaction';

/** Imports of earlier readings: what a file may name, the rows as they come, undo. */

export interface SubjectIds {
  known: KnownSubjects;
  strings: ReadonlyMap<string, number>;
  inverters: ReadonlyMap<string, number>;
  /** By `NAME/NUMBER`. */
  inputs: ReadonlyMap<string, number>;
}

/** What a file may name at a site, with the database's own numbers. */
export async function subjectsOf(tx: Tx, siteId: number): Promise<SubjectIds> {
  const { rows: strings } = await tx.raw<{ rows: { id: number; name: string; slots: number }[] }>(
    'select id, name, slots from string where site_id = ? order by name',
    [siteId],
  );
  const { rows: inverters } = await tx.raw<{
    rows: { id: number; name: string; inputs: { id: number; number: number }[] }[];
  }>(
    `select v.id, v.name, coalesce(json_agg(json_build_object('id', i.id, 'number', i.number) order by i.number)
       filter (where i.id is not null), '[]') as inputs
     from inverter v left join input i on i.inverter_id = v.id where v.site_id = ? group by v.id order by v.name`,
    [siteId],
  );
  return {
    known: {
      strings: strings.map(({ name, slots }) => ({ name, slots })),
      inverters: inverters.map((v) => ({ name: v.name, inputs: v.inputs.map((i) => i.number) })),
    },
    strings: new Map(strings.map((s) => [s.name, s.id])),
    inverters: new Map(inverters.map((v) => [v.name, v.id])),
    inputs: new Map(inverters.flatMap((v) => v.inputs.map((i) => [`${v.name}/${i.number}`, i.id] as const))),
  };
}

/** The import of this very file that is in force; undefined: none. */
export async function importOfContent(
  tx: Tx,
  siteId: number,
  hash: Buffer,
): Promise<{ ref: string; fileName: string; madeAt: Date } | undefined> {
  const { rows } = await tx.raw<{ rows: { ref: string; fileName: string; madeAt: Date }[] }>(
    `select ref, file_name as "fileName", made_at as "madeAt" from history_import
     where site_id = ? and content_hash = ? and undone_at is null`,
    [siteId, hash],
  );
  return rows[0];
}

export interface ImportBegun {
  siteId: number;
  fileName: string;
  hash: Buffer;
  layout: Layout;
  note: string;
  personId: number;
  at: Date;
}

/** The row of an import whose readings follow in the same transaction. */
export async function beginImport(tx: Tx, begun: ImportBegun): Promise<number> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into history_import (site_id, file_name, content_hash, layout, rows, readings, cells_left_out, doubles,
       from_at, to_at, note, made_by, made_at)
     values (:siteId, :fileName, :hash, :layout, 0, 0, 0, 0, :at, :at, :note, :personId, :at) returning id`,
    { ...begun, layout: JSON.stringify(begun.layout) },
  );
  const made = rows[0];
  if (!made) throw new Error('an import was not written');
  return made.id;
}

export interface SeriesOf {
  stringId: number | null;
  position: number | null;
  inputId: number | null;
  inverterId: number | null;
}

export async function addSeries(tx: Tx, importId: number, siteId: number, of: SeriesOf): Promise<number> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into history_series (import_id, site_id, string_id, position, input_id, inverter_id, step_s)
     values (:importId, :siteId, :stringId, :position, :inputId, :inverterId, 900) returning id`,
    { importId, siteId, ...of },
  );
  const made = rows[0];
  if (!made) throw new Error('a series was not written');
  return made.id;
}

/** Readings in columns: what `unnest` takes. */
export class ReadingColumns {
  readonly series: number[] = [];
  readonly at: number[] = [];
  readonly values: (number | null)[][] = [[], [], [], [], []];

  get length(): number {
    return this.series.length;
  }
  add(series: number, at: number, values: readonly (number | null)[]): void {
    this.series.push(series);
    this.at.push(at);
    for (let i = 0; i < this.values.length; i++) this.values[i]?.push(values[i] ?? null);
  }
}

/** Writes readings; the same series and instant again changes nothing. Says how many were new. */
export async function addReadings(tx: Tx, columns: ReadingColumns): Promise<number> {
  const { rows } = await tx.raw<{ rows: { n: number }[] }>(
    `with added as (
       insert into history_reading (series_id, at, voltage, current, power, energy, temperature)
       select s, to_timestamp(t), v, c, p, e, d
       from unnest(?::int4[], ?::int8[], ?::real[], ?::real[], ?::real[], ?::real[], ?::real[]) x(s, t, v, c, p, e, d)
       on conflict do nothing returning 1)
     select count(*)::int as n from added`,
    // knex's types know no null within an array; the driver does
    [columns.series, columns.at, ...(columns.values as number[][])],
  );
  return rows[0]?.n ?? 0;
}

/** Wh of a reading: what the file says, or its power over its step. The reading is `r`, its series `s`. */
const ENERGY = `coalesce(r.energy, coalesce(r.power, r.voltage * r.current) * s.step_s / 3600.0)`;

/** Steps, days and totals of an import whose readings are all there. */
export async function finishImport(
  tx: Tx,
  importId: number,
  timeZone: string,
  counts: { rows: number; readings: number; leftOut: number; doubles: number },
): Promise<void> {
  await tx.raw(`set local statement_timeout = '120s'`);
  await tx.raw(
    `update history_series s set step_s = x.step from (
       select series_id, (percentile_disc(0.5) within group (order by apart))::int4 as step
       from (select series_id, extract(epoch from at - lag(at) over (partition by series_id order by at)) as apart
             from history_reading where series_id in (select id from history_series where import_id = :importId)) a
       where apart > 0 group by series_id) x
     where s.id = x.series_id and s.import_id = :importId`,
    { importId },
  );
  await tx.raw(
    `insert into history_day (series_id, day, readings, energy, voltage_avg, voltage_max)
     select r.series_id, (r.at at time zone :timeZone)::date, count(*), sum(${ENERGY}),
            coalesce(avg(r.voltage) filter (where ${ENERGY} > 0), avg(r.voltage)), max(r.voltage)
     from history_reading r join history_series s on s.id = r.series_id where s.import_id = :importId group by 1, 2`,
    { importId, timeZone },
  );
  await tx.raw(
    `update history_import set rows = :rows, readings = :readings, cells_left_out = :leftOut, doubles = :doubles,
       from_at = x.from_at, to_at = x.to_at
     from (select min(at) as from_at, max(at) as to_at from history_reading
           where series_id in (select id from history_series where import_id = :importId)) x
     where id = :importId`,
    { importId, ...counts },
  );
}

/** Takes an import back: its readings go, and that it was stays. Undefined: none of this identifier. */
export async function undoImport(
  tx: Tx,
  siteId: number,
  ref: string,
  personId: number,
  at: Date,
): Promise<{ undone: boolean; fileName: string; readings: number } | undefined> {
  const { rows } = await tx.raw<{
    rows: { id: number; undone: boolean; fileName: string; readings: number }[];
  }>(
    `select id, undone_at is not null as undone, file_name as "fileName", readings from history_import
     where site_id = ? and ref = ? for update`,
    [siteId, ref],
  );
  const found = rows[0];
  if (!found || found.undone) return found;
  await tx.raw(`set local statement_timeout = '120s'`);
  for (const table of ['history_reading', 'history_day'])
    await tx.raw(
      `delete from ${table} where series_id in (select id from history_series where import_id = ?)`,
      [found.id],
    );
  await tx.raw('update history_import set undone_by = ?, undone_at = ? where id = ?', [
    personId,
    at,
    found.id,
  ]);
  return found;
}

/** Imports of a site, newest first; of one, where `ref` names it. */
export async function importsOfSite(
  tx: Tx,
  siteId: number,
  ref: string | null = null,
): Promise<HistoryImportView[]> {
  type Row = Omit<HistoryImportView, 'from' | 'to' | 'madeAt' | 'undoneAt'> & {
    from: Date;
    to: Date;
    madeAt: Date;
    undoneAt: Date | null;
  };
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select i.ref as id, i.file_name as "fileName", i.rows, i.readings, i.cells_left_out as "leftOut", i.doubles,
            i.from_at as "from", i.to_at as "to", i.note, maker.name as "madeBy", i.made_at as "madeAt",
            undoer.name as "undoneBy", i.undone_at as "undoneAt",
            coalesce((select json_agg(distinct case when st.id is not null then 'string ' || st.name
                        when inp.id is not null then v.name || ', input ' || inp.number else v.name end)
              from history_series s left join string st on st.id = s.string_id left join input inp on inp.id = s.input_id
                left join inverter v on v.id = coalesce(s.inverter_id, inp.inverter_id)
              where s.import_id = i.id), '[]') as of
     from history_import i join person maker on maker.id = i.made_by left join person undoer on undoer.id = i.undone_by
     where i.site_id = :siteId and (cast(:ref as uuid) is null or i.ref = :ref) order by i.made_at desc, i.id desc
     limit 200`,
    { siteId, ref },
  );
  return rows.map((r) => ({
    ...r,
    from: r.from.toISOString(),
    to: r.to.toISOString(),
    madeAt: r.madeAt.toISOString(),
    undoneAt: r.undoneAt && r.undoneAt.toISOString(),
  }));
}
