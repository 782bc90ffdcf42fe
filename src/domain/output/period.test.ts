import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { dayAfter, daysBetween, elapsedOf, periodOf, yearBefore } from './period';

describe('periods', () => {
  it('follow one another without a gap', () => {
    fc.assert(
      fc.property(fc.integer({ min: 2001, max: 2099 }), fc.integer({ min: 1, max: 12 }), (year, month) => {
        const key = `${year}-${String(month).padStart(2, '0')}`;
        const period = periodOf(key);
        expect(period && periodOf(period.next)?.from).toBe(period?.before);
        expect(period && periodOf(period.previous)?.before).toBe(period?.from);
        expect(period && periodOf(period.yearBefore)?.from.slice(5)).toBe(period?.from.slice(5));
      }),
    );
  });
  it('are months or years, and nothing else', () => {
    expect(periodOf('2026-11')).toMatchObject({ label: 'November 2026', before: '2026-12-01' });
    expect(periodOf('2026')).toMatchObject({ from: '2026-01-01', before: '2027-01-01' });
    for (const odd of ['2026-13', '2026-00', '26-11', '2026-1', 'now', '', '1999', '2026-11-01'])
      expect(periodOf(odd)).toBeNull();
  });
  it('begin with the plant and end with today', () => {
    const month = periodOf('2026-11')!;
    expect(elapsedOf(month, '2026-11-10', '2026-11-12')).toEqual({
      from: '2026-11-10',
      before: '2026-11-13',
      days: 3,
      running: true,
    });
    expect(elapsedOf(month, null, '2026-12-24')).toMatchObject({ days: 30, running: false });
    expect(elapsedOf(month, null, '2026-11-30')).toMatchObject({ days: 30, running: true });
    expect(elapsedOf(month, '2027-01-01', '2026-11-12')).toBeNull();
    expect(elapsedOf(month, null, '2026-10-31')).toBeNull();
  });
  it('count calendar days, leap days too', () => {
    expect(daysBetween('2028-02-01', '2028-03-01')).toBe(29);
    expect(dayAfter('2028-02-28')).toBe('2028-02-29');
    expect(yearBefore('2028-02-29')).toBe('2027-02-28');
    expect(yearBefore('2027-03-01')).toBe('2026-03-01');
  });
});
