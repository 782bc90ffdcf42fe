import { describe, expect, it } from 'vitest';
import { apartFrom, counterpartOf, typicalOf } from './membership-evidence';

const of = (...values: number[]) => Float64Array.from(values);

describe('evidence of membership', () => {
  it('the string’s typical current leaves the unit in question out', () => {
    const currents = [of(5, 5), of(5.2, NaN), of(9, 9)];
    expect([...typicalOf(currents, 2)]).toEqual([5.1, 5]);
    expect([...typicalOf([of(NaN), of(NaN), of(4)])]).toEqual([NaN]);
  });
  it('how far apart they are, over steps with current only', () => {
    expect(apartFrom(of(5.3, 0.01, 5.3), of(5, 5, 5))).toEqual({
      share: expect.closeTo(0.06, 9) as number,
      steps: 2,
    });
    expect(apartFrom(of(0.1), of(0.1))).toBeNull();
  });
  it('a pair that looks exchanged, and none where it is not one to one', () => {
    const a = { string: 'A', unit: 3, otherString: 'B' };
    const b = { string: 'B', unit: 1, otherString: 'A' };
    expect(counterpartOf(a, [a, b])).toBe(b);
    expect(counterpartOf(a, [a])).toBeNull();
    expect(counterpartOf(a, [a, b, { ...b, unit: 2 }])).toBeNull();
    expect(counterpartOf(a, [a, b, { ...a, unit: 4 }])).toBeNull();
  });
});
