import { countAtStart, counted, decibelMilliwatts, number } from '../drawings/numbers';
import { clock, clockOrDate } from '../drawings/times';

export const curveSheet = {
  rollCall: 'Roll call',
  theCurveBeginsWhen: 'The curve begins when somebody starts the roll call',
  answeredBeforeAnyRoll: (heard: number) =>
    `${counted(heard, 'unit')} answered before any roll call: a logger hears what speaks by itself.`,
  eachUnitThatAnswers: 'Each unit that answers is one step of it.',
  started: 'started ',
  stopped: ' · stopped ',
  gatewayOfListening: (listening: number, gateways: number) =>
    ` · gateway ${listening} of ${gateways} listening`,
  hadAnsweredBeforeThis: (before: number) =>
    `${counted(before, 'unit')} had answered before this start: the curve stands on them.`,
};

export const commissioningGaps = {
  acceptedAsItIs: 'accepted as it is',
  acceptAsItIs: 'Accept as it is',
  whyThisMayStand: 'Why this may stand open',
  yourNameTheTime: 'Your name, the time and this reason go into the handover pack.',
  acceptInMyName: 'Accept in my name',
  leaveItOpen: 'Leave it open',
};

export const lists = {
  string: 'String',
  position: 'Position',
  serial: 'Serial',
  placeOnTheRoof: 'Place on the roof',
  notRecorded: 'not recorded',
  anotherUnit: 'Another unit',
  replace: 'Replace',
  replaceAt: (serial: string, stringName: string, position: number) =>
    `Replace ${serial} at ${stringName}-${position}`,
  stillToHear: 'Still to hear',
  countedMissingUnit: (missing: number) => counted(missing, 'unit'),
  walkToThem: 'Walk to them',
  unitsThatHaveNot: 'Units that have not answered',
  everyUnitOnThe: 'Every unit on the roll has answered',
  showAll: (missing: number) => `Show all ${missing}`,
  heardButNotOn: 'Heard, but not on the as-built',
  firstAt: ', first at ',
  place: 'Place',
  placeSerial: (serial: string) => `Place ${serial}`,
  aSpareANeighbours:
    'A spare, a neighbour’s unit, or one that sits where the drawing has another: read the label on the roof.',
  gateway: 'Gateway',
  silentLastHeardAt: (silent: boolean, lastHeardAt: string, at: string, timeZone: string) =>
    `${silent ? 'silent, last' : 'last'} ${clockOrDate(lastHeardAt, at, timeZone)}`,
  nothingHeardYet: 'nothing heard yet',
  heard: 'Heard',
  weakest: 'Weakest',
  gateways: 'Gateways',
  rollCallByGateway: 'Roll call by gateway',
  weakestOfAllPosition: (stringName: string, position: number, serial: string, signal: null | number) =>
    `Weakest of all: ${stringName}, position ${position} (${serial}) at ${decibelMilliwatts(signal)}`,
  byGateway: (gateway: string) => `, by ${gateway}`,
};

export const commissioningRollCall = {
  theUnitIsPlaced: 'The unit is placed',
  theUnitIsReplaced: 'The unit is replaced; the old one’s life stays in the history',
  theTwoUnitsAre: 'The two units are exchanged on the as-built',
  theUnitIsMoved: 'The unit is moved on the as-built',
  commissioning: 'Commissioning',
  theRollCallCould: 'The roll call could not be read again',
  andDoNotObey: 'and do not obey the initiator. Treat every string as live.',
  untilTheyHaveAnswered: 'Until they have answered, units of this type pass full module voltage',
  theLoggersGetThe: 'The loggers get the new roster. ',
  seeTheHistory: 'See the history',
};

