import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  SAPM_MOUNTS,
  temperatureCellNoct,
  temperatureCellNoctWind,
  temperatureCellSapm,
  temperatureFaiman,
  temperatureModuleSapm,
} from './cell';

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true, noDefaultInfinity: true });
const exposure = fc.record({
  poaGlobal: between(0, 2000),
  temperatureAir: between(-90, 70),
  windSpeed: between(0, 60),
});

describe('cell temperature', () => {
  it('is the air’s without light, and above it with light', () => {
    fc.assert(
      fc.property(exposure, fc.constantFrom(...Object.values(SAPM_MOUNTS)), (given, mount) => {
        const noct = { noct: 45, moduleEfficiency: 0.2 };
        for (const model of [
          (e: typeof given) => temperatureModuleSapm(e, mount),
          (e: typeof given) => temperatureCellSapm(e, mount),
          (e: typeof given) => temperatureFaiman(e),
          (e: typeof given) => temperatureCellNoct(e.poaGlobal, e.temperatureAir, 45),
          (e: typeof given) => temperatureCellNoctWind(e, noct),
        ]) {
          const warm = model(given);
          expect(Number.isFinite(warm)).toBe(true);
          expect(warm).toBeGreaterThanOrEqual(given.temperatureAir);
          expect(model({ ...given, poaGlobal: 0 })).toBeCloseTo(given.temperatureAir, 12);
          const windy = model({ ...given, windSpeed: Math.min(60, given.windSpeed + 1) });
          expect(windy).toBeLessThanOrEqual(warm + 1e-9);
        }
      }),
    );
  });

  it('is hotter the closer the module sits to the roof', () => {
    const sun = { poaGlobal: 800, temperatureAir: 20, windSpeed: 1 };
    const at = (mountStandoff: number) =>
      temperatureCellNoctWind(sun, { noct: 45, moduleEfficiency: 0.2, mountStandoff });
    const heights = [0.3, 1, 2, 3, 4].map(at);
    expect([...heights].sort((a, b) => b - a)).toEqual(heights);
  });

  it('refuses by name', () => {
    expect(() => temperatureFaiman({ poaGlobal: -1, temperatureAir: 20, windSpeed: 1 })).toThrow(/poaGlobal/);
    expect(() => temperatureFaiman({ poaGlobal: 1, temperatureAir: 99, windSpeed: 1 })).toThrow(
      /temperatureAir/,
    );
    expect(() => temperatureFaiman({ poaGlobal: 1, temperatureAir: 20, windSpeed: -1 })).toThrow(/windSpeed/);
    expect(() => temperatureFaiman({ poaGlobal: 1, temperatureAir: 20, windSpeed: 1 }, 0)).toThrow(/u0/);
    expect(() => temperatureCellNoct(800, 20, 10)).toThrow(/noct/);
  });
});
