import type { EventItem } from '../../schemas/api/now';
import type { InForce } from '../../domain/verdicts/codes';
import type { Tx } from '../db/transaction';
import { anyString, framesOf, oneString, SPAN, type FrameColumn } from './frames';

/** Readings of one string over time, and what they are compared with. Instants in epoch seconds; V, A, W. */
export interface HistoryPoint {
  at: number;
  value: number;
  low: number;
  high: number;
  /** Wh in the step; null where nothing tells. */
  energy: number | null;
}
export interface Window {
  from: Date;
  to: Date;
}
export type Quantity = 'voltage' | 'current' | 'power';

/**
 * One report's figure, in so many parts of a V, W or A: units of a string carry one current, so the middle one stands for it.
 * Whole numbers are summed exactly, in whatever order they come, and quickly.
 */
const OF_FRAME: Record<Quantity, { value: string; per: number }> = {
  voltage: { value: 'voltage_sum', per: 100 },
  power: { value: 'power_sum', per: 10 },
  current: {
    value: '(select percentile_cont(0.5) within group (order by c) from unnest(current) c)',
    per: 1000,
  },
};
const FRAME_COLUMNS: Record<Quantity, readonly FrameColumn[]> = {
  voltage: ['voltage_sum', 'power_sum'],
  power: ['voltage_sum', 'power_sum'],
  current: ['voltage_sum', 'power_sum', 'current'],
};
const OF_QUARTER: Record<Quantity, { value: string; low: string; high: string }> = {
  voltage: {
    value: 'voltage_avg / 100.0::float8',
    low: 'voltage_min / 100.0::float8',
    high: 'voltage_max / 100.0::float8',
  },
  power: {
    value: 'energy / 150.0::float8',
    low: 'energy / 150.0::float8',
    high: 'energy / 150.0::float8',
  },
  current: {
    value: '(select percentile_cont(0.5) within group (order by c) from unnest(unit_current) c) / 1000.0',
    low: 'null::float8',
    high: 'null::float8',
  },
};

/** Means of reports over steps of `stepS` seconds, lowest and highest kept; with the report interval the reports as they came. */
export async function stringMinutes(
  tx: Tx,
  stringId: number,
  { from, to }: Window,
  stepS: number,
  quantity: Quantity,
): Promise<HistoryPoint[]> {
  const { value, per } = OF_FRAME[quantity];
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select extract(epoch from step)::int8 as at, avg(v)::float8 / ${per} as value, min(v)::float8 / ${per} as low,
            max(v)::float8 / ${per} as high, avg(power_sum)::float8 / 10 * :stepS / 3600 as energy
     from (select date_bin(make_interval(secs => :stepS), at, timestamptz '2000-01-01 00:00Z') as step,
                  ${value} as v, power_sum
           from ${framesOf({ columns: FRAME_COLUMNS[quantity], strings: oneString(':stringId'), ...SPAN })} r) f
     where v is not null group by step order by step`,
    { stringId, stepS, from, to },
  );
  return rows;
}

export async function stringQuarters(
  tx: Tx,
  stringId: number,
  { from, to }: Window,
  quantity: Quantity,
): Promise<HistoryPoint[]> {
  const of = OF_QUARTER[quantity];
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select at, v::float8 as value, coalesce(low, v)::float8 as low, coalesce(high, v)::float8 as high, energy
     from (select extract(epoch from at)::int8 + 450 as at, ${of.value} as v, ${of.low} as low, ${of.high} as high,
                  energy / 600.0::float8 as energy
           from string_quarter where string_id = :stringId and at >= :from and at < :to) q
     where v is not null order by at`,
    { stringId, from, to },
  );
  return rows;
}

