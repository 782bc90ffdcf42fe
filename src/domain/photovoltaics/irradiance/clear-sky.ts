import { cosDeg, sinDeg } from '../angles';
import { within } from '../range';
import { STANDARD_PRESSURE } from './air-mass';

/** W/m²: on the horizontal, normal to the beam, diffuse on the horizontal. */
export interface Irradiance {
  ghi: number;
  dni: number;
  dhi: number;
}

const NIGHT: Irradiance = { ghi: 0, dni: 0, dhi: 0 };

/**
 * Clear-sky ghi in W/m² from the apparent zenith alone: B. Haurwitz, J. Meteorology 2 (1945) 154, with the exponent
 * −0.059/cos z as in M. Reno, C. Hansen, J. Stein, SAND2012-2389.
 *
 * @param apparentZenith degrees, 0 to 180; 0 W/m² from 90 on
 */
export function haurwitz(apparentZenith: number): number {
  within('apparentZenith', apparentZenith, 0, 180, 'degrees');
  const cosZenith = cosDeg(apparentZenith);
  if (apparentZenith >= 90) return 0;
  return 1098 * cosZenith * Math.exp(-0.059 / cosZenith);
}

export interface IneichenInputs {
  /** Degrees, 0 to 180. */
  apparentZenith: number;
  /** Pressure-corrected; unused at night. */
  airMassAbsolute: number;
  /** 1 to 12. */
  linkeTurbidity: number;
  /** m, −500 to 9000. */
  altitude: number;
  /** W/m² */
  dniExtra: number;
}

/**
 * Clear sky from the Linke turbidity: P. Ineichen, R. Perez, Solar Energy 73 (2002) 151, without the enhancement for
 * low sun.
 *
 * @throws RangeError naming the parameter
 */
export function ineichen(inputs: IneichenInputs): Irradiance {
  const { apparentZenith, airMassAbsolute, linkeTurbidity, altitude, dniExtra } = inputs;
  within('apparentZenith', apparentZenith, 0, 180, 'degrees');
  within('linkeTurbidity', linkeTurbidity, 1, 12, '');
  within('altitude', altitude, -500, 9000, 'm');
  within('dniExtra', dniExtra, 0, 2000, 'W/m²');
  if (apparentZenith >= 90) return NIGHT;
  within('airMassAbsolute', airMassAbsolute, 0, 50, '');
  const cosZenith = cosDeg(apparentZenith);
  const heightFactor = Math.exp(-altitude / 8000);
  const hazeFactor = Math.exp(-altitude / 1250);
  const haze = linkeTurbidity - 1;
  const ghi =
    (5.09e-5 * altitude + 0.868) *
    dniExtra *
    cosZenith *
    Math.exp(-(3.92e-5 * altitude + 0.0387) * airMassAbsolute * (heightFactor + hazeFactor * haze));
  const beam = dniExtra * (0.664 + 0.163 / heightFactor) * Math.exp(-0.09 * airMassAbsolute * haze);
  const diffuseShare = (0.1 - 0.2 * Math.exp(-linkeTurbidity)) / (0.1 + 0.882 / heightFactor);
  const dni = Math.max(0, Math.min(beam, (ghi * (1 - diffuseShare)) / cosZenith));
  return { ghi, dni, dhi: ghi - dni * cosZenith };
}

export interface SolisInputs {
  /** Degrees, 0 to 180. */
  apparentZenith: number;
  /** Aerosol optical depth at 700 nm, 0 to 0.45 (the range of the fit). */
  aod700: number;
  /** cm, 0 to 10; taken as 0.2 below. */
  precipitableWater: number;
  /** Pa, 30 000 to 120 000. */
  pressure: number;
  /** W/m² */
  dniExtra: number;
}

const polynomial = (x: number, ...fromHighest: number[]): number =>
  fromHighest.reduce((sum, coefficient) => sum * x + coefficient, 0);

/** Optical depths and exponents of the fit: beam, global, diffuse. */
function solisDepths(aod: number, water: number, logPressure: number) {
  const logWater = Math.log(water);
  const beamDepth =
    polynomial(logWater, 0.0071, 0.056, 1.82) * aod +
    polynomial(logWater, 0.0096, 0.045, 0.33) +
    (0.0089 * water + 0.13) * logPressure;
  const beamExponent =
    polynomial(aod, 0.00925, 0.0148, -0.0172) * logWater + polynomial(aod, -0.7565, 0.5057, 0.4557);
  const globalDepth =
    polynomial(logWater, 0.0061, 0.047, 1.24) * aod +
    polynomial(logWater, 0.009, 0.043, 0.27) +
    (0.0079 * water + 0.1) * logPressure;
  const globalExponent = -0.0147 * logWater + polynomial(aod, -0.3079, 0.2846, 0.3798);
  const diffuseDepth =
    aod < 0.05
      ? polynomial(
          aod,
          86 * water - 13800,
          -3.11 * water + 79.4,
          -0.23 * water + 74.8,
          0.092 * water - 8.86,
          0.0042 * water + 3.12,
        ) -
        0.83 * (1 + aod) ** -17.2 * logPressure
      : polynomial(
          aod,
          -0.21 * water + 11.6,
          0.27 * water - 20.7,
          -0.134 * water + 15.5,
          0.0554 * water - 5.71,
          0.0057 * water + 2.94,
        ) -
        0.71 * (1 + aod) ** -15 * logPressure;
  const diffuseExponent = polynomial(aod, -0.337, 0.63, 0.116) + logPressure / (18 + 152 * aod);
  return { beamDepth, beamExponent, globalDepth, globalExponent, diffuseDepth, diffuseExponent };
}

/**
 * Clear sky from aerosols and water vapour: P. Ineichen, Solar Energy 82 (2008) 758. The three parts are fitted apart,
 * so ghi is not exactly dni·cos z + dhi.
 *
 * @throws RangeError naming the parameter
 */
export function simplifiedSolis(inputs: SolisInputs): Irradiance {
  const { apparentZenith, aod700, precipitableWater, pressure, dniExtra } = inputs;
  within('apparentZenith', apparentZenith, 0, 180, 'degrees');
  within('aod700', aod700, 0, 0.45, '');
  within('precipitableWater', precipitableWater, 0, 10, 'cm');
  within('pressure', pressure, 30_000, 120_000, 'Pa');
  within('dniExtra', dniExtra, 0, 2000, 'W/m²');
  if (apparentZenith >= 90) return NIGHT;
  const water = Math.max(precipitableWater, 0.2);
  const logPressure = Math.log(pressure / STANDARD_PRESSURE);
  const enhanced =
    dniExtra *
    (polynomial(aod700, 0.12 * water ** 0.56, 0.97 * water ** 0.032, 1.08 * water ** 0.0051) +
      0.071 * logPressure);
  const d = solisDepths(aod700, water, logPressure);
  const sinElevation = Math.max(1e-30, sinDeg(90 - apparentZenith));
  return {
    dni: enhanced * Math.exp(-d.beamDepth / sinElevation ** d.beamExponent),
    ghi: enhanced * Math.exp(-d.globalDepth / sinElevation ** d.globalExponent) * sinElevation,
    dhi: enhanced * Math.exp(-d.diffuseDepth / sinElevation ** d.diffuseExponent),
  };
}
