import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { isQuiet, isTimeZone, minuteOfDay, nextAt, quietUntil } from './person-clock';

const ZONES = [
  'UTC',
  'Europe/Oslo',
  'America/New_York',
  'Australia/Lord_Howe', // half an hour of summer time
  'Asia/Kathmandu', // +05:45
  'America/Sao_Paulo',
  'Pacific/Apia',
  'Africa/Casablanca',
];
const zone = fc.constantFrom(...ZONES);
const minute = fc.integer({ min: 0, max: 1439 });
const at = fc
  .integer({ min: Date.UTC(2024, 0, 1) / 1000, max: Date.UTC(2029, 0, 1) / 1000 })
  .map((s) => new Date(s * 1000));
const HOUR = 3_600_000;
const next = (now: string, m: number, tz: string) => nextAt(new Date(now), m, tz).toISOString();

describe('the next time of day', () => {
  it('keeps to the wall clock when summer time begins and ends', () => {
    expect(next('2026-03-28T06:00:00Z', 420, 'Europe/Oslo')).toBe('2026-03-29T05:00:00.000Z');
    expect(next('2026-10-24T06:00:00Z', 420, 'Europe/Oslo')).toBe('2026-10-25T06:00:00.000Z');
  });

  it('of an hour that the day does not have is by the offset before it; of one that comes twice, the first', () => {
    expect(next('2026-03-28T12:00:00Z', 150, 'Europe/Oslo')).toBe('2026-03-29T01:30:00.000Z');
    expect(next('2026-10-24T12:00:00Z', 150, 'Europe/Oslo')).toBe('2026-10-25T00:30:00.000Z');
    // the second 02:30 of that night is no second digest
    expect(next('2026-10-25T00:30:00Z', 150, 'Europe/Oslo')).toBe('2026-10-26T01:30:00.000Z');
  });

  it('is later than now, within 25 hours, and shows that minute unless the day has none', () => {
    fc.assert(
      fc.property(at, minute, zone, (now, m, tz) => {
        const then = nextAt(now, m, tz);
        const waits = then.getTime() - now.getTime();
        expect(waits).toBeGreaterThan(0);
        expect(waits).toBeLessThanOrEqual(25 * HOUR);
        const off = (minuteOfDay(then, tz) - m + 1440) % 1440;
        expect([0, 30, 60]).toContain(off);
      }),
      { numRuns: 400 },
    );
  });
});

describe('quiet hours', () => {
  const quiet = fc.record({ from: minute, to: minute }).filter((q) => q.from !== q.to);

  it('end at the first minute that is not quiet', () => {
    fc.assert(
      fc.property(at, quiet, zone, (now, q, tz) => {
        const end = quietUntil(now, q, tz);
        expect(isQuiet(end, q, tz)).toBe(false);
        const waits = end.getTime() - now.getTime();
        expect(waits).toBeGreaterThanOrEqual(0);
        // an hour or less that is not quiet may fall into the hour that a day does not have
        const loud = (q.from - q.to + 1440) % 1440;
        expect(waits).toBeLessThanOrEqual((loud > 60 ? 25 : 48) * HOUR);
        if (waits === 0) return;
        for (const back of [1, 30_000, 60_000, waits / 2, waits])
          if (back <= waits) expect(isQuiet(new Date(end.getTime() - back), q, tz)).toBe(true);
      }),
      { numRuns: 400 },
    );
  });

  it('past midnight and through the night that has an hour less or more', () => {
    const q = { from: 22 * 60, to: 150 };
    const until = (now: string) => quietUntil(new Date(now), q, 'Europe/Oslo').toISOString();
    expect(until('2026-06-01T20:30:00Z')).toBe('2026-06-02T00:30:00.000Z');
    expect(until('2026-03-28T22:00:00Z')).toBe('2026-03-29T01:00:00.000Z'); // 02:00 becomes 03:00
    expect(until('2026-10-24T22:00:00Z')).toBe('2026-10-25T00:30:00.000Z'); // the first 02:30
    expect(until('2026-10-25T01:10:00Z')).toBe('2026-10-25T01:30:00.000Z'); // 02:10 for the second time
  });

  it('that leave only minutes which a day does not have go on until the next day’s', () => {
    const until = (now: string) => quietUntil(new Date(now), { from: 121, to: 120 }, 'America/New_York');
    expect(until('2026-03-07T06:30:00Z').toISOString()).toBe('2026-03-07T07:00:00.000Z');
    expect(until('2026-03-07T07:01:00Z').toISOString()).toBe('2026-03-09T06:00:00.000Z');
  });

  it('none are never quiet', () => {
    expect(isQuiet(new Date(0), null, 'UTC')).toBe(false);
  });
});

it('knows a zone that there is not', () => {
  expect(isTimeZone('Europe/Oslo')).toBe(true);
  expect(isTimeZone('Mars/Olympus')).toBe(false);
});
