import type { Tx } from '../db/transaction';
import { after, framesOf, oneString, SPAN, type FrameColumn } from './frames';
import type { Window } from './string-history';

/** Single units of a string over time, and which unit sat where. Instants in epoch seconds. */

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
const MADE_OF: Record<UnitColumn, readonly FrameColumn[]> = {
  voltage: ['voltage'],
  voltageIn: ['voltage_in'],
  current: ['current'],
  temperature: ['temperature'],
  power: ['power', 'voltage', 'current'],
};
const reportsOf = (column: UnitColumn): string =>
  framesOf({ columns: MADE_OF[column], strings: oneString(':stringId'), ...SPAN });

/** One quantity of every unit, report by report; arrays in slot order. */
export async function unitMinutes(
  tx: Tx,
  stringId: number,
  { from, to }: Window,
  column: UnitColumn,
): Promise<{ at: number; values: (number | null)[] | null }[]> {
  const [name, scale] = UNIT_COLUMNS[column];
  const { rows } = await tx.raw<{ rows: { at: number; values: (number | null)[] | null }[] }>(
    `select extract(epoch from at)::int8 as at, to_json(${name}) as values
     from ${reportsOf(column)} f order by at`,
    { stringId, from, to },
  );
  for (const row of rows) row.values = row.values?.map((v) => (v === null ? null : v / scale)) ?? null;
  return rows;
}

const QUARTER_COLUMNS: Record<UnitColumn, [string, number] | null> = {
  voltage: ['unit_voltage', 100],
  voltageIn: ['unit_voltage', 100],
  current: ['unit_current', 1000],
  temperature: ['unit_temperature_max', 10],
  power: ['unit_energy', 150], // dW·min in a quarter of an hour
};

/** The same as means of 15 minutes (temperature: the highest), in the middle of each. */
export async function unitQuarters(
  tx: Tx,
  stringId: number,
  { from, to }: Window,
  column: UnitColumn,
): Promise<{ at: number; values: (number | null)[] | null }[]> {
  const [name, scale] = QUARTER_COLUMNS[column] ?? ['unit_voltage', 100];
  const { rows } = await tx.raw<{ rows: { at: number; values: (number | null)[] | null }[] }>(
    `select extract(epoch from at)::int8 + 450 as at, to_json(${name}) as values
     from string_quarter where string_id = :stringId and at >= :from and at < :to order by at`,
    { stringId, from, to },
  );
  for (const row of rows) row.values = row.values?.map((v) => (v === null ? null : v / scale)) ?? null;
  return rows;
}

export interface Stay {
  position: number;
  serial: string;
  /** Epoch s; null: it sits there still. */
  from: number;
  to: number | null;
}

/** Which unit sat at which position in a time, oldest first. */
export async function staysOf(tx: Tx, stringId: number, { from, to }: Window): Promise<Stay[]> {
  const { rows } = await tx.raw<{ rows: Stay[] }>(
    `select sl.position, u.serial, extract(epoch from p.placed_from)::float8 as "from",
            extract(epoch from p.placed_to)::float8 as "to"
     from slot sl join placement p on p.slot_id = sl.id join unit u on u.id = p.unit_id
     where sl.string_id = :stringId and p.placed_from < :to and (p.placed_to is null or p.placed_to > :from)
     order by sl.position, p.placed_from`,
    { stringId, from, to },
  );
  return rows;
}

export interface FrameThen {
  at: number;
  voltage: (number | null)[];
  voltageIn: (number | null)[] | null;
  current: (number | null)[];
  power: (number | null)[] | null;
  temperature: (number | null)[];
  claim: (number | null)[];
}

/** The newest report at or before an instant, no older than `withinS`; cV, mA, dW, 0.1 °C by position. */
export async function frameAt(
  tx: Tx,
  stringId: number,
  at: Date,
  withinS: number,
): Promise<FrameThen | undefined> {
  const { rows } = await tx.raw<{ rows: FrameThen[] }>(
    `select extract(epoch from at)::int8 as at, voltage, voltage_in as "voltageIn", current, power, temperature,
            state as claim
     from ${framesOf({
       columns: ['voltage', 'voltage_in', 'current', 'power', 'temperature', 'state'],
       strings: oneString(':stringId'),
       from: after('(:at::timestamptz - make_interval(secs => :withinS))'),
       to: after(':at'),
     })} f
     order by at desc limit 1`,
    { stringId, at, withinS },
  );
  return rows[0];
}

/** State and verdict of each position as they were concluded at an instant; codes. */
export async function conductAt(
  tx: Tx,
  stringId: number,
  at: Date,
): Promise<{ position: number; state: number; verdict: number }[]> {
  const { rows } = await tx.raw<{ rows: { position: number; state: number; verdict: number }[] }>(
    `select distinct on (position) position, state, verdict from unit_event
     where string_id = :stringId and at <= :at order by position, at desc`,
    { stringId, at },
  );
  return rows;
}

/** What a string's input measured at or before an instant, V and A. */
export async function inputAt(
  tx: Tx,
  inputId: number,
  at: Date,
  withinS: number,
): Promise<{ at: number; voltage: number | null; current: number | null } | undefined> {
  const { rows } = await tx.raw<{ rows: { at: number; voltage: number | null; current: number | null }[] }>(
    `select extract(epoch from at)::int8 as at, voltage / 10.0::float8 as voltage, current / 100.0::float8 as current
     from input_frame
     where input_id = :inputId and at <= :at and at > :at::timestamptz - make_interval(secs => :withinS)
     order by at desc limit 1`,
    { inputId, at, withinS },
  );
  return rows[0];
}

/** Means of single units over steps of `stepS` seconds, by position. */
export async function unitSteps(
  tx: Tx,
  stringId: number,
  { from, to }: Window,
  column: UnitColumn,
  stepS: number,
): Promise<{ at: number; values: (number | null)[] }[]> {
  const [name, scale] = UNIT_COLUMNS[column];
  const { rows } = await tx.raw<{ rows: { at: number; values: (number | null)[] }[] }>(
    `select extract(epoch from step)::int8 as at, json_agg(v order by o) as values
     from (select date_bin(make_interval(secs => :stepS), at, timestamptz '2000-01-01 00:00Z') as step, u.o,
                  (avg(u.v) / ${scale})::float8 as v
           from ${reportsOf(column)} f cross join lateral unnest(${name}) with ordinality u(v, o) group by 1, 2) s
     group by step order by step`,
    { stringId, stepS, from, to },
  );
  return rows;
}

/** The newest fitted resistance of each string up to a day (yyyy-mm-dd), within a month of it; ohm. */
export async function newestLoopFits(
  tx: Tx,
  stringIds: readonly number[],
  day: string,
): Promise<{ ohm: number; cableOhm: number; slots: number }[]> {
  const { rows } = await tx.raw<{ rows: { ohm: number; cableOhm: number; slots: number }[] }>(
    `select distinct on (string_id) ohm::float8 as ohm, s.cable_resistance::float8 as "cableOhm", s.slots::int as slots
     from loop_fit join string s on s.id = string_id
     where string_id = any (:ids::int4[]) and day <= :day::date and day > :day::date - 31
     order by string_id, day desc`,
    { ids: [...stringIds], day },
  );
  return rows;
}
