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
    const typicals = new Map([
      ['A', of(5, 6, 7)],
      ['B', of(6, 7, 8)],
      ['C', of(9, 9, 9)],
    ]);
    const a = { string: 'A', current: of(6.02, 7.01, 8), apart: 0.16 };
    const b = { string: 'B', current: of(5.01, 6, 7.02), apart: 0.14 };
    expect(counterpartOf(a, [a, b], typicals)).toBe(b);
    expect(counterpartOf(b, [a, b], typicals)).toBe(a);
    expect(counterpartOf(a, [a], typicals)).toBeNull();
    expect(counterpartOf(a, [a, b, { ...b }], typicals)).toBeNull();
    expect(counterpartOf(a, [a, b, { ...a }], typicals)).toBeNull();
    const far = { string: 'C', current: of(5, 6, 7), apart: 0.3 };
    expect(counterpartOf(a, [a, far], typicals)).toBeNull();
  });
});
