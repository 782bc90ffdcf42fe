import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { NONE, packValues, SPAN, unpackValues } from './packed-values';

const INT2 = { min: -32_768, max: 32_767 };

/** Bits of the slots that are told, as ingest makes a frame's mask. */
const maskOf = (values: Int32Array, slots: number): bigint[] =>
  Array.from({ length: values.length / slots }, (_, f) => {
    let bits = 0n;
    for (let s = 0; s < slots; s++) if (values[f * slots + s] !== NONE) bits |= 1n << BigInt(s);
    return bits;
  });

const day = fc
  .record({ slots: fc.integer({ min: 1, max: 63 }), frames: fc.integer({ min: 1, max: 2 * SPAN + 3 }) })
  .chain(({ slots, frames }) =>
    fc.record({
      slots: fc.constant(slots),
      values: fc
        .array(
          fc.oneof(
            { weight: 6, arbitrary: fc.integer({ min: 3000, max: 3015 }) },
            { weight: 1, arbitrary: fc.integer(INT2) },
            { weight: 1, arbitrary: fc.constantFrom(NONE, INT2.min, INT2.max) },
          ),
          { minLength: slots * frames, maxLength: slots * frames },
        )
        .map((v) => Int32Array.from(v)),
    }),
  );

describe('packed values', () => {
  it('come back to the bit, whatever they are', () => {
    fc.assert(
      fc.property(day, fc.boolean(), ({ slots, values }, frameHadMore) => {
        const mask = maskOf(values, slots).map((m) => (frameHadMore ? m | 1n : m));
        expect(unpackValues(packValues(values, slots, mask), slots, mask)).toEqual(values);
      }),
      { numRuns: 60 },
    );
  });

  it('keep a mask of their own only where it says more than the frame does', () => {
    fc.assert(
      fc.property(day, ({ slots, values }) => {
        const own = maskOf(values, slots);
        expect(packValues(values, slots, own).has).toBeNull();
        const other = own.map((m) => m ^ 1n);
        expect(packValues(values, slots, other).has).toEqual(own);
      }),
      { numRuns: 20 },
    );
  });

  it('need no more bits than the noise has', () => {
    const slots = 20;
    const frames = 1440;
    let seed = 7;
    const noise = () => (seed = (Math.imul(seed, 1_103_515_245) + 12_345) >>> 0) >>> 29; // three bits
    const values = Int32Array.from(
      { length: slots * frames },
      (_, i) => 3100 + 40 * (i % slots) + Math.round(200 * Math.sin(i / slots / 200)) + noise(),
    );
    const packed = packValues(values, slots, maskOf(values, slots));
    expect(Math.max(...packed.width)).toBeLessThanOrEqual(4);
    expect(packed.rest.length).toBeLessThanOrEqual((values.length * 4) / 8 + 2);
  });

  it('of units that all say the same take no rest at all', () => {
    const values = new Int32Array(20 * 100).fill(1);
    const packed = packValues(values, 20, maskOf(values, 20));
    expect([...packed.rest]).toEqual([0, 0]);
  });
});
