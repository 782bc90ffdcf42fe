import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { absoluteAirMass, pressureAtAltitude, relativeAirMass } from './air-mass';
import { haurwitz, ineichen, simplifiedSolis } from './clear-sky';
import { erbs } from './decomposition';
import { dniExtra } from './extraterrestrial';
import { aoi, iamAshrae, iamPhysical } from './incidence';
import { TRANSPOSITION_MODELS, planeIrradiance, poaGlobal } from './transposition';

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true, noDefaultInfinity: true });
const zenith = between(0, 180);
const cosOf = (degrees: number) => Math.cos((degrees * Math.PI) / 180);

describe('air mass', () => {
  it('grows towards the horizon and ends there', () => {
    fc.assert(
      fc.property(between(0, 90), between(0, 90), (a, b) => {
        const [high, low] = a < b ? [a, b] : [b, a];
        for (const model of ['kasten_young_1989', 'gueymard_1993', 'simple'] as const) {
          const above = relativeAirMass(high, model);
          const below = relativeAirMass(low, model);
          if (above === null || below === null) throw new Error('the sun is above the horizon');
          expect(Number.isFinite(below)).toBe(true);
          expect(below).toBeGreaterThanOrEqual(above - 1e-4);
        }
      }),
    );
    expect(relativeAirMass(90.0001)).toBeNull();
    expect(relativeAirMass(180)).toBeNull();
  });

  it('thins with altitude', () => {
    expect(pressureAtAltitude(0)).toBeCloseTo(101_325, -1);
    fc.assert(
      fc.property(between(-500, 8999), (altitude) => {
        expect(pressureAtAltitude(altitude + 1)).toBeLessThan(pressureAtAltitude(altitude));
      }),
    );
    expect(absoluteAirMass(2, 101_325)).toBe(2);
  });
});

describe('clear sky', () => {
  const ineichenInputs = fc.record({
    apparentZenith: zenith,
    airMassAbsolute: between(0, 50),
    linkeTurbidity: between(1, 12),
    altitude: between(-500, 9000),
    dniExtra: between(1300, 1420),
  });
  it('Ineichen: never negative, never above the extraterrestrial, closes on the horizontal', () => {
    fc.assert(
      fc.property(ineichenInputs, (inputs) => {
        const sky = ineichen(inputs);
        for (const value of Object.values(sky)) expect(value).toBeGreaterThanOrEqual(0);
        expect(sky.dni).toBeLessThanOrEqual(inputs.dniExtra * 1.3);
        if (inputs.apparentZenith < 90) {
          expect(sky.dni * cosOf(inputs.apparentZenith) + sky.dhi).toBeCloseTo(sky.ghi, 9);
        } else expect(sky).toEqual({ ghi: 0, dni: 0, dhi: 0 });
      }),
    );
  });

  it('simplified Solis: finite and never negative in the range of its fit', () => {
    const inputs = fc.record({
      apparentZenith: zenith,
      aod700: between(0, 0.45),
      precipitableWater: between(0, 10),
      pressure: between(30_000, 120_000),
      dniExtra: between(1300, 1420),
    });
    fc.assert(
      fc.property(inputs, (given) => {
        for (const value of Object.values(simplifiedSolis(given))) {
          expect(Number.isFinite(value)).toBe(true);
          expect(value).toBeGreaterThanOrEqual(0);
        }
      }),
    );
  });

  it('Haurwitz: falls with the sun', () => {
    fc.assert(
      fc.property(between(0, 179), (z) => {
        const higher = haurwitz(z);
        expect(higher).toBeGreaterThanOrEqual(0);
        expect(haurwitz(z + 1)).toBeLessThanOrEqual(higher);
      }),
    );
  });

  it('refuses by name', () => {
    expect(() => haurwitz(Number.NaN)).toThrow(/apparentZenith/);
    const night = { apparentZenith: 60, airMassAbsolute: 2, altitude: 0, dniExtra: 1366 };
    expect(() => ineichen({ ...night, linkeTurbidity: 0 })).toThrow(/linkeTurbidity/);
    const solis = { apparentZenith: 60, precipitableWater: 1, pressure: 101_325, dniExtra: 1366 };
    expect(() => simplifiedSolis({ ...solis, aod700: 0.6 })).toThrow(/aod700/);
  });
});

describe('Erbs', () => {
  it('closes on the horizontal and gives no negative part', () => {
    fc.assert(
      fc.property(between(0, 2000), zenith, fc.integer({ min: 1, max: 366 }), (ghi, z, day) => {
        const { kt, dni, dhi } = erbs(ghi, z, dniExtra(day));
        expect(kt).toBeGreaterThanOrEqual(0);
        expect(kt).toBeLessThanOrEqual(1);
        expect(dni).toBeGreaterThanOrEqual(0);
        expect(dhi).toBeGreaterThanOrEqual(0);
        expect(dhi).toBeLessThanOrEqual(ghi);
        if (z <= 87) expect(dni * cosOf(z) + dhi).toBeCloseTo(ghi, 6);
      }),
    );
  });
});

