import type { PlaceColumn, Quantity, Subject } from '../domain/history-import/layout';
import { listedUpTo } from './domain-counts';

/** What a file of earlier readings holds, and why a cell, a row or the whole of it can't be read. */

export const QUANTITY_NAMES: Record<Quantity, string> = {
  voltage: 'voltage',
  current: 'current',
  power: 'power',
  energy: 'energy',
  temperature: 'temperature',
};

export const PLACE_WORDS: Record<PlaceColumn, string> = {
  at: 'date and time',
  date: 'date',
  clock: 'time of day',
  string: 'string',
  position: 'position',
  inverter: 'inverter',
  input: 'input',
};

const subject = (s: Subject): string =>
  s.kind === 'string'
    ? `string ${s.string}`
    : s.kind === 'unit'
      ? `string ${s.string}, position ${s.position}`
      : s.kind === 'input'
        ? `${s.inverter}, input ${s.input}`
        : s.inverter;
export const historySubjects = { subject };

export const layoutSaid = {
  noTime: 'Choose the column with the date and time.',
  noValues: 'Choose at least one column with voltage, current, power, energy or temperature.',
  column: (number: number) => `column ${number}`,
  /** @param more how many other columns lack it too */
  ofWhat: (header: string, more: number) =>
    `Say of what "${header}"${more > 0 ? ` and ${more} more` : ''} is, or set it to not used; or choose the column that names the string or the inverter of each row.`,
  inputNeedsInverter: 'An input needs the column that names its inverter.',
  positionNeedsString: 'A position needs the column that names its string.',
  /** @param of null: of what the row names */
  twice: (quantity: Quantity, of: Subject | null) =>
    `Two columns hold the ${QUANTITY_NAMES[quantity]} of ${of ? subject(of) : 'the same row'}: choose one.`,
};

type Named = 'string' | 'inverter';
const listed = (names: readonly (string | number)[]): string =>
  names.length === 0 ? 'none' : listedUpTo(6, names);

/** What is wrong with a cell. */
export const historyFaults = {
  timeMissing: 'the time is missing',
  inTheFuture: 'lies in the future',
  beforeTheYear2000: 'lies before the year 2000',
  nameMissing: (what: Named) => `the ${PLACE_WORDS[what]} is missing`,
  nobodyIsCalled: (what: Named, name: string) => `no ${PLACE_WORDS[what]} here is called "${name}"`,
  noSuchInput: (inverter: string) => `${inverter} has no such input`,
  noSuchPosition: (string: string) => `${string} has no such position`,
  twoNumbers: (text: string, one: number, other: number) => `"${text}" can be ${one} or ${other}`,
  beyond: (text: string, unit: string, quantity: Quantity) =>
    `${text} ${unit} is beyond any ${QUANTITY_NAMES[quantity]} of a plant`,
};

/** What would do. */
export const historyRemedies = {
  fillIn: 'Fill it in, or leave the row out.',
  lookAtYearAndOrder: 'Look at the year, and at which of day and month comes first.',
  lookAtYear: 'Look at the year.',
  isMeant: (near: string) => `Is ${near} meant? Names are those of the as-built.`,
  asBuiltHas: (names: readonly string[]) => `The as-built has ${listed(names)}.`,
  inputs: (inputs: readonly number[]) => `It has ${listed(inputs)}.`,
  positions: (slots: number) => `Its positions go from 1 to ${slots}.`,
  writeANumber: 'Write a number, or leave the cell empty.',
  sayTheMark: 'Say above which mark stands before decimals.',
  otherUnit: 'Is the column in another unit? Choose it above.',
};

/** What is wrong with a time, and what would do; `text` as it stands in the file. */
export const timeFaults = {
  noDateAndTime: (text: string) => `"${text}" is no date and time`,
  twoWays: (text: string) => `"${text}" can be meant two ways: day or month first`,
  noSuchHour: (text: string) => `"${text}" has no such hour`,
  noTimeOfDay: (text: string) => `"${text}" is no time of day`,
  noDayOfTheCalendar: (text: string) => `"${text}" is no day of the calendar`,
  neverWas: (text: string, timeZone: string) =>
    `"${text}" never was: the clock in ${timeZone} was put forward past it`,
};
export const timeRemedies = {
  order: 'Say above whether the day or the month comes first.',
  forms: 'Write it as 2026-03-28 14:15, 28.03.2026 14:15, or with a zone as 2026-03-28T14:15+01:00.',
  clock: 'Write it as 14:15 or 14:15:00.',
  mendDate: 'Mend the date; look whether day and month changed places.',
  mendTime: 'Mend the time: hours to 23, minutes and seconds to 59.',
  otherZone: 'Look whether the file is in another time zone, such as UTC.',
};
