import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { detectClearSky } from './clear-detection';
import { clearSkyInPlane } from './clear-sky-plane';

const place = { latitude: 40, longitude: -105, altitude: 1600, surfaceTilt: 0, surfaceAzimuth: 180 };
const noon = Date.UTC(2026, 3, 1, 19);
/** Four hours about noon, each minute. */
const sky = Array.from({ length: 240 }, (_, i) => clearSkyInPlane(noon + (i - 120) * 60_000, place).ghi);

describe('detectClearSky', () => {
  it('finds a clear day clear, and the scale of the curve', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.94, max: 1.06, noNaN: true }), (scale) => {
        const found = detectClearSky(
          sky.map((ghi) => scale * ghi),
          sky,
          1,
        );
        expect(found.clear.every(Boolean)).toBe(true);
        expect(found.scale).toBeCloseTo(scale, 6);
      }),
      { numRuns: 20 },
    );
  });

  it('marks the minutes of a passing cloud and no others but its edges', () => {
    const measured = sky.map((ghi, i) => (i >= 100 && i < 120 ? 0.4 * ghi : ghi));
    const { clear } = detectClearSky(measured, sky, 1);
    expect(clear.slice(100, 120).some(Boolean)).toBe(false);
    expect(clear.slice(0, 100).every(Boolean)).toBe(true);
    expect(clear.slice(120).every(Boolean)).toBe(true);
  });

  it('finds nothing in an overcast or a flickering sky, nor across a gap or at night', () => {
    const none = (measured: (number | null)[], clearSky = sky) =>
      detectClearSky(measured, clearSky, 1).clear.some(Boolean);
    expect(none(sky.map((ghi) => 0.3 * ghi))).toBe(false);
    expect(none(sky.map((ghi, i) => ghi + (i % 2 ? 20 : -20)))).toBe(false);
    expect(none(sky.map((ghi, i) => (i % 5 === 0 ? null : ghi)))).toBe(false);
    expect(
      none(
        sky.map(() => 0),
        sky.map(() => 0),
      ),
    ).toBe(false);
  });

  it('refuses by name', () => {
    expect(() => detectClearSky([1, 2], [1], 1)).toThrow(/clearSky must be as long/);
    expect(() => detectClearSky([], [], 0)).toThrow(/intervalMinutes/);
    expect(() => detectClearSky([NaN], [1], 1)).toThrow(/measured\[0\]/);
    expect(() => detectClearSky([1], [-1], 1)).toThrow(/clearSky\[0\]/);
    expect(() => detectClearSky([1], [1], 15)).toThrow(/samples per window/);
  });
});
