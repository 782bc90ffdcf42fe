import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lastPeriod } from './letter-period';
import { dayAfter, daysBetween } from './period';

const days = fc.integer({ min: 0, max: 20_000 }).map((n) => dayAfter('2001-01-01', n));

describe('what a letter is about', () => {
  it('is a whole week from Monday to Sunday that is over', () => {
    expect(lastPeriod('week', '2026-12-01')).toEqual({
      key: '2026-11-23',
      from: '2026-11-23',
      before: '2026-11-30',
      label: 'the week from 23 November to 29 November',
    });
    // on a Monday the week that ended yesterday
    expect(lastPeriod('week', '2026-11-30').key).toBe('2026-11-23');
    expect(lastPeriod('week', '2026-11-29').key).toBe('2026-11-16');
  });
  it('is a calendar month that is over', () => {
    expect(lastPeriod('month', '2026-12-01')).toMatchObject({ key: '2026-11', label: 'November 2026' });
    expect(lastPeriod('month', '2026-01-31').key).toBe('2025-12');
  });
  it('never holds a day that is not over, and leaves none out', () => {
    fc.assert(
      fc.property(days, fc.constantFrom('week' as const, 'month' as const), (today, every) => {
        const period = lastPeriod(every, today);
        expect(period.before <= today).toBe(true);
        expect(lastPeriod(every, dayAfter(period.before, -1)).before).toBe(period.from);
        expect(daysBetween(period.from, period.before)).toBeGreaterThan(6);
      }),
    );
  });
});
