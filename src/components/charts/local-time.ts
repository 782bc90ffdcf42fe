/**
 * The chart library knows UTC and the reader's zone, not the site's. Instants are therefore moved by the site's offset
 * and the axis is told to read them as UTC.
 */
const formatters = new Map<string, Intl.DateTimeFormat>();
function partsOf(ms: number, timeZone: string): number {
  let formatter = formatters.get(timeZone);
  if (!formatter) {
    formatter = new Intl.DateTimeFormat('en-GB', {
      timeZone,
      hourCycle: 'h23',
      year: 'numeric',
      month: 'numeric',
      day: 'numeric',
      hour: 'numeric',
      minute: 'numeric',
      second: 'numeric',
    });
    formatters.set(timeZone, formatter);
  }
  const of: Record<string, number> = {};
  for (const { type, value } of formatter.formatToParts(ms)) of[type] = Number(value);
  return Date.UTC(
    of.year ?? 1970,
    (of.month ?? 1) - 1,
    of.day ?? 1,
    of.hour ?? 0,
    of.minute ?? 0,
    of.second ?? 0,
  );
}

const HOUR_MS = 3_600_000;
const offsets = new Map<string, number>();
/** ms that the wall clock there is ahead of UTC; offsets change on whole hours at most. */
function offsetAt(ms: number, timeZone: string): number {
  const hour = Math.floor(ms / HOUR_MS);
  const key = `${timeZone} ${hour}`;
  let offset = offsets.get(key);
  if (offset === undefined) {
    const start = hour * HOUR_MS;
    offset = partsOf(start, timeZone) - start;
    if (offsets.size > 20_000) offsets.clear();
    offsets.set(key, offset);
  }
  return offset;
}

/** Epoch seconds → ms that read as the site's wall clock in UTC. */
export const toWall = (atS: number, timeZone: string): number => atS * 1000 + offsetAt(atS * 1000, timeZone);
/** The way back; an hour that the clock repeats is taken as its second. */
export function fromWall(wallMs: number, timeZone: string): number {
  const guess = wallMs - offsetAt(wallMs, timeZone);
  return (wallMs - offsetAt(guess, timeZone)) / 1000;
}
