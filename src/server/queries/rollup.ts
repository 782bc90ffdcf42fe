import type { Knex } from 'knex';
import type pg from 'pg';
import { framesOf } from './frames';

/**
 * Roll-ups by SQL: quarters of an hour from frames, a site's local days from quarters. Every statement replaces what
 * it makes, so repeating one changes nothing. Voltages cV, currents mA, energy dW·min in quarters and Wh in days.
 */

export const QUARTER_MS = 15 * 60_000;

/** The quarter that an instant lies in. */
export const quarterOf = (at: Date): Date => new Date(Math.floor(at.getTime() / QUARTER_MS) * QUARTER_MS);

/** Quarters before this are closed and rolled up; where nothing was yet: the quarter of the oldest frame, or null. */
export async function rollupWatermark(db: Knex): Promise<Date | null> {
  const { rows } = await db.raw<{ rows: { quarter: Date | null }[] }>(
    `select coalesce((select quarter from rollup_watermark),
       (select date_bin('15 min', min(at), '2000-01-01Z') from string_frame)) as quarter`,
  );
  return rows[0]?.quarter ?? null;
}

export async function setRollupWatermark(db: Knex, quarter: Date): Promise<void> {
  await db.raw(
    `insert into rollup_watermark (quarter) values (?)
     on conflict (only_row) do update set quarter = greatest(rollup_watermark.quarter, excluded.quarter)`,
    [quarter.toISOString()],
  );
}

export async function allSites(db: Knex): Promise<number[]> {
  const { rows } = await db.raw<{ rows: { id: number }[] }>('select id from site order by id');
  return rows.map((r) => r.id);
}

const QUARTER_FRAMES = framesOf({
  columns: ['voltage_sum', 'power_sum', 'voltage', 'voltage_in', 'current', 'power', 'temperature', 'state'],
  strings: (id) => `${id} = s.id`,
  from: ':from::timestamptz',
  to: `(:from::timestamptz + interval '15 min')`,
});

/**
 * A quarter of strings from their frames. A frame stands for one report interval; frames that came between, because
 * a state changed, add no time: minutes are capped by the quarter. A unit's own power where it reports one, else
 * output voltage by current, else input voltage by current while it passes.
 */
export async function rollStringQuarter(
  db: Knex,
  quarter: Date,
  which: { siteId: number } | { stringIds: readonly number[] },
): Promise<void> {
  const chosen = 'siteId' in which ? 's.site_id = :which' : 's.id = any (:which::int4[])';
  await db.raw(
    `with f as materialized (
       select f.*, site.report_interval_s / 60.0 as minutes
       from string s join site on site.id = s.site_id
         cross join lateral ${QUARTER_FRAMES} f
       where ${chosen}),
     whole as (
       select string_id, count(*) as frames, avg(voltage_sum) as v, min(voltage_sum) as v_min, max(voltage_sum) as v_max,
         avg(power_sum) * least(15, count(*) * max(minutes)) as energy
       from f group by string_id),
     unit as (
       select f.string_id, u.o, avg(coalesce(u.v, u.vi)) as v, avg(u.c) as c, max(u.t) as t,
         avg(coalesce(u.p, u.v::int8 * u.c / 10000.0, case when u.s = 1 then u.vi::int8 * u.c / 10000.0 end))
           * least(15, count(u.s) * max(f.minutes)) as energy
       from f cross join lateral unnest(f.voltage, f.voltage_in, f.current, f.power, f.temperature, f.state)
         with ordinality u(v, vi, c, p, t, s, o)
       group by f.string_id, u.o),
     units as (
       select string_id, array_agg(round(v)::int2 order by o) as v, array_agg(round(c)::int2 order by o) as c,
         array_agg(round(energy)::int4 order by o) as energy, array_agg(t order by o) as t
       from unit group by string_id)
     insert into string_quarter (at, string_id, frames, voltage_avg, voltage_min, voltage_max, energy, unit_voltage,
       unit_current, unit_energy, unit_temperature_max)
     select :from, w.string_id, w.frames, round(w.v), w.v_min, w.v_max, round(w.energy), u.v, u.c, u.energy, u.t
     from whole w join units u using (string_id) order by w.string_id
     on conflict (string_id, at) do update set frames = excluded.frames, voltage_avg = excluded.voltage_avg,
       voltage_min = excluded.voltage_min, voltage_max = excluded.voltage_max, energy = excluded.energy,
       unit_voltage = excluded.unit_voltage, unit_current = excluded.unit_current, unit_energy = excluded.unit_energy,
       unit_temperature_max = excluded.unit_temperature_max`,
    { from: quarter.toISOString(), which: 'siteId' in which ? which.siteId : [...which.stringIds] },
  );
}

