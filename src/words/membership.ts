import { countAtStart, counted, number } from '../drawings/numbers';
import { clockSeconds, duration } from '../drawings/times';

export const isolationResult = {
  wentToZero: 'Went to zero',
  keptItsCurrent: 'Kept its current',
  wentToZeroToo: 'Went to zero too',
  nothingTold: 'Nothing told',
  betweenAnd: (after: string, timeZone: string, by: string) =>
    `between ${clockSeconds(after, timeZone)} and ${clockSeconds(by, timeZone)}`,
  unit: 'Unit',
  before: 'Before',
  since: 'Since',
  fell: 'Fell',
  itsCurrent: 'Its current',
  input: 'Input',
  lostBeyondTheOthers: 'Lost beyond the others',
  timesAreThoseOf: '. Times are those of reports: what happened lies between two of them.',
  currentFell: (dropped: string) => `Current fell ${dropped}`,
  andCameBack: (returned: string) => `, and came back ${returned}`,
  unitsOfAndWhoever: (stringName: string) => `Units of ${stringName} and whoever fell with them`,
  unitsOfOtherStrings: (others: number) =>
    `${others} units of other strings kept their current, as they should.`,
  reviewTheMove: 'Review the move',
  whatTheInputsCarried: 'What the inputs carried',
  inputs: 'Inputs',
};

export const isolationSheet = {
  byOnSite: (startedBy: string, personOnSite: string) => ` by ${startedBy}; on site ${personOnSite}`,
  ended: '; ended ',
  byStoppedBy: (stoppedBy: string) => ` by ${stoppedBy}`,
  itsTimeWasUp: ', its time was up',
  watchingStringName: (stringName: string) => `Watching ${stringName}`,
  theDecisiveWayIsolate: 'The decisive way: isolate one string',
  endsByItselfIn: (left: number) => `ends by itself in ${duration(left)}`,
  anArcKillsAnd:
    'An arc kills and burns. Wakeline only watches: it switches nothing, and a current of zero is no proof that anything is dead. Qualified people, the site’s procedure and local code first.',
  byTheStringsLoad: 'By the string’s load-break device only, never a connector under load.',
  theWatchCouldNot: 'The watch could not be read again',
  itCouldNotBe: 'It could not be stopped',
  stopping: 'Stopping …',
  stopWatchingAndKeep: 'Stop watching and keep the result',
  twoReportsInRow: (reportIntervalS: number) =>
    `Two reports in a row decide, one each ${reportIntervalS} s. Afterwards the person closes the string again by the same device.`,
  aPersonIsolatesOne:
    'A person isolates one string; the page shows whose current goes to zero: who is in it, who is not, and who of the others is.',
  aManagerOrA: 'A manager or a technician starts it, with a qualified person at the switch.',
  whatWasFoundBefore: 'What was found before',
  runsKept: (runs: number) => `${runs} kept`,
  theEvidence: 'The evidence',
};

export const isolationStart = {
  chooseTheStringThat: 'Choose the string that will be isolated.',
  enterTheNameOf: 'Enter the name of the person who isolates the string.',
  confirmThatItIs: 'Confirm that it is isolated by a load-break device only.',
  itDidNotWork: 'It did not work',
  stringToIsolate: 'String to isolate',
  chooseAString: 'Choose a string',
  nameCurrentANow: (name: string, current: string) => `${name}, ${current} A now`,
  itsUnitsReportNothing: 'Its units report nothing: only the input’s current will tell.',
  itCarriesHardlyAny: 'It carries hardly any current now: wait until the inverter runs.',
  itMustCarryCurrent: 'It must carry current now, or nothing can fall.',
  whoIsolatesIt: 'Who isolates it',
  firstAndLastName: 'First and last name; it is kept with the result.',
  aQualifiedPersonIs: 'A qualified person is at the string’s load-break device and opens nothing else.',
  starting: 'Starting …',
  startWatching: 'Start watching',
};

