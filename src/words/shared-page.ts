import { clock, zoneName } from '../drawings/times';

export const sharedRoof = {
  noLongerShared: 'This page is no longer shared',
  theLinkWasEnded: 'The link was ended or has run out. Ask whoever gave it to you.',
  asOfAtReaderZone: (at: string, timeZone: string, readerZone: null | string, at2: boolean) =>
    `As of ${clock(at, timeZone)}${readerZone && at2 ? ` ${zoneName(at, timeZone)}, the time at the roof` : ''}.`,
  notReadSince: ' It could not be read again since; the next try follows by itself.',
};

export const sharedScreen = {
  lookedAfterByOrganisation: (organisation: string, late: boolean, at: string, timeZone: string) =>
    `Looked after by ${organisation} · ${late ? `last read ${clock(at, timeZone)}` : clock(at, timeZone)}`,
  today: 'Today',
  todaySolidWhatWas: 'Today: solid what was made, dotted a clear day of this date.',
};