/** A quarter of sites from their inverters and irradiance sensors. */
export async function rollSiteQuarter(db: Knex, quarter: Date, siteIds: readonly number[]): Promise<void> {
  await db.raw(
    `with made as (
       select site_id, sum(p) as ac_power from (
         select v.site_id, v.id, avg(f.ac_power) as p
         from inverter v join inverter_frame f on f.inverter_id = v.id and f.at >= :from and f.at < :from::timestamptz + interval '15 min'
         where v.site_id = any (:siteIds::int4[]) group by v.site_id, v.id) i
       where p is not null group by site_id),
     light as (
       select n.site_id, avg(f.irradiance) / 4 as insolation
       from sensor n join weather_frame f on f.sensor_id = n.id and f.at >= :from and f.at < :from::timestamptz + interval '15 min'
       where n.site_id = any (:siteIds::int4[]) and n.kind = 'poa_global' group by n.site_id)
     insert into site_quarter (at, site_id, ac_power, poa_insolation)
     select :from, site_id, round(coalesce(m.ac_power, 0)), round(l.insolation)
     from made m full join light l using (site_id) order by site_id
     on conflict (site_id, at) do update set ac_power = excluded.ac_power, poa_insolation = excluded.poa_insolation`,
    { from: quarter.toISOString(), siteIds: [...siteIds] },
  );
}

/** Local days that a quarter of these sites lies in. */
export async function localDays(
  db: Knex,
  quarter: Date,
  siteIds: readonly number[],
): Promise<{ siteId: number; day: string }[]> {
  const { rows } = await db.raw<{ rows: { siteId: number; day: string }[] }>(
    `select id as "siteId", (?::timestamptz at time zone time_zone)::date::text as day from site where id = any (?::int4[])`,
    [quarter.toISOString(), [...siteIds]],
  );
  return rows;
}

/** A site's local day, which has 92, 96 or 100 quarters: its strings, then the site. */
export async function rollDay(db: Knex, siteId: number, day: string): Promise<void> {
  await db.raw(
    `with span as (
       select (:day::date)::timestamp at time zone time_zone as from_at, (:day::date + 1)::timestamp at time zone time_zone as to_at
       from site where id = :siteId),
     q as materialized (
       select q.* from span, string s join string_quarter q on q.string_id = s.id
       where s.site_id = :siteId and q.at >= span.from_at and q.at < span.to_at),
     units as (
       select string_id, array_agg(e order by o) as energy from (
         select q.string_id, u.o, round(sum(u.e) / 600.0)::int4 as e
         from q cross join lateral unnest(q.unit_energy) with ordinality u(e, o) group by q.string_id, u.o) x
       group by string_id)
     insert into string_day (day, string_id, site_id, frames, voltage_avg, voltage_max, energy, unit_energy)
     select :day, q.string_id, :siteId, sum(q.frames), round(coalesce(avg(q.voltage_avg) filter (where q.energy > 0), avg(q.voltage_avg))),
       max(q.voltage_max), round(sum(q.energy) / 600.0), (select u.energy from units u where u.string_id = q.string_id)
     from q group by q.string_id order by q.string_id
     on conflict (string_id, day) do update set frames = excluded.frames, voltage_avg = excluded.voltage_avg,
       voltage_max = excluded.voltage_max, energy = excluded.energy, unit_energy = excluded.unit_energy`,
    { day, siteId },
  );
  await rollSiteDay(db, siteId, day);
}

/**
 * Lost minutes: enough light to run by (60 W/m² in the plane) and no AC power, by minutes that both were reported in.
 * What the weather allowed: nameplate power by the plane's insolation, corrected for module temperature where it is
 * measured (IEC 61724-1, temperature-corrected reference yield); NULL without a sensor in the plane. Complete: frames
 * over those that the daylight quarters of the day should have brought. "Lit" sums run over quarters with light and
 * power both, "warm" ones over those with module temperature too (domain/output/day-figures).
 */
