import { describe, expect, it } from 'vitest';
import { yearChange } from './year-change';

const month = (energyKWh: number, days = 30) => ({ energyKWh, days });

describe('a month against the year before', () => {
  it('is a change in per cent, with its sign', () => {
    expect(yearChange('2026-11', month(110), month(100), '2026-12-01').replace(/\s/g, ' ')).toBe('+10 %');
    expect(yearChange('2026-11', month(90), month(100), '2026-12-01').replace(/\s/g, ' ')).toBe('−10 %');
  });

  it('is not told while it runs, nor where days without data would look like a loss', () => {
    expect(yearChange('2026-11', month(50), month(100), '2026-11-15')).toBe('–');
    expect(yearChange('2026-11', month(5, 2), month(100), '2026-12-01')).toBe('–');
    expect(yearChange('2026-11', undefined, month(100), '2026-12-01')).toBe('–');
    // February of a leap year has a day more
    expect(yearChange('2028-02', month(103, 29), month(100, 28), '2028-03-01')).not.toBe('–');
  });
});