export const membershipBoard = {
  commissioning: 'Commissioning',
  rollCall: 'Roll call',
  theCurrentsCouldNot: 'The currents could not be read again',
  theLoggersGetThe:
    'The loggers get the new roster. Reports from before the change no longer count for these units. ',
  seeTheHistory: 'See the history',
  reportsOf: 'Reports of',
  last2Hours: 'Last 2 hours',
  n6Hours: '6 hours',
  n24Hours: '24 hours',
  reading: 'reading …',
  theTwoUnitsAre: 'The two units are exchanged on the as-built',
  theUnitIsMoved: 'The unit is moved on the as-built',
};

export const suspectsSheet = {
  itsString: (which: string) => `${which}, its string`,
  hideTheCurrents: 'Hide the currents',
  seeTheCurrents: 'See the currents',
  reviewTheMove: 'Review the move',
  isolateToBeCertain: (which: string) => `Isolate ${which} to be certain`,
  wiredDifferentlyFromThe: 'Wired differently from the drawing?',
  everyUnitAsCsv: 'Every unit as CSV',
  ofStepsOfMin: (withCurrent: number, steps: number, stepS: number) =>
    `${withCurrent} of ${steps} steps of ${stepS / 60} min had current.`,
  noUnitCarriesAnother: 'No unit carries another string’s current, as far as it can be told',
  nothingCanBeTold: 'Nothing can be told from these hours',
  cantTellForUnits: (cantTell: number) => `Can’t tell for ${cantTell} units`,
  unitsInStrings8: (units: number, strings: number, strings2: string, why: string) =>
    `${units} in ${strings <= 8 ? strings2 : `${strings} strings`}: ${why}`,
  unitsInSeriesCarry:
    'Units in series carry one current. What counts are differences against the units’ accuracy, not whether currents rise and fall together. It names another string, never a position. ',
  howItIsJudged: 'How it is judged',
};

export const membershipChart = {
  itsStringOnThe: (which: string) => `${which}, its string on the drawing`,
  currentOf: (s: string) => `Current of ${s}`,
  currentsWhileIsIsolated: (stringName: string) => `Currents while ${stringName} is isolated`,
  theWatchBegan: 'The watch began',
  withoutCurrent: (stringName: string) => `${stringName} without current`,
  stringNameFell: (stringName: string) => `${stringName} fell`,
};

