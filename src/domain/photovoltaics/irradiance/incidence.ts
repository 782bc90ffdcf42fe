import { RADIANS, acosDeg, cosDeg, sinDeg } from '../angles';
import { within } from '../range';

/** Cosine of the angle between the sun's beam and a plane's normal, −1 to 1. All angles in degrees. */
export function aoiProjection(
  surfaceTilt: number,
  surfaceAzimuth: number,
  solarZenith: number,
  solarAzimuth: number,
): number {
  const projection =
    cosDeg(surfaceTilt) * cosDeg(solarZenith) +
    sinDeg(surfaceTilt) * sinDeg(solarZenith) * cosDeg(solarAzimuth - surfaceAzimuth);
  return Math.min(1, Math.max(-1, projection));
}

/** Angle of incidence on a plane, degrees (Duffie & Beckman eq. 1.6.3). */
export function aoi(
  surfaceTilt: number,
  surfaceAzimuth: number,
  solarZenith: number,
  solarAzimuth: number,
): number {
  return acosDeg(aoiProjection(surfaceTilt, surfaceAzimuth, solarZenith, solarAzimuth));
}

/**
 * Incidence-angle modifier by ASHRAE 93-77 (A.F. Souka, H.H. Safwat 1966): 1 − b0 (1/cos aoi − 1), held to 0..1.
 *
 * @param aoi degrees, 0 to 180; 0 from 90 on
 * @param b0 0 to 1
 */
export function iamAshrae(aoi: number, b0 = 0.05): number {
  within('aoi', aoi, 0, 180, 'degrees');
  within('b0', b0, 0, 1, '');
  if (aoi >= 90) return 0;
  return Math.min(1, Math.max(0, 1 - b0 * (1 / cosDeg(aoi) - 1)));
}

export interface Glazing {
  /** Index of refraction, 1 to 3. */
  n: number;
  /** Extinction, 1/m. */
  extinction: number;
  /** Thickness, m. */
  thickness: number;
}

export const PLAIN_GLASS: Glazing = { n: 1.526, extinction: 4, thickness: 0.002 };

/**
 * Incidence-angle modifier of a glass cover, Fresnel and Bouguer, without an anti-reflection coating: W. De Soto, S.A.
 * Klein, W.A. Beckman, Solar Energy 80 (2006) 78, section 3; Duffie & Beckman 5.1 to 5.4.
 *
 * @param aoi degrees, 0 to 180; 0 from 90 on
 */
export function iamPhysical(aoi: number, glazing: Glazing = PLAIN_GLASS): number {
  within('aoi', aoi, 0, 180, 'degrees');
  within('n', glazing.n, 1, 3, '');
  within('extinction', glazing.extinction, 0, 1000, '1/m');
  within('thickness', glazing.thickness, 0, 0.1, 'm');
  if (aoi >= 90) return 0;
  const { n } = glazing;
  const cosIn = Math.cos(aoi * RADIANS);
  const sinOut = Math.sin(aoi * RADIANS) / n;
  const cosOut = Math.sqrt(1 - sinOut * sinOut);
  const reflectedAcross = ((cosIn - n * cosOut) / (cosIn + n * cosOut)) ** 2;
  const reflectedAlong = ((n * cosIn - cosOut) / (n * cosIn + cosOut)) ** 2;
  const depth = glazing.extinction * glazing.thickness;
  const transmitted = (1 - (reflectedAcross + reflectedAlong) / 2) * Math.exp(-depth / cosOut);
  const transmittedNormal = (1 - ((n - 1) / (n + 1)) ** 2) * Math.exp(-depth);
  return transmitted / transmittedNormal;
}
