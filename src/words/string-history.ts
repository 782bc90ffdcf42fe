import { number, quantity } from '../drawings/numbers';
import { clockOrDate, longDate } from '../drawings/times';

export const historySheet = {
  day: 'Day',
  week: 'Week',
  month: 'Month',
  year: 'Year',
  voltage: 'Voltage',
  current: 'Current',
  power: 'Power',
  stringVoltage: 'String voltage',
  stringCurrent: 'String current',
  stringPower: 'String power',
  firstToLast: (first: string, last: number, timeZone: string) => `${first} to ${longDate(last, timeZone)}`,
  stringOther: (other: undefined | string) => `String ${other ?? ''}`,
  siteStringWhich: (site: string, which: string) => `${site}, string ${which}`,
  quantity: 'Quantity',
  range: 'Range',
  theHistoryCouldNot: 'The history could not be fetched',
  whatShouldBeLaid: 'What should be laid over it could not be fetched',
  earlier: 'Earlier',
  later: 'Later',
  lastDayShown: 'Last day shown',
  aYearShowsDays: 'A year shows days. For the staircase of a minute choose a day, a week or a month.',
  whichLessOverlay: (which: string, overlay: string) => `${which} less ${overlay}`,
  nothingWasReportedIn: 'Nothing was reported in this time.',
  bandExpectedNineTimes: (from: string) => `Band: expected nine times in ten, from ${from}.`,
  dashedOverlay: (overlay: string) => `Dashed: ${overlay}.`,
};

export const historyModel = {
  aDay: 'a day',
  aWeek: 'a week',
  aMonth: 'a month',
  aYear: 'a year',
  voltage: 'Voltage',
  current: 'Current',
  power: 'Power',
  siblingsMiddle: 'Siblings, middle',
  madeThatDay: 'Made that day',
  subjectQuantitySaidOverRange: (subject: string, quantitySaid: string, range: string) =>
    `${subject}: ${quantitySaid.toLowerCase()} over ${range}`,
  meanName: (name: string) => `Mean ${name.toLowerCase()}`,
  imported: 'Imported',
  expected: 'Expected',
  lowestToHighest: 'Lowest to highest',
  subjectLessOverlay: (subject: string, overlay: string) => `${subject}: less ${overlay}`,
  difference: 'Difference',
  ofSingleUnits: (subject: string, quantitySaid: string, quantitySaid2: string, side: string) =>
    `${subject}: ${quantitySaid} of single units${quantitySaid2 === 'voltage' && side === 'module' ? ', module side' : ''}`,
  positionPosition: (position: number) => `Position ${position}`,
  takenOutAt: (out: null | string, position: number) => `${out ?? 'Unit'} taken out at ${position}`,
  placedAt: (inSaid: string, position: number) => `${inSaid} placed at ${position}`,
  inPlaceOfAt: (inSaid: string, out: string, position: number) =>
    `${inSaid} in place of ${out} at ${position}`,
};

export const heatSheet = {
  voltage: 'Voltage',
  current: 'Current',
  temperature: 'Temperature',
  power: 'Power',
  stringOfEveryUnit: (site: string, which: string, quantitySaid: string) =>
    `${site}, string ${which}: ${quantitySaid} of every unit`,
  everyUnitOverThe: 'Every unit over the day',
  quantityOfTheStrip: 'Quantity of the strip',
  scaleOfTheStrip: 'Scale of the strip',
  againstTheMiddle: 'Against the middle',
  figures: 'Figures',
  theDayCouldNot: 'The day could not be fetched',
  fetchingTheDayOf: 'Fetching the day of every unit …',
  positionsDownwardMeansOf: (from: number, timeZone: string, stepS: number) =>
    `${longDate(from * 1000, timeZone)}, positions downward, means of ${stepS / 60} minutes`,
  aTapShowsThe: '. A tap shows the staircase of that moment and the unit’s line.',
  moduleSide: ', module side',
  chooseAnotherDayIn: 'Choose another day in the history above.',
  noUnitReportedOn: 'No unit reported on this day',
};

export const loopSheet = {
  pointsOfTheResistance: 'Points of the resistance, figures',
  sumOfTheUnits: 'Sum of the units less the input over the current',
  time: 'Time',
  currentA: 'Current, A',
  sumLessInputV: 'Sum less input, V',
  resistance: 'Resistance',
  timesInFromTo: (ohm: number, low: number, high: number) =>
    `${quantity(ohm, 'Ω', 3)}, 19 times in 20 from ${number(low, 3)} to ${number(high, 3)}`,
  cableByTheAs: 'Cable by the as-built',
  heatOfAllOf: 'Heat of all of it',
  ohmAtHighestA: (ohm: number, highestA: number) =>
    `${quantity(ohm * highestA ** 2, 'W')} at ${quantity(highestA, 'A', 1)}`,
  gainErrorTakenOut: 'Gain error taken out',
  sharedWithTheOther: 'Shared with the other strings of the input',
  samples: 'Samples',
  unitsAgainstTheInput: 'Units against the input: resistance of the loop',
  fromDayToDay: (fromDay: string, day: string) => `${fromDay} to ${day}`,
  theSamplesCouldNot: 'The samples could not be fetched',
  fetchingThreeDaysOf: 'Fetching three days of reports …',
  points: 'Points',
  table: 'Table',
  itCouldBe: (couldBe: string) => `It could be ${couldBe}.`,
  eachPointTheSum: (ohm: number, source: string) =>
    `Each point: the sum of all unit outputs less the input’s voltage, gain errors taken out, over the string’s own current. The slope is the resistance of connectors and leads between them; the shaded wedge holds it 19 times in 20. Limit: ${number(ohm, 1)} Ω (${source}). Connectors on the module side lie outside: no finding is not proof.`,
};

export const compareControls = {
  siblings: 'Siblings',
  noneOnThisPlane: 'none on this plane',
  theirMiddle: 'their middle',
  eachOf: (siblings: number) => `each of ${siblings}`,
  notShown: 'not shown',
  layOver: 'Lay over',
  noString: 'no string',
  stringName: (name: string) => `string ${name}`,
  orTheDay: 'or the day',
  difference: 'Difference',
};

export const notesSheet = {
  giveTheTimeOf: 'Give the time of the note, day and hour.',
  note: 'Note',
  at: 'At',
  toForASpan: 'To, for a span',
  about: 'About',
  stringWhich: (which: string) => `string ${which}`,
  theWholeSite: 'the whole site',
  theNoteWasNot: 'The note was not pinned',
  pinning: 'Pinning …',
  pinTheNote: 'Pin the note',
  leaveIt: 'Leave it',
  notesOnTheTime: 'Notes on the time axis',
  pinANote: 'Pin a note',
  theNotesCouldNot: 'The notes could not be fetched',
  theNoteStandsAs: 'The note stands as it was',
  theNoteIsTaken: 'The note is taken away.',
  putItBack: 'Put it back',
  noneYetChooseA: 'None yet. Choose a moment in the history, then pin what is worth remembering.',
  toTo: (to: string, at: string, timeZone: string) => ` to ${clockOrDate(to, at, timeZone)}`,
  wholeSite: 'whole site',
  takeAway: 'Take away',
  takeAwayTheNote: (note: string) => `Take away the note “${note}”`,
};
