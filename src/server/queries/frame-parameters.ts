import { VALUE_COLUMNS, type ValueColumn } from './frames';
import type { FrameRow } from './ingest-rows';

/**
 * A batch of frames as the parameters of one statement, and the CTE `x` that makes rows of them again. The values of
 * a column lie behind one another in one array in PostgreSQL's binary form, which costs the least on both sides, and
 * each row cuts its own out. A NULL among thousands would make every cut walk through the whole array: a value that
 * no frame has stands for it, and is put right in the rows that have one.
 */
const GAP = -32_768; // FRAME_RANGES are well within
const NEWEST = 1;
const WHOLE = 2;
const GAPS = 4;

const INT2 = { oid: 21, bytes: 2 } as const; // oids of pg_type
const INT4 = { oid: 23, bytes: 4 } as const;
const HEADER_BYTES = 20;
const LENGTH_BYTES = 4;

const NUMBERS = [
  'at',
  'string_id',
  'site_id',
  'voltage_sum',
  'power_sum',
  'flags',
  'slots',
  'first',
  'voltage_in_first',
  'power_first',
] as const;
const FIRST_COLUMN = NUMBERS.length + 2;

/** The first parameter after those of `frameParameters`. */
export const NEXT_PARAMETER = FIRST_COLUMN + VALUE_COLUMNS.length;

/** Optional columns have offsets of their own: 0 where a row has none. */
const isOptional = (column: ValueColumn): boolean => column === 'voltage_in' || column === 'power';

function cut(column: ValueColumn, i: number): string {
  const first = isOptional(column) ? `nullif(${column}_first, 0)` : 'first';
  const part = `($${FIRST_COLUMN + i}::int2[])[${first} : ${first} + slots - 1]`;
  return `case when flags & ${GAPS} = 0 then ${part} else array_replace(${part}, '${GAP}'::int2, null) end ${column}`;
}

/**
 * `x`: the frames by string and time. `newest` is true for the last of each string in the batch, `whole` where every
 * slot reported.
 */
export const FRAMES_AS_ROWS = `x as materialized (
  select to_timestamp(at) at, mask, string_id, site_id, voltage_sum, power_sum,
    flags & ${NEWEST} <> 0 newest, flags & ${WHOLE} <> 0 whole,
    ${VALUE_COLUMNS.map(cut).join(',\n    ')}
  from unnest($1::int8[], ${NUMBERS.map((_, i) => `$${i + 2}::int4[]`).join(', ')}) b(mask, ${NUMBERS.join(', ')}))`;

/** An array of so many numbers, without NULL, as PostgreSQL receives it in binary form; the numbers are still 0. */
function emptyArray({ oid, bytes }: typeof INT2 | typeof INT4, length: number): Buffer {
  const buffer = Buffer.allocUnsafe(HEADER_BYTES + length * (LENGTH_BYTES + bytes));
  buffer.writeInt32BE(1, 0); // dimensions
  buffer.writeInt32BE(0, 4); // no NULL in it
  buffer.writeInt32BE(oid, 8);
  buffer.writeInt32BE(length, 12);
  buffer.writeInt32BE(1, 16); // its first index
  const element = Buffer.alloc(LENGTH_BYTES + bytes);
  element.writeInt32BE(bytes, 0);
  return buffer.fill(element, HEADER_BYTES);
}

/** An int4[] as PostgreSQL receives it in binary form. */
export function int4Array(values: readonly number[]): Buffer {
  const buffer = emptyArray(INT4, values.length);
  let offset = HEADER_BYTES + LENGTH_BYTES;
  for (const value of values) {
    buffer.writeInt32BE(value, offset);
    offset += LENGTH_BYTES + INT4.bytes;
  }
  return buffer;
}

type Values = readonly (number | null)[] | null;
interface Column {
  array: Buffer;
  /** Where the next value goes. */
  offset: number;
  /** How many are in. */
  length: number;
}

