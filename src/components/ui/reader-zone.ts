import { useSyncExternalStore } from 'react';
import { clock, clockOrDate, localDay, zoneName } from '../../drawings/times';

const never = () => () => undefined;
const browserZone = () => Intl.DateTimeFormat().resolvedOptions().timeZone;

/** The reader's time zone; null on the server and for the first paint, where it isn't known. */
export const useReaderZone = (): string | null =>
  useSyncExternalStore<string | null>(never, browserZone, () => null);

/** Whether a clock at `timeZone` shows something else than the reader's own, so that the zone must be named. */
export const clocksDiffer = (at: string | Date, timeZone: string, readerZone: string | null): boolean =>
  readerZone === null ||
  clock(at, timeZone) !== clock(at, readerZone) ||
  localDay(at, timeZone) !== localDay(at, readerZone);

/** "13:51", "3 Nov, 13:51"; with the zone where the reader's clock shows something else. */
export const siteClock = (
  at: string,
  now: string | Date,
  timeZone: string,
  readerZone: string | null,
): string =>
  `${clockOrDate(at, now, timeZone)}${clocksDiffer(at, timeZone, readerZone) ? ` ${zoneName(at, timeZone)}` : ''}`;
