import { solarPositionQuick } from '../sun/position-quick';
import { dayOfYear } from '../sun/time';
import { absoluteAirMass, pressureAtAltitude, relativeAirMass } from './air-mass';
import { ineichen } from './clear-sky';
import { dniExtra } from './extraterrestrial';
import { poaGlobal } from './transposition';

export interface PlaneAtPlace {
  latitude: number;
  longitude: number;
  /** m */
  altitude: number;
  /** Degrees. */
  surfaceTilt: number;
  surfaceAzimuth: number;
  /** 0 … 1; 0.2 without it. */
  albedo?: number;
}

/** Linke turbidity of a temperate site over the year's mean; from experience: 2 in the mountains, 5 in haze. */
export const LINKE_TURBIDITY = 3;

/**
 * What a clear sky gives in a plane, W/m², and the sun's elevation, degrees. Ineichen & Perez 2002 with one Linke
 * turbidity, transposed by Hay & Davies 1980. 0 while the sun is below the horizon.
 *
 * @param epochMs ms since 1970-01-01T00:00Z
 * @throws RangeError naming the parameter
 */
export function clearSkyInPlane(
  epochMs: number,
  at: PlaneAtPlace,
  linkeTurbidity = LINKE_TURBIDITY,
): { poaGlobal: number; ghi: number; elevation: number } {
  const sun = solarPositionQuick(epochMs, at);
  const elevation = 90 - sun.apparentZenith;
  const airMass = elevation > 0 ? relativeAirMass(sun.apparentZenith) : null;
  if (airMass === null) return { poaGlobal: 0, ghi: 0, elevation };
  const extra = dniExtra(dayOfYear(epochMs));
  const sky = ineichen({
    apparentZenith: sun.apparentZenith,
    airMassAbsolute: absoluteAirMass(airMass, pressureAtAltitude(at.altitude)),
    linkeTurbidity,
    altitude: at.altitude,
    dniExtra: extra,
  });
  return {
    ghi: sky.ghi,
    elevation,
    poaGlobal: poaGlobal({
      surfaceTilt: at.surfaceTilt,
      surfaceAzimuth: at.surfaceAzimuth,
      solarZenith: sun.apparentZenith,
      solarAzimuth: sun.azimuth,
      ghi: sky.ghi,
      dni: sky.dni,
      dhi: sky.dhi,
      dniExtra: extra,
      albedo: at.albedo,
    }),
  };
}
