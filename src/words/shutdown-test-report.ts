import { countAtStart, counted, volts } from '../drawings/numbers';
import { fullTime, longDate } from '../drawings/times';

export const shutdownTestReportReport = {
  theSite: 'The site',
  commissioning: 'Commissioning',
  shutdownTests: 'Shutdown tests',
  signedBy: 'Signed by ',
  itIsNeverChanged: (at: string, timeZone: string) =>
    `, ${fullTime(at, timeZone)}. It is never changed; only a newer one supersedes it.`,
  recordedBeforeTestsWere:
    'Recorded before tests were signed here: it says less, and nothing shows that it is unchanged.',
  startANewerTest: 'Start a newer test',
  repeatForWhatIs: 'Repeat for what is open',
  print: 'Print',
  itStandsAsIt: 'It stands as it was signed; what holds today is in the newer one.',
  supersededByTheTest: (at: string, timeZone: string) =>
    `Superseded by the test of ${longDate(at, timeZone)}`,
  goToIt: 'Go to it',
  theLoggerSentLate: (strings: string) =>
    `${strings}: the logger sent late. They don’t change what was signed. A new test takes them in.`,
  ofTheseMinutesCame: (reports: number) =>
    `${counted(reports, 'report')} of these minutes came after the signature`,
  whatIsStoredIs:
    'What is stored is not what was signed. Don’t rely on it; tell whoever looks after this installation.',
  theFingerprintDoesNot: 'The fingerprint does not fit the data',
  snowOnTheModules: 'snow on the modules',
  eachModuleAndIts:
    'Each module and its leads to its unit stay at module voltage. Isolate, lock out, prove dead with a rated meter; local code and the authority having jurisdiction come first.',
  shutdownIsNotIsolation: 'Shutdown is not isolation.',
  roundIFacts: (i: number, facts: string) => `Round ${i + 1}: ${facts}`,
  by: (by: string) => `, by ${by}`,
  notReported: 'not reported',
  notNoted: 'not noted',
  readingsOfTheInstrument: 'Readings of the instrument',
  noneReportsAloneDecide: 'None: reports alone decide nothing.',
  secondsByThePages: ', seconds by the page’s clock',
  secondsAsTyped: ', seconds as typed',
  struckBy: (by: string, reason: string) => `; struck by ${by}: ${reason}`,
  peopleAndCircumstances: 'People and circumstances',
  instrument: 'Instrument',
  noCategoryMarked: 'no category marked',
  beforeTheTest: 'before the test',
  notBeforeTheTest: 'not before the test',
  notAfterIt: 'not after it',
  rightAfterIt: 'right after it',
  wrongAfterIt: 'wrong after it',
  noneWasUsed: 'None was used.',
  signature: 'Signature',
  withThePasswordEntered: (signature: string, role: string) =>
    `${signature} (${role}), with the password entered again`,
  theyAreTheSame: 'They are the same.',
  theyDiffer: 'They differ.',
  theTestOf: (at: string, timeZone: string) => `the test of ${longDate(at, timeZone)}`,
  countedStringsString: (strings: number) => counted(strings, 'string'),
  noReadingsAreKept: 'No readings are kept with it.',
  plusMinusAndEarth: (
    voltsSaid: undefined | null | number,
    voltsSaid2: undefined | null | number,
    voltsSaid3: undefined | null | number,
  ) => ` + to − ${volts(voltsSaid)}, + to earth ${volts(voltsSaid2)}, − to earth ${volts(voltsSaid3)}`,
  afterTheCommand: (afterS: number) => `, ${afterS} s after the command`,
};

export const results = {
  followed: 'followed',
  followedTooLate: 'followed too late',
  keptPassing: 'kept passing',
  inShutdownBeforeThe: 'in shutdown before the command: shows nothing',
  nothingKnown: 'nothing known',
  measuredOnItsConductors: 'measured on its conductors',
  byItsOwnClaim: 'by its own claim',
  treatAsLive: (listedSaid: string) => `Treat as live: ${listedSaid}`,
  theInitiatorDoesNot:
    'The initiator does not make these strings dead. Keep people off them, tell everybody on site and whoever answers for the building; isolate, lock out and prove dead with a rated meter before any work.',
  unitsFollowed: (followed: number) => `${followed} units followed`,
  units: 'Units',
  noUnit: 'no unit',
  didNotComeBack: ', did not come back',
  resultByString: 'Result by string',
  limitsSource: (source: string) => `limits: ${source}`,
  noStringHasBeen: 'No string has been tested yet',
  testedAt: (at: string, timeZone: string) => `Tested ${longDate(at, timeZone)}`,
  roundWords: (round: number, words: string) => `Round ${round + 1}: ${words}`,
  didNotComeBack2: 'Did not come back',
  stuckInShutdownThey: (words: string) =>
    `${words}. Stuck in shutdown: they cost yield, and their modules stay at module voltage.`,
  whatIsStillMissing: 'What is still missing',
  toKnow: 'To know',
};

