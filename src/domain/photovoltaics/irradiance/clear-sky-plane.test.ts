import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import chain from '../../../../tests/reference/expected_power_chain.json';
import { clearSkyInPlane } from './clear-sky-plane';

const at = (latitude: number, longitude: number, surfaceTilt = 20, surfaceAzimuth = 180) => ({
  latitude,
  longitude,
  altitude: 50,
  surfaceTilt,
  surfaceAzimuth,
});

describe('a clear sky in a plane', () => {
  // Computed with pvlib-python 0.15.2 (BSD-3): Ineichen clear sky, Hay & Davies transposition; the source is in the file.
  // Ours takes the pressure of the altitude and the quick sun, hence 1 % and no case under 6 degrees.
  it.each(chain.cases.filter((c) => (c.out.apparent_zenith ?? 90) < 84))(
    'agrees with $id',
    ({ in: given, out }) => {
      const found = clearSkyInPlane(
        Date.parse(given.time_utc),
        {
          latitude: given.latitude,
          longitude: given.longitude,
          altitude: given.altitude_m,
          surfaceTilt: given.surface_tilt,
          surfaceAzimuth: given.surface_azimuth,
          albedo: given.albedo,
        },
        given.linke_turbidity,
      );
      expect(Math.abs(found.poaGlobal / (out.poa_global ?? 0) - 1)).toBeLessThan(0.01);
      expect(Math.abs(found.ghi / (out.ghi_clear ?? 0) - 1)).toBeLessThan(0.01);
    },
  );

  it('is nothing while the sun is down, and never more than the sun itself', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: Date.UTC(2020, 0, 1), max: Date.UTC(2035, 0, 1) }),
        fc.double({ min: -66, max: 66, noNaN: true }),
        fc.double({ min: -180, max: 180, noNaN: true }),
        (epochMs, latitude, longitude) => {
          const sky = clearSkyInPlane(epochMs, at(latitude, longitude));
          if (sky.elevation < 0) expect(sky.poaGlobal).toBe(0);
          expect(sky.poaGlobal).toBeGreaterThanOrEqual(0);
          expect(sky.poaGlobal).toBeLessThan(1420);
        },
      ),
    );
  });

  it('in a level plane is the global horizontal irradiance', () => {
    const sky = clearSkyInPlane(Date.UTC(2026, 5, 3, 12), at(50, 0, 0));
    expect(sky.poaGlobal).toBeCloseTo(sky.ghi, 6);
  });
});