export const membershipWordsWords = {
  theLastHours: (hours: number) => `the last ${hours} hours`,
  isolateOneStringTo: 'Isolate one string to be certain.',
  aAndBa: (a: string, b: string, outcome: string, outcome2: string, groups: number) =>
    `${a} and ${b} ${outcome === 'elsewhere' && outcome2 === 'elsewhere' ? 'look' : 'may be'} exchanged${groups > 1 ? `, and ${counted(groups - 1, 'more place')} ${groups === 2 ? 'doesn’t' : 'don’t'} fit` : ''}`,
  carriesTheCurrentOf: (a: string, otherString: string) => `${a} carries the current of ${otherString}`,
  doesNotCarryThe: (a: string, which: string) => `${a} does not carry the current of ${which}`,
  unitsDontCarryTheir: (elsewhere: number) =>
    `${countAtStart(elsewhere)} units don’t carry their string’s current`,
  readTheLabelsThere: 'Read the labels there before anything is changed.',
  ofCarryTheCurrent: (here: number, judged: number) =>
    `${number(here)} of ${counted(judged, 'unit')} carry the current of their own string.`,
  noUnitHereTells: 'No unit here tells its current',
  accordingToTheType:
    'According to the type entered its units report nothing: only the input’s current falls when a string is isolated.',
  theAsBuiltHolds: 'The as-built holds no units yet.',
  cantTellYetNo: 'Can’t tell yet: no unit has told its current',
  unitsReportOnceThey: 'Units report once they have answered the roll call',
  andWhileThereIs: (hours: string) => `and while there is light; none did in ${hours}.`,
  cantTellYetNoString: 'Can’t tell yet: no string carried current',
  theInvertersDidNot: 'The inverters did not run',
  itIsNightThere: 'It is night there',
  inComeBackWhen: (hours: string) => `in ${hours}. Come back when they have run for half an hour.`,
  noStringsCurrent: (fitsNone: number) =>
    `${countAtStart(fitsNone)} ${fitsNone === 1 ? 'unit fits' : 'units fit'} no string’s current`,
  itsMeasurementMayBe: 'Its measurement may be wrong.',
  cantTellForAny: (judged: number) => `Can’t tell for any of ${counted(judged, 'unit')}`,
  theStringsCurrentsAre: 'The strings’ currents are too alike',
  inOrTooFew: (hours: string, decide: string) => `in ${hours}, or too few. ${decide}`,
  ofCarryTheCurrentOf: (here: number, judged: number) =>
    `${number(here)} of ${counted(judged, 'unit')} carry the current of their string`,
  forItCantBe: (cantTell: number) => `For ${number(cantTell)} it can’t be told:`,
  stringsInTheSame: (decide: string) => `strings in the same light carry the same current. ${decide}`,
  allUnitsCarryThe: (judged: number) => `All ${number(judged)} units carry the current of their string`,
  byTheReportsOf: (hours: string) => `By the reports of ${hours}.`,
  itCarriedHardlyAny: 'It carried hardly any current before: an isolated string can’t be seen.',
  nothingOfItWas: 'Nothing of it was reported before the start.',
  everyStringStoppedTogether:
    'Every string stopped together: the inverter, the grid or dusk, and no single string.',
  tooLittleLightCurrents: 'Too little light: currents are too small to part zero from the rest.',
  noOtherStringReports: 'No other string reports beside it, so a cloud and an open switch look alike.',
  nobodysCurrentWentTo: (which: string) => `${which}: nobody’s current went to zero`,
  itsHalfHourWas: 'Its half hour was up.',
  theWatchWasStopped: 'The watch was stopped before.',
  nothingIsConcluded: 'Nothing is concluded.',
  watchingNothingHasFallen: (which: string) => `Watching ${which}: nothing has fallen yet`,
  mayIsolateItNow: (personOnSite: string) => `${personOnSite} may isolate it now,`,
  byItsLoadBreak: 'by its load-break device. Two reports in a row decide.',
  cantTell: (which: string) => `${which}: can’t tell`,
  notButWentTo: (which: string, strings: string) => `Not ${which} but ${strings} went to zero`,
  anotherStringWasIsolated: 'Another string was isolated than the one named,',
  orTheDrawingHas: 'or the drawing has their names exchanged. Check the mark on the switch.',
  wentToZeroTogether: (strings: string) => `${strings} went to zero together`,
  moreThanOneString: 'More than one string was isolated:',
  whoIsInWhich: 'who is in which of them this does not say. Isolate one alone.',
  theInputLostPart: (which: string) => `The input lost ${which}’s part`,
  itsUnitsReportNothing: 'Its units report nothing:',
  theInputShowsThat: 'the input shows that a string of it was isolated, and never which units are in it.',
  everyUnitOf: (gone: number, which: string) => `All ${number(gone)} units of ${which} are in it`,
  inToldNothing: (gone: number, which: string, untold: number) =>
    `${counted(gone, 'unit')} ${gone === 1 ? 'is' : 'are'} in ${which}, ${number(untold)} told nothing`,
  noUnitOfAnother: 'No unit of another string went to zero with it.',
  keptCurrent: (kept: string, kept2: number) => `${kept} kept ${kept2 === 1 ? 'its' : 'their'} current`,
  wentToZeroWith: (joined: string, which: string) => `${joined} went to zero with ${which}`,
  notIn: (kept: string, kept2: number, which: string) =>
    `${kept} ${kept2 === 1 ? 'is' : 'are'} not in ${which}`,
  is: 'is',
  are: 'are',
  ofItConfirmed: (gone: number) =>
    `${counted(gone, 'other unit')} of it ${gone === 1 ? 'is' : 'are'} confirmed.`,
};
