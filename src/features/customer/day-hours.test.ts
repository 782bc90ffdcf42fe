import { describe, expect, it } from 'vitest';
import { dayHours } from './day-hours';

const FROM = Date.parse('2026-12-01T00:00:00Z');
const quarter = (i: number) => new Date(FROM + i * 900_000).toISOString();
const today = (madeAt: number[]) => ({
  day: '2026-12-01',
  from: quarter(0),
  to: quarter(96),
  made: madeAt.map((i) => ({ at: quarter(i), power: 1000 + i })),
  energy: 1,
  clear: Array.from({ length: 96 }, (_, i) => ({ at: quarter(i), power: i >= 32 && i < 64 ? 2000 : 0 })),
  clearFrom: 'own_best' as const,
  clearEnergyUntilNow: 1,
});

describe('the day in hours', () => {
  it('sets each quarter at its middle, from midnight at the site', () => {
    const day = dayHours(today([40]), quarter(41));
    expect(day.clear[0]?.hour).toBe(0.125);
    expect(day.made.find((p) => p.value !== null)).toEqual({ hour: 10.125, value: 1040 });
  });
  it('draws a gap where a passed quarter is not known, and nothing of what is to come', () => {
    const day = dayHours(today([38, 40]), quarter(44));
    expect(day.made.slice(38, 41).map((p) => p.value)).toEqual([1038, null, 1040]);
    expect(day.made.at(-1)?.hour).toBeLessThan(11);
    expect(day.made.at(-1)?.value).toBeNull();
  });
  it('does not open a gap for the quarter that is being summed up just now', () => {
    expect(dayHours(today([38, 39, 40]), quarter(42)).made.at(-1)?.value).toBe(1040);
  });
  it('holds on a day of which nothing is known', () => {
    const day = dayHours(today([]), quarter(44));
    expect(day.made.every((p) => p.value === null)).toBe(true);
    expect(day.rows).toHaveLength(32);
  });
});
