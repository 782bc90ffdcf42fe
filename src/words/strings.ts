import { celsius, irradiance, number, quantity, volts } from '../drawings/numbers';
import { clock, shortDate } from '../drawings/times';

export const copyLink = {
  linkCopied: 'Link copied',
  copyLink: 'Copy link',
  theLinkToExactly: 'The link to exactly this view is on the clipboard.',
  linkToThisView: 'Link to this view',
};

export const eventsSheet = {
  whatHappened: 'What happened',
  n14Days: '14 days',
  nothingOutOfThe: 'Nothing out of the ordinary.',
};

export const explanationsSheet = {
  fits: 'Fits',
  inPart: 'In part',
  cantTell: 'Can’t tell',
  doesNotFit: 'Does not fit',
  itMakesLessThan: 'It makes less than it should',
  itMakesWhatIt: 'It makes what it should',
  whetherItMakesWhat: 'Whether it makes what it should can’t be told',
  figure: 'Figure',
  measured: 'Measured',
  ifItWereSo: 'If it were so',
  wouldBe: (would: string) => `would be ${would}`,
  whichExplanationFits: 'Which explanation fits',
  judgedAfter: (day: string) => `judged after ${shortDate(`${day}T12:00:00Z`, 'UTC')}`,
  noNightJudgedYet: 'no night judged yet',
  theJudgementCouldNot: 'The judgement could not be fetched',
  holdingTheExplanationsAgainst: 'Holding the explanations against the figures …',
  missingOverTheseDays: (days: number, low: number, high: number) =>
    ` missing over these ${days} days, 9 times in 10 between ${number(low, 1)} and ${number(high, 1)}.`,
  fewerThanFiveStrings:
    'Fewer than five strings like it lie on this plane: held against the model, with a wide band.',
  madeOfWhatWas: (source: string) => `Made of what was expected, day by day; dashed: the limit (${source}).`,
  howEachIsTold: 'How each is told: ',
  notesOnTheMethods: 'notes on the methods',
};

export const momentBar = {
  now: 'now',
  outsideOfWhatIs: ', outside of what is shown',
  staircaseAt: 'Staircase at',
  momentOfTheStaircase: 'Moment of the staircase',
  stepSMin: (stepS: number) => `−${stepS / 60} min`,
  stepSMin2: (stepS: number) => `+${stepS / 60} min`,
  now2: 'Now',
};

export const nextStrings = {
  toString: (previous: string) => `To string ${previous}`,
  toString2: (next: string) => `To string ${next}`,
};

export const readingsSheet = {
  whatTheReadingsSay: 'What the readings say',
  whyOrWhatElse: 'Why, or what else it could be',
  sourceLimitSourceAccording: (source: string) =>
    `${source && `Limit: ${source}. `}According to the unit type entered.`,
};

export const staircaseSheet = {
  underLoad: (current: number) => `under load, ${quantity(current, 'A', 1)}`,
  noCurrent: 'no current',
  aloneOnInput: (inverter: string, input: number) => `alone on ${inverter}, input ${input}`,
  oneOfOnInput: (strings: number, inverter: string, input: number) =>
    `one of ${strings} on ${inverter}, input ${input}`,
  moduleTemperatureModule: (temperatureModule: number) => `module ${celsius(temperatureModule)}`,
  inPlane: (poaGlobal: number) => `${irradiance(poaGlobal)} in plane`,
  dottedEveryUnitIn: 'Dotted: every unit in shutdown, by the type entered. ',
  dottedExpectedFrom: (expectedFrom: string) => `Dotted: expected from ${expectedFrom}. `,
  dashedAssumedFromWhat: 'Dashed: assumed from what the unit claims, not measured at its output. ',
  anotherUnitSatThen: (map: string) => `Another unit sat then at ${map}; it was replaced since.`,
  noReportCameWithin:
    'No report came within three intervals before it. Choose another moment in the history below.',
  nothingWasReportedAt: 'Nothing was reported at that moment',
  voltageStaircaseNow: 'Voltage staircase, now',
  voltageStaircaseAt: (moment: number, timeZone: string) =>
    `Voltage staircase at ${clock(moment * 1000, timeZone)}, ${shortDate(moment * 1000, timeZone)}`,
  backToNow: 'Back to now',
  theStaircaseAppearsWith: 'The staircase appears with the first report of the logger.',
  noReadingYet: 'No reading yet',
  thatMomentCouldNot: 'That moment could not be fetched',
  fetchingThatMoment: 'Fetching that moment …',
};

export const stringView = {
  noteNote: (note: string) => `Note: ${note}`,
  fleet: 'Fleet',
  stringWhich: (which: string) => `String ${which}`,
  caseOpenCase: (openCase: number) => `Case ${openCase}`,
  openACase: 'Open a case',
  theNewestFiguresCould: 'The newest figures could not be fetched',
  doNext: 'Do next',
  walkAndLadderCard: 'Walk and ladder card',
  lostHereToday: 'Lost here today',
  sinceAgainst: (since: string, timeZone: string, against: string) =>
    `since ${clock(since, timeZone)}, against ${against}`,
};

export const unitTable = {
  position: 'Position',
  state: 'State',
  noUnit: 'No unit',
  output: 'Output',
  moduleSide: 'Module side',
  current: 'Current',
  temperature: 'Temperature',
  signal: 'Signal',
  heardBy: 'Heard by',
  lastReport: 'Last report',
  serial: 'Serial',
  onTheRoof: 'On the roof',
  unitsFromTheNegative: 'Units, from the negative end',
  unitsOfString: (which: string) => `Units of string ${which}`,
  noPositionIsEntered: 'No position is entered for this string.',
};

