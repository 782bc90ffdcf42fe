/** The wall clock of a place, against instants. Rules of zones come from the platform (IANA time zone database). */

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

const HALF_HOUR_MS = 1_800_000;
const DAY_MS = 48 * HALF_HOUR_MS;
const offsets = new Map<string, Map<number, number>>();

/** ms that the wall clock there is ahead of UTC at an instant; offsets change on half hours at most. */
export function offsetAt(ms: number, timeZone: string): number {
  const half = Math.floor(ms / HALF_HOUR_MS);
  let ofZone = offsets.get(timeZone);
  if (!ofZone) offsets.set(timeZone, (ofZone = new Map<number, number>()));
  let offset = ofZone.get(half);
  if (offset === undefined) {
    const start = half * HALF_HOUR_MS;
    offset = partsOf(start, timeZone) - start;
    if (ofZone.size > 20_000) ofZone.clear();
    ofZone.set(half, offset);
  }
  return offset;
}

/**
 * The instants (ms) at which the clock there shows `wallMs` (the wall time, read as if it were UTC): none where the clock
 * is put forward past it, two where it is put back, the earlier one first.
 */
export function instantsOf(wallMs: number, timeZone: string): number[] {
  const before = wallMs - offsetAt(wallMs - DAY_MS, timeZone);
  const after = wallMs - offsetAt(wallMs + DAY_MS, timeZone);
  const fits = (ms: number): boolean => ms + offsetAt(ms, timeZone) === wallMs;
  if (before === after) return [before]; // no change of the clock near by
  return [before, after].filter(fits).sort((a, b) => a - b);
}
