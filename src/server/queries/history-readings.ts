import type { Tx } from '../db/transaction';

/**
 * Imported readings where pages ask for the past. What was measured is never replaced: whoever calls takes only the
 * steps for which there is nothing else. Of two imports that speak of the same step the newer one counts.
 */

/** Of a string, or of an input where its strings' units tell nothing. */
export type ImportedOf = { stringId: number } | { inputId: number };
export type ImportedQuantity = 'voltage' | 'current' | 'power';

export interface ImportedPoint {
  /** Epoch s: the middle of the step, the site's noon where it is a day. */
  at: number;
  /** V, A or W; null: the file says nothing of it. */
  value: number | null;
  low: number | null;
  high: number | null;
  /** Wh in the step. */
  energy: number | null;
  /** How far readings of its series lie apart, seconds. */
  stepS: number;
}

const VALUES: Record<ImportedQuantity, string> = {
  voltage: 'r.voltage',
  current: 'r.current',
  power: `coalesce(r.power, r.voltage * r.current, r.energy * 3600.0 / s.step_s)`,
};
/** Wh of a reading: what the file says, or its power over its step. */
const ENERGY = `coalesce(r.energy, coalesce(r.power, r.voltage * r.current) * s.step_s / 3600.0)`;

const seriesOf = (of: ImportedOf): { where: string; id: number } =>
  'stringId' in of
    ? { where: 's.string_id = :id and s.position is null', id: of.stringId }
    : { where: 's.input_id = :id', id: of.inputId };

/** Means over steps of `stepS` seconds, at least a quarter of an hour, oldest first. */
export async function importedSteps(
  tx: Tx,
  of: ImportedOf,
  { from, to }: { from: Date; to: Date },
  quantity: ImportedQuantity,
  stepS: number,
): Promise<ImportedPoint[]> {
  const { where, id } = seriesOf(of);
  const value = VALUES[quantity];
  const { rows } = await tx.raw<{ rows: ImportedPoint[] }>(
    `select distinct on (step) extract(epoch from step)::float8 + cast(:stepS as float8) / 2 as at, value, low, high, energy, "stepS"
     from (select date_bin(make_interval(secs => :stepS), r.at, timestamptz '2000-01-01 00:00Z') as step, s.id as series,
                  avg(${value})::float8 as value, min(${value})::float8 as low, max(${value})::float8 as high,
                  sum(${ENERGY})::float8 as energy, s.step_s as "stepS"
           from history_series s join history_reading r on r.series_id = s.id
           where ${where} and r.at >= :from and r.at < :to group by 1, s.id) x
     order by step, series desc`,
    { id, stepS: Math.max(900, stepS), from, to },
  );
  return rows;
}

/** Days, as instants of the site's noon, oldest first. Power is the day's mean over its readings. */
export async function importedDays(
  tx: Tx,
  of: ImportedOf,
  { from, to }: { from: Date; to: Date },
  quantity: ImportedQuantity,
  timeZone: string,
): Promise<ImportedPoint[]> {
  const { where, id } = seriesOf(of);
  const [value, high] = {
    voltage: ['d.voltage_avg', 'd.voltage_max'],
    current: ['null::real', 'null::real'],
    power: [
      'd.energy * 3600.0 / nullif(d.readings * s.step_s, 0)',
      'd.energy * 3600.0 / nullif(d.readings * s.step_s, 0)',
    ],
  }[quantity] as [string, string];
  const { rows } = await tx.raw<{ rows: ImportedPoint[] }>(
    `select distinct on (d.day) extract(epoch from (d.day + time '12:00') at time zone :timeZone)::float8 as at,
            (${value})::float8 as value, (${value})::float8 as low, (${high})::float8 as high, d.energy::float8 as energy,
            86400 as "stepS"
     from history_series s join history_day d on d.series_id = s.id
     where ${where} and d.day >= (cast(:from as timestamptz) at time zone :timeZone)::date
       and d.day <= (cast(:to as timestamptz) at time zone :timeZone)::date
     order by d.day, s.id desc`,
    { id, timeZone, from, to },
  );
  return rows;
}

