import { RADIANS, wrap180, wrap360 } from '../angles';
import { within } from '../range';
import { type Air, type Place, type SolarPosition, airAt, checkPlace, withRefraction } from './position';

const FIRST_MS = Date.UTC(1950, 0, 1);
const LAST_MS = Date.UTC(2101, 0, 1);
const J2000_MS = Date.UTC(2000, 0, 1, 12);
const SIDEREAL_DEGREES_PER_MS = 360.98564736629 / 86_400_000;

/** What moon and planets add to the longitude, degrees: the largest short terms of SPA's table A4.2. */
function pull(centuries: number): number {
  const t = centuries / 10;
  return (
    0.002 * Math.cos(2.7441 + 5753.3849 * t) +
    0.0018 * Math.cos(3.6277 + 77713.7715 * t) +
    0.00153 * Math.cos(4.4181 + 7860.4194 * t) +
    0.00134 * Math.cos(6.1352 + 3930.2097 * t) +
    0.00076 * Math.cos(0.7425 + 11506.7698 * t) +
    0.00073 * Math.cos(2.0371 + 529.691 * t)
  );
}

/**
 * Where the sun stands, about ten times faster than `solarPosition` and within 0.007° of it (tested) for the years
 * 1950 to 2100: J. Meeus, Astronomical Algorithms, ch. 25 "low accuracy", with the largest terms of nutation, moon
 * and planets, and the sun's parallax. For bulk work over many sites and minutes.
 *
 * @param epochMs ms since 1970-01-01T00:00Z
 * @throws RangeError naming the parameter
 */
export function solarPositionQuick(epochMs: number, place: Place, air: Air = {}): SolarPosition {
  within('epochMs', epochMs, FIRST_MS, LAST_MS, 'ms (years 1950 to 2100)');
  checkPlace(place);
  const { pressure, temperatureAir } = airAt(place.altitude, air);
  // 69 s of TT − UT1: the sun moves 0.0008° in that time
  const t = (epochMs - J2000_MS + 69_000) / (36525 * 86_400_000);
  const meanLongitude = 280.46646 + t * (36000.76983 + t * 0.0003032);
  const anomaly = (357.52911 + t * (35999.05029 - t * 0.0001537)) * RADIANS;
  const eccentricity = 0.016708634 - t * (0.000042037 + t * 0.0000001267);
  const sinM = Math.sin(anomaly);
  const cosM = Math.cos(anomaly);
  const sin2M = 2 * sinM * cosM;
  const sin3M = sinM * (3 - 4 * sinM * sinM);
  const centre =
    (1.914602 - t * (0.004817 + t * 0.000014)) * sinM + (0.019993 - t * 0.000101) * sin2M + 0.000289 * sin3M;
  const trueAnomaly = anomaly + centre * RADIANS;
  const earthSunDistance =
    (1.000001018 * (1 - eccentricity * eccentricity)) / (1 + eccentricity * Math.cos(trueAnomaly));
  const node = (125.04 - 1934.136 * t) * RADIANS;
  const nutation = -0.00478 * Math.sin(node);
  const longitude = (meanLongitude + centre + pull(t) - 0.00569 + nutation) * RADIANS;
  const obliquity = (23.4392911 - t * 0.0130042 + 0.00256 * Math.cos(node)) * RADIANS;

  const sinLongitude = Math.sin(longitude);
  const sinDeclination = Math.sin(obliquity) * sinLongitude;
  const cosDeclination = Math.sqrt(1 - sinDeclination * sinDeclination);
  const cosObliquity = Math.cos(obliquity);
  const rightAscension = Math.atan2(cosObliquity * sinLongitude, Math.cos(longitude)) / RADIANS;

  const siderealTime =
    280.46061837 + SIDEREAL_DEGREES_PER_MS * (epochMs - J2000_MS) + nutation * cosObliquity;
  const hourAngle = ((siderealTime + place.longitude - rightAscension) % 360) * RADIANS;
  const latitude = place.latitude * RADIANS;
  const sinLatitude = Math.sin(latitude);
  const cosLatitude = Math.cos(latitude);
  const cosHour = Math.cos(hourAngle);
  const sinElevation = sinLatitude * sinDeclination + cosLatitude * cosDeclination * cosHour;
  const geocentric = Math.asin(Math.min(1, Math.max(-1, sinElevation)));
  const parallax = 8.794 / 3600;
  const elevation = geocentric / RADIANS - parallax * Math.cos(geocentric);
  const azimuth = wrap360(
    180 +
      Math.atan2(
        Math.sin(hourAngle) * cosDeclination,
        cosHour * sinLatitude * cosDeclination - sinDeclination * cosLatitude,
      ) /
        RADIANS,
  );
  const equationOfTime = 4 * wrap180(meanLongitude - 0.0057183 - rightAscension + nutation * cosObliquity);
  return withRefraction(elevation, azimuth, equationOfTime, earthSunDistance, pressure, temperatureAir);
}