export const runPanel = {
  itDidNotWork: 'It did not work',
  enterTheNameOf: 'Enter the name of the person who is on site.',
  confirmThatThisPerson: 'Confirm that this person is on site now.',
  theRollCallWas: 'The roll call was not started',
  aUnitThatIs: 'A unit that is heard begins to follow the command in force.',
  wakelineAsksTheLoggers: 'Wakeline asks the loggers to listen; it sends no release and no shutdown.',
  whoIsOnSite: 'Who is on site',
  firstAndLastName: 'First and last name; it is kept with the roll call.',
  thisPersonIsOn: 'This person is on site now, and nobody is working on the strings.',
  starting: 'Starting …',
  startTheRollCall: 'Start the roll call',
  started: 'Started ',
  byOnSite: (startedBy: string, personOnSite: string) => ` by ${startedBy}. On site: ${personOnSite}.`,
  stopping: 'Stopping …',
  stopTheRollCall: 'Stop the roll call',
  aManagerOrA: 'A manager or a technician stops it.',
  theRollCallIs: 'The roll call is running',
  startTheRollCallAgain: 'Start the roll call again',
  aManagerOrATechnician: 'A manager or a technician starts it, with somebody on site.',
  loggerSerial: (serial: string) => `Logger ${serial} `,
  itListensWhenIt: ': it listens when it comes back.',
  hasNotSpokenSince: 'has not spoken since ',
  hasNotSpokenYet: 'has not spoken yet',
};

export const siteOverview = {
  openTheAsBuilt: 'Open the as-built',
  openTheInstallChecks: 'Open the install checks',
  openTheReadings: 'Open the readings',
  openTheRollCall: 'Open the roll call',
  openTheShutdownTests: 'Open the shutdown tests',
  openTheHandover: 'Open the handover',
  since: ' · since ',
  countedRestMorePoint: (rest: number) => counted(rest, 'more point'),
  restOpen: (rest: number) => `${counted(rest, 'point')} open`,
  nothingIsOpen: 'Nothing is open.',
  designChecks: 'Design checks',
  roofPlan: 'Roof plan',
  walkAndLadderCard: 'Walk and ladder card',
  whichStringAUnit: 'Which string a unit is in, by current',
  whoChangedWhat: 'Who changed what',
  theSiteAsIt: 'The site as it stands',
  commissioning: 'Commissioning',
  theStepsCouldNot: 'The steps could not be read again',
  localCodeAndThe: (every: boolean) =>
    `${every ? 'until you have isolated it and proved it dead with a rated meter. ' : 'until its roll call is complete and its shutdown has been measured. '}Local code and the authority having jurisdiction come first.`,
  treatEveryStringAs: 'Treat every string as live',
  alsoForThisSite: 'Also for this site',
};

export const sitesUnderWay = {
  nothingBlocksTheHandover: 'Nothing blocks the handover. It waits to be made.',
  blocksTheHandover: 'Blocks the handover',
  andOf: (more: number, key: string) => `And ${counted(more, 'more point')} of ${key.toLowerCase()}`,
  countedStringsString: (strings: number) => counted(strings, 'string'),
  countedUnitsUnit: (units: number) => counted(units, 'unit'),
  step: 'Step',
  notBegun: ', not begun',
  sinceToday: ', since today',
  countedDaysDay: (days: number) => counted(days, 'day'),
  onIt: 'On it',
  nobodyYet: 'nobody yet',
  rollCall: 'Roll call',
  theRollCallIs: 'The roll call is running',
  filterByNamePlace: 'Filter by name, place or person',
  atStep: 'At step',
  any: 'any',
  sortedBy: 'Sorted by',
  name: 'name',
  daysInStep: 'days in step',
  pointsThatBlock: 'points that block',
  beginASite: 'Begin a site',
  nothingIsUnderWay: 'Nothing is under way',
  clearTheSearchOr: 'Clear the search, or choose any step.',
  noSiteFitsThese: 'No site fits these filters',
};

