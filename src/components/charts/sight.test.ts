import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { shareOf, WHOLE, zoomed } from './sight';

const line = (at: number[], values: (number | null)[]) => ({ name: 'Voltage', at, values }) as never;
const model = (lines: never[]) => ({ from: 0, to: 86_400, timeZone: 'UTC', lines });

describe('what zooming is about', () => {
  it('the moment that was chosen, else the newest reading that is drawn', () => {
    const lines = [line([0, 21_600, 43_200], [1, 2, null])];
    expect(shareOf(model(lines), 64_800)).toBe(75);
    expect(shareOf(model(lines), null)).toBe(25);
  });
  it('stays in its place in sight, and the whole has no end', () => {
    expect(zoomed(WHOLE, 0.5, 40)).toEqual([20, 70]);
    expect(zoomed([20, 70], 2, 40)).toEqual([0, 100]);
    expect(zoomed([20, 70], 0.5, 90)).toEqual([32.5, 57.5]);
    expect(zoomed(WHOLE, 0.5, -Infinity)).toEqual([25, 75]);
  });
  it('any sight stays within the whole and no narrower than a hundredth', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 98, noNaN: true }),
        fc.double({ min: 1, max: 100, noNaN: true }),
        fc.double({ min: 0.1, max: 10, noNaN: true }),
        fc.double({ min: -50, max: 150, noNaN: true }),
        (start, width, factor, about) => {
          const [from, to] = zoomed([start, Math.min(100, start + width)], factor, about);
          expect(from).toBeGreaterThanOrEqual(0);
          expect(to).toBeLessThanOrEqual(100 + 1e-9);
          expect(to - from).toBeGreaterThanOrEqual(1 - 1e-9);
        },
      ),
    );
  });
});
