import { describe, expect, it } from 'vitest';
import { aboutMiddle, cellAt, middles, mixed, onRamp, rangeOf, type HeatModel } from './heat';

const model: HeatModel = {
  title: 'x',
  unit: 'V',
  digits: 1,
  timeZone: 'UTC',
  from: 0,
  to: 900,
  stepS: 300,
  at: [0, 300, 600],
  rows: [
    { position: 1, values: [38, 40, 0.4] },
    { position: 2, values: [38, 40, null] },
    { position: 3, values: [38, 20, 0.4] },
    { position: 4, values: [null, 40, 0.4] },
  ],
  scale: 'middle',
};

describe('a heat strip', () => {
  it('holds each unit against the middle of its step, and a missing one against nothing', () => {
    const m = middles(model, 5);
    expect(m).toEqual([38, 40, null]);
    expect(cellAt(model, m, 2, 1)).toEqual({ at: 300, position: 3, value: 20, ratio: 0.5 });
    expect(cellAt(model, m, 3, 0).value).toBeNull();
    // a few tenths of a volt in the dark are no middle to divide by
    expect(cellAt(model, m, 0, 2).ratio).toBeNull();
  });

  it('ranges from nothing to the highest, whatever one wild value says', () => {
    const wild = { rows: [{ position: 1, values: [...Array.from({ length: 400 }, () => 30), 3000] }] };
    expect(rangeOf(wild)).toEqual([0, 30]);
    expect(rangeOf({ rows: [{ position: 1, values: [null] }] })).toEqual([0, 1]);
  });

  it('lies on its ramp within its ends', () => {
    expect([onRamp(-5, [0, 40]), onRamp(20, [0, 40]), onRamp(99, [0, 40])]).toEqual([0, 0.5, 1]);
    expect([aboutMiddle(0), aboutMiddle(1), aboutMiddle(1.125), aboutMiddle(9)]).toEqual([-1, 0, 0.5, 1]);
    expect(mixed(['rgb(0 0 0)', 'rgb(100 100 100)', 'rgb(200 0 0)'], 0.25)).toBe('rgb(50 50 50)');
    expect(mixed(['rgb(0 0 0)', 'rgb(100 100 100)', 'rgb(200 0 0)'], 1)).toBe('rgb(200 0 0)');
  });
});
