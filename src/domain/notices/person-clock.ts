import { instantsOf, offsetAt } from '../time/wall-clock';

/**
 * A person's day: the clock on the wall in a time zone, days of 23 and 25 hours included. A time that a day doesn't
 * have is the one by the offset before the change; of a time that it has twice, the first counts (RFC 5545, 3.3.5;
 * "compatible" in ECMAScript's Temporal).
 */
const MINUTE_MS = 60_000;
const DAY_MIN = 1440;

/** What the clock there shows, as if it were UTC, in ms. @throws RangeError for a zone that there is not */
const wallMs = (at: number, timeZone: string): number => at + offsetAt(at, timeZone);

export function isTimeZone(timeZone: string): boolean {
  try {
    offsetAt(0, timeZone);
    return true;
  } catch {
    return false;
  }
}

/** Minutes since midnight on the clock there, 0 … 1439. */
export function minuteOfDay(at: Date, timeZone: string): number {
  const wall = wallMs(at.getTime(), timeZone);
  return Math.floor((((wall % 86_400_000) + 86_400_000) % 86_400_000) / MINUTE_MS);
}

/** The instant at which the clock there shows `wall` (ms as if UTC), or would by the offset before it is put forward. */
const instantOf = (wall: number, timeZone: string): number =>
  instantsOf(wall, timeZone)[0] ?? wall - offsetAt(wall - 86_400_000, timeZone);

/** The next instant after `now` at which the clock there shows that minute of the day; once in each of its days. */
export function nextAt(now: Date, minute: number, timeZone: string): Date {
  const today = Math.floor(wallMs(now.getTime(), timeZone) / 86_400_000) * 86_400_000;
  for (let day = -1; ; day++) {
    const at = instantOf(today + day * 86_400_000 + minute * MINUTE_MS, timeZone);
    if (at > now.getTime()) return new Date(at);
  }
}

/** From and to as minutes of the day, `to` not included; may go past midnight. */
export interface QuietHours {
  from: number;
  to: number;
}

export function isQuiet(at: Date, quiet: QuietHours | null, timeZone: string): boolean {
  if (!quiet) return false;
  const minute = minuteOfDay(at, timeZone);
  return quiet.from < quiet.to
    ? minute >= quiet.from && minute < quiet.to
    : minute >= quiet.from || minute < quiet.to;
}

/**
 * The first whole minute from `at` on that is not quiet; `at` itself where it is not. Where all minutes that are not
 * quiet fall into the hour that a day does not have, they are the next day's.
 */
export function quietUntil(at: Date, quiet: QuietHours | null, timeZone: string): Date {
  if (!quiet || !isQuiet(at, quiet, timeZone)) return at;
  const quietAt = (t: number) => isQuiet(new Date(t), quiet, timeZone);
  let t = Math.floor(at.getTime() / MINUTE_MS) * MINUTE_MS;
  // a clock put back makes the same quiet minutes come twice; one put forward jumps over the end
  while (quietAt(t)) {
    const left = (quiet.to - minuteOfDay(new Date(t), timeZone) + DAY_MIN) % DAY_MIN;
    t += Math.max(1, left) * MINUTE_MS;
  }
  while (t - MINUTE_MS > at.getTime() && !quietAt(t - MINUTE_MS)) t -= MINUTE_MS;
  return new Date(t);
}