export const unitsSheet = {
  voltage: 'Voltage',
  current: 'Current',
  temperature: 'Temperature',
  power: 'Power',
  siteStringWhich: (site: string, which: string) => `${site}, string ${which}`,
  chosenUnits: 'Chosen units',
  quantityOfUnits: 'Quantity of units',
  positionsAtMost: (unitsChosenMost: number) => `Positions, ${unitsChosenMost} at most`,
  takeOneOutTo: ': take one out to add another',
  position: 'Position ',
  theLinesCouldNot: 'The lines could not be fetched',
  choosePositionsAboveOr: 'Choose positions above, or tap a row of the strip below.',
  noUnitIsChosen: 'No unit is chosen',
  fetchingTheUnitsReports: 'Fetching the units’ reports …',
  imported: 'Nothing was reported then: from imported readings. ',
  highestOf15Minutes: 'Highest of 15 minutes. ',
  meansOf15Minutes: 'Means of 15 minutes. ',
  singleUnitsAreKept: 'Single units are kept by quarters of an hour: a month is shown. ',
  beforeAMarkTheReadings: 'Before a mark the readings of that position are another unit’s. ',
  rustStuckLateOr: 'Rust: stuck, late or flapping now. ',
  crimsonNotShuttingDown: 'Crimson: not shutting down. ',
};

export const whenNear = {
  loading: 'Loading …',
};

export const stringsAdvice = {
  shutdownWhileTheString: (many: boolean, held: number) =>
    `${many ? (held === 2 ? 'Both report' : 'All report') : 'It reports'} shutdown while the string is released`,
  theVoltageOnOutput: (many: boolean) => `the voltage on ${many ? 'their' : 'its'} output shows it`,
  manyAlive: (many: boolean) => `${many ? 'their inputs are' : 'its input is'} alive`,
  theStringLacksJust: (many: boolean) => `the string lacks just ${many ? 'their share' : 'its share'}`,
  heldInShutdown: (upper: string) => `${upper} held in shutdown`,
  stillPassing: (upper: string) => `${upper} still passing`,
  shutdownIsCommandedIts: 'Shutdown is commanded, its time is over, and voltage stands at their output.',
  measuredBesideExpected: (measuredV: number, expectedV: null | number, thresholdV: number, scope: string) =>
    `Measured ${volts(measuredV)}${expectedV === null ? '' : `, expected ${volts(expectedV)}`}; the threshold is ${volts(thresholdV)}.${scope === 'input' ? ' Strings share this input: which of them it is can not be told.' : ''}`,
  cantTell: 'Can’t tell',
  shutdownIsCommandedAnd: 'Shutdown is commanded, and no reading shows whether these units followed.',
  voltageBelowWhatIs: 'Voltage below what is expected',
  expectedFromShadeBypassed: (expectedFrom: string) =>
    `Expected from ${expectedFrom}. Shade, a bypassed part of a module and a wrong count of modules all look like this at one instant; the days tell them apart.`,
  whosePlaceOnThe: (position: number) => `${position}, whose place on the roof is not entered`,
  walkToAndMore: (placeOf: string, slots: number) =>
    `Walk to ${placeOf} and ${slots - 4} more, listed below.`,
  walkTo: (listedSaid: string) => `Walk to ${listedSaid}.`,
  haveAQualifiedPerson:
    'Have a qualified person measure the home run at the inverter end with a rated meter: + to −, + to earth, − to earth.',
  stringIsolatedAndIts:
    'String isolated and its current proved zero with a rated meter: re-mate the long leads there.',
  stillHeldSwapUnit: (position: undefined | number) =>
    `Still held? Swap unit ${position ?? ''} for a spare. This page watches for the change.`,
  keepEverybodyAwayFrom: 'Keep everybody away from the array and its home run: treat them as live.',
  lookForATransmitter: 'Look for a transmitter next door that still sends, and check the as-built.',
  checkThatTheKeep: 'Check that the keep-alive reaches the string: is its transmitter on?',
  stringIsolatedMeasureIts:
    'String isolated: measure its open-circuit voltage, then halve the string to find the unit.',
  compareTheAsBuilt:
    'Compare the as-built with the roof: a module wired in without its unit, or a string on another input.',
  untilThatShowsOtherwise: 'Until that shows otherwise, treat the string as live.',
  isItsGatewayOn: 'Is its gateway on and listening, and is there snow or shade on the modules?',
  compareTheSerialsOn: 'Compare the serials on the roof with the as-built.',
  seeWhetherOtherStrings:
    'See whether other strings of the same gateway are silent too: then it is the gateway.',
  compareWithYesterdayAnd:
    'Compare with yesterday and with the week below: shade comes at the same sun, a bypassed module stays.',
  isTheLoggerReporting: 'Is the logger reporting, and is the string on its roster?',
  isolateThenProveWith:
    'Isolate, then prove with a rated meter before touching conductors. Follow local codes; this is work for licensed people.',
  shutdownIsNotIsolation: 'Shutdown is not isolation.',
  eachModuleAndIts: (isolate: string) =>
    `Each module and its leads to its unit stay at module voltage. ${isolate}`,
  untilTheyHaveAnswered: 'Until they have answered, units of this type pass full module voltage',
  andDoNotObey: (isolate: string) => `and do not obey the initiator. Treat every string as live. ${isolate}`,
  darkIsNotDead: 'Dark is not dead.',
  theStringIsLive: (isolate: string) => `The string is live at first light. ${isolate}`,
  aReadingOnThis: 'A reading on this page is not proof of a dead circuit.',
};
