import { describe, expect, it } from 'vitest';
import { sunRiseSet } from '../photovoltaics/sun/rise-set';
import { eveningOf } from './evening';

const midnight = (iso: string): number => Date.parse(iso) / 1000;

describe('the evening of a local day', () => {
  it('is sunset, as the sunrise and sunset tables have it', () => {
    // rise-set itself is held against the published tables (tests/reference/sun.test.ts)
    for (const [latitude, day] of [
      [52, '2026-06-21'],
      [52, '2026-12-21'],
      [-33, '2026-03-29'],
    ] as const) {
      const fromS = midnight(`${day}T00:00Z`);
      const { sunset } = sunRiseSet(fromS * 1000, { latitude, longitude: 0 });
      const evening = eveningOf(fromS, fromS + 86_400, { latitude, longitude: 0, altitude: 0 });
      // the disc's edge and refraction: sunset is a few minutes after the centre's true setting
      expect(Math.abs(evening - sunset! / 1000)).toBeLessThan(900);
    }
  });
  it('is the end of a day without a night and the beginning of one without a day', () => {
    const place = { latitude: 78, longitude: 15, altitude: 0 };
    const june = midnight('2026-06-21T00:00Z');
    const december = midnight('2026-12-21T00:00Z');
    expect(eveningOf(june, june + 86_400, place)).toBe(june + 86_400);
    expect(eveningOf(december, december + 86_400, place)).toBe(december);
  });
  it('keeps to days of 23 and 25 hours', () => {
    const place = { latitude: 48, longitude: 11, altitude: 500 };
    for (const [from, to] of [
      ['2026-03-29T00:00+01:00', '2026-03-30T00:00+02:00'],
      ['2026-10-25T00:00+02:00', '2026-10-26T00:00+01:00'],
    ] as const) {
      const evening = eveningOf(midnight(from), midnight(to), place);
      expect(evening).toBeGreaterThan(midnight(from) + 15 * 3600);
      expect(evening).toBeLessThan(midnight(to) - 3 * 3600);
    }
  });
});
