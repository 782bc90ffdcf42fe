import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { typedNumber } from './typed-number';

const VOLTS = { min: -2000, max: 2000, unit: 'V' };

describe('typedNumber', () => {
  it.each([
    ['7.8', 7.8],
    ['7,8', 7.8],
    [' −7,8 V ', -7.8],
    ['-7.8v', -7.8],
    ['+412', 412],
    ['.5', 0.5],
    ['8.', 8],
  ])('reads %s', (text, value) => {
    expect(typedNumber(text, 'Reading', VOLTS)).toEqual({ value, fault: null });
  });
  it.each(['', '-', ',', '7.8.1', '1,234.5', 'OL', '7 A', '1e3', '0x10', '--2', '2001', 'Infinity', 'NaN'])(
    'refuses %s and says what to do',
    (text) => {
      const read = typedNumber(text, 'Reading', VOLTS);
      expect(read.value).toBeNull();
      expect(read.fault).toMatch(/^Reading: .*[Tt]ype/);
    },
  );
  it('wants whole numbers where a half makes no sense', () => {
    expect(typedNumber('13.5', 'Units', { min: 1, max: 63, whole: true }).fault).toBe(
      'Units: 13.5 is no whole number. Type one from 1 to 63.',
    );
  });
  it('reads back every number in its range, with a point and with a comma', () => {
    fc.assert(
      fc.property(fc.integer({ min: -200_000, max: 200_000 }), (hundredths) => {
        const value = hundredths / 100;
        for (const text of [String(value), String(value).replace('.', ',')])
          expect(typedNumber(text, 'Reading', VOLTS).value).toBe(value);
      }),
    );
  });
  it('never throws and never gives a value outside its range', () => {
    fc.assert(
      fc.property(fc.string(), (text) => {
        const { value } = typedNumber(text, 'Reading', VOLTS);
        expect(value === null || (value >= -2000 && value <= 2000)).toBe(true);
      }),
    );
  });
});