async function rollSiteDay(db: Knex, siteId: number, day: string): Promise<void> {
  await db.raw(
    `with span as (
       select id as site_id, report_interval_s, (:day::date)::timestamp at time zone time_zone as from_at,
         (:day::date + 1)::timestamp at time zone time_zone as to_at
       from site where id = :siteId),
     ac as (select sum(ac_power) / 4.0 as energy from site_quarter q, span where q.site_id = :siteId and q.at >= from_at and q.at < to_at),
     dc as (select coalesce(sum(energy), 0) as energy from string_day where site_id = :siteId and day = :day),
     made as (
       select date_trunc('minute', f.at) as minute, sum(f.ac_power) as p, bool_or(f.status = 'grid_lost') as grid_lost,
         bool_or(f.status in ('derated', 'curtailed')) as limited
       from span, inverter v join inverter_frame f on f.inverter_id = v.id
       where v.site_id = :siteId and f.at >= from_at and f.at < to_at group by 1),
     light as (
       select date_trunc('minute', f.at) as minute, avg(f.irradiance) as poa, avg(f.temperature_module) / 10.0 as t
       from span, sensor n join weather_frame f on f.sensor_id = n.id
       where n.site_id = :siteId and n.kind = 'poa_global' and f.at >= from_at and f.at < to_at group by 1),
     nameplate as (
       select sum(m.vmp_ref::float8 * m.imp_ref) as p0,
         sum(m.gamma_pmp::float8 * m.vmp_ref * m.imp_ref) / nullif(sum(m.vmp_ref::float8 * m.imp_ref), 0) as gamma
       from slot join module_type m on m.id = slot.module_type_id where slot.site_id = :siteId),
     lost as (
       select count(*) filter (where poa > 60) as lit, count(*) filter (where poa > 60 and limited) as limited,
         count(*) filter (where poa > 60 and p <= 0) as minutes, count(*) filter (where poa > 60 and p <= 0 and grid_lost) as grid,
         coalesce(sum(poa) filter (where poa > 60 and p <= 0), 0) / 60000 * max(p0) as energy,
         coalesce(sum(poa) filter (where poa > 60 and p <= 0 and grid_lost), 0) / 60000 * max(p0) as energy_grid
       from made join light using (minute), nameplate),
     quarters as (
       select date_bin('15 min', minute, '2000-01-01Z') as at, avg(poa) / 4 as insolation, avg(t) as t from light group by 1),
     allowed as (
       select sum(insolation * (1 + gamma * (coalesce(t, 25) - 25))) / 1000 * max(p0) as energy from nameplate, quarters),
     lit as (
       select count(*) as quarters, sum(q.insolation) as insolation, sum(a.ac_power) / 4.0 as ac,
         sum(coalesce((select sum(d.energy) / 600.0 from string s join string_quarter d on d.string_id = s.id and d.at = q.at
                       where s.site_id = :siteId), 0)) as dc,
         count(q.t) as warm, coalesce(sum(q.insolation) filter (where q.t is not null), 0) as insolation_warm,
         coalesce(sum(q.insolation * q.t), 0) as insolation_temperature,
         coalesce(sum(a.ac_power) filter (where q.t is not null), 0) / 4.0 as ac_warm
       from quarters q join site_quarter a on a.site_id = :siteId and a.at = q.at
       where q.insolation is not null
         and exists (select from made where made.minute >= q.at and made.minute < q.at + interval '15 min' and made.p is not null)
       having count(*) > 0),
     come as (
       select sum(least(q.frames, ceil(900.0 / report_interval_s))) as n, count(*) * max(ceil(900.0 / report_interval_s)) as due
       from span, string s join string_quarter q on q.string_id = s.id
       where s.site_id = :siteId and q.at >= from_at and q.at < to_at)
     insert into site_day (day, site_id, energy_ac, energy_dc, energy_expected, lost_minutes, lost_minutes_grid, complete,
       nameplate, gamma_pmp, quarters_due, quarters_lit, insolation, energy_ac_lit, energy_dc_lit, quarters_warm,
       insolation_warm, insolation_temperature, energy_ac_warm, minutes_lit, limited_minutes, lost_energy, lost_energy_grid)
     select :day, :siteId, round(coalesce(ac.energy, 0)), dc.energy, round(allowed.energy), least(lost.minutes, 1500), least(lost.grid, 1500),
       coalesce(least(1, come.n / nullif(come.due, 0)), 1),
       round(p0), gamma, extract(epoch from to_at - from_at) / 900, lit.quarters, lit.insolation, round(lit.ac), round(lit.dc), lit.warm,
       lit.insolation_warm, lit.insolation_temperature, round(lit.ac_warm), least(lost.lit, 1500), least(lost.limited, 1500),
       round(lost.energy), round(lost.energy_grid)
     from span, ac, dc, lost, allowed, come, nameplate left join lit on true where ac.energy is not null or dc.energy > 0
     on conflict (site_id, day) do update set energy_ac = excluded.energy_ac, energy_dc = excluded.energy_dc,
       energy_expected = excluded.energy_expected, lost_minutes = excluded.lost_minutes,
       lost_minutes_grid = excluded.lost_minutes_grid, complete = excluded.complete, nameplate = excluded.nameplate,
       gamma_pmp = excluded.gamma_pmp, quarters_due = excluded.quarters_due, quarters_lit = excluded.quarters_lit,
       insolation = excluded.insolation, energy_ac_lit = excluded.energy_ac_lit, energy_dc_lit = excluded.energy_dc_lit,
       quarters_warm = excluded.quarters_warm, insolation_warm = excluded.insolation_warm,
       insolation_temperature = excluded.insolation_temperature, energy_ac_warm = excluded.energy_ac_warm,
       minutes_lit = excluded.minutes_lit, limited_minutes = excluded.limited_minutes, lost_energy = excluded.lost_energy,
       lost_energy_grid = excluded.lost_energy_grid`,
    { day, siteId },
  );
}

