import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { solarPosition } from './position';
import { solarPositionQuick } from './position-quick';
import { sunRiseSet } from './rise-set';
import { dayOfYear, deltaTAt } from './time';

/** ms: many runs, on a busy machine. */
const SLOW = 60_000;

const finite = (options: { min: number; max: number }) =>
  fc.double({ ...options, noNaN: true, noDefaultInfinity: true });
const place = fc.record({
  latitude: finite({ min: -90, max: 90 }),
  longitude: finite({ min: -180, max: 180 }),
  altitude: finite({ min: -500, max: 9000 }),
});
const anyTime = fc.integer({ min: Date.UTC(-2000, 0, 1), max: Date.UTC(6000, 11, 31) });
const ourTime = fc.integer({ min: Date.UTC(1950, 0, 1), max: Date.UTC(2100, 11, 31) });
const air = fc.record({
  pressure: finite({ min: 0, max: 120_000 }),
  temperatureAir: finite({ min: -90, max: 70 }),
});

describe('solarPosition', () => {
  it('is a direction everywhere and at any time it is stated for', () => {
    fc.assert(
      fc.property(anyTime, place, air, (at, where, through) => {
        const sun = solarPosition(at, where, through);
        for (const value of Object.values(sun)) expect(Number.isFinite(value)).toBe(true);
        expect(sun.zenith).toBeGreaterThanOrEqual(0);
        expect(sun.zenith).toBeLessThanOrEqual(180);
        expect(sun.azimuth).toBeGreaterThanOrEqual(0);
        expect(sun.azimuth).toBeLessThan(360);
        expect(sun.zenith + sun.elevation).toBeCloseTo(90, 9);
        expect(sun.apparentElevation).toBeGreaterThanOrEqual(sun.elevation - 0.01);
        expect(Math.abs(sun.equationOfTime)).toBeLessThan(30);
        expect(sun.earthSunDistance).toBeGreaterThan(0.97);
        expect(sun.earthSunDistance).toBeLessThan(1.03);
      }),
      { numRuns: 500 },
    );
  });

  it.each([
    [Number.NaN, { latitude: 0, longitude: 0, altitude: 0 }, {}, /epochMs/],
    [
      0,
      { latitude: 91, longitude: 0, altitude: 0 },
      {},
      /latitude must be between -90 and 90 degrees, but is 91/,
    ],
    [0, { latitude: 0, longitude: 181, altitude: 0 }, {}, /longitude/],
    [0, { latitude: 0, longitude: 0, altitude: 9001 }, {}, /altitude/],
    [0, { latitude: 0, longitude: 0, altitude: 0 }, { pressure: -1 }, /pressure/],
    [0, { latitude: 0, longitude: 0, altitude: 0 }, { temperatureAir: 100 }, /temperatureAir/],
    [0, { latitude: 0, longitude: 0, altitude: 0 }, { deltaT: Number.NaN }, /deltaT/],
  ])('refuses %s %o %o', (at, where, through, named) => {
    expect(() => solarPosition(at, where, through)).toThrow(RangeError);
    expect(() => solarPosition(at, where, through)).toThrow(named);
  });
});

describe('solarPositionQuick', () => {
  it(
    'keeps within 0.007° of the full algorithm from 1950 to 2100',
    () => {
      fc.assert(
        fc.property(ourTime, place, (at, where) => {
          const exact = solarPosition(at, where);
          const quick = solarPositionQuick(at, where);
          expect(Math.abs(quick.zenith - exact.zenith)).toBeLessThan(0.007);
          const turn = Math.abs(quick.azimuth - exact.azimuth);
          const across = Math.min(turn, 360 - turn) * Math.sin((exact.zenith * Math.PI) / 180);
          expect(across).toBeLessThan(0.007);
          expect(Math.abs(quick.equationOfTime - exact.equationOfTime)).toBeLessThan(0.06);
        }),
        { numRuns: 2000 },
      );
    },
    SLOW,
  );

  it('refuses years it was not made for', () => {
    expect(() =>
      solarPositionQuick(Date.UTC(1900, 0, 1), { latitude: 0, longitude: 0, altitude: 0 }),
    ).toThrow(/epochMs/);
  });
});

describe('sunRiseSet', () => {
  it('puts sunrise before transit and sunset after, or says that the sun stays up or down', () => {
    fc.assert(
      fc.property(ourTime, place, fc.constantFrom('published', 'actual'), (at, where, beyondDay) => {
        const day = sunRiseSet(at, where, { beyondDay });
        expect(Number.isFinite(day.transit)).toBe(true);
        const dayStart = Math.floor(at / 86_400_000) * 86_400_000;
        expect(Math.abs(day.transit - dayStart - 43_200_000)).toBeLessThan(43_200_000 + 60_000);
        if (day.sunUp !== 'rises_and_sets') {
          expect([day.sunrise, day.sunset]).toEqual([null, null]);
          expect(Math.abs(where.latitude)).toBeGreaterThan(65);
          return;
        }
        expect(day.sunrise).not.toBeNull();
        expect(day.sunset).not.toBeNull();
        if (Math.abs(where.latitude) > 65) return; // days on which the sun only grazes the horizon
        expect(day.sunrise).toBeLessThan(day.transit);
        expect(day.sunset).toBeGreaterThan(day.transit);
      }),
      { numRuns: 500 },
    );
  });

  it('has the sun high at the end of polar night’s opposite', () => {
    const north = { latitude: 75, longitude: 20 };
    expect(sunRiseSet(Date.UTC(2026, 5, 21), north).sunUp).toBe('all_day');
    expect(sunRiseSet(Date.UTC(2026, 11, 21), north).sunUp).toBe('not_at_all');
  });
});

describe('time', () => {
  it('counts days of the year in UTC', () => {
    expect(dayOfYear(Date.UTC(2026, 0, 1))).toBe(1);
    expect(dayOfYear(Date.UTC(2026, 11, 31, 23, 59))).toBe(365);
    expect(dayOfYear(Date.UTC(2024, 11, 31))).toBe(366);
    expect(dayOfYear(Date.UTC(2024, 1, 29))).toBe(60);
    expect(dayOfYear(-1)).toBe(365);
  });

  it('knows terrestrial minus universal time as observed', () => {
    // IERS: 63.83 s at 2000.0, 69.36 s at 2020.0
    expect(deltaTAt(Date.UTC(2000, 0, 1))).toBeCloseTo(63.8, 1);
    expect(deltaTAt(Date.UTC(2020, 0, 1))).toBeCloseTo(69.4, 1);
    expect(deltaTAt(Date.UTC(2090, 0, 1))).toBe(69.1);
  });
});
