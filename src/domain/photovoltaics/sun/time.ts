import { within } from '../range';

const DAY_MS = 86_400_000;
const UNIX_EPOCH_JULIAN_DAY = 2_440_587.5;

/** The span for which the Solar Position Algorithm is stated: years −2000 to 6000. */
const FIRST_MS = Date.UTC(-2000, 0, 1);
const LAST_MS = Date.UTC(6000, 11, 31);

/** Refuses an instant outside the years −2000 to 6000. */
export function checkInstant(epochMs: number): void {
  within('epochMs', epochMs, FIRST_MS, LAST_MS, 'ms (years -2000 to 6000)');
}

/** Julian day of an instant given in ms since 1970-01-01T00:00Z. */
export const julianDay = (epochMs: number): number => epochMs / DAY_MS + UNIX_EPOCH_JULIAN_DAY;

/** Start of the UTC calendar day that holds the instant, ms. */
export const utcDayStart = (epochMs: number): number => Math.floor(epochMs / DAY_MS) * DAY_MS;

/** Day of the year in UTC, 1 to 366. */
export function dayOfYear(epochMs: number): number {
  checkInstant(epochMs);
  const date = new Date(epochMs);
  const newYear = new Date(0);
  newYear.setUTCFullYear(date.getUTCFullYear(), 0, 1);
  return Math.floor((epochMs - newYear.getTime()) / DAY_MS) + 1;
}

/** TT − UT1 in seconds at the start of each fifth year from 1970 (IERS, observed). */
const DELTA_T_1970 = [40.2, 45.5, 50.5, 54.3, 56.9, 60.8, 63.8, 64.7, 66.1, 67.6, 69.4, 69.1];

/**
 * TT − UT1 in seconds: observed values from 1970 on, the last one held for later years, the parabola of Morrison &
 * Stephenson (2004) before. One second moves the sun by 0.04 arc seconds, so a rough value is enough here.
 */
export function deltaTAt(epochMs: number): number {
  const year = 1970 + epochMs / (365.2425 * DAY_MS);
  if (year < 1970) {
    const blend = Math.min(1, (1970 - year) / 150);
    const parabola = -20 + 32 * ((year - 1820) / 100) ** 2;
    return 40.2 + blend * (parabola - 40.2);
  }
  const at = (year - 1970) / 5;
  const index = Math.floor(at);
  const before = DELTA_T_1970[index];
  const after = DELTA_T_1970[index + 1];
  if (before === undefined || after === undefined) return 69.1;
  return before + (after - before) * (at - index);
}