export const stringsSheet = {
  string: 'String',
  unitsFromTheNegative: 'Units, from the negative end',
  heard: 'Heard',
  weakestSignal: 'Weakest signal',
  strings: 'Strings',
  whichStrings: 'Which strings',
  allStrings: (strings: number) => `All ${strings}`,
  stillMissingUnits: (filter: number) => `Still missing units, ${filter}`,
  unitsAsCsv: 'Units as CSV',
  rollCallByString: 'Roll call by string',
  noStringIsMissing: 'No string is missing a unit',
  unitsOfShutdownOnly: (mute: number) =>
    `${mute} units of shutdown-only strings are not on the roll: according to the type entered they cannot answer.`,
  noSerialOnThe: (emptySlots: number) =>
    `${emptySlots} ${emptySlots === 1 ? 'slot has' : 'slots have'} no serial on the as-built.`,
};

export const wiredSheet = {
  wiredDifferentlyFromThe: 'Wired differently from the drawing?',
  seeTheCurrents: 'See the currents',
  reviewTheMove: 'Review the move',
  theCurrentsCouldNot: (message: string) => `The currents could not be read: ${message}`,
  comparingTheUnitsCurrents: 'Comparing the units’ currents …',
  unitsCarryTheCurrent: (here: number, cantTell: number) =>
    `${here} units carry the current of their string; for ${cantTell} it can’t be told.`,
  itCantBeTold: 'It can’t be told yet: the strings’ currents are too small or too alike.',
  compareCurrentsOrIsolate: 'Compare currents, or isolate a string',
  readOnTheRoof: 'Read on the roof that it is otherwise?',
  exchangeTwoSerials: 'Exchange two serials',
  replaceAUnit: 'Replace a unit',
};

export const commissioningTally = {
  ofHeard: (heard: number, roster: number) => `${heard} of ${roster} heard`,
};

export const underWay = {
  noSiteIsBeing: 'No site is being commissioned',
  theRollCallIs: (only: string, roll: string) => `The roll call is running at ${only}${roll}`,
  rollCallsAreRunning: (running: number) => `Roll calls are running at ${counted(running, 'site')}`,
  oneSiteIsBeing: 'One site is being commissioned',
  sitesAreBeingCommissioned: (sites: number) => `${number(sites)} sites are being commissioned`,
  reportsProveNothingDead: 'Reports prove nothing dead: isolate and measure before touching a conductor.',
  isHandedOver: (site: string) => `${site} is handed over`,
  itsPapersStayHere: 'Its papers stay here; a later change makes a new version.',
  isReadyToBe: (site: string) => `${site} is ready to be handed over`,
  everyStepBeforeIt: 'Every step before it is done, or its gaps are accepted by name.',
  ofDone: (done: number, steps: number) =>
    `${countAtStart(done)} of ${counted(steps, 'step')} ${done === 1 ? 'is' : 'are'} done`,
  theHandover: (gaps: number, site: boolean, liveUntilMeasured: string) =>
    `${counted(gaps, 'point blocks', 'points block')} the handover. ${site ? liveUntilMeasured : 'Until the roll call is complete, treat every string as live.'}`,
};

