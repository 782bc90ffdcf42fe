/** Dates and times as they stand in files of several countries. */
import { timeFaults as faults, timeRemedies as remedies } from '../../words/domain-history-import';
import { instantsOf } from '../time/wall-clock';

export type ReadTime =
  | { kind: 'instant'; at: number } // epoch s
  /** The clock shows it twice: the earlier and the later instant. */
  | { kind: 'twice'; at: readonly [number, number] }
  | { kind: 'empty' }
  | { kind: 'fault'; message: string; remedy: string };

const ISO =
  /^(\d{4})[-/.](\d{1,2})[-/.](\d{1,2})(?:[T ]+(\d{1,2}):(\d{2})(?::(\d{2})(?:[.,]\d+)?)?)?\s*(Z|UTC|GMT|[+-]\d{2}:?\d{2})?$/i;
const DAY_OR_MONTH_FIRST =
  /^(\d{1,2})([./-])(\d{1,2})\2(\d{4}|\d{2})(?:[T ,]+(\d{1,2}):(\d{2})(?::(\d{2})(?:[.,]\d+)?)?\s*(am|pm)?)?$/i;
const CLOCK = /^(\d{1,2}):(\d{2})(?::(\d{2})(?:[.,]\d+)?)?\s*(am|pm)?$/i;
const EPOCH = /^(\d{10})(\d{3})?$/;

interface Wall {
  year: number;
  month: number;
  day: number;
  hour: number;
  minute: number;
  second: number;
  /** Minutes ahead of UTC, where the text says so. */
  offsetMin: number | null;
}
const number = (text: string | undefined): number => (text === undefined ? 0 : Number(text));

/** The hour of a clock with am and pm; undefined: no such hour. */
function hourOf(text: string | undefined, half: string | undefined): number | undefined {
  const hour = number(text);
  if (half === undefined) return hour;
  if (hour < 1 || hour > 12) return undefined;
  return (hour % 12) + (half.toLowerCase() === 'pm' ? 12 : 0);
}

function offsetOf(text: string | undefined): number | null {
  if (text === undefined) return null;
  const [, sign, hours, minutes] = /^([+-])(\d{2}):?(\d{2})$/.exec(text) ?? [];
  return sign === undefined ? 0 : (sign === '-' ? -1 : 1) * (number(hours) * 60 + number(minutes));
}

/** A date with slashes or dashes that can only be meant one way: true: the day comes first. */
export function saysDayFirst(text: string): boolean | null {
  const [, a, mark, b] = DAY_OR_MONTH_FIRST.exec(text.trim()) ?? [];
  if (a === undefined || b === undefined) return null;
  if (mark === '.') return true;
  if (Number(a) > 12) return true;
  return Number(b) > 12 ? false : null;
}

/** Whether the text looks like a date, with or without a time of day. */
export const looksLikeTime = (text: string): boolean => {
  const t = text.trim();
  return ISO.test(t) || DAY_OR_MONTH_FIRST.test(t) || EPOCH.test(t);
};
export const looksLikeClock = (text: string): boolean => CLOCK.test(text.trim());

const fault = (message: string, remedy: string): ReadTime => ({ kind: 'fault', message, remedy });
/** As much of a cell as a sentence has room for. */
const short = (text: string): string => (text.length > 40 ? `${text.slice(0, 39)}…` : text);

function wallOf(text: string, dayFirst: boolean | null): Wall | ReadTime {
  const iso = ISO.exec(text);
  if (iso)
    return {
      year: number(iso[1]),
      month: number(iso[2]),
      day: number(iso[3]),
      hour: number(iso[4]),
      minute: number(iso[5]),
      second: number(iso[6]),
      offsetMin: offsetOf(iso[7]),
    };
  const found = DAY_OR_MONTH_FIRST.exec(text);
  if (!found) return fault(faults.noDateAndTime(short(text)), remedies.forms);
  const first = found[2] === '.' ? true : dayFirst;
  if (first === null && saysDayFirst(text) === null)
    return fault(faults.twoWays(short(text)), remedies.order);
  const isDayFirst = first ?? saysDayFirst(text) ?? true;
  const hour = hourOf(found[5], found[8]);
  if (hour === undefined) return fault(faults.noSuchHour(short(text)), remedies.forms);
  const year = number(found[4]);
  return {
    year: year < 100 ? 2000 + year : year,
    month: number(isDayFirst ? found[3] : found[1]),
    day: number(isDayFirst ? found[1] : found[3]),
    hour,
    minute: number(found[6]),
    second: number(found[7]),
    offsetMin: null,
  };
}

/**
 * The instant that `text` names. Without a zone of its own it is read by the clock of `timeZone`. A `clock` beside a
 * date is its time of day.
 */
export function readTime(
  text: string,
  clock: string | null,
  timeZone: string,
  dayFirst: boolean | null,
): ReadTime {
  const trimmed = text.trim();
  if (trimmed === '') return { kind: 'empty' };
  const epoch = EPOCH.exec(trimmed);
  if (epoch) return { kind: 'instant', at: number(epoch[1]) };
  const wall = wallOf(trimmed, dayFirst);
  if ('kind' in wall) return wall;
  if (clock !== null && clock.trim() !== '') {
    const [, hours, minutes, seconds, half] = CLOCK.exec(clock.trim()) ?? [];
    const hour = hourOf(hours, half);
    if (hours === undefined || hour === undefined)
      return fault(faults.noTimeOfDay(short(clock.trim())), remedies.clock);
    Object.assign(wall, { hour, minute: number(minutes), second: number(seconds) });
  }
  return instantOf(wall, clock === null ? trimmed : `${trimmed} ${clock.trim()}`, timeZone);
}

function instantOf(w: Wall, text: string, timeZone: string): ReadTime {
  // 24:00 is the end of a day, as some loggers write it
  const end = w.hour === 24 && w.minute === 0 && w.second === 0;
  const ms = Date.UTC(w.year, w.month - 1, w.day, end ? 0 : w.hour, w.minute, w.second);
  const back = new Date(ms);
  if (back.getUTCMonth() !== w.month - 1 || back.getUTCDate() !== w.day)
    return fault(faults.noDayOfTheCalendar(short(text)), remedies.mendDate);
  if ((w.hour > 23 && !end) || w.minute > 59 || w.second > 59)
    return fault(faults.noTimeOfDay(short(text)), remedies.mendTime);
  const wallMs = end ? ms + 86_400_000 : ms;
  if (w.offsetMin !== null) return { kind: 'instant', at: wallMs / 1000 - w.offsetMin * 60 };
  const [first, second] = instantsOf(wallMs, timeZone);
  if (first === undefined) return fault(faults.neverWas(short(text), timeZone), remedies.otherZone);
  return second === undefined
    ? { kind: 'instant', at: first / 1000 }
    : { kind: 'twice', at: [first / 1000, second / 1000] };
}
