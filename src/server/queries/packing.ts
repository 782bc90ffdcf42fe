import type pg from 'pg';
import { to as copyTo } from 'pg-copy-streams';
import { z } from 'zod';
import { groupedBy } from '../../domain/grouped-by';
import { packedFrames, singleFrames, VALUE_COLUMNS, type FramesWanted, type ValueColumn } from './frames';
import { NONE, packValues, type PackedValues } from './packed-values';

/** Frames of one string and UTC day on their way into packed rows, and back where late ones come. */

/** Frames that have the same slots and the same quantities. `values`: frames × slots, NONE for NULL. */
export interface StringDay {
  stringId: number;
  slots: number;
  /** µs: the first from the day's beginning, each other from the one before. */
  steps: number[];
  mask: bigint[];
  voltageSum: number[];
  powerSum: number[];
  values: Record<ValueColumn, Int32Array | null>;
}

export interface PackedDay extends Omit<StringDay, 'values'> {
  values: Record<ValueColumn, PackedValues | null>;
}

export function packDay(day: StringDay): PackedDay {
  const values = {} as PackedDay['values'];
  for (const c of VALUE_COLUMNS) {
    const column = day.values[c];
    values[c] = column && packValues(column, day.slots, day.mask);
  }
  return { ...day, values };
}

const MIDNIGHT = `$1::date::timestamp at time zone 'UTC'`;
const WITHIN_DAY = `at >= ${MIDNIGHT} and at < ($1::date + 1)::timestamp at time zone 'UTC'`;
const dayName = (day: string): string => day.replaceAll('-', '');

/** Closed UTC days (yyyy-mm-dd) before this one that have single frames' partitions, oldest first. */
export async function daysToPack(client: pg.ClientBase, before: string): Promise<string[]> {
  const { rows } = await client.query<{ day: string }>(
    `select to_char(to_date(right(c.relname, 8), 'YYYYMMDD'), 'YYYY-MM-DD') as day
     from pg_inherits i join pg_class c on c.oid = i.inhrelid
     where i.inhparent = 'string_frame'::regclass and right(c.relname, 8) < to_char($1::date, 'YYYYMMDD') order by 1`,
    [before],
  );
  return rows.map((r) => r.day);
}

/** Closes the day for single frames; false where it has none any more. */
export async function beginPacking(client: pg.ClientBase, day: string): Promise<boolean> {
  const { rows } = await client.query<{ begun: boolean }>('select begin_packing($1::date) as begun', [day]);
  return rows[0]?.begun ?? false;
}

/** Counting a day of a large fleet takes longer than other statements may. */
export async function allowLongCounts(client: pg.ClientBase): Promise<void> {
  await client.query(`set statement_timeout = '10min'`);
}

/** Swaps the frames for the packed rows. Refused by the database where they are not as many. */
export async function finishPacking(client: pg.ClientBase, day: string): Promise<number> {
  // the day is closed: this count holds. Without a lock: it takes a while
  const { rows } = await client.query<{ n: number }>(
    `select count(*)::int8 as n from string_frame where ${WITHIN_DAY}`,
    [day],
  );
  const frames = Number(rows[0]?.n ?? 0);
  await client.query('select finish_packing($1::date, $2::int8)', [day, frames]);
  return frames;
}

/** The next strings of the day that are not packed; they are packed in the order of their numbers. */
export async function stringsToPack(client: pg.ClientBase, day: string, most: number): Promise<number[]> {
  const { rows } = await client.query<{ id: number }>(
    `select string_id as id from string_frame
     where ${WITHIN_DAY} and string_id > (select coalesce(max(string_id), -1) from packed_frame_${dayName(day)})
     group by string_id order by string_id limit $2`,
    [day, most],
  );
  return rows.map((r) => r.id);
}

export interface FrameInDay {
  stringId: number;
  micros: bigint;
  mask: bigint;
  voltageSum: number;
  powerSum: number;
  values: Record<ValueColumn, Int32Array | null>;
}

/** The single frames of some strings on a day, as days to be packed: in the order of their strings. */
export async function framesToPack(
  client: pg.ClientBase,
  day: string,
  stringIds: readonly number[],
): Promise<StringDay[]> {
  return gather(await framesOfDay(client, singleFrames(allOf(day, stringIds)), day));
}

