import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { bytesOf, writeRows } from './copy-frames';
import type { FrameRow } from './ingest-rows';

/** Source: PostgreSQL 15, "COPY", binary format, and array_send: read back here by that description alone. */

const value = fc.option(fc.integer({ min: -32_767, max: 32_767 }), { nil: null });
const row = fc
  .record({ slots: fc.integer({ min: 1, max: 63 }), at: fc.integer({ min: 0, max: 4_102_444_800 }) })
  .chain(({ slots, at }) => {
    const values = fc.array(value, { minLength: slots, maxLength: slots });
    return fc.record<FrameRow>({
      stringId: fc.integer({ min: 1, max: 2 ** 31 - 1 }),
      siteId: fc.constant(1),
      at: fc.constant(at),
      voltage: values,
      voltageIn: fc.option(values, { nil: null }),
      current: values,
      power: fc.option(values, { nil: null }),
      temperature: values,
      signal: values,
      via: values,
      state: values,
    });
  });

function readArray(bytes: Buffer): (number | null)[] {
  expect(bytes.readInt32BE(0)).toBe(1);
  expect(bytes.readInt32BE(8)).toBe(21);
  expect(bytes.readInt32BE(16)).toBe(1);
  const values: (number | null)[] = [];
  let offset = 20;
  while (offset < bytes.length) {
    const length = bytes.readInt32BE(offset);
    values.push(length === -1 ? null : bytes.readInt16BE(offset + 4));
    if (length !== -1) expect(length).toBe(2);
    offset += 4 + Math.max(0, length);
  }
  expect(bytes.readInt32BE(12)).toBe(values.length);
  expect(bytes.readInt32BE(4)).toBe(values.includes(null) ? 1 : 0);
  return values;
}

function readFile(bytes: Buffer): (Buffer | null)[][] {
  expect(bytes.subarray(0, 19).toString('latin1')).toBe('PGCOPY\n\xff\r\n\0' + '\0'.repeat(8));
  let offset = 19;
  const next = (): number => {
    const length = bytes.readInt32BE(offset);
    offset += 4;
    return length;
  };
  const rows: (Buffer | null)[][] = [];
  for (;;) {
    const fields = bytes.readInt16BE(offset);
    offset += 2;
    if (fields === -1) break;
    rows.push(
      Array.from({ length: fields }, () => {
        const length = next();
        if (length === -1) return null;
        offset += length;
        return bytes.subarray(offset - length, offset);
      }),
    );
  }
  expect(offset).toBe(bytes.length);
  return rows;
}

describe('frames as COPY takes them', () => {
  it('are read back as they were, in as many bytes as were set aside at most', () => {
    fc.assert(
      fc.property(fc.array(row, { minLength: 1, maxLength: 5 }), (rows) => {
        const most = rows.reduce((sum, r) => sum + bytesOf(r), 21);
        const buffer = Buffer.alloc(most, 0xaa);
        const used = writeRows(buffer, rows);
        expect(used).toBeLessThanOrEqual(most);
        const read = readFile(buffer.subarray(0, used));
        expect(read).toHaveLength(rows.length);
        for (const [i, fields] of read.entries()) {
          const r = rows[i]!;
          const [at, mask, stringId, , , ...columns] = fields;
          expect(at?.readBigInt64BE()).toBe((BigInt(r.at) - 946_684_800n) * 1_000_000n);
          expect(mask?.readBigInt64BE()).toBe(
            r.state.reduce((bits, s, k) => (s === null ? bits : bits | (1n << BigInt(k))), 0n),
          );
          expect(stringId?.readInt32BE()).toBe(r.stringId);
          expect(columns.map((c) => c && readArray(c))).toEqual([
            r.voltage,
            r.voltageIn,
            r.current,
            r.power,
            r.temperature,
            r.signal,
            r.via,
            r.state,
          ]);
        }
      }),
    );
  });
});
