import type { EventItem } from '../../schemas/api/now';
import type { InForce } from '../../domain/verdicts/codes';
import type { Tx } from '../db/transaction';

/** Readings of one string over time, and what they are compared with. Instants in epoch seconds, volts. */
export interface HistoryPoint {
  at: number;
  voltage: number;
  low: number;
  high: number;
  /** Wh in the step; null where nothing tells. */
  energy: number | null;
}
interface Window {
  from: Date;
  to: Date;
}

/** Means of reports over steps of `stepS` seconds; with the report interval the reports as they came. */
export async function stringMinutes(
  tx: Tx,
  stringId: number,
  window: Window,
  stepS: number,
): Promise<HistoryPoint[]> {
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select extract(epoch from step)::int8 as at, avg(voltage_sum)::float8 / 100 as voltage,
            min(voltage_sum)::float8 / 100 as low, max(voltage_sum)::float8 / 100 as high,
            avg(power_sum)::float8 / 10 * :stepS / 3600 as energy
     from (select date_bin(make_interval(secs => :stepS), at, timestamptz '2000-01-01 00:00Z') as step,
                  voltage_sum, power_sum
           from string_frame where string_id = :stringId and at >= :from and at < :to) f
     group by step order by step`,
    { stringId, stepS, ...window },
  );
  return rows;
}

export async function stringQuarters(tx: Tx, stringId: number, window: Window): Promise<HistoryPoint[]> {
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select extract(epoch from at)::int8 + 450 as at, voltage_avg / 100.0::float8 as voltage,
            voltage_min / 100.0::float8 as low, voltage_max / 100.0::float8 as high, energy / 600.0::float8 as energy
     from string_quarter where string_id = :stringId and at >= :from and at < :to order by at`,
    { stringId, ...window },
  );
  return rows;
}

