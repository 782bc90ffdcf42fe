import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cusum } from './cusum';
import {
  mad,
  median,
  medianInPlace,
  modifiedZ,
  outliersByModifiedZ,
  quantile,
  ranked,
  sigmaMad,
} from './robust';
import { theilSen } from './theil-sen';

/** ms: many runs, on a busy machine. */
const SLOW = 60_000;

const number = fc.double({ min: -1e6, max: 1e6, noNaN: true, noDefaultInfinity: true });
/** In eighths, so that scaling is exact. */
const eighths = fc.array(
  fc.integer({ min: -8000, max: 8000 }).map((value) => value / 8),
  { minLength: 1, maxLength: 60 },
);
const numbers = fc.array(number, { minLength: 1, maxLength: 60 });

describe('robust statistics', () => {
  it('has half of the values on either side of the median', () => {
    fc.assert(
      fc.property(numbers, (values) => {
        const middle = median(values);
        expect(values.filter((value) => value < middle).length).toBeLessThanOrEqual(values.length / 2);
        expect(values.filter((value) => value > middle).length).toBeLessThanOrEqual(values.length / 2);
        expect(quantile(values, 0.5)).toBeCloseTo(middle, 6);
        expect(quantile(values, 0) - Math.min(...values)).toBeCloseTo(0, 12);
        expect(quantile(values, 1) - Math.max(...values)).toBeCloseTo(0, 12);
      }),
    );
  });

  it('finds every rank as sorting does, among many of a kind too', () => {
    const few = fc.array(fc.integer({ min: 0, max: 5 }), { minLength: 1, maxLength: 200 });
    const many = fc.array(number, { minLength: 1, maxLength: 200 });
    fc.assert(
      fc.property(fc.oneof(few, many), fc.nat(), fc.nat({ max: 20 }), (values, any, more) => {
        const ordered = [...values].sort((a, b) => a - b);
        const rank = any % values.length;
        // what lies behind the count is not looked at
        const set = Float64Array.from([...values, ...Array.from({ length: more }, () => -1e9)]);
        expect(ranked(set, rank, values.length)).toBeCloseTo(ordered[rank]!, 12);
        expect(Math.max(...set.slice(0, rank + 1))).toBeCloseTo(ordered[rank]!, 12);
        const signless = (list: Iterable<number>): number[] => Array.from(list, (v) => v + 0); // −0 is 0
        expect(signless(set.slice(0, values.length).sort())).toEqual(signless(ordered));
        const middle = values.length >> 1;
        expect(medianInPlace(set, values.length)).toBeCloseTo(
          values.length % 2 === 1 ? ordered[middle]! : (ordered[middle - 1]! + ordered[middle]!) / 2,
          9,
        );
      }),
    );
  });

  it('isn’t moved by a minority of wild values', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 9, max: 11, noNaN: true }), { minLength: 5, maxLength: 30 }),
        (good) => {
          const wild = good.slice(0, Math.floor((good.length - 1) / 2)).map(() => 1e9);
          const middle = median([...good, ...wild]);
          expect(middle).toBeGreaterThanOrEqual(9);
          expect(middle).toBeLessThanOrEqual(11);
          expect(sigmaMad([...good, ...wild])).toBeLessThan(1e9);
        },
      ),
    );
  });

  it('has its own rule where more than half of the values are equal', () => {
    const values = [5, 5, 5, 5, 4];
    expect(mad(values)).toBe(0);
    expect(modifiedZ(values)).toEqual([null, null, null, null, null]);
    expect(outliersByModifiedZ(values)).toEqual([]);
    // mean absolute deviation 0.2: −1/(1.253314·0.2)
    expect(modifiedZ(values, 'mean_deviation')[4]).toBeCloseTo(-3.98942, 4);
    expect(modifiedZ([7, 7, 7], 'mean_deviation')).toEqual([0, 0, 0]);
  });

  it('scores don’t change with the unit', () => {
    fc.assert(
      fc.property(eighths, (values) => {
        const before = modifiedZ(values);
        const after = modifiedZ(values.map((value) => 1000 * value));
        before.forEach((z, index) => {
          if (z === null || after[index] === null) expect(after[index]).toBe(z);
          else
            expect(Math.abs((after[index] ?? NaN) - z)).toBeLessThanOrEqual(1e-6 * Math.max(1, Math.abs(z)));
        });
      }),
    );
  });

  it('refuses an empty set and values that are no numbers', () => {
    expect(() => median([])).toThrow(/values must hold at least one number/);
    expect(() => median([1, Number.NaN])).toThrow(/finite numbers only/);
    expect(() => mad([1, Infinity])).toThrow(/finite numbers only/);
    expect(() => quantile([1], 2)).toThrow(/share/);
  });
});

