import fc from 'fast-check';
import { expect, it } from 'vitest';
import { UNIT_PRESETS } from '../equipment/unit-type';
import { earthFinding } from './earth';
import { interpretReading } from './interpret';
import { question } from './sample-readings';

const found = (voltageV: number, positiveV: number, negativeV: number) =>
  earthFinding(question({ voltageV, earth: { positiveV, negativeV } }), false);

it('a string that shows a few volts to earth floats', () => {
  expect(found(412, 12, -9)?.outcome).toBe('no_fault_seen');
});

it('gives no chance of a fault until both readings are in', () => {
  const of = (positiveV: number | null, negativeV: number | null, voltageV = 412) =>
    earthFinding(question({ voltageV, earth: { positiveV, negativeV } }), true);
  expect(of(2, null)).toMatchObject({ outcome: 'cant_tell', probability: null });
  expect(of(null, -410)).toMatchObject({ outcome: 'cant_tell', probability: null });
  expect(of(2, -3, 0.3)?.probability).toBeNull();
  expect(of(2, -3)?.probability).toBeLessThan(0.05);
});

it('some passing and some in shutdown: a fault is a fault, and its place is not told', () => {
  // 3 of 14 pass: below the contact is one of them, above it two; the rest give 0.6 V each
  const voc = 38;
  const volts = 3 * voc + 11 * 0.6;
  const below = voc + 4 * 0.6;
  const answer = interpretReading(
    question({
      unitType: UNIT_PRESETS.monitored,
      units: 14,
      heard: 11,
      commanded: 'shutdown',
      voltageV: volts,
      siblings: [{ units: 14, voltageV: volts * 1.001 }],
      earth: { positiveV: volts - below, negativeV: -below },
    }),
  );
  expect(answer.hypotheses[0]!.kind).toBe('some_passing');
  expect(answer.earth).toMatchObject({ outcome: 'fault', between: null, placeProbability: 0 });
  expect(answer.earth!.words).toContain('do not all give the same voltage');
});

it('a fault of a mixed string is found wherever it lies, whichever units pass', () => {
  fc.assert(
    fc.property(
      fc.array(fc.boolean(), { minLength: 4, maxLength: 20 }).filter((p) => p.filter(Boolean).length >= 2),
      fc.double({ min: 0, max: 1, noNaN: true }),
      fc.double({ min: -1, max: 1, noNaN: true }),
      (passing, where, error) => {
        const each = passing.map((p) => (p ? 38 : 0.6));
        const volts = each.reduce((a, b) => a + b, 0);
        const k = Math.round(where * each.length);
        const below = each.slice(0, k).reduce((a, b) => a + b, 0);
        const finding = earthFinding(
          question({
            units: each.length,
            voltageV: volts,
            earth: {
              positiveV: (volts - below) * (1 + 0.004 * error),
              negativeV: -below * (1 - 0.004 * error),
            },
          }),
          false,
        );
        expect(finding).toMatchObject({ outcome: 'fault', between: null });
      },
    ),
  );
});

it('like modules of which the ratio falls between two places: a fault without a place', () => {
  const finding = earthFinding(
    question({ units: 8, voltageV: 320, earth: { positiveV: 320 * 0.56, negativeV: -320 * 0.44 } }),
    true,
  );
  expect(finding).toMatchObject({ outcome: 'fault', between: null });
  expect(finding!.words).toContain('the place can not be told. Do not connect');
});

it('readings to earth that add up to the string are never called sound, whatever stands between', () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 60, max: 900 }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      fc.constantFrom(1, -1),
      (volts, share, sign) => {
        const finding = found(sign * volts, sign * volts * share, -sign * volts * (1 - share));
        expect(finding?.outcome).not.toBe('no_fault_seen');
      },
    ),
  );
});
