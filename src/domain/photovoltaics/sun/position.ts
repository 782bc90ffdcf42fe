import { RADIANS, asinDeg, atan2Deg, cosDeg, sinDeg, tanDeg, wrap360 } from '../angles';
import { within } from '../range';
import { pressureAtAltitude } from '../irradiance/air-mass';
import { geocentricSun } from './ephemeris';
import { checkInstant, deltaTAt } from './time';

export interface Place {
  /** Degrees, north positive, −90 to 90. */
  latitude: number;
  /** Degrees, east positive, −180 to 180. */
  longitude: number;
  /** m above sea level, −500 to 9000. */
  altitude: number;
}

/** What bends the light, where it is known. */
export interface Air {
  /** Pa; without it, the standard atmosphere at the place's altitude. */
  pressure?: number;
  /** °C; without it 12. */
  temperatureAir?: number;
  /** TT − UT1 in s; without it, what the years' observations say. */
  deltaT?: number;
}

/** Angles in degrees; azimuth clockwise from north. Apparent values include refraction. */
export interface SolarPosition {
  zenith: number;
  apparentZenith: number;
  elevation: number;
  apparentElevation: number;
  azimuth: number;
  /** Minutes, apparent minus mean solar time. */
  equationOfTime: number;
  /** AU */
  earthSunDistance: number;
}

/** Half the sun's disc and the refraction at the horizon, degrees: below their sum no refraction is applied. */
export const SUN_RADIUS = 0.26667;
export const HORIZON_REFRACTION = 0.5667;

export function checkPlace(place: Place): void {
  within('latitude', place.latitude, -90, 90, 'degrees');
  within('longitude', place.longitude, -180, 180, 'degrees');
  within('altitude', place.altitude, -500, 9000, 'm');
}

/** Refraction in degrees at a true elevation in degrees (SPA eq. 42; none when the disc is below the horizon). */
export function refraction(elevation: number, pressure: number, temperatureAir: number): number {
  if (elevation < -(SUN_RADIUS + HORIZON_REFRACTION)) return 0;
  return (
    ((pressure / 101000) * (283 / (273 + temperatureAir)) * 1.02) /
    (60 * tanDeg(elevation + 10.3 / (elevation + 5.11)))
  );
}

/**
 * Elevation and azimuth of a body at an hour angle (west of south positive) and a declination, degrees (Duffie & Beckman
 * eq. 1.6.5 and 1.6.6).
 */
export function directionInSky(hourAngle: number, declination: number, latitude: number) {
  const sinLatitude = sinDeg(latitude);
  const cosLatitude = cosDeg(latitude);
  const elevation = asinDeg(
    sinLatitude * sinDeg(declination) + cosLatitude * cosDeg(declination) * cosDeg(hourAngle),
  );
  const azimuth = wrap360(
    180 + atan2Deg(sinDeg(hourAngle), cosDeg(hourAngle) * sinLatitude - tanDeg(declination) * cosLatitude),
  );
  return { elevation, azimuth };
}

/** Adds refraction and the complementary angles. */
export function withRefraction(
  elevation: number,
  azimuth: number,
  equationOfTime: number,
  earthSunDistance: number,
  pressure: number,
  temperatureAir: number,
): SolarPosition {
  const apparentElevation = elevation + refraction(elevation, pressure, temperatureAir);
  return {
    zenith: 90 - elevation,
    apparentZenith: 90 - apparentElevation,
    elevation,
    apparentElevation,
    azimuth,
    equationOfTime,
    earthSunDistance,
  };
}

/** The air with its gaps filled, checked. */
export function airAt(altitude: number, air: Air): { pressure: number; temperatureAir: number } {
  const pressure = air.pressure ?? pressureAtAltitude(altitude);
  const temperatureAir = air.temperatureAir ?? 12;
  within('pressure', pressure, 0, 120_000, 'Pa');
  within('temperatureAir', temperatureAir, -90, 70, '°C');
  return { pressure, temperatureAir };
}

/**
 * Where the sun stands: the Solar Position Algorithm of I. Reda and A. Andreas, NREL/TP-560-34302 (rev. 2008), stated
 * there to ±0.0003° for the years −2000 to 6000.
 *
 * @param epochMs ms since 1970-01-01T00:00Z
 * @throws RangeError naming the parameter outside the ranges of Place, pressure 0 to 120 000 Pa, air −90 to 70 °C
 */
export function solarPosition(epochMs: number, place: Place, air: Air = {}): SolarPosition {
  checkInstant(epochMs);
  checkPlace(place);
  const { pressure, temperatureAir } = airAt(place.altitude, air);
  const deltaT = air.deltaT ?? deltaTAt(epochMs);
  within('deltaT', deltaT, -8000, 80_000, 's');
  const sun = geocentricSun(epochMs, deltaT);

  const hourAngle = wrap360(sun.siderealTime + place.longitude - sun.rightAscension);
  const parallax = (8.794 / (3600 * sun.earthSunDistance)) * RADIANS;
  const reducedLatitude = Math.atan(0.99664719 * tanDeg(place.latitude));
  const height = place.altitude / 6378140;
  const x = Math.cos(reducedLatitude) + height * cosDeg(place.latitude);
  const y = 0.99664719 * Math.sin(reducedLatitude) + height * sinDeg(place.latitude);
  const cosDeclination = cosDeg(sun.declination);
  const across = cosDeclination - x * Math.sin(parallax) * cosDeg(hourAngle);
  const shift = Math.atan2(-x * Math.sin(parallax) * sinDeg(hourAngle), across);
  const declination = atan2Deg((sinDeg(sun.declination) - y * Math.sin(parallax)) * Math.cos(shift), across);

  const seen = directionInSky(hourAngle - shift / RADIANS, declination, place.latitude);
  return withRefraction(
    seen.elevation,
    seen.azimuth,
    sun.equationOfTime,
    sun.earthSunDistance,
    pressure,
    temperatureAir,
  );
}