describe('theilSen', () => {
  const x = Array.from({ length: 60 }, (_, i) => i);
  it(
    'finds a line through a quarter of wild points',
    () => {
      fc.assert(
        fc.property(
          fc.double({ min: -5, max: 5, noNaN: true }),
          fc.double({ min: -50, max: 50, noNaN: true }),
          fc.array(fc.integer({ min: 0, max: 59 }), { maxLength: 15 }),
          (slope, intercept, wild) => {
            const y = x.map((value) => intercept + slope * value);
            for (const index of wild) y[index] = 1e6 * (index % 2 ? 1 : -1);
            const line = theilSen(x, y);
            expect(line.slope).toBeCloseTo(slope, 6);
            expect(line.intercept).toBeCloseTo(intercept, 5);
            expect(line.slopeLow).toBeLessThanOrEqual(line.slope);
            expect(line.slopeHigh).toBeGreaterThanOrEqual(line.slope);
          },
        ),
      );
    },
    SLOW,
  );

  it('stays true on thousands of points by a choice of pairs', () => {
    const many = Array.from({ length: 3000 }, (_, i) => i / 100);
    // a fixed ripple in place of noise
    const line = theilSen(
      many,
      many.map((value, i) => 2 + 0.3 * value + Math.sin(i * 12.9898) * 0.5),
    );
    expect(line.pairs).toBeLessThanOrEqual(40_000);
    expect(line.slope).toBeCloseTo(0.3, 2);
    expect(line.slopeLow).toBeLessThan(0.3);
    expect(line.slopeHigh).toBeGreaterThan(0.3);
    expect(line.slopeHigh - line.slopeLow).toBeLessThan(0.02);
  });

  it(
    'has the true slope in its interval nineteen times of twenty',
    () => {
      // a linear congruential sequence: the same noise in every run (Numerical Recipes constants)
      let state = 12345;
      const uniform = () => {
        state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
        return state / 2 ** 32;
      };
      const normal = () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
      const trials = 200;
      let held = 0;
      for (let trial = 0; trial < trials; trial += 1) {
        const line = theilSen(
          x,
          x.map((value) => 1 + 0.05 * value + normal()),
        );
        if (line.slopeLow <= 0.05 && line.slopeHigh >= 0.05) held += 1;
      }
      expect(held / trials).toBeGreaterThan(0.925);
      expect(held / trials).toBeLessThan(0.98);
    },
    SLOW,
  );

  it('refuses what has no line', () => {
    expect(() => theilSen([1], [1])).toThrow(/two points/);
    expect(() => theilSen([1, 2], [1])).toThrow(/one length/);
    expect(() => theilSen([1, 1], [1, 2])).toThrow(/two different values/);
    expect(() => theilSen([1, Number.NaN], [1, 2])).toThrow(/finite/);
    expect(() => theilSen([1, 2], [1, 2], 1)).toThrow(/confidence/);
  });
});

describe('cusum', () => {
  it('stays silent on target, and tells the side of a shift', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 50 }),
        fc.double({ min: 0.5, max: 3, noNaN: true }),
        (before, shift) => {
          const quiet = Array.from({ length: before }, () => 10);
          expect(cusum(quiet, 10, 0.25, 2).firstSignal).toBeNull();
          const risen = cusum([...quiet, ...Array.from({ length: 50 }, () => 10 + shift)], 10, 0.25, 2);
          const fallen = cusum([...quiet, ...Array.from({ length: 50 }, () => 10 - shift)], 10, 0.25, 2);
          expect(risen.side).toBe('high');
          expect(fallen.side).toBe('low');
          expect(risen.firstSignal).toBe(fallen.firstSignal);
          expect(risen.firstSignal).toBeGreaterThanOrEqual(before);
        },
      ),
    );
  });

  it('refuses by name', () => {
    expect(() => cusum([1], Number.NaN, 1, 1)).toThrow(/target/);
    expect(() => cusum([1], 1, -1, 1)).toThrow(/k must/);
    expect(() => cusum([1], 1, 1, 0)).toThrow(/h must/);
    expect(() => cusum([1, Number.NaN], 1, 1, 1)).toThrow(/values\[1\]/);
  });
});