/** Days as instants of the site's noon: voltage, or what the day made (kWh). */
export async function stringDays(
  tx: Tx,
  stringId: number,
  { from, to }: Window,
  timeZone: string,
  quantity: 'voltage' | 'power',
): Promise<HistoryPoint[]> {
  const [value, high] =
    quantity === 'voltage'
      ? ['voltage_avg / 100.0::float8', 'voltage_max / 100.0::float8']
      : ['energy / 1000.0::float8', 'energy / 1000.0::float8'];
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select extract(epoch from (day + time '12:00') at time zone :timeZone)::int8 as at,
            ${value} as value, ${value} as low, ${high} as high, energy::float8 as energy
     from string_day
     where string_id = :stringId and day >= (:from::timestamptz at time zone :timeZone)::date
       and day <= (:to::timestamptz at time zone :timeZone)::date
     order by day`,
    { stringId, timeZone, from, to },
  );
  return rows;
}

const OF_INPUT: Record<Quantity, string> = {
  voltage: 'voltage / 10.0',
  current: 'current / 100.0',
  power: 'voltage::float8 * current / 1000.0',
};

/** For strings whose units tell nothing: what their input measures, mean over steps of `stepS` seconds. */
export async function inputHistory(
  tx: Tx,
  inputId: number,
  { from, to }: Window,
  stepS: number,
  quantity: Quantity,
): Promise<HistoryPoint[]> {
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select extract(epoch from step)::int8 as at, avg(v)::float8 as value, min(v)::float8 as low, max(v)::float8 as high,
            null as energy
     from (select date_bin(make_interval(secs => :stepS), at, timestamptz '2000-01-01 00:00Z') as step,
                  ${OF_INPUT[quantity]} as v
           from input_frame where input_id = :inputId and at >= :from and at < :to) f
     where v is not null group by step order by step`,
    { inputId, stepS, from, to },
  );
  return rows;
}