/** Takes some quarters that late frames made wrong; whoever takes them redoes them in the same transaction. */
export async function takeDirty(
  db: Knex,
  limit: number,
): Promise<{ quarter: Date; stringId: number; siteId: number }[]> {
  const { rows } = await db.raw<{ rows: { quarter: Date; stringId: number; siteId: number }[] }>(
    `with taken as (
       delete from rollup_dirty where (quarter, string_id) in (
         select quarter, string_id from rollup_dirty order by quarter, string_id limit ? for update skip locked)
       returning quarter, string_id)
     select t.quarter, t.string_id as "stringId", s.site_id as "siteId" from taken t join string s on s.id = t.string_id`,
    [limit],
  );
  return rows;
}

export interface LateFrame {
  id: number;
  at: Date;
  frame: unknown;
}

/** Parked frames that are young enough to be kept and whose day (yyyy-mm-dd, UTC) is none of these, oldest arrival first. */
export async function lateFrames(
  db: Knex,
  after: Date,
  closedDays: readonly string[],
  limit: number,
): Promise<LateFrame[]> {
  const { rows } = await db.raw<{ rows: LateFrame[] }>(
    `select l.id, l.at, l.frame from late_frame l join string s on s.id = l.string_id
     where l.at >= ? and (l.at at time zone 'UTC')::date <> all (?::date[]) order by l.id limit ?`,
    [after.toISOString(), [...closedDays], limit],
  );
  return rows;
}

export async function dropLateFrames(db: Knex, ids: readonly number[]): Promise<void> {
  await db.raw('delete from late_frame where id = any (?::int8[])', [[...ids]]);
}

/** The same on the connection of whoever merged them. */
export async function forgetLateFrames(client: pg.ClientBase, ids: readonly number[]): Promise<void> {
  await client.query('delete from late_frame where id = any ($1::int8[])', [[...ids]]);
}

/** Quarters of these instants are to be rolled up again. */
export async function markDirty(
  client: pg.ClientBase,
  frames: readonly { at: Date; stringId: number }[],
): Promise<void> {
  await client.query(
    `insert into rollup_dirty (quarter, string_id)
     select distinct date_bin('15 min', at, '2000-01-01Z'), string_id from unnest($1::timestamptz[], $2::int4[]) x(at, string_id)
     order by 1, 2 on conflict do nothing`,
    [frames.map((f) => f.at), frames.map((f) => f.stringId)],
  );
}

/** Gives up raw readings, packed or not, before this UTC day; gives the number of partitions dropped. */
export async function dropDaysBefore(db: Knex, day: Date): Promise<number> {
  const { rows } = await db.raw<{ rows: { dropped: number }[] }>(
    'select drop_days_before(?::date) as dropped',
    [day.toISOString().slice(0, 10)],
  );
  return rows[0]?.dropped ?? 0;
}

/** Gives up quarters of an hour before this UTC day; days stay. Gives the number of partitions dropped. */
export async function dropQuartersBefore(db: Knex, day: Date): Promise<number> {
  const { rows } = await db.raw<{ rows: { dropped: number }[] }>(
    'select drop_quarters_before(?::date) as dropped',
    [day.toISOString().slice(0, 10)],
  );
  return rows[0]?.dropped ?? 0;
}

export async function ensureDaysAhead(db: Knex, from: Date, to: Date): Promise<void> {
  await db.raw('select ensure_days(?::date, ?::date)', [
    from.toISOString().slice(0, 10),
    to.toISOString().slice(0, 10),
  ]);
}