const ALL = ['mask', 'voltage_sum', 'power_sum', ...VALUE_COLUMNS] as const;

/** COPY takes no parameters: numbers and a day are written into its text. */
function allOf(day: string, stringIds: readonly number[]): FramesWanted {
  const midnight = `timestamptz '${z.iso.date().parse(day)} 00:00Z'`;
  const ids = stringIds.map((id) => z.int().parse(id)).join(',');
  return {
    columns: ALL,
    strings: (id) => `${id} = any ('{${ids}}'::int4[])`,
    from: midnight,
    to: `(${midnight} + interval '24 hours')`,
  };
}

/** In PostgreSQL's binary form, without the detour over text: a day of a fleet is a billion numbers. */
async function framesOfDay(client: pg.ClientBase, source: string, day: string): Promise<FrameInDay[]> {
  const frames = `select string_id, (extract(epoch from at - timestamptz '${day} 00:00Z') * 1000000)::int8, ${ALL.join(', ')}
    from (${source}) f order by string_id, at`;
  const pieces: Buffer[] = [];
  for await (const piece of client.query(copyTo(`copy (${frames}) to stdout (format binary)`)))
    pieces.push(piece as Buffer);
  return readFrames(Buffer.concat(pieces));
}

const COPY_HEADER_BYTES = 19;

/** Rows of COPY's binary form: a count of fields, then each with its length; −1 for NULL. */
function readFrames(b: Buffer): FrameInDay[] {
  const frames: FrameInDay[] = [];
  let at = COPY_HEADER_BYTES + b.readInt32BE(COPY_HEADER_BYTES - 4);
  const field = <T>(read: (from: number) => T): T | null => {
    const length = b.readInt32BE(at);
    const from = at + 4;
    at = from + Math.max(0, length);
    return length < 0 ? null : read(from);
  };
  const int4 = (): number => field((from) => b.readInt32BE(from)) ?? 0;
  const int8 = (): bigint => field((from) => b.readBigInt64BE(from)) ?? 0n;
  while (b.readInt16BE(at) > 0) {
    at += 2;
    const frame = {
      stringId: int4(),
      micros: int8(),
      mask: int8(),
      voltageSum: int4(),
      powerSum: int4(),
      values: {} as FrameInDay['values'],
    };
    for (const c of VALUE_COLUMNS) frame.values[c] = field((from) => int2s(b, from));
    frames.push(frame);
  }
  return frames;
}

/** An int2[] of one dimension: dimensions, flags, type, then size and lower bound, then the elements. */
function int2s(b: Buffer, from: number): Int32Array {
  if (b.readInt32BE(from) === 0) return new Int32Array(0);
  const values = new Int32Array(b.readInt32BE(from + 12));
  let at = from + 20;
  for (let i = 0; i < values.length; i++) {
    const isNull = b.readInt32BE(at) < 0;
    values[i] = isNull ? NONE : b.readInt16BE(at + 4);
    at += isNull ? 4 : 6;
  }
  return values;
}

/** The frames of packed strings, one by one; nobody else changes them until the transaction ends. */
export async function lockPackedFrames(
  client: pg.ClientBase,
  day: string,
  stringIds: readonly number[],
): Promise<FrameInDay[]> {
  await client.query(
    'select from packed_frame where day = $1 and string_id = any ($2::int4[]) order by string_id for update',
    [day, [...stringIds]],
  );
  return framesOfDay(client, packedFrames(allOf(day, stringIds)), day);
}

/** Puts strings of a packed day in the place of what was packed of them. */
export async function replacePacked(
  client: pg.ClientBase,
  day: string,
  stringIds: readonly number[],
  packed: readonly PackedDay[],
): Promise<void> {
  await client.query('delete from packed_frame where day = $1 and string_id = any ($2::int4[])', [
    day,
    [...stringIds],
  ]);
  await insertInto(client, 'packed_frame', day, packed);
}

/** UTC days (yyyy-mm-dd) that are packed, and those that are being packed and take nothing now. */
export async function packedDays(
  client: pg.ClientBase,
): Promise<{ packed: Set<string>; closed: Set<string> }> {
  const { rows } = await client.query<{ day: string; packed: boolean }>(
    `select to_char(to_date(right(c.relname, 8), 'YYYYMMDD'), 'YYYY-MM-DD') as day, c.relispartition as packed
     from pg_class c where c.relnamespace = 'public'::regnamespace and c.relkind = 'r'
       and c.relname ~ '^packed_frame_\\d{8}$'`,
  );
  return {
    packed: new Set(rows.filter((r) => r.packed).map((r) => r.day)),
    closed: new Set(rows.filter((r) => !r.packed).map((r) => r.day)),
  };
}

