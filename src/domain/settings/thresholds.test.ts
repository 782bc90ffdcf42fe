import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DAYS_LOW, LOSS_MIN } from '../output/low-output';
import { EXCESS_OHM } from '../output/resistance';
import { LOSS_MIN as WEAK_MIN } from '../output/weak-unit';
import { THRESHOLDS, THRESHOLD_KEYS, thresholdsOf } from './thresholds';

describe('thresholds', () => {
  it('have the judgements’ own figures as defaults', () => {
    expect(thresholdsOf({})).toEqual({
      stuckGraceS: null,
      lowOutputLoss: LOSS_MIN,
      lowOutputDays: DAYS_LOW,
      weakUnitLoss: WEAK_MIN,
      loopExcessOhm: EXCESS_OHM,
      incompleteBelow: 0.9,
    });
    expect(THRESHOLDS.map((t) => t.key)).toEqual([...THRESHOLD_KEYS]);
    for (const { initial, min, max } of THRESHOLDS)
      if (initial !== null) expect(initial >= min && initial <= max).toBe(true);
  });
  it('are never outside their range, whatever is kept', () => {
    fc.assert(
      fc.property(
        fc.dictionary(fc.constantFrom<string>(...THRESHOLD_KEYS, 'other'), fc.anything()),
        (kept) => {
          const held = thresholdsOf(kept);
          for (const { key, min, max } of THRESHOLDS) {
            const value = held[key];
            if (value !== null) expect(value >= min && value <= max).toBe(true);
          }
        },
      ),
    );
    expect(thresholdsOf(null)).toEqual(thresholdsOf({}));
    expect(thresholdsOf({ lowOutputDays: 2.5, lowOutputLoss: 0.1 })).toMatchObject({
      lowOutputDays: 3,
      lowOutputLoss: 0.1,
    });
  });
});