/**
 * Imported points of steps for which nothing was measured, and the stretches that they make (epoch s).
 * `measured`: instants of what was; a point within half a step of one of them is left out.
 */
export function whereNothingElse(
  imported: readonly ImportedPoint[],
  measured: readonly number[],
  stepS: number,
): { points: ImportedPoint[]; stretches: [number, number][] } {
  const half = Math.max(900, stepS) / 2;
  const sorted = [...measured].sort((a, b) => a - b);
  let k = 0;
  const points = imported.filter((p) => {
    while (k < sorted.length && (sorted[k] ?? Infinity) < p.at - half) k++;
    return !((sorted[k] ?? Infinity) <= p.at + half);
  });
  const stretches: [number, number][] = [];
  for (const p of points) {
    const last = stretches.at(-1);
    const reach = Math.max(half, p.stepS / 2);
    // a night without readings does not end a stretch
    if (last && p.at - reach - last[1] <= 86_400) last[1] = p.at + reach;
    else stretches.push([p.at - reach, p.at + reach]);
  }
  return { points, stretches };
}

/**
 * One quantity of every unit of a string, where an import tells of single units: means over steps of `stepS` seconds,
 * by their beginning; arrays in slot order.
 */
export async function importedUnits(
  tx: Tx,
  stringId: number,
  { from, to }: { from: Date; to: Date },
  quantity: ImportedQuantity | 'temperature',
  stepS: number,
  slots: number,
): Promise<{ at: number; values: (number | null)[] }[]> {
  const value = quantity === 'temperature' ? 'r.temperature' : VALUES[quantity];
  const { rows } = await tx.raw<{ rows: { at: number; position: number; value: number | null }[] }>(
    `select distinct on (step, position) extract(epoch from step)::float8 as at, position, value
     from (select date_bin(make_interval(secs => :stepS), r.at, timestamptz '2000-01-01 00:00Z') as step, s.position,
                  s.id as series, avg(${value})::float8 as value
           from history_series s join history_reading r on r.series_id = s.id
           where s.string_id = :stringId and s.position between 1 and :slots and r.at >= :from and r.at < :to
           group by 1, 2, 3) x
     order by step, position, series desc`,
    { stringId, stepS, slots, from, to },
  );
  const out: { at: number; values: (number | null)[] }[] = [];
  for (const { at, position, value: v } of rows) {
    let row = out.at(-1);
    if (row?.at !== at) out.push((row = { at, values: new Array<number | null>(slots).fill(null) }));
    row.values[position - 1] = v;
  }
  return out;
}

export interface ImportedSiteDay {
  /** The site's local date. */
  day: string;
  siteId: number;
  /** Wh; null: the files say nothing of it. */
  energyAc: number | null;
  energyDc: number | null;
}

/**
 * Energy of whole sites by day, from imports, for days of which nothing was measured (no row of site_day). AC is what
 * inverters gave; DC the strings, or the inputs where the files tell of those.
 */
export async function importedSiteDays(
  tx: Tx,
  siteIds: readonly number[],
  from: string,
  to: string,
): Promise<ImportedSiteDay[]> {
  const { rows } = await tx.raw<{ rows: ImportedSiteDay[] }>(
    `with of_part as (
       select distinct on (d.day, s.site_id, s.string_id, s.input_id, s.inverter_id) d.day, s.site_id, d.energy,
         case when s.inverter_id is not null then 'ac' when s.string_id is not null then 'string' else 'input' end as side
       from history_series s join history_day d on d.series_id = s.id
       where s.site_id = any (:siteIds::int4[]) and s.position is null and d.day between :from::date and :to::date
         and not exists (select from site_day m where m.site_id = s.site_id and m.day = d.day)
       order by d.day, s.site_id, s.string_id, s.input_id, s.inverter_id, s.id desc)
     select to_char(day, 'YYYY-MM-DD') as day, site_id as "siteId",
            sum(energy) filter (where side = 'ac')::float8 as "energyAc",
            coalesce(sum(energy) filter (where side = 'string'), sum(energy) filter (where side = 'input'))::float8 as "energyDc"
     from of_part group by day, site_id order by day, site_id`,
    { siteIds: [...siteIds], from, to },
  );
  return rows;
}