/** Frames that are alike, string by string; each in the order that it came in. */
export function gather(frames: readonly FrameInDay[]): StringDay[] {
  const alike = groupedBy(frames, (f) => {
    const slots = f.values.state?.length ?? 0;
    return `${f.stringId} ${slots} ${f.values.voltage_in === null} ${f.values.power === null}`;
  });
  return [...alike.values()].map((list) => {
    const [first] = list as [FrameInDay];
    const slots = first.values.state?.length ?? 0;
    const values = {} as StringDay['values'];
    for (const c of VALUE_COLUMNS) {
      if (first.values[c] === null) {
        values[c] = null;
        continue;
      }
      const column = new Int32Array(list.length * slots);
      list.forEach((f, i) => {
        const row = f.values[c];
        if (row?.length !== slots)
          throw new Error(
            `string ${f.stringId}: ${c} has ${row?.length ?? 0} slots where state has ${slots}`,
          );
        column.set(row, i * slots);
      });
      values[c] = column;
    }
    return {
      stringId: first.stringId,
      slots,
      steps: list.map((f, i) => Number(f.micros - (list[i - 1]?.micros ?? 0n))),
      mask: list.map((f) => f.mask),
      voltageSum: list.map((f) => f.voltageSum),
      powerSum: list.map((f) => f.powerSum),
      values,
    };
  });
}

const array = (values: readonly (number | bigint)[]): string => `{${values.join(',')}}`;
/** Parameters of one packed_values: six each, all NULL where the quantity is not measured. */
const parameters = (p: PackedValues | null): unknown[] =>
  p === null
    ? [null, null, null, null, null, null]
    : [array(p.level), array(p.share), array(p.width), array(p.start), p.rest, p.has && array(p.has)];

const FIXED = 9;
const ROW = VALUE_COLUMNS.map((_, k) => {
  const n = FIXED + 6 * k;
  const row = `row($${n + 1}::int2[], $${n + 2}::int2[], $${n + 3}::int2[], $${n + 4}::int4[], $${n + 5}::bytea, $${n + 6}::int8[])`;
  return `case when $${n + 1}::int2[] is not null then ${row}::packed_values end`;
}).join(', ');

/**
 * Writes packed rows. `table`: where they go, `packed_frame` itself or a day's table that is not part of it yet.
 * Parts of one string are numbered as they come.
 */
async function insertInto(
  client: pg.ClientBase,
  table: string,
  day: string,
  packed: readonly PackedDay[],
): Promise<void> {
  const parts = new Map<number, number>();
  for (const p of packed) {
    const part = parts.get(p.stringId) ?? 0;
    parts.set(p.stringId, part + 1);
    await client.query({
      name: `insert_${table}`,
      text: `insert into ${table} (day, string_id, part, slots, frames, steps, mask, voltage_sum, power_sum, ${VALUE_COLUMNS.join(', ')})
             values ($1, $2, $3, $4, $5, $6, $7, $8, $9, ${ROW})`,
      values: [
        day,
        p.stringId,
        part,
        p.slots,
        p.mask.length,
        array(p.steps),
        array(p.mask),
        array(p.voltageSum),
        array(p.powerSum),
        ...VALUE_COLUMNS.flatMap((c) => parameters(p.values[c])),
      ],
    });
  }
}

/** Puts packed strings beside the frames of their day, where no reader looks yet. */
export async function putAside(
  client: pg.ClientBase,
  day: string,
  packed: readonly PackedDay[],
): Promise<void> {
  await inTransaction(client, () => insertInto(client, `packed_frame_${dayName(day)}`, day, packed));
}

export async function inTransaction<T>(client: pg.ClientBase, work: () => Promise<T>): Promise<T> {
  await client.query('begin');
  try {
    const done = await work();
    await client.query('commit');
    return done;
  } catch (error) {
    // where the connection is gone the server rolls back by itself
    await client.query('rollback').catch(() => undefined);
    throw error;
  }
}