/** The same of local days, as instants of their noon: means of their quarters, or what these come to (kWh). */
export async function inputDays(
  tx: Tx,
  inputId: number,
  { from, to }: Window,
  timeZone: string,
  quantity: Quantity,
): Promise<HistoryPoint[]> {
  const made = 'sum(v) / 4000';
  const [value, low, high] = quantity === 'power' ? [made, made, made] : ['avg(v)', 'min(low)', 'max(high)'];
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select extract(epoch from (day + time '12:00') at time zone :timeZone)::int8 as at, ${value}::float8 as value,
            ${low}::float8 as low, ${high}::float8 as high, null as energy
     from (select (at at time zone :timeZone)::date as day, avg(v) as v, min(v) as low, max(v) as high
           from (select at, ${OF_INPUT[quantity]} as v from input_frame
                 where input_id = :inputId and at >= :from and at < :to) f
           where v is not null group by day, date_bin('15 min', at, timestamptz '2000-01-01 00:00Z')) q
     group by day order by day`,
    { inputId, timeZone, from, to },
  );
  return rows;
}

interface SiblingOptions {
  resolution: 'minute' | 'quarter' | 'day';
  stepS: number;
  timeZone: string;
  passingFrom: number;
  quantity: Quantity;
}

/** What each string told in a step: its voltage (cV), and the quantity itself in V, A, W (of reports in parts of these), or kWh a day. */
const sourceOf = ({ resolution, quantity }: SiblingOptions): string =>
  ({
    minute: `select string_id, date_bin(make_interval(secs => :stepS), at, timestamptz '2000-01-01 00:00Z') as step,
                    voltage_sum as voltage, ${OF_FRAME[quantity].value} as v
             from ${framesOf({ columns: FRAME_COLUMNS[quantity], strings: anyString, ...SPAN })} r`,
    quarter: `select string_id, at as step, voltage_avg as voltage, ${OF_QUARTER[quantity].value} as v
              from string_quarter where string_id = any (:ids) and at >= :from and at < :to`,
    day: `select string_id, (day + time '12:00') at time zone :timeZone as step, voltage_avg as voltage,
                 ${quantity === 'voltage' ? 'voltage_avg / 100.0::float8' : 'energy / 1000.0::float8'} as v
          from string_day where string_id = any (:ids) and day >= (:from::timestamptz at time zone :timeZone)::date
            and day <= (:to::timestamptz at time zone :timeZone)::date`,
  })[resolution];

/** Each sibling's figure a unit (a current is every unit's own), where it passes. */
const eachOf = (options: SiblingOptions): string => `
  with told as (${sourceOf(options)}),
  each as (
    select step, t.string_id, avg(t.v)::float8 / ${options.resolution === 'minute' ? OF_FRAME[options.quantity].per : 1}
             ${options.quantity === 'current' ? '' : '/ u.units'} as v
    from told t join unnest(:ids::int4[], :units::int4[]) as u(id, units) on u.id = t.string_id
    group by step, t.string_id, u.units having avg(t.voltage)::float8 / 100 / u.units >= :passingFrom)`;

export interface SiblingStep {
  at: number;
  /** A unit: median over the siblings that pass, and its quartiles. */
  typical: number;
  low: number;
  high: number;
  strings: number;
}

const siblingParameters = (
  siblings: readonly { id: number; units: number }[],
  { from, to }: Window,
  { stepS, timeZone, passingFrom }: SiblingOptions,
) => ({
  ids: siblings.map((s) => s.id),
  units: siblings.map((s) => s.units),
  stepS,
  timeZone,
  passingFrom,
  from,
  to,
});

/**
 * What a passing unit of the siblings gave, step by step. Siblings below `passingFrom` volts a unit are in shutdown or
 * dark and say nothing of what is usual.
 */
export async function siblingHistory(
  tx: Tx,
  siblings: readonly { id: number; units: number }[],
  window: Window,
  options: SiblingOptions,
): Promise<SiblingStep[]> {
  if (siblings.length === 0) return [];
  const { rows } = await tx.raw<{ rows: SiblingStep[] }>(
    `${eachOf(options)}
     select extract(epoch from step)::int8 as at, percentile_cont(0.5) within group (order by v) as typical,
            percentile_cont(0.25) within group (order by v) as low,
            percentile_cont(0.75) within group (order by v) as high, count(*)::int as strings
     from each where v is not null group by step order by step`,
    siblingParameters(siblings, window, options),
  );
  return rows;
}

/** Each sibling by itself, a unit, whether it passes or not. */
export async function siblingLines(
  tx: Tx,
  siblings: readonly { id: number; units: number }[],
  window: Window,
  options: Omit<SiblingOptions, 'passingFrom'>,
): Promise<{ stringId: number; at: number[]; values: number[] }[]> {
  if (siblings.length === 0) return [];
  const all = { ...options, passingFrom: -1000 };
  const { rows } = await tx.raw<{ rows: { stringId: number; at: number[]; values: number[] }[] }>(
    `${eachOf(all)}
     select string_id as "stringId", json_agg(extract(epoch from step)::int8 order by step) as at,
            json_agg(v order by step) as values
     from each where v is not null group by string_id`,
    siblingParameters(siblings, window, all),
  );
  return rows;
}

/** Light in the plane by its sensor, W/m², over steps; empty where there is none. */
export async function planeLight(
  tx: Tx,
  planeId: number,
  { from, to }: Window,
  stepS: number,
): Promise<{ at: number; poaGlobal: number; temperatureModule: number | null }[]> {
  const { rows } = await tx.raw<{
    rows: { at: number; poaGlobal: number; temperatureModule: number | null }[];
  }>(
    `select extract(epoch from date_bin(make_interval(secs => :stepS), f.at, timestamptz '2000-01-01 00:00Z'))::int8 as at,
            avg(f.irradiance)::float8 as "poaGlobal", avg(f.temperature_module)::float8 / 10 as "temperatureModule"
     from sensor n join weather_frame f on f.sensor_id = n.id
     where n.plane_id = :planeId and n.kind = 'poa_global' and f.irradiance is not null
       and f.at >= :from and f.at < :to
     group by 1 order by 1`,
    { planeId, stepS, from, to },
  );
  return rows;
}

/** Wh of the string and of each sibling a unit, over reports of the window. */
export async function energyAgainst(
  tx: Tx,
  stringId: number,
  siblingIds: readonly number[],
  { from, to }: Window,
): Promise<{ stringId: number; wh: number; reports: number }[]> {
  const { rows } = await tx.raw<{ rows: { stringId: number; wh: number; reports: number }[] }>(
    `with spaced as (
       select string_id, power_sum,
              extract(epoch from least(coalesce(lead(at) over (partition by string_id order by at), :to::timestamptz) - at, interval '5 minutes'))
                ::float8 as seconds
       from ${framesOf({ columns: ['power_sum'], strings: anyString, ...SPAN })} r)
     select string_id as "stringId", coalesce(sum(power_sum / 10.0 * seconds / 3600), 0)::float8 as wh,
            count(*)::int as reports
     from spaced group by string_id`,
    { ids: [stringId, ...siblingIds], from, to },
  );
  return rows;
}

/** Events of the string and those of its site that concern every string, newest first. */
export async function eventsOfString(
  tx: Tx,
  string: { id: number; siteId: number },
  { from, to }: Window,
  limit: number,
): Promise<EventItem[]> {
  const { rows } = await tx.raw<{
    rows: (Omit<EventItem, 'at' | 'recordedAt'> & { at: Date; recordedAt: Date })[];
  }>(
    `select e.id::text as id, e.at, e.recorded_at as "recordedAt", site.ref as "siteId", site.name as "siteName",
            s.ref as "stringId", s.name as "stringName", e.kind, e.detail
     from event e
     join site on site.id = e.site_id
     left join string s on s.id = e.string_id
     where e.site_id = :siteId and e.at >= :from and e.at < :to
       and (e.string_id = :id or (e.string_id is null and e.kind in ('command', 'inverter_status', 'logger_connected',
            'logger_lost', 'gateway_silent', 'gateway_back', 'roll_call_started', 'roll_call_stopped', 'roster_changed')))
       and not exists (select from event later where later.supersedes = e.id)
     order by e.at desc, e.id desc limit :limit`,
    { id: string.id, siteId: string.siteId, limit, from, to },
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString(), recordedAt: r.recordedAt.toISOString() }));
}

/** Commands of the string's zone that held at some time of the window, oldest first. */
export async function commandsOfZone(
  tx: Tx,
  zoneId: number,
  { from, to }: Window,
): Promise<{ since: Date; inForce: InForce }[]> {
  const { rows } = await tx.raw<{ rows: { since: Date; inForce: InForce }[] }>(
    `select since, in_force as "inForce" from command where zone_id = :zoneId and since < :to
       and since >= coalesce((select max(since) from command where zone_id = :zoneId and since <= :from), '-infinity')
     order by since`,
    { zoneId, from, to },
  );
  return rows;
}

/** The instant of a local day's first moment at a place, and of the day after `days` of them. */
export async function dayBounds(
  tx: Tx,
  day: string | null,
  at: Date,
  timeZone: string,
  days: number,
): Promise<{ from: Date; to: Date; today: boolean }> {
  const { rows } = await tx.raw<{ rows: { from: Date; to: Date; today: boolean }[] }>(
    `with last as (select coalesce(:day::date, (:at::timestamptz at time zone :timeZone)::date) as d)
     select (d - :days::int + 1)::timestamp at time zone :timeZone as "from",
            (d + 1)::timestamp at time zone :timeZone as "to",
            d = (:at::timestamptz at time zone :timeZone)::date as today
     from last`,
    { day, at, timeZone, days },
  );
  const found = rows[0];
  if (!found) throw new Error('a day has no bounds');
  return found;
}
