import { describe, expect, it } from 'vitest';
import { daylightBetween } from './daylight';

const equator = { latitude: 0, longitude: 0, altitude: 0 };
const HOUR = 3_600_000;
const midnight = Date.parse('2026-03-20T00:00:00Z');

describe('daylight between two instants', () => {
  it('at the equator at equinox: twelve hours less the low sun of both ends', () => {
    const light = daylightBetween(midnight, midnight + 24 * HOUR, equator, 24 * HOUR) / HOUR;
    // 90° in six hours: six degrees take 24 minutes, twice
    expect(light).toBeGreaterThan(11);
    expect(light).toBeLessThan(11.4);
  });

  it('none at night, all at noon, and no more than is enough', () => {
    expect(daylightBetween(midnight, midnight + 5 * HOUR, equator, 24 * HOUR)).toBe(0);
    expect(daylightBetween(midnight + 11 * HOUR, midnight + 13 * HOUR, equator, 24 * HOUR)).toBe(2 * HOUR);
    expect(daylightBetween(midnight, midnight + 240 * HOUR, equator, 3 * HOUR)).toBe(3 * HOUR);
  });
});
