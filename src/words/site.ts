import { countAtStart, counted, energy, number, percent, power, volts } from '../drawings/numbers';
import { duration } from '../drawings/times';

export const casesSheet = {
  cases: 'Cases',
  countedCasesCaseIs: (cases: number) => counted(cases, 'case is open', 'cases are open'),
  theCasesCouldNot: 'The cases could not be read anew',
  nobodyWorksOnAnything: 'Nobody works on anything here',
  overdue: 'overdue',
  nobodyYet: 'nobody yet',
  openACase: 'Open a case',
  allCasesOfThis: 'All cases of this site',
};

export const eventsSheet = {
  reportedLater: (lateS: number) => ` (reported ${duration(lateS)} later)`,
  events: 'Events',
  kind: 'Kind',
  all: 'All',
  eventsCouldNotBe: 'Events could not be read',
  nothingHasHappenedYet: 'Nothing has happened yet',
  nothingOfThisKind: 'Nothing of this kind has happened',
  eventsNewestFirst: 'Events, newest first',
  readingOlderOnes: 'Reading older ones …',
  olderOnes: 'Older ones',
};

export const invertersSheet = {
  standby: 'Standby',
  running: 'Running',
  derated: 'Derated',
  curtailed: 'Curtailed',
  gridLost: 'Grid lost',
  inFault: 'In fault',
  invertersAndInputs: 'Inverters and inputs',
  asTheInvertersReport: 'as the inverters report themselves',
  noInverterIsEntered: 'No inverter is entered for this site',
  arcFlag: 'Arc flag',
  earthFaultFlag: 'Earth-fault flag',
  acPowerOfAcPower: (acPower: null | number, acPowerMax: number) =>
    `${power(acPower)} of ${power(acPowerMax)}`,
  insulation: (insulation: string) => ` · insulation ${insulation} · `,
  limitedTo: (powerLimit: number) => `, limited to ${power(powerLimit)}`,
  notReportedYet: 'not reported yet',
  inputsOf: (inverter: string) => `Inputs of ${inverter}`,
  input: 'Input',
  strings: 'Strings',
  voltage: 'Voltage',
  current: 'Current',
};

export const nowSheet = {
  rapidShutdownWithin30: 'Rapid shutdown within 30 s',
  rapidShutdownWithin10: 'Rapid shutdown within 10 s (older edition)',
  listedHazardControlSystem: 'Listed hazard-control system',
  noShutdownRule: 'No shutdown rule',
  consistentByTelemetryAlone: 'consistent by telemetry alone',
  notWitnessed: 'not witnessed',
  ofMost: (most: number) => `of ${power(most)}`,
  powerNotKnownJust: 'Power not known just now',
  ofTheInvertersCapacity: (share: number) => `${percent(share)} of the inverters' capacity`,
  noInverterHasReported: 'No inverter has reported lately.',
  ofWhatTheInverters: (share: number) => `${percent(share)} of what the inverters can do`,
  now: 'Now',
  newestReport: 'newest report ',
  noReportYet: 'no report yet',
  unitsInStrings: (units: number, strings: number) =>
    `${counted(units, 'unit')} in ${counted(strings, 'string')}`,
  cantBeConfirmed: (unconfirmed: number) => `; ${number(unconfirmed)} can't be confirmed`,
  contact: 'Contact',
  shutdownSwitch: 'Shutdown switch',
  notRecorded: 'not recorded',
  ruleSet: 'Rule set',
  lastShutdownTest: 'Last shutdown test',
  noneRecorded: 'none recorded',
  performanceRatio30D: 'Performance ratio, 30 d',
  rollCallUnderWay: (personOnSite: string) => `Roll call under way, ${personOnSite} on site`,
  rollCall: 'Roll call',
  customersPage: "Customer's page",
};

export const radioSheet = {
  gatewaysAndLoggers: 'Gateways and loggers',
  gatewaysAreLearnedFrom: 'gateways are learned from what is heard',
  noGatewayHasBeen: 'No gateway has been heard yet',
  byItHeard: (units: number) => `${counted(units, 'unit')} by it · heard `,
  silent: 'Silent',
  loggerSerial: (serial: string) => `Logger ${serial}`,
  lastSpoke: 'last spoke ',
  firmware: (firmware: string) => `firmware ${firmware} · `,
  tokensOfTheLoggers: 'Tokens of the loggers, and what was refused',
  whetherUnitsBehindA:
    "Whether units behind a silent gateway follow a shutdown can't be confirmed until it is heard again.",
};

export const siteBoard = {
  fleet: 'Fleet',
  onTheRoof: 'On the roof',
  walkTheRoof: 'Walk the roof',
  whoIsInWhich: 'Who is in which string',
  figures: 'Figures',
  plannedWorks: 'Planned works',
  loggers: 'Loggers',
  earlierReadings: 'Earlier readings',
  whatIsShownMay: 'What is shown may be old.',
  theSiteCouldNot: 'The site could not be read anew',
  causesToActOn: 'Causes to act on',
  shutdownIsNotIsolation:
    'Shutdown is not isolation: each module and its leads to its unit stay at module voltage. Never open a connector under load. Isolate, lock out, prove dead with a rated meter; licensed or qualified people, local code first.',
  stringsStayDangerousIn: 'Strings stay dangerous in light.',
};

export const standingSheet = {
  stringsUntil: (strings: string) => `${strings} until `,
  whatHappensThereIs: '. What happens there is no alarm until then; units that don’t shut down are. ',
  plannedWorks: (reason: string) => `Planned works: ${reason}`,
  plannedWorks2: 'Planned works',
  whatTheNightsHave: 'What the nights have found',
  allCausesHere: 'all causes here',
  since: 'since ',
  lossWhDayADay: (lossWhDay: number) => ` · ${energy(lossWhDay)} a day`,
  atTheWholeSite: 'At the whole site',
  atStrings: (strings: string) => `At ${strings}`,
};

