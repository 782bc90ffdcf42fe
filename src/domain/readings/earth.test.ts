import fc from 'fast-check';
import { expect, it } from 'vitest';
import { earthFinding } from './earth';
import { question } from './sample-readings';

const found = (voltageV: number, positiveV: number, negativeV: number) =>
  earthFinding(question({ voltageV, earth: { positiveV, negativeV } }), false);

it('a string that shows a few volts to earth floats', () => {
  expect(found(412, 12, -9)?.outcome).toBe('no_fault_seen');
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