export const commissioningWords = {
  noUnitHereCan: 'No unit here can answer a roll call',
  noneOfAnsweredThe: (roster: number, have: string) =>
    `None of ${counted(roster, 'unit')} ${have} answered the roll call`,
  theOnlyUnitHas: 'The only unit has answered the roll call',
  allUnitsHaveAnswered: (roster: number) => `All ${number(roster)} units have answered the roll call`,
  ofAnsweredTheRoll: (heard: number, roster: number, heard2: string) =>
    `${number(heard)} of ${counted(roster, 'unit')} ${heard2} answered the roll call`,
  unitsOfStrings: (reduce: number, strings: number) => `${number(reduce)} units of ${strings} strings`,
  itsGatewayItsSerials: 'its gateway, its serials',
  theirGatewayTheirSerials: 'their gateway, their serials',
  haveNotStirredLook: (who: string, its: string) => `${who} have not stirred: look at ${its}, or snow.`,
  noneOfTheUnits: (units: number, replace: string) =>
    `None of the ${units} units with serials ${replace} has stirred: compare their labels.`,
  theLoggersAreListening: 'The loggers are listening.',
  nothingListens: (since: string | null, loggers: boolean, who: readonly string[], timeZone: string) =>
    since
      ? loggers
        ? `Nothing listens since ${clock(since, timeZone)}: logger ${who.join(', ')} does not report.`
        : `Nothing has been heard since ${clock(since, timeZone)}, by ${who.join(', ')}.`
      : 'Nothing has listened here yet.',
  notHeardSince: (
    since: string | null,
    loggers: boolean,
    who: readonly string[],
    missing: number,
    timeZone: string,
  ) =>
    `${loggers ? `Of logger ${who.join(', ')}` : `By ${who.join(', ')}`} nothing has been heard ${since ? `since ${clock(since, timeZone)}` : 'yet'}. Of ${number(missing)} missing ${missing === 1 ? 'unit' : 'units'} nobody can tell.`,
  thisPageIsNot: 'This page is not live now.',
  nobodyCanTell: 'Nobody can tell who would answer. Treat every string as live.',
  treatEveryString: 'Treat every string as live.',
  tooFewAnswersSo: 'Too few answers so far to say how long it takes.',
  noFurtherAnswersAre: 'No further answers are expected soon.',
  notAnsweredWalkTo: (missing: number, missing2: string) =>
    `${counted(missing, 'unit')} ${missing2} not answered: walk to ${missing === 1 ? 'it' : 'them'}, and compare the label.`,
  by: (by: string, timeZone: string) => ` by ${clock(by, timeZone)}`,
  theOneMissingIs: 'The one missing is expected',
  allMissingAreExpected: (missing: number) => `All ${number(missing)} missing are expected`,
  ofTheMissingExpected: (expected: number, missing: number) =>
    `${number(expected)} of the ${number(missing)} missing ${expected === 1 ? 'is' : 'are'} expected`,
  accordingToTheType: (mute: number) =>
    `According to the type entered, its ${counted(mute, 'unit')} ${mute === 1 ? 'reports' : 'report'} nothing: only a meter or the inverter’s input shows what ${mute === 1 ? 'it does' : 'they do'}.`,
  theAsBuiltHolds: 'The as-built holds no units yet.',
  nobodyIsMissing: 'Nobody is missing.',
  stopTheRollCall: 'Stop the roll call: the loggers are still listening for serials.',
  theRollCallHas: 'The roll call has not been started.',
  somebodyOnSiteStarts: 'Somebody on site starts it.',
  itWasStoppedAt: (stoppedAt: string, timeZone: string, stoppedBy: null | string) =>
    `It was stopped at ${clock(stoppedAt, timeZone)}${stoppedBy ? ` by ${stoppedBy}` : ''}.`,
  notAnsweredStartIt: (missing: number, missing2: string) =>
    `${counted(missing, 'unit')} ${missing2} not answered; start it again when somebody is on site.`,
  shutdownByTheInitiator: 'shutdown by the initiator',
  shutdownBecauseTheKeep: 'shutdown, because the keep-alive is lost',
  shutdownBecausePowerIs: 'shutdown, because power is lost',
  inForceNowReleased:
    'In force now: released. A unit that is heard goes on passing power, and from then on obeys the initiator.',
  inForceNowUnit: (parts: string) => `In force now: ${parts}. A unit that is heard there goes into shutdown.`,
  heardBy: (gateway: string) => `heard by ${gateway}`,
  whichLacks: (name: string, missing: number) => `${name}, which lacks ${missing}`,
  asAreAnd: (by: string, first: string, second: string) => `${by}, as are ${first}, and ${second}`,
  asIs: (by: string, first: string) => `${by}, as is ${first}`,
};