export const stringsSheet = {
  conductorsStayLive: 'Conductors stay live',
  stuck: (stuck: number) => `${number(stuck)} stuck`,
  stuckPositionsUnknown: 'Stuck, positions unknown',
  voltageNotExplained: 'Voltage not explained',
  unconfirmed: (unconfirmed: number) => `${number(unconfirmed)} unconfirmed`,
  tellsNothing: 'tells nothing',
  heardOfUnits: (heard: number, units: number) => `${number(heard)} of ${number(units)}`,
  string: 'String',
  units: 'Units',
  voltage: 'Voltage',
  ofThoseHeard: 'of the units heard',
  inShutdown: (expectedInShutdown: number) => `${volts(expectedInShutdown)} in shutdown`,
  withEveryUnitIn: 'with every unit in shutdown, by the type entered',
  expectedVoltageExpected: (expectedVoltage: number) => `${volts(expectedVoltage)} expected`,
  expectedBy: (expectedFrom: string) => `expected by ${expectedFrom}`,
  current: 'Current',
  power: 'Power',
  heard: 'Heard',
  weakestSignal: 'Weakest signal',
  position: (position: number) => `position ${position}`,
  strings: 'Strings',
  what: 'strings',
  countedShownString: (shown: number) => counted(shown, 'string'),
  ofStrings: (strings: number) => ` of ${number(strings)}`,
  filterStringsByName: 'Filter strings by name or serial',
  filterByNameOr: 'Filter by name or serial',
  stringsWithTheirUnits:
    'Strings with their units as a comb, voltage, current, power, units heard and weakest signal',
  noStringIsEntered: 'No string is entered for this site',
  anotherNameOrSerial: 'Another name or serial may.',
  noStringMatches: 'No string matches',
};

export const zonesSheet = {
  inShutdownInitiatorOpen: 'In shutdown, initiator open',
  inShutdownKeepAlive: 'In shutdown, keep-alive gone',
  inShutdownPowerGone: 'In shutdown, power gone',
  released: 'Released',
  zone: 'Zone',
  countedStringsString: (strings: number) => counted(strings, 'string'),
  inForce: 'In force',
  notReportedYet: 'not reported yet',
  transmitterSince: (where: string, word: string) => `Transmitter ${where}: ${word.toLowerCase()} since `,
  since: 'since ',
  sinceBy: 'Since, by',
  initiator: 'Initiator',
  whatIsCommanded: 'What is commanded',
  asTheLoggerReports: 'as the logger reports it; Wakeline switches nothing',
  zonesAndTheCommand: 'Zones and the command in force in each',
  noZoneIsEntered: 'No zone is entered for this site',
};

export const siteFindingWords = {
  allUnits: (all: number) => `All ${number(all)} units`,
  ofUnits: (n: number, all: number) => `${countAtStart(n)} of ${number(all)} units`,
  didNotShutDown: (who: string) => `${who} did not shut down`,
  unitsStuckInShutdown: (who: string, single: boolean) =>
    `${who} ${single ? 'has' : 'have'} units stuck in shutdown`,
  stuckInShutdown: (who: string, single: boolean) => `${who} ${single ? 'is' : 'are'} stuck in shutdown`,
  theShutdownOfCant: (charAt: string, who: string) =>
    `The shutdown of ${charAt.toLowerCase()}${who} can't be confirmed`,
  whoSingleSilent: (who: string, single: boolean) => `${who} ${single ? 'is' : 'are'} silent`,
  whatTheInvertersMake: 'What the inverters make is not known just now.',
  theInvertersMakeOf: (watts: number, acPowerMax: number) =>
    `The inverters make ${power(watts)} of ${power(acPowerMax)}.`,
  theInvertersMadeOf: (watts: number, acPowerMax: number, at: string) =>
    `The inverters made ${power(watts)} of ${power(acPowerMax)} at ${at}; no report since.`,
  here: 'here',
  nothingHasBeenReported: (reportedAt: string) => `Nothing has been reported since ${reportedAt}`,
  nothingHasBeenReportedYet: 'Nothing has been reported yet',
  theLoggerIsNot: 'The logger is not connected. What is shown is what it said last; nothing newer is known.',
  inShutdownSinceOn: (inShutdownSince: string) => `In shutdown since ${inShutdownSince}, on command`,
  ofUnitsSayThat: (shutdown: number, units: number) =>
    `${number(shutdown)} of ${number(units)} units say that they are in shutdown. A home run is dead only when a rated meter shows it.`,
  ofUnitsHaveAnswered: (units: number, unheard: number) =>
    `${number(units - unheard)} of ${number(units)} units have answered the roll call`,
  untilTheRollCall: 'Until the roll call is complete, treat every string as live.',
  allUnitsAreIn: (units: number) => `All ${number(units)} units are in the dark`,
  tooLittleLightReaches:
    'Too little light reaches the modules to power their units. The strings are live again at sunrise.',
  allUnitsPass: (units: number) => `All ${number(units)} units pass`,
  nothingNeedsAttention: (site: string) => `${site} Nothing needs attention.`,
  inTheDark: (dark: string) => `${dark} in the dark`,
  notHeardYet: (unheard: string) => `${unheard} not heard yet`,
  inShutdown: (shutdown: string) => `${shutdown} in shutdown`,
  ofUnitsPass: (passing: number, units: number) => `${number(passing)} of ${number(units)} units pass`,
  nothingNeedsAttention2: 'Nothing needs attention',
  ofTheOthers: (rest: string) => `Of the others ${rest}. `,
};