export const testList = {
  zone: 'Zone',
  result: 'Result',
  underWay: 'Under way',
  endedNotSigned: 'Ended, not signed',
  superseded: 'Superseded',
  strings: 'Strings',
  countedStringsString: (strings: number) => counted(strings, 'string'),
  failed: (failed: number) => `, ${failed} failed`,
  fromAnEarlierTest: (carried: number) => `, ${carried} from an earlier test`,
  signedOrStartedBy: 'Signed or started by',
  when: 'When',
  commissioning: 'Commissioning',
  eachModuleAndIts:
    'Each module and its leads to its unit stay at module voltage. Wakeline watches a test and keeps its record; a person operates the initiator.',
  shutdownIsNotIsolation: 'Shutdown is not isolation.',
  tests: 'Tests',
  testsAsCsv: 'Tests as CSV',
  whichTests: 'Which tests',
  inForceAndUnder: 'In force and under way',
  notSigned: 'Not signed',
  allTests: (tests: number) => `All ${tests}`,
  allZones: 'All zones',
  search: 'Search',
  shutdownTests: 'Shutdown tests',
  noTestHasBeen: 'No test has been made here',
  noTestFitsThis: 'No test fits this choice',
  notTested: 'Not tested',
  newest: 'Newest: ',
  withoutTest: (untested: number, untested2: string) =>
    `Without a test: ${untested > 8 ? counted(untested, 'string') : untested2}`,
  goOnWithThe: 'Go on with the test',
  watchTheTest: 'Watch the test',
  started: 'started ',
  byStartedBy: (startedBy: string) => ` by ${startedBy}`,
  repeatForWhatIs: 'Repeat for what is open',
  startANewTest: 'Start a new test of the whole zone',
  startTheTest: 'Start the test',
  aManagerOrA: 'A manager or a technician starts a test.',
};

export const shutdownTestReportList = {
  thereIsNoZone: 'There is no zone to test yet',
  nameAnInitiatorAnd: 'Name an initiator and its zone on the as-built first.',
  failedTheShutdownTest: (failed: string) => `${failed} failed the shutdown test`,
  treatWhatFailedAs:
    'Treat what failed as live, whatever the initiator says, find the cause, then repeat the test for the failed strings.',
  notBeenTested: (never: string, never2: number) =>
    `${never} ${never2 === 1 ? 'has' : 'have'} not been tested`,
  untilARatedInstrument:
    'Until a rated instrument has shown it, nobody knows that the initiator shuts it down.',
  noRatedInstrumentHas: (open: string) => `${open}: no rated instrument has shown the shutdown`,
  reportsOfUnitsDecide: 'Reports of units decide nothing. Read at the home runs within the time limit.',
  notBeenTested2: (missing: number) =>
    `${countAtStart(missing)} ${missing === 1 ? 'string has' : 'strings have'} not been tested`,
  cameToWithoutTest: (missing: number, missing2: string, partly: string) =>
    `${missing <= 6 ? missing2 : counted(missing, 'string')} came to ${partly} without a test.`,
  passedItsShutdownTest: (zones: string) => `${zones} passed its shutdown test`,
  allZonesPassedTheir: (zones: number) => `All ${zones} zones passed their shutdown tests`,
  aResultSpeaksOf: (last: undefined | string, timeZone: string) =>
    `A result speaks of the day of the test${last ? `, last ${longDate(last, timeZone)}` : ''}. Shutdown is not isolation.`,
};

export const stringRows = {
  to: '+ to −',
  toEarth: '+ to earth',
  toEarth2: '− to earth',
  beforeTheCommand: 'before the command',
  afterIt: (round: number) => `${round} s after it`,
  notAtTheInverters: ', not at the inverter’s end',
  waitingForTheCommand: 'waiting for the command',
  nothingReported: 'nothing reported',
  atAfterSs: (afterS: number) => `at ${afterS} s`,
  limitVvOrLess: (limitV: number, underFromS: number, underFromS2: number) =>
    `${limitV} V or less ${underFromS < 1 ? 'from the start' : `after ${underFromS2} s`}`,
  overPast: (limitV: number, timeLimitS: number) => `over ${limitV} V past ${timeLimitS} s`,
  overLimitVv: (limitV: number) => `over ${limitV} V`,
  readBefore: 'Read before',
  addReading: 'Add reading',
  theCommand: (part: string) => `the command: ${part}`,
  ofAfterTheCommand: (part: string) => `of ${part} after the command`,
  ofInShutdown: (down: number, units: number) => `${down} of ${units} in shutdown, `,
  ofWentCameBack: (gone: number, units: number, back: number) =>
    `${gone} of ${units} went, ${back} came back, `,
  itsUnitsTellNothing: 'its units tell nothing',
  homeRunInsideThe: ' · home run inside the array',
  struckReason: (reason: string) => ` (struck: ${reason})`,
  strike: 'Strike',
};
