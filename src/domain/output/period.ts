import { periodLabels } from '../../words/domain-periods';

/** A month or a year of calendar days, as figures are asked for. Days are yyyy-mm-dd of the site's own calendar. */
export interface Period {
  kind: 'month' | 'year';
  /** 2026-11 or 2026 */
  key: string;
  /** First day, and the day after the last. */
  from: string;
  before: string;
  label: string;
  previous: string;
  next: string;
  /** The same period of the year before. */
  yearBefore: string;
}

const two = (n: number): string => String(n).padStart(2, '0');

/** The period of `2026-11` or `2026`; null where it names none between the years 2000 and 2100. */
export function periodOf(key: string): Period | null {
  const year = Number(key.slice(0, 4));
  if (!(year >= 2000 && year <= 2100)) return null;
  if (/^\d{4}$/.test(key))
    return {
      kind: 'year',
      key,
      from: `${key}-01-01`,
      before: `${year + 1}-01-01`,
      label: key,
      previous: String(year - 1),
      next: String(year + 1),
      yearBefore: String(year - 1),
    };
  if (!/^\d{4}-(0[1-9]|1[0-2])$/.test(key)) return null;
  const month = Number(key.slice(5));
  const keyAt = (offset: number): string => {
    const n = year * 12 + month - 1 + offset;
    return `${Math.floor(n / 12)}-${two((n % 12) + 1)}`;
  };
  return {
    kind: 'month',
    key,
    from: `${key}-01`,
    before: `${keyAt(1)}-01`,
    label: periodLabels.month(month, year),
    previous: keyAt(-1),
    next: keyAt(1),
    yearBefore: keyAt(-12),
  };
}

const DAY_MS = 86_400_000;
const at = (day: string): number => Date.parse(`${day}T00:00:00Z`);

/** Days from `from` up to and without `before`; never negative. */
export const daysBetween = (from: string, before: string): number =>
  Math.max(0, Math.round((at(before) - at(from)) / DAY_MS));
export const dayAfter = (day: string, days = 1): string =>
  new Date(at(day) + days * DAY_MS).toISOString().slice(0, 10);
/** The same calendar day a year before; 29 February becomes the 28th. */
export function yearBefore(day: string): string {
  const before = `${Number(day.slice(0, 4)) - 1}${day.slice(4)}`;
  return before.endsWith('-02-29') ? `${before.slice(0, 8)}28` : before;
}

/** Whether today lies in it: its days are not all over. */
export const isRunning = (period: Pick<Period, 'from' | 'before'>, today: string): boolean =>
  today >= period.from && today < period.before;

/** Whether sums of so many days are held against each other: with more than one day in twenty missing, data would be. */
export const daysAlike = (now: number, before: number): boolean => 20 * Math.abs(now - before) <= before;

/** The part of a period that has been: from the plant's first day to today; null where there is none. */
export function elapsedOf(
  period: Pick<Period, 'from' | 'before'>,
  firstDay: string | null,
  today: string,
): { from: string; before: string; days: number; running: boolean } | null {
  const from = firstDay !== null && firstDay > period.from ? firstDay : period.from;
  const tomorrow = dayAfter(today);
  const before = tomorrow < period.before ? tomorrow : period.before;
  const days = daysBetween(from, before);
  return days > 0 ? { from, before, days, running: before < period.before || before === tomorrow } : null;
}
