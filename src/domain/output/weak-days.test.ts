import { describe, expect, it } from 'vitest';
import { isWell, lastingWeakUnits } from './weak-days';
import type { WeakUnit } from './weak-unit';

const weak = (
  unit: number,
  kind: WeakUnit['kind'] = 'bypassed_substring',
  count: number | null = 1,
): WeakUnit => ({
  unit,
  kind,
  count,
  ratio: 0.66,
  share: 1,
  words: '',
  threshold: { ratio: 0.94, source: '' },
  confidence: 0.9,
  couldBe: [],
});

describe('weak units over days', () => {
  it('are found on the second day that says the same, days that tell nothing left out', () => {
    expect(lastingWeakUnits([[weak(3)]])).toEqual([]);
    expect(lastingWeakUnits([[weak(3)], null, null, [weak(3)]]).map((w) => w.unit)).toEqual([3]);
    expect(lastingWeakUnits([[weak(3)], [weak(3, 'low', null)]])).toEqual([]);
    expect(lastingWeakUnits([[weak(3)], [weak(3)], []])).toEqual([]);
  });
  it('leave held units and shade of part of a day to others', () => {
    expect(lastingWeakUnits([[weak(1, 'held', null)], [weak(1, 'held', null)]])).toEqual([]);
    expect(lastingWeakUnits([[weak(1, 'part_of_day', null)], [weak(1, 'part_of_day', null)]])).toEqual([]);
  });
  it('are well after two days without it, and before that nobody can say', () => {
    expect(isWell([[weak(1)], []], 1)).toBeNull();
    expect(isWell([[weak(1)], [], null, []], 1)).toBe(true);
    expect(isWell([[weak(1)], [weak(1)]], 1)).toBe(false);
    expect(isWell([null, null, []], 1)).toBeNull();
  });
});
