import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { absoluteAirMass, pressureAtAltitude, relativeAirMass } from './irradiance/air-mass';
import { haurwitz, ineichen, simplifiedSolis } from './irradiance/clear-sky';
import { clearSkyInPlane } from './irradiance/clear-sky-plane';
import { erbs } from './irradiance/decomposition';
import { dniExtra } from './irradiance/extraterrestrial';
import { iamAshrae, iamPhysical, PLAIN_GLASS } from './irradiance/incidence';
import { planeIrradiance, TRANSPOSITION_MODELS } from './irradiance/transposition';
import { circuitCurrents, coldVoltageFactor, voltageAtTemperature } from './limits/string-sizing';
import { vocOf } from './module/open-circuit';
import { pvwattsDc } from './module/pvwatts';
import { translatePoint } from './module/translation';
import { solarPosition } from './sun/position';
import { solarPositionQuick } from './sun/position-quick';
import { sunRiseSet } from './sun/rise-set';
import { temperatureCellNoct, temperatureCellSapm, temperatureFaiman } from './temperature/cell';

/**
 * Every number that a physical function takes, with the range that it states: within it nothing but finite numbers (or
 * null, where a function says so) comes back, outside it and for NaN a RangeError that names the parameter.
 */
const AT = Date.UTC(2026, 2, 20, 9);
const MODULE = {
  name: 'any',
  vocRef: 41.2,
  iscRef: 11.4,
  vmpRef: 34.1,
  impRef: 10.8,
  betaVoc: -0.0028,
  alphaIsc: 0.0005,
  gammaPmp: -0.0036,
  cellsInSeries: 60,
  bypassGroups: 3,
  noct: 45,
};
const PLACE = { latitude: 40, longitude: -3, altitude: 600 };
const SKY = { apparentZenith: 60, airMassAbsolute: 2, linkeTurbidity: 3, altitude: 100, dniExtra: 1366 };
const SOLIS = {
  apparentZenith: 60,
  aod700: 0.1,
  precipitableWater: 1,
  pressure: 101_325,
  dniExtra: 1366,
};
const LIGHT = {
  surfaceTilt: 30,
  surfaceAzimuth: 180,
  solarZenith: 50,
  solarAzimuth: 170,
  ghi: 600,
  dni: 700,
  dhi: 120,
  dniExtra: 1366,
  albedo: 0.2,
};
const EXPOSURE = { poaGlobal: 800, temperatureAir: 20, windSpeed: 2 };
const POINT = { current: 9, voltage: 33, isc: 10, poaGlobal: 900, temperatureCell: 40 };
const TO = { poaGlobal: 1000, temperatureCell: 25 };
const COEFFICIENTS = { alphaIsc: 0.005, betaVoc: -0.12, resistanceSeries: 0.3, kappa: 0.001 };
const ROOF = { ...PLACE, surfaceTilt: 30, surfaceAzimuth: 180, albedo: 0.2 };

type Case = [of: string, parameter: string, min: number, max: number, call: (x: number) => unknown];

const keys = <T extends object>(
  of: string,
  ranges: [keyof T & string, number, number][],
  call: (x: Partial<T>) => unknown,
) =>
  ranges.map(([key, min, max]): Case => [
    of,
    key,
    min,
    max,
    (x) => call({ [key]: x } as unknown as Partial<T>),
  ]);