/** Appends a row's values; true where one of them is NULL. */
function append(column: Column, values: readonly (number | null)[]): boolean {
  const { array } = column;
  let { offset } = column;
  let gaps = false;
  for (let i = 0; i < values.length; i++) {
    let value = values[i] ?? null;
    if (value === null) {
      value = GAP;
      gaps = true;
    }
    // the two bytes by hand: a tight loop over every reading that comes in
    array[offset] = (value >> 8) & 0xff;
    array[offset + 1] = value & 0xff;
    offset += LENGTH_BYTES + INT2.bytes;
  }
  column.offset = offset;
  column.length += values.length;
  return gaps;
}

/** A frame's values in the order of VALUE_COLUMNS. */
export const columnsOf = (row: FrameRow): readonly Values[] => [
  row.voltage,
  row.voltageIn,
  row.current,
  row.power,
  row.temperature,
  row.signal,
  row.via,
  row.state,
];

/** Bit (position − 1) set: that unit reported. Its upper and its lower 32 bits. */
export function maskWords(state: readonly (number | null)[]): [high: number, low: number] {
  let low = 0;
  let high = 0;
  for (let i = 0; i < state.length; i++) {
    if (state[i] === null) continue;
    // shifts, and no powers, which are reckoned as such: this is asked of every reading
    if (i < 32) low |= 1 << i;
    else high |= 1 << (i - 32);
  }
  return [high >>> 0, low >>> 0];
}

/** The same as text: 63 bits do not fit a double. */
export function maskOf(state: readonly (number | null)[]): string {
  const [high, low] = maskWords(state);
  return high < 2 ** 20 ? String(high * 2 ** 32 + low) : String(BigInt(high) * 4_294_967_296n + BigInt(low));
}

/** cV and dW over the units of a frame, as the database's frame_voltage and frame_power reckon them. */
export function sumsOf(row: Pick<FrameRow, 'voltage' | 'voltageIn' | 'current' | 'power' | 'state'>): {
  voltage: number;
  power: number;
} {
  let voltage = 0;
  let scaled = 0;
  const { voltageIn, power } = row;
  for (let i = 0; i < row.state.length; i++) {
    const out = row.voltage[i] ?? null;
    const into = voltageIn === null ? null : (voltageIn[i] ?? null);
    const current = row.current[i] ?? 0;
    voltage += out ?? into ?? 0;
    const reported = power === null ? null : (power[i] ?? null);
    if (reported !== null) scaled += reported * 10_000;
    else if (out !== null) scaled += out * current;
    else if (into !== null && row.state[i] === 1) scaled += into * current;
  }
  return { voltage, power: Math.round(scaled / 10_000) };
}

/** The parameters that FRAMES_AS_ROWS reads, in its order. At least one row, by string and time; none twice. */
export function frameParameters(rows: readonly FrameRow[]): (string | Buffer)[] {
  const lengths = VALUE_COLUMNS.map(() => 0);
  for (const row of rows) columnsOf(row).forEach((values, k) => (lengths[k]! += values?.length ?? 0));
  const columns = lengths.map((length): Column => ({
    array: emptyArray(INT2, length),
    offset: HEADER_BYTES + LENGTH_BYTES,
    length: 0,
  }));
  const masks: string[] = [];
  const numbers = NUMBERS.map(() => [] as number[]);
  rows.forEach((row, i) => {
    const sums = sumsOf(row);
    const [voltage, voltageIn, , power] = columns as [Column, Column, Column, Column];
    const values = [
      row.at,
      row.stringId,
      row.siteId,
      sums.voltage,
      sums.power,
      rows[i + 1]?.stringId === row.stringId ? 0 : NEWEST,
      row.state.length,
      voltage.length + 1,
      row.voltageIn ? voltageIn.length + 1 : 0,
      row.power ? power.length + 1 : 0,
    ];
    masks.push(maskOf(row.state));
    let gaps = false;
    columnsOf(row).forEach((column, k) => {
      if (column) gaps = append(columns[k]!, column) || gaps;
    });
    values[NUMBERS.indexOf('flags')]! |= (row.state.includes(null) ? 0 : WHOLE) | (gaps ? GAPS : 0);
    values.forEach((value, k) => numbers[k]!.push(value));
  });
  return [`{${masks.join(',')}}`, ...numbers.map(int4Array), ...columns.map((c) => c.array)];
}
