import { finished } from 'node:stream/promises';
import type pg from 'pg';
import { from as copyFrom } from 'pg-copy-streams';
import { VALUE_COLUMNS } from './frames';
import { columnsOf, maskWords, sumsOf } from './frame-parameters';
import type { FrameRow } from './ingest-rows';

/**
 * New frames into the partition of their day by COPY in PostgreSQL's binary form: rows go in by the page, which costs the
 * server half of what single inserts do. A partition is written by its own name, since COPY goes past no row security; only
 * ingest may.
 */

const SIGNATURE = Buffer.from('PGCOPY\n\xff\r\n\0\0\0\0\0\0\0\0\0', 'latin1'); // no flags, no extension
const FIELDS = 5 + VALUE_COLUMNS.length;
const EPOCH_2000_S = 946_684_800;
const INT2_OID = 21;
const ARRAY_HEADER_BYTES = 20;
/** Field count, times and sums with their lengths. */
const ROW_BYTES = 2 + (4 + 8) + (4 + 8) + 3 * (4 + 4);
const ARRAY_BYTES = 4 + ARRAY_HEADER_BYTES;
const VALUE_BYTES = 4 + 2;

/** As many bytes as a row takes at most. Exported for its test, as `writeRows` is. */
export const bytesOf = (row: FrameRow): number =>
  ROW_BYTES + VALUE_COLUMNS.length * (ARRAY_BYTES + row.state.length * VALUE_BYTES);

/** One buffer a connection: a fresh one for each batch would be new memory each time. */
const buffers = new WeakMap<pg.ClientBase, Buffer>();

function bufferFor(client: pg.ClientBase, bytes: number): Buffer {
  const known = buffers.get(client);
  if (known && known.length >= bytes) return known;
  const made = Buffer.allocUnsafeSlow(Math.ceil(bytes * 1.25));
  buffers.set(client, made);
  return made;
}

/** An int2[] at `offset`; returns where it ends. */
function writeArray(into: Buffer, from: number, values: readonly (number | null)[]): number {
  let offset = from + ARRAY_BYTES;
  let gaps = 0;
  for (let i = 0; i < values.length; i++) {
    const value = values[i] ?? null;
    // bytes by hand: a tight loop over every reading that comes in
    if (value === null) {
      gaps = 1;
      into[offset] = into[offset + 1] = into[offset + 2] = into[offset + 3] = 0xff;
      offset += 4;
      continue;
    }
    into[offset] = into[offset + 1] = into[offset + 2] = 0;
    into[offset + 3] = 2;
    into[offset + 4] = (value >> 8) & 0xff;
    into[offset + 5] = value & 0xff;
    offset += VALUE_BYTES;
  }
  into.writeInt32BE(offset - from - 4, from);
  into.writeInt32BE(1, from + 4); // dimensions
  into.writeInt32BE(gaps, from + 8);
  into.writeInt32BE(INT2_OID, from + 12);
  into.writeInt32BE(values.length, from + 16);
  into.writeInt32BE(1, from + 20); // its first index
  return offset;
}

/** Rows of `string_frame` as COPY takes them; returns how many bytes they are. */
export function writeRows(into: Buffer, rows: readonly FrameRow[]): number {
  let offset = SIGNATURE.copy(into, 0);
  for (const row of rows) {
    const sums = sumsOf(row);
    const us = (row.at - EPOCH_2000_S) * 1e6;
    const [high, low] = maskWords(row.state);
    offset = into.writeInt16BE(FIELDS, offset);
    offset = into.writeInt32BE(8, offset);
    offset = into.writeInt32BE(Math.floor(us / 2 ** 32), offset);
    offset = into.writeUInt32BE(us - Math.floor(us / 2 ** 32) * 2 ** 32, offset);
    offset = into.writeInt32BE(8, offset);
    offset = into.writeUInt32BE(high, offset);
    offset = into.writeUInt32BE(low, offset);
    for (const number of [row.stringId, sums.voltage, sums.power]) {
      offset = into.writeInt32BE(4, offset);
      offset = into.writeInt32BE(number, offset);
    }
    for (const values of columnsOf(row))
      offset = values === null ? into.writeInt32BE(-1, offset) : writeArray(into, offset, values);
  }
  return into.writeInt16BE(-1, offset);
}

const COLUMNS = `at, mask, string_id, voltage_sum, power_sum, ${VALUE_COLUMNS.join(', ')}`;

/**
 * Copies frames of one UTC day (YYYYMMDD) into its partition; in a transaction of the caller. Fails as a whole where one
 * of them is there already.
 */
export async function copyFrames(
  client: pg.ClientBase,
  day: string,
  rows: readonly FrameRow[],
): Promise<void> {
  if (!/^\d{8}$/.test(day)) throw new RangeError(`${day} is no day of a partition`);
  const bytes = rows.reduce((sum, row) => sum + bytesOf(row), SIGNATURE.length + 2);
  const buffer = bufferFor(client, bytes);
  const used = writeRows(buffer, rows);
  const stream = client.query(copyFrom(`copy string_frame_${day} (${COLUMNS}) from stdin (format binary)`));
  stream.end(buffer.subarray(0, used));
  await finished(stream);
}
