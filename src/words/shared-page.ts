import { clock, clockOrDate, zoneName } from '../drawings/times';

export const sharedRoof = {
  noLongerShared: 'This page is no longer shared',
  theLinkWasEnded: 'The link was ended or has run out. Ask whoever gave it to you.',
  asOfAtReaderZone: (at: string, now: string, timeZone: string, readerZone: null | string, at2: boolean) =>
    `As of ${clockOrDate(at, now, timeZone)}${readerZone && at2 ? ` ${zoneName(at, timeZone)}, the time at the roof` : ''}.`,
  notReadSince: ' It could not be read again since; the next try follows by itself.',
};

export const sharedScreen = {
  lookedAfterByOrganisation: (
    organisation: string,
    late: boolean,
    at: string,
    now: string,
    timeZone: string,
  ) =>
    `Looked after by ${organisation} · ${late ? `last read ${clock(now, timeZone)}` : `as of ${clockOrDate(at, now, timeZone)}`}`,
  today: 'Today',
  todaySolidWhatWas: 'Today: solid what was made, dotted a clear day of this date.',
};
