import { RADIANS, asinDeg, atan2Deg, cosDeg, sinDeg, wrap180, wrap360 } from '../angles';
import { DISTANCE_TERMS, LATITUDE_TERMS, LONGITUDE_TERMS, NUTATION_TERMS } from './terms';
import { julianDay } from './time';

/** The sun as seen from the centre of the earth, and how far the earth has turned. Angles in degrees. */
export interface GeocentricSun {
  rightAscension: number;
  declination: number;
  /** AU */
  earthSunDistance: number;
  /** Apparent sidereal time at Greenwich. */
  siderealTime: number;
  /** Minutes, apparent minus mean solar time. */
  equationOfTime: number;
}

function series(terms: readonly Float64Array[], millennia: number): number {
  let sum = 0;
  let power = 1;
  for (const table of terms) {
    let part = 0;
    for (let i = 0; i + 2 < table.length; i += 3) {
      part += table[i]! * Math.cos(table[i + 1]! + table[i + 2]! * millennia);
    }
    sum += part * power;
    power *= millennia;
  }
  return sum / 1e8;
}

/** Nutation in longitude and in obliquity, degrees. */
function nutation(centuries: number): { longitude: number; obliquity: number } {
  const t = centuries;
  const elongation = 297.85036 + t * (445267.11148 + t * (-0.0019142 + t / 189474));
  const anomalySun = 357.52772 + t * (35999.05034 + t * (-0.0001603 - t / 300000));
  const anomalyMoon = 134.96298 + t * (477198.867398 + t * (0.0086972 + t / 56250));
  const latitudeMoon = 93.27191 + t * (483202.017538 + t * (-0.0036825 + t / 327270));
  const node = 125.04452 + t * (-1934.136261 + t * (0.0020708 + t / 450000));
  const terms = NUTATION_TERMS;
  let longitude = 0;
  let obliquity = 0;
  for (let i = 0; i + 8 < terms.length; i += 9) {
    const argument =
      (terms[i]! * elongation +
        terms[i + 1]! * anomalySun +
        terms[i + 2]! * anomalyMoon +
        terms[i + 3]! * latitudeMoon +
        terms[i + 4]! * node) *
      RADIANS;
    longitude += (terms[i + 5]! + terms[i + 6]! * t) * Math.sin(argument);
    obliquity += (terms[i + 7]! + terms[i + 8]! * t) * Math.cos(argument);
  }
  return { longitude: longitude / 36e6, obliquity: obliquity / 36e6 };
}

/** Mean obliquity of the ecliptic, arc seconds, in units of ten millennia from 2000. */
function meanObliquity(millennia: number): number {
  const u = millennia / 10;
  const coefficients = [
    2.45, 5.79, 27.87, 7.12, -39.05, -249.67, -51.38, 1999.25, -1.55, -4680.93, 84381.448,
  ];
  return coefficients.reduce((sum, coefficient) => sum * u + coefficient, 0);
}

/**
 * Geocentric sun at an instant: sections 3.1 to 3.11 and A.1 of the Solar Position Algorithm (I. Reda, A. Andreas,
 * NREL/TP-560-34302, rev. 2008).
 *
 * @param epochMs ms since 1970-01-01T00:00Z
 * @param deltaT TT − UT1, s
 */
export function geocentricSun(epochMs: number, deltaT: number): GeocentricSun {
  const day = julianDay(epochMs);
  const century = (day - 2451545) / 36525;
  const ephemerisCentury = (day + deltaT / 86400 - 2451545) / 36525;
  const millennia = ephemerisCentury / 10;

  const longitudeOfSun = series(LONGITUDE_TERMS, millennia) / RADIANS + 180;
  const latitude = -series(LATITUDE_TERMS, millennia) / RADIANS;
  const earthSunDistance = series(DISTANCE_TERMS, millennia);

  const shift = nutation(ephemerisCentury);
  const obliquity = meanObliquity(millennia) / 3600 + shift.obliquity;
  const aberration = -20.4898 / (3600 * earthSunDistance);
  const apparentLongitude = longitudeOfSun + shift.longitude + aberration;

  const sinLongitude = sinDeg(apparentLongitude);
  const sinObliquity = sinDeg(obliquity);
  const cosObliquity = cosDeg(obliquity);
  const rightAscension = wrap360(
    atan2Deg(
      sinLongitude * cosObliquity - Math.tan(latitude * RADIANS) * sinObliquity,
      cosDeg(apparentLongitude),
    ),
  );
  const declination = asinDeg(
    sinDeg(latitude) * cosObliquity + cosDeg(latitude) * sinObliquity * sinLongitude,
  );

  const meanSiderealTime =
    280.46061837 + 360.98564736629 * (day - 2451545) + century * century * (0.000387933 - century / 38710000);
  const siderealTime = wrap360(meanSiderealTime + shift.longitude * cosObliquity);

  const m = millennia;
  const meanLongitude =
    280.4664567 + m * (360007.6982779 + m * (0.03032028 + m * (1 / 49931 + m * (-1 / 15300 - m / 2000000))));
  const equationOfTime =
    4 * wrap180(meanLongitude - 0.0057183 - rightAscension + shift.longitude * cosObliquity);

  return { rightAscension, declination, earthSunDistance, siderealTime, equationOfTime };
}