const CASES: Case[] = [
  ['haurwitz', 'apparentZenith', 0, 180, haurwitz],
  ['relativeAirMass', 'zenith', 0, 180, (x) => relativeAirMass(x)],
  ['relativeAirMass by Gueymard', 'zenith', 0, 180, (x) => relativeAirMass(x, 'gueymard_1993')],
  ['pressureAtAltitude', 'altitude', -500, 9000, pressureAtAltitude],
  ['absoluteAirMass', 'relative air mass', 0, 50, (x) => absoluteAirMass(x, 90_000)],
  ['absoluteAirMass', 'pressure', 0, 120_000, (x) => absoluteAirMass(2, x)],
  ['dniExtra', 'dayOfYear', 1, 366, (x) => dniExtra(x)],
  ['erbs', 'ghi', 0, 2000, (x) => erbs(x, 50, 1366)],
  ['erbs', 'zenith', 0, 180, (x) => erbs(300, x, 1366)],
  ['iamAshrae', 'aoi', 0, 180, (x) => iamAshrae(x)],
  ['iamAshrae', 'b0', 0, 1, (x) => iamAshrae(40, x)],
  ['iamPhysical', 'aoi', 0, 180, (x) => iamPhysical(x)],
  ...keys<typeof PLAIN_GLASS>(
    'iamPhysical',
    [
      ['n', 1, 3],
      ['extinction', 0, 1000],
      ['thickness', 0, 0.1],
    ],
    (x) => iamPhysical(70, { ...PLAIN_GLASS, ...x }),
  ),
  ...keys<typeof SKY>(
    'ineichen',
    [
      ['apparentZenith', 0, 180],
      ['airMassAbsolute', 0, 50],
      ['linkeTurbidity', 1, 12],
      ['altitude', -500, 9000],
      ['dniExtra', 0, 2000],
    ],
    (x) => ineichen({ ...SKY, ...x }),
  ),
  ...keys<typeof SOLIS>(
    'simplifiedSolis',
    [
      ['apparentZenith', 0, 180],
      ['aod700', 0, 0.45],
      ['precipitableWater', 0, 10],
      ['pressure', 30_000, 120_000],
      ['dniExtra', 0, 2000],
    ],
    (x) => simplifiedSolis({ ...SOLIS, ...x }),
  ),
  ...TRANSPOSITION_MODELS.flatMap((model) =>
    keys<typeof LIGHT>(
      `planeIrradiance by ${model}`,
      [
        ['surfaceTilt', 0, 180],
        ['surfaceAzimuth', -360, 360],
        ['solarZenith', 0, 180],
        ['solarAzimuth', -360, 360],
        ['ghi', 0, 2000],
        ['dni', 0, 2000],
        ['dhi', 0, 2000],
        ['dniExtra', 1, 2000],
        ['albedo', 0, 1],
      ],
      (x) => planeIrradiance({ ...LIGHT, ...x }, model),
    ),
  ),
  ...keys<typeof PLACE>(
    'solarPosition',
    [
      ['latitude', -90, 90],
      ['longitude', -180, 180],
      ['altitude', -500, 9000],
    ],
    (x) => solarPosition(AT, { ...PLACE, ...x }),
  ),
  ...keys<typeof PLACE>(
    'solarPositionQuick',
    [
      ['latitude', -90, 90],
      ['longitude', -180, 180],
    ],
    (x) => solarPositionQuick(AT, { ...PLACE, ...x }),
  ),
  ...keys<typeof PLACE>(
    'sunRiseSet',
    [
      ['latitude', -90, 90],
      ['longitude', -180, 180],
    ],
    (x) => sunRiseSet(AT, { ...PLACE, ...x }, { beyondDay: 'actual' }),
  ),
  ...keys<typeof ROOF>(
    'clearSkyInPlane',
    [
      ['latitude', -90, 90],
      ['longitude', -180, 180],
      ['surfaceTilt', 0, 180],
      ['albedo', 0, 1],
    ],
    (x) => clearSkyInPlane(AT, { ...ROOF, ...x }),
  ),
  ...keys<typeof EXPOSURE>(
    'temperatureCellSapm',
    [
      ['poaGlobal', 0, 2000],
      ['temperatureAir', -90, 70],
      ['windSpeed', 0, 60],
    ],
    (x) => temperatureCellSapm({ ...EXPOSURE, ...x }),
  ),
  ['temperatureFaiman', 'u0', 1, 200, (x) => temperatureFaiman(EXPOSURE, x)],
  ['temperatureFaiman', 'u1', 0, 50, (x) => temperatureFaiman(EXPOSURE, 25, x)],
  ['temperatureCellNoct', 'noct', 20, 90, (x) => temperatureCellNoct(800, 20, x)],
  ['vocOf', 'poaGlobal', 0, 2000, (x) => vocOf(MODULE, x, 25)],
  ['vocOf', 'temperatureCell', -90, 150, (x) => vocOf(MODULE, 800, x)],
  ['pvwattsDc', 'poaGlobal', 0, 2000, (x) => pvwattsDc(x, 25, { pdc0: 400, gammaPmp: -0.004 })],
  ['pvwattsDc', 'temperatureCell', -90, 150, (x) => pvwattsDc(800, x, { pdc0: 400, gammaPmp: -0.004 })],
  ['pvwattsDc', 'gammaPmp', -0.02, 0.01, (x) => pvwattsDc(800, 40, { pdc0: 400, gammaPmp: x })],
  [
    'translatePoint',
    'poaGlobal',
    1,
    2000,
    (x) => translatePoint({ ...POINT, poaGlobal: x }, TO, COEFFICIENTS),
  ],
  ['translatePoint', 'kappa', -10, 10, (x) => translatePoint(POINT, TO, { ...COEFFICIENTS, kappa: x })],
  ['coldVoltageFactor', 'temperatureMin', -90, 60, coldVoltageFactor],
  ['voltageAtTemperature', 'temperature', -90, 150, (x) => voltageAtTemperature(40, -0.003, x)],
  ['circuitCurrents', 'strings', 1, 1000, (x) => circuitCurrents(10, x)],
];

/** Nothing in what came back is NaN or infinite. */
function finite(value: unknown): boolean {
  if (typeof value === 'number') return Number.isFinite(value);
  if (value !== null && typeof value === 'object') return Object.values(value).every(finite);
  return true;
}

describe('within what is stated, numbers; outside, a refusal by name', () => {
  it.each(CASES)('%s, %s from %d to %d', (_of, parameter, min, max, call) => {
    for (const x of [min, max]) expect(finite(call(x)), `${parameter} ${x}`).toBe(true);
    fc.assert(
      fc.property(fc.double({ min, max, noNaN: true }), (x) => finite(call(x))),
      { numRuns: 40 },
    );
    const width = max - min;
    for (const x of [min - 0.01 * width, max + 0.01 * width, Number.NaN, Infinity, -Infinity]) {
      expect(() => call(x), `${parameter} ${x}`).toThrow(RangeError);
      expect(() => call(x), `${parameter} ${x}`).toThrow(parameter);
    }
  });
});

describe('where a beam is stronger than outside the atmosphere', () => {
  it('Hay & Davies gives no negative isotropic part: all of the sky is about the sun', () => {
    const behind = { ...LIGHT, surfaceTilt: 90, surfaceAzimuth: 0, solarAzimuth: 180, dni: 1500 };
    expect(planeIrradiance(behind, 'hay_davies').poaSkyDiffuse).toBe(0);
    const facing = { ...behind, surfaceAzimuth: 180 };
    const { poaSkyDiffuse } = planeIrradiance(facing, 'hay_davies');
    const ratio = Math.sin((50 * Math.PI) / 180) / Math.cos((50 * Math.PI) / 180);
    expect(poaSkyDiffuse).toBeCloseTo(120 * (1500 / 1366) * ratio, 9);
  });
});
