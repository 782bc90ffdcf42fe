import { describe, expect, it } from 'vitest';
import { DATASHEET_SCALE, QUARTER_MS, clearDay, ownBestScale, type ArrayAtPlace } from './clear-day';

const array: ArrayAtPlace = {
  latitude: 51.5,
  longitude: 0,
  altitude: 30,
  acPowerMax: 40_000,
  planes: [{ surfaceTilt: 30, surfaceAzimuth: 180, albedo: 0.2, pmpRef: 40_000 }],
};
const DAY = 86_400_000;
const JUNE = Date.UTC(2026, 5, 20);
const energy = (points: { power: number }[]) => points.reduce((sum, p) => sum + p.power / 4, 0);

describe('a clear day', () => {
  const day = clearDay(JUNE, JUNE + DAY, array, DATASHEET_SCALE);
  it('has a quarter for each 15 minutes, nothing at night and its peak near solar noon', () => {
    expect(day).toHaveLength(96);
    expect(day[0]?.power).toBe(0);
    const peak = day.reduce((a, b) => (b.power > a.power ? b : a));
    expect(Math.abs(peak.atMs - (JUNE + DAY / 2))).toBeLessThanOrEqual(2 * QUARTER_MS);
  });
  it('gives what a clear midsummer day gives a south roof in London: 6 to 7.5 kWh a kWp (common practice)', () => {
    const yieldPerKwp = energy(day) / 40_000;
    expect(yieldPerKwp).toBeGreaterThan(6);
    expect(yieldPerKwp).toBeLessThan(7.5);
  });
  it('is cut at the inverters’ limit', () => {
    const cut = clearDay(JUNE, JUNE + DAY, { ...array, acPowerMax: 20_000 }, DATASHEET_SCALE);
    expect(Math.max(...cut.map((p) => p.power))).toBe(20_000);
  });
  it('follows the plane: east of it earlier, west of it later', () => {
    const faces = (surfaceAzimuth: number) => {
      const points = clearDay(
        JUNE,
        JUNE + DAY,
        { ...array, planes: [{ surfaceTilt: 30, surfaceAzimuth, albedo: 0.2, pmpRef: 40_000 }] },
        1,
      );
      return points.reduce((a, b) => (b.power > a.power ? b : a)).atMs;
    };
    expect(faces(90)).toBeLessThan(faces(180));
    expect(faces(270)).toBeGreaterThan(faces(180));
  });
  it('has 92 and 100 quarters where the clocks change', () => {
    expect(clearDay(JUNE, JUNE + 23 * 3_600_000, array, 1)).toHaveLength(92);
    expect(clearDay(JUNE, JUNE + 25 * 3_600_000, array, 1)).toHaveLength(100);
  });
});

describe('a site’s own best', () => {
  const made = (scale: number, cloudy: (i: number) => number) =>
    clearDay(JUNE, JUNE + 5 * DAY, array, 1).map((p, i) => ({ ...p, power: p.power * scale * cloudy(i) }));

  it('finds the scale again through days of cloud', () => {
    const scale = ownBestScale(
      made(0.7, (i) => (i % 3 === 0 ? 1 : 0.3)),
      array,
    );
    expect(scale).toBeCloseTo(0.7, 6);
  });
  it('is not carried away by a few bright cloud edges', () => {
    expect(
      ownBestScale(
        made(0.7, (i) => (i % 50 === 0 ? 1.3 : 1)),
        array,
      ),
    ).toBeCloseTo(0.7, 6);
  });
  it('leaves out quarters at the inverters’ limit, and says nothing from too few', () => {
    expect(
      ownBestScale(
        made(0.7, () => 1).map((p) => ({ ...p, power: 40_000 })),
        array,
      ),
    ).toBeNull();
    expect(ownBestScale(made(0.7, () => 1).slice(40, 50), array)).toBeNull();
    expect(ownBestScale([], array)).toBeNull();
  });
});
