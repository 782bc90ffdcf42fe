import { acosDeg, asinDeg, cosDeg, sinDeg, wrap180, wrap360 } from '../angles';
import { within } from '../range';
import { geocentricSun } from './ephemeris';
import { type Place, HORIZON_REFRACTION, SUN_RADIUS } from './position';
import { checkInstant, deltaTAt, utcDayStart } from './time';

/** Times in ms since 1970-01-01T00:00Z; null where the sun does not cross the horizon that day. */
export interface SunRiseSet {
  sunrise: number | null;
  transit: number;
  sunset: number | null;
  /** Without a crossing: whether the sun stays up or stays down. */
  sunUp: 'rises_and_sets' | 'all_day' | 'not_at_all';
}

const DAY_MS = 86_400_000;
const HORIZON = -(SUN_RADIUS + HORIZON_REFRACTION);

/** Three daily positions round the day, for interpolation. */
interface DailyPath {
  rightAscension: (fraction: number) => number;
  declination: (fraction: number) => number;
}

function interpolation(before: number, on: number, after: number): (fraction: number) => number {
  const a = wrap180(on - before);
  const b = wrap180(after - on);
  return (n) => on + (n * (a + b + (b - a) * n)) / 2;
}

function dailyPath(dayStart: number): DailyPath {
  // at 0 h terrestrial time, hence the time difference of zero
  const [before, on, after] = [-1, 0, 1].map((days) => geocentricSun(dayStart + days * DAY_MS, 0));
  if (!before || !on || !after) throw new RangeError('epochMs has no neighbouring days');
  return {
    rightAscension: interpolation(before.rightAscension, on.rightAscension, after.rightAscension),
    declination: interpolation(before.declination, on.declination, after.declination),
  };
}

export interface RiseSetOptions {
  /** TT − UT1 in s. */
  deltaT?: number;
  /**
   * Whose sun a crossing beyond the UTC day is read from. `published`: the UTC day's own, moved by a whole day, as the
   * published procedure and the calculators built on it do; far from Greenwich that is off by a day's change, up to
   * three minutes at 60° latitude. `actual`: the sun at the crossing itself.
   */
  beyondDay?: 'published' | 'actual';
}

/**
 * Sunrise, transit and sunset (upper limb, standard refraction, sea level: −0.8333°) about the solar transit that falls
 * on the UTC calendar day holding `epochMs`; so sunrise may fall on the UTC day before and sunset on the day after.
 * Appendix A.2 of I. Reda, A. Andreas, NREL/TP-560-34302 (rev. 2008); see `beyondDay` for its one weakness.
 *
 * @param epochMs ms since 1970-01-01T00:00Z
 * @throws RangeError naming the parameter
 */
export function sunRiseSet(
  epochMs: number,
  place: Pick<Place, 'latitude' | 'longitude'>,
  options: RiseSetOptions = {},
): SunRiseSet {
  checkInstant(epochMs);
  within('latitude', place.latitude, -90, 90, 'degrees');
  within('longitude', place.longitude, -180, 180, 'degrees');
  const deltaT = options.deltaT ?? deltaTAt(epochMs);
  within('deltaT', deltaT, -8000, 80_000, 's');
  const { latitude, longitude } = place;
  const dayStart = utcDayStart(epochMs);
  const siderealTime = geocentricSun(dayStart, deltaT).siderealTime;
  const path = dailyPath(dayStart);
  const terrestrial = (m: number) => m + deltaT / 86_400;
  const hourAngleAt = (m: number) =>
    wrap180(siderealTime + 360.985647 * m + longitude - path.rightAscension(terrestrial(m)));

  const guess = wrap360(path.rightAscension(0) - longitude - siderealTime) / 360;
  const transit = dayStart + (guess - hourAngleAt(guess) / 360) * DAY_MS;

  const cosLatitude = cosDeg(latitude);
  const noonDeclination = path.declination(0);
  const cosHorizonAngle =
    (sinDeg(HORIZON) - sinDeg(latitude) * sinDeg(noonDeclination)) / (cosLatitude * cosDeg(noonDeclination));
  if (!(Math.abs(cosHorizonAngle) <= 1)) {
    return { sunrise: null, transit, sunset: null, sunUp: cosHorizonAngle > 1 ? 'not_at_all' : 'all_day' };
  }

  const crossing = (m: number): number => {
    const wholeDays = options.beyondDay === 'actual' ? 0 : Math.floor(m);
    const inDay = m - wholeDays;
    const declination = path.declination(terrestrial(inDay));
    const hourAngle = hourAngleAt(inDay);
    const height = asinDeg(
      sinDeg(latitude) * sinDeg(declination) + cosLatitude * cosDeg(declination) * cosDeg(hourAngle),
    );
    const correction = (height - HORIZON) / (360 * cosDeg(declination) * cosLatitude * sinDeg(hourAngle));
    // where the sun only grazes the horizon the step has no meaning: at most a quarter of a day, and none from 0/0
    const step = Number.isNaN(correction) ? 0 : Math.min(0.25, Math.max(-0.25, correction));
    return dayStart + (m + step) * DAY_MS;
  };
  const horizonFraction = acosDeg(cosHorizonAngle) / 360;
  return {
    sunrise: crossing(guess - horizonFraction),
    transit,
    sunset: crossing(guess + horizonFraction),
    sunUp: 'rises_and_sets',
  };
}
