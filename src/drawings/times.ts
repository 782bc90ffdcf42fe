import { lengths, LOCALE } from '../words/language';

/** How times are written: in the site's zone, 24 hours, the zone named where the reader could mistake it. */
type Instant = string | number | Date;

const made = new Map<string, Intl.DateTimeFormat>();
function formatter(timeZone: string, options: Intl.DateTimeFormatOptions): Intl.DateTimeFormat {
  const key = timeZone + JSON.stringify(options);
  let found = made.get(key);
  if (!found) {
    found = new Intl.DateTimeFormat(LOCALE, { timeZone, hourCycle: 'h23', ...options });
    made.set(key, found);
  }
  return found;
}
const HOUR_MINUTE = { hour: '2-digit', minute: '2-digit' } as const;

/** 14:02 */
export const clock = (at: Instant, timeZone: string): string =>
  formatter(timeZone, HOUR_MINUTE).format(new Date(at));
/** 14:02:31 */
export const clockSeconds = (at: Instant, timeZone: string): string =>
  formatter(timeZone, { ...HOUR_MINUTE, second: '2-digit' }).format(new Date(at));
/** 3 November 2026 */
export const longDate = (at: Instant, timeZone: string): string =>
  formatter(timeZone, { day: 'numeric', month: 'long', year: 'numeric' }).format(new Date(at));
/** 3 Nov */
export const shortDate = (at: Instant, timeZone: string): string =>
  formatter(timeZone, { day: 'numeric', month: 'short' }).format(new Date(at));
/** CET, GMT+8 … */
export function zoneName(at: Instant, timeZone: string): string {
  const parts = formatter(timeZone, { timeZoneName: 'short' }).formatToParts(new Date(at));
  return parts.find((p) => p.type === 'timeZoneName')?.value ?? timeZone;
}
/** 3 Nov 2026, 14:02:31 CET: the absolute form that every relative time carries. */
export const fullTime = (at: Instant, timeZone: string): string =>
  `${formatter(timeZone, { day: 'numeric', month: 'short', year: 'numeric' }).format(new Date(at))}, ${clockSeconds(at, timeZone)} ${zoneName(at, timeZone)}`;
/** The calendar day at a place, as 2026-11-03. */
export function localDay(at: Instant, timeZone: string): string {
  const parts = formatter(timeZone, { year: 'numeric', month: '2-digit', day: '2-digit' }).formatToParts(
    new Date(at),
  );
  const of = (type: string) => parts.find((p) => p.type === type)?.value ?? '';
  return `${of('year')}-${of('month')}-${of('day')}`;
}
/** The clock while it is today there, else day and clock, or the date of another year: "14:02", "3 Nov, 14:02", "3 November 2024". */
export const clockOrDate = (at: Instant, now: Instant, timeZone: string): string =>
  localDay(at, timeZone) === localDay(now, timeZone)
    ? clock(at, timeZone)
    : localDay(at, timeZone).slice(0, 4) === localDay(now, timeZone).slice(0, 4)
      ? `${shortDate(at, timeZone)}, ${clock(at, timeZone)}`
      : longDate(at, timeZone);

/** A length of time in its largest whole part: "18 s", "41 min", "3 h", "5 days". */
export function duration(seconds: number): string {
  const s = Math.max(0, Math.round(seconds));
  if (s < 90) return lengths.seconds(s);
  if (s < 90 * 60) return lengths.minutes(Math.round(s / 60));
  if (s < 36 * 3600) return lengths.hours(Math.round(s / 3600));
  return lengths.days(Math.round(s / 86_400));
}
/** "just now", "41 min ago". */
export function ago(at: Instant, now: Instant): string {
  const seconds = (new Date(now).getTime() - new Date(at).getTime()) / 1000;
  return seconds < 5 ? lengths.justNow : lengths.ago(duration(seconds));
}
