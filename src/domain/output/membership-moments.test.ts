import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chooseMoments, momentLength, type Heard } from './membership-moments';

const every = (lengthS: number, count: number, strings: (k: number) => number = () => 5): Heard[] =>
  Array.from({ length: count }, (_, k) => ({ atS: 1_790_000_040 + k * lengthS, strings: strings(k) }));

describe('moments at which currents are compared', () => {
  it('last whole minutes, one report of each string at least', () => {
    expect([10, 60, 90, 300, 900].map(momentLength)).toEqual([60, 60, 120, 300, 900]);
  });

  it('are all of them, where there are few', () => {
    const heard = every(300, 240);
    expect(chooseMoments(heard, 300)).toEqual({ stepS: 300, atS: heard.map((m) => m.atS) });
    expect(chooseMoments([], 300)).toEqual({ stepS: 300, atS: [] });
  });

  it('of a minute-by-minute day one of each step: where most strings reported, then the newest', () => {
    const heard = every(60, 1440, (k) => (k % 6 === 2 ? 5 : 4));
    const { stepS, atS } = chooseMoments(heard, 60);
    expect(stepS).toBe(360);
    expect(atS).toEqual(heard.filter((_, k) => k % 6 === 2).map((m) => m.atS));
    const alike = chooseMoments(every(60, 1440), 60);
    expect(alike.atS).toEqual(heard.filter((_, k) => k % 6 === 5).map((m) => m.atS));
  });

  it('are at most 240 of those heard, ascending, each step once', () => {
    fc.assert(
      fc.property(
        fc.uniqueArray(fc.nat(3000), { minLength: 1, maxLength: 900 }),
        fc.constantFrom(60, 120, 300),
        (places, lengthS) => {
          const heard = places.sort((a, b) => a - b).map((k) => ({ atS: k * lengthS, strings: 1 + (k % 4) }));
          const { stepS, atS } = chooseMoments(heard, lengthS);
          expect(atS.length).toBeLessThanOrEqual(240);
          const from = heard[0]!.atS;
          const steps = (times: readonly number[]) => times.map((t) => Math.floor((t - from) / stepS));
          expect(steps(atS)).toEqual([...new Set(steps(heard.map((m) => m.atS)))]);
          expect(atS.every((t) => heard.some((m) => m.atS === t))).toBe(true);
        },
      ),
    );
  });
});