/** Days as instants of the site's noon. */
export async function stringDays(
  tx: Tx,
  stringId: number,
  window: Window,
  timeZone: string,
): Promise<HistoryPoint[]> {
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select extract(epoch from (day + time '12:00') at time zone :timeZone)::int8 as at,
            voltage_avg / 100.0::float8 as voltage, voltage_avg / 100.0::float8 as low,
            voltage_max / 100.0::float8 as high, energy::float8 as energy
     from string_day
     where string_id = :stringId and day >= (:from::timestamptz at time zone :timeZone)::date
       and day <= (:to::timestamptz at time zone :timeZone)::date
     order by day`,
    { stringId, timeZone, ...window },
  );
  return rows;
}

/** For strings whose units tell nothing: the voltage at their input, mean over steps of `stepS` seconds. */
export async function inputHistory(
  tx: Tx,
  inputId: number,
  window: Window,
  stepS: number,
): Promise<HistoryPoint[]> {
  const { rows } = await tx.raw<{ rows: HistoryPoint[] }>(
    `select extract(epoch from step)::int8 as at, avg(voltage)::float8 / 10 as voltage,
            min(voltage)::float8 / 10 as low, max(voltage)::float8 / 10 as high, null as energy
     from (select date_bin(make_interval(secs => :stepS), at, timestamptz '2000-01-01 00:00Z') as step, voltage
           from input_frame where input_id = :inputId and at >= :from and at < :to and voltage is not null) f
     group by step order by step`,
    { inputId, stepS, ...window },
  );
  return rows;
}

const SOURCES = {
  minute: `select string_id, date_bin(make_interval(secs => :stepS), at, timestamptz '2000-01-01 00:00Z') as step,
                  voltage_sum as voltage
           from string_frame where string_id = any (:ids) and at >= :from and at < :to`,
  quarter: `select string_id, at as step, voltage_avg as voltage
            from string_quarter where string_id = any (:ids) and at >= :from and at < :to`,
  day: `select string_id, (day + time '12:00') at time zone :timeZone as step, voltage_avg as voltage
        from string_day where string_id = any (:ids) and day >= (:from::timestamptz at time zone :timeZone)::date
          and day <= (:to::timestamptz at time zone :timeZone)::date`,
} as const;

export interface SiblingStep {
  at: number;
  /** V a unit: median over the siblings that pass, and its quartiles. */
  typical: number;
  low: number;
  high: number;
  strings: number;
}

/**
 * What a passing unit of the siblings gave, step by step. Siblings below `passingFrom` volts a unit are in shutdown or
 * dark and say nothing of what is usual.
 */
export async function siblingHistory(
  tx: Tx,
  siblings: readonly { id: number; units: number }[],
  window: Window,
  options: { resolution: keyof typeof SOURCES; stepS: number; timeZone: string; passingFrom: number },
): Promise<SiblingStep[]> {
  if (siblings.length === 0) return [];
  const { rows } = await tx.raw<{ rows: SiblingStep[] }>(
    `with told as (${SOURCES[options.resolution]}),
     each as (
       select step, avg(t.voltage)::float8 / 100 / u.units as v
       from told t join unnest(:ids::int4[], :units::int4[]) as u(id, units) on u.id = t.string_id
       group by step, t.string_id, u.units)
     select extract(epoch from step)::int8 as at, percentile_cont(0.5) within group (order by v) as typical,
            percentile_cont(0.25) within group (order by v) as low,
            percentile_cont(0.75) within group (order by v) as high, count(*)::int as strings
     from each where v >= :passingFrom group by step order by step`,
    {
      ids: siblings.map((s) => s.id),
      units: siblings.map((s) => s.units),
      stepS: options.stepS,
      timeZone: options.timeZone,
      passingFrom: options.passingFrom,
      ...window,
    },
  );
  return rows;
}

/** Wh of the string and of each sibling a unit, over reports of the window. */
export async function energyAgainst(
  tx: Tx,
  stringId: number,
  siblingIds: readonly number[],
  window: Window,
): Promise<{ stringId: number; wh: number; reports: number }[]> {
  const { rows } = await tx.raw<{ rows: { stringId: number; wh: number; reports: number }[] }>(
    `with spaced as (
       select string_id, power_sum,
              extract(epoch from least(coalesce(lead(at) over (partition by string_id order by at), :to::timestamptz) - at, interval '5 minutes'))
                ::float8 as seconds
       from string_frame where string_id = any (:ids) and at >= :from and at < :to)
     select string_id as "stringId", coalesce(sum(power_sum / 10.0 * seconds / 3600), 0)::float8 as wh,
            count(*)::int as reports
     from spaced group by string_id`,
    { ids: [stringId, ...siblingIds], ...window },
  );
  return rows;
}

/** Events of the string and those of its site that concern every string, newest first. */
export async function eventsOfString(
  tx: Tx,
  string: { id: number; siteId: number },
  window: Window,
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
    { id: string.id, siteId: string.siteId, limit, ...window },
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString(), recordedAt: r.recordedAt.toISOString() }));
}

/** Commands of the string's zone that held at some time of the window, oldest first. */
export async function commandsOfZone(
  tx: Tx,
  zoneId: number,
  window: Window,
): Promise<{ since: Date; inForce: InForce }[]> {
  const { rows } = await tx.raw<{ rows: { since: Date; inForce: InForce }[] }>(
    `select since, in_force as "inForce" from command where zone_id = :zoneId and since < :to
       and since >= coalesce((select max(since) from command where zone_id = :zoneId and since <= :from), '-infinity')
     order by since`,
    { zoneId, ...window },
  );
  return rows;
}

const UNIT_COLUMNS = {
  voltage: ['voltage', 100],
  voltageIn: ['voltage_in', 100],
  current: ['current', 1000],
  temperature: ['temperature', 10],
  // where the unit reports no power it is voltage times current, dW from cV and mA
  power: [
    `coalesce(power, (select array_agg((v::int8 * c / 10000)::int2 order by o)
       from unnest(voltage, current) with ordinality u(v, c, o)))`,
    10,
  ],
} as const;
export type UnitColumn = keyof typeof UNIT_COLUMNS;

/** One quantity of every unit, report by report; arrays in slot order. */
export async function unitMinutes(
  tx: Tx,
  stringId: number,
  window: Window,
  column: UnitColumn,
): Promise<{ at: number; values: (number | null)[] | null }[]> {
  const [name, scale] = UNIT_COLUMNS[column];
  const { rows } = await tx.raw<{ rows: { at: number; values: (number | null)[] | null }[] }>(
    `select extract(epoch from at)::int8 as at, to_json(${name}) as values
     from string_frame where string_id = :stringId and at >= :from and at < :to order by at`,
    { stringId, ...window },
  );
  for (const row of rows) row.values = row.values?.map((v) => (v === null ? null : v / scale)) ?? null;
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