const light = fc.record({
  surfaceTilt: between(0, 180),
  surfaceAzimuth: between(0, 360),
  solarZenith: zenith,
  solarAzimuth: between(0, 360),
  ghi: between(0, 2000),
  dni: between(0, 1300),
  dhi: between(0, 1000),
  dniExtra: between(1300, 1420),
  albedo: between(0, 1),
});

describe('transposition', () => {
  it('is finite and not negative for any model, sky and plane', () => {
    fc.assert(
      fc.property(light, fc.constantFrom(...TRANSPOSITION_MODELS), (inputs, model) => {
        const plane = planeIrradiance(inputs, model);
        for (const value of Object.values(plane)) {
          expect(Number.isFinite(value)).toBe(true);
          expect(value).toBeGreaterThanOrEqual(0);
        }
        expect(poaGlobal(inputs, model)).toBe(plane.poaBeam + plane.poaSkyDiffuse + plane.poaGroundDiffuse);
      }),
      { numRuns: 500 },
    );
  });

  it('gives back the horizontal for a flat plane', () => {
    fc.assert(
      fc.property(light, between(0, 80), (inputs, z) => {
        const flat = { ...inputs, surfaceTilt: 0, solarZenith: z, dhi: inputs.dhi / 2 };
        const ghi = flat.dni * cosOf(z) + flat.dhi;
        expect(poaGlobal({ ...flat, ghi }, 'isotropic')).toBeCloseTo(ghi, 6);
        expect(poaGlobal({ ...flat, ghi }, 'hay_davies')).toBeCloseTo(ghi, 6);
      }),
    );
  });

  it('without a beam Hay and Davies are isotropic', () => {
    fc.assert(
      fc.property(light, (inputs) => {
        const overcast = { ...inputs, dni: 0 };
        expect(poaGlobal(overcast, 'hay_davies')).toBeCloseTo(poaGlobal(overcast, 'isotropic'), 6);
      }),
    );
  });

  it('refuses by name', () => {
    const inputs = {
      surfaceTilt: 20,
      surfaceAzimuth: 180,
      solarZenith: 40,
      solarAzimuth: 180,
      ghi: 600,
      dni: 600,
      dhi: 100,
      dniExtra: 1366,
    };
    expect(() => poaGlobal({ ...inputs, surfaceTilt: -1 })).toThrow(/surfaceTilt/);
    expect(() => poaGlobal({ ...inputs, ghi: -1 })).toThrow(
      /ghi must be between 0 and 2000 W\/m², but is -1/,
    );
    expect(() => poaGlobal({ ...inputs, dhi: Number.NaN })).toThrow(/dhi/);
    expect(() => poaGlobal({ ...inputs, albedo: 2 })).toThrow(/albedo/);
  });
});

describe('incidence', () => {
  it('is the tilt at noon between plane and sun, whichever way round the compass', () => {
    expect(aoi(30, 180, 30, 180)).toBeCloseTo(0, 5);
    expect(aoi(90, 180, 0, 0)).toBeCloseTo(90, 9);
    fc.assert(
      fc.property(light, (l) => {
        const angle = aoi(l.surfaceTilt, l.surfaceAzimuth, l.solarZenith, l.solarAzimuth);
        const turned = aoi(l.surfaceTilt, l.surfaceAzimuth + 90, l.solarZenith, l.solarAzimuth + 90);
        expect(turned).toBeCloseTo(angle, 5);
      }),
    );
  });

  it('modifiers start at 1, never rise, and end at 0', () => {
    expect(iamAshrae(0)).toBe(1);
    expect(iamPhysical(0)).toBe(1);
    fc.assert(
      fc.property(between(0, 180), between(0, 1), between(1, 3), (angle, b0, n) => {
        const glass = { n, extinction: 4, thickness: 0.002 };
        for (const modifier of [(a: number) => iamAshrae(a, b0), (a: number) => iamPhysical(a, glass)]) {
          const here = modifier(angle);
          expect(here).toBeGreaterThanOrEqual(0);
          expect(here).toBeLessThanOrEqual(1 + 1e-12);
          expect(modifier(Math.min(180, angle + 1))).toBeLessThanOrEqual(here + 1e-12);
          if (angle >= 90) expect(here).toBe(0);
        }
      }),
    );
  });
});

describe('extraterrestrial irradiance', () => {
  it('stays within the orbit’s 3.4 %', () => {
    for (let day = 1; day <= 366; day += 1) {
      for (const model of ['spencer_1971', 'asce'] as const) {
        expect(Math.abs(dniExtra(day, model) / 1366.1 - 1)).toBeLessThan(0.036);
      }
    }
    expect(() => dniExtra(0)).toThrow(/dayOfYear/);
  });
});
