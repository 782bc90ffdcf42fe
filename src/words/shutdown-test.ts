import { amperes, listed, volts } from '../drawings/numbers';
import { clock, clockSeconds } from '../drawings/times';
import { counted, figure } from './domain-counts';
import { isOne } from './language';

export const cautionStep = {
  enterYourName: 'Enter your name.',
  treatEveryConductorAs: 'Treat every conductor as live before, during and after this test.',
  dcStringsAreDangerous: 'DC strings are dangerous in light: shock, arc, fire.',
  beforeYouGoOn: 'Before you go on',
  eachModuleAndIts: ' Each module and its leads to its unit stay at module voltage.',
  shutdownIsNotIsolation: 'Shutdown is not isolation.',
  onlyLicensedOrQualified:
    'Only licensed or qualified people measure, in the protective equipment that local rules ask for.',
  neverOpenAConnector:
    'Never open a connector under load. Nobody works on the strings or stands on the roof while the test runs.',
  theInstrumentIsRated:
    'The instrument is rated for the string’s voltage and proved on a known source before and after. A reading of zero proves nothing if the instrument is broken.',
  wakelineWatches: 'Wakeline watches. ',
  operatorOperatesInitiatorPlace: (operator: undefined | string, initiator: string, place: string) =>
    `: ${operator ?? 'a person'} operates ${initiator}${place ? ` (${place})` : ''} by hand.`,
  itSwitchesNothing: 'It switches nothing',
  localCodeAndThe:
    'Local code and the authority having jurisdiction come first. Isolate, lock out, prove dead before any work.',
  iHaveReadThis: 'I have read this and told everybody here',
  readThePointsThen: 'Read the points, then tick the box.',
  yourName: 'Your name',
  acceptAndGoOn: 'Accept and go on',
};

export const guidedTest = {
  whoAndWhat: 'Who and what',
  caution: 'Caution',
  verdictAndSignature: 'Verdict and signature',
  commissioning: 'Commissioning',
  shutdownTests: 'Shutdown tests',
  stepsOfTheTest: 'Steps of the test',
  done: ', done',
  isOnSiteOperates: (onSite: string, operator: string) =>
    `${onSite} is on site, ${operator} operates the initiator`,
  nothingIsPlannedYet: 'Nothing is planned yet',
  acceptedBy: (caution: string) => `Accepted by ${caution}`,
  notAcceptedYet: 'Not accepted yet',
  haveNotAnswered: (unheard: number, units: number) =>
    `${figure(unheard)} of ${counted(units, 'unit')} ${isOne(unheard) ? 'has' : 'have'} not answered the roll call.`,
  theyWillNotFollow:
    'According to the type entered, such a unit passes full voltage and does not follow the initiator. Treat every string as live.',
  shutdownIsNotIsolation: 'Shutdown is not isolation. Wakeline switches nothing; a person does.',
  treatEveryConductorAs: 'Treat every conductor as live.',
  goToTheVerdict: 'Go to the verdict',
  goToRound: (next: number) => `Go to round ${next + 1}`,
  anotherRound: (facts: string) => `Another round: ${facts}`,
  endedWithoutSignatureBy: (by: string, at: string, zone: string) =>
    `Ended without a signature by ${by}, ${clock(at, zone)}`,
  lastEntryYouSee: (at: string, zone: string) =>
    `Last entry ${clock(at, zone)}. You see what they save, and they see yours; agree who reads and who watches.`,
  atThisTestToo: (map: string, others: number) => `${map} ${others === 1 ? 'is' : 'are'} at this test too`,
  onThisPhone: (waiting: number) =>
    `${waiting} ${waiting === 1 ? 'entry waits' : 'entries wait'} on this phone`,
  youAreSignedOut: 'You are signed out: sign in again in another tab; nothing is lost.',
  theyAreKeptHere: 'They are kept here, with their times, and sent when the network is back.',
  theNewestCouldNot: 'The newest could not be read',
  notTaken: (replaceAll: string, at: string, zone: string) => `Not taken: ${replaceAll}, ${clock(at, zone)}`,
  removeIt: 'Remove it',
  endWithoutSigning: 'End without signing …',
  endThisTestWithout: 'End this test without a signature',
  whatWasWrittenStays: 'What was written stays readable in the list. It counts as no test.',
  why: 'Why',
  endTheTest: 'End the test',
};

export const planStep = {
  bright: 'Bright',
  dull: 'Dull',
  snowOnModules: 'Snow on modules',
  night: 'Night',
  catIV: 'CAT IV',
  catIII: 'CAT III',
  catII: 'CAT II',
  noMark: 'No mark',
  off: 'off',
  whoIsThere: 'Who is there',
  personOnSite: 'Person on site',
  inChargeOfThe: 'In charge of the test.',
  whoOperatesTheInitiator: 'Who operates the initiator',
  othersPresent: 'Others present',
  witnessesTheCustomerMay: 'Witnesses, the customer; may stay empty.',
  whatIsTested: (zone: string) => `What is tested: ${zone}`,
  ofStrings: (strings: number, strings2: number) => `${strings} of ${strings2} strings`,
  strings: 'Strings',
  rounds: 'Rounds',
  theOthersRunning: (i: number, facts: string) => `${i + 1}. ${facts}, the others running`,
  aStringThatHears:
    'A string that hears a neighbour’s transmitter shows itself only while its own is off and the others run.',
  lightAndWeather: 'Light and weather',
  lightOnTheModules: 'Light on the modules',
  aDeadStringIn: 'A dead string in this light proves nothing: nothing can pass.',
  weather: 'Weather',
  clearCloudPassing12: 'Clear, cloud passing, 12 °C, wind …',
  instrument: 'Instrument',
  aRatedInstrumentIs: 'A rated instrument is used at the home runs',
  makeAndModel: 'Make and model',
  serialNumber: 'Serial number',
  measurementCategoryAtIts: 'Measurement category at its input',
  measurementCategory: 'Measurement category',
  ratedVoltageOfThat: 'Rated voltage of that category',
  calibratedOn: 'Calibrated on',
  provedOnAKnown: 'Proved on a known source just now',
  withoutOneTheTest: 'Without one the test can be consistent at best: inverters can not read a few volts.',
  saveTheseChanges: 'Save these changes',
  saveAndReadThe: 'Save and read the caution',
};

export const readingEntry = {
  save: 'Save',
  next: 'Next',
  to: '+ to −',
  toEarth: '+ to earth',
  toEarth2: '− to earth',
  secondsAfterTheCommand: 'Seconds after the command',
  typeAtLeastOne: 'Type at least one voltage.',
  sinceTheCommand: (sinceS: number) => `${sinceS} s since the command`,
  beforeTheCommandTo: 'Before the command: + to − shows that the string is live and the instrument reads it.',
  atMostMayStand: (limitV: number, timeLimitS: number) =>
    `At most ${limitV} V may stand here ${timeLimitS} s after the command, any two conductors or to earth.`,
  voltagesOf: (part: string) => `Voltages of ${part}`,
  changeTheSignOf: (label: string) => `Change the sign of ${label}`,
  overLimitVV: (limitV: number) => `over ${limitV} V`,
  withinLimitVV: (limitV: number) => `within ${limitV} V`,
  readSoLongAfter: 'Read so long after the command',
  notedAtTheFirst: 'Noted at the first key; correct it by your stopwatch.',
  fromNTheTimeLimitS: (from: string, n: number, timeLimitS: number) =>
    `${from === 'clock' ? 'By this page’s clock' : 'As typed'}: ${n <= timeLimitS ? 'within' : 'after'} the ${timeLimitS} s.`,
  whereItWasRead: 'Where it was read',
  atTheInvertersEnd: 'At the inverter’s end',
  elsewhere: 'Elsewhere',
  keptButOnlyThe: 'Kept, but only the inverter’s end decides.',
  saveThisReading: 'Save this reading',
  cancel: 'Cancel',
};

export const repeatTest = {
  starting: 'Starting …',
  goToThatTest: 'Go to that test',
};

export const roundDrawing = {
  linesBeginWithThe: 'Lines begin with the command; until then nothing is drawn.',
  voltagesOfStringsFrom: (
    facts: string,
    strings: number,
    outsideV: number,
    insideV: number,
    afterS: number,
  ) =>
    `${facts}: voltages of ${strings} strings from the command on, with limits of ${outsideV} V outside and ${insideV} V inside the array and of ${afterS} s.`,
  linesAreReportsAnd:
    'Lines are reports and no test. Rings are the instrument’s readings, the highest of three.',
  theSameAsA: 'The same as a table',
  string: 'String',
  newest: 'Newest',
  atOrUnderIts: 'At or under its limit',
  from: 'From',
  afterSeconds: (n: number, afterS: number) => `${volts(n)} after ${afterS} s`,
  notKnown: 'not known',
  notUnder: (limitV: number) => `not under ${limitV} V`,
  limitVvAfterUnderFromS: (limitV: number, underFromS: number) => `${limitV} V after ${underFromS} s`,
};

export const roundStep = {
  operated: 'operated',
  takenOff: 'taken off',
  roundOf: (index: number, rounds: number, facts: string) => `Round ${index + 1} of ${rounds}: ${facts}`,
  personIsolatesTheSupply: (what: string, map: string) =>
    `A person isolates the supply of ${what} by hand; every other transmitter keeps running. Only ${map || 'no string'} may shut down.`,
  sinceReleaseItAnd: (since: string, zone: string) =>
    `Since ${clock(since, zone)}. Release it and let the strings come back: what is down before the command shows nothing.`,
  shutdownIsInForce: (map: string) => `${map}: shutdown is in force already`,
  startWatching: 'Start watching',
  watchedSince: (at: string, zone: string) => `watched since ${clockSeconds(at, zone)}`,
  commandByTheLoggers: 'Command by the logger’s report:',
  noneYet: 'none yet',
  mmssAgo: (mmss: string) => ` (${mmss} ago)`,
  asAPersonNoted: 'As a person noted it:',
  notYet: 'not yet',
  whenToOfEach: 'When + to − of each string is read, ',
  operatesWhatPlace: (what: string, place: string) =>
    ` operates ${what}${place && ` (${place})`} by hand. Wakeline switches nothing; it only notes the time.`,
  personTakesOffBy: (what: string) =>
    `A person takes ${what} off by hand. Wakeline switches nothing; it only notes the time.`,
  nowNoteTheTime: (what: string, initiator: string, verb: string) =>
    `${what === initiator ? 'Initiator' : what} ${verb} now: note the time`,
  transmitterNullInitiatorReleased: (transmitter: null | string, what: string) =>
    `${transmitter === null ? 'Initiator released' : `${what} running`} again now: note the time`,
  beforeARelease:
    'Before anybody releases: everyone off the roof and away from the conductors. The strings come back to full voltage.',
  takeTheNotedTime: (verb: string) => `Take the noted time back: it was not ${verb} yet`,
  noUnitToldThat: 'No unit told that it went, so none can tell that it came back.',
  backOfGoneUnits: (back: number, gone: number, held: number) =>
    `${back} of ${gone} units that went have come back${held > 0 ? `; ${held} ${isOne(held) ? 'is' : 'are'} still in shutdown` : ''}.`,
  giveThemAFew: 'Give them a few reports. What does not come back is stuck: the verdict names it.',
  endThisRound: 'End this round',
  beforeTheCommand: 'Before the command',
  homeRunsAtThe: 'Home runs at the inverter’s end',
  strings: (strings: number) => `${strings} strings`,
  voltageOfEachString: 'Voltage of each string',
  limitsSource: (source: string) => `limits: ${source}`,
  homeRunAtThe: (part: string) => `${part}, home run at the inverter’s end`,
  strikeThisReading: 'Strike this reading',
  why: 'Why',
  itStaysOnRecord: 'It stays on record, struck through.',
  strikeIt: 'Strike it',
  watching: 'Watching',
  nothingCanBeWatched: 'Nothing can be watched now',
  newestReport: (newestAt: string, timeZone: string) => ` Newest report ${clockSeconds(newestAt, timeZone)}.`,
  sinceTheCommand: 'since the command',
  pastThe: (limitS: number) => `past the ${limitS} s`,
  leftOf: (ceil: number, limitS: number) => `${ceil} s left of ${limitS} s`,
};

export const signStep = {
  theInstrumentAfterThe: 'The instrument after the test',
  proveItAgainOn:
    'Prove it again on a known source: a meter that died meanwhile reads zero on a live string. Without this no reading decides.',
  provedAfterTheTest: 'Proved after the test',
  itReadTheKnown: 'It read the known source right',
  itDidNot: 'It did not',
  notDoneYet: 'Not done yet.',
  itReadRight: 'It read right.',
  itDidNotRead: 'It did not read right.',
  anotherRoundByThe: 'Another round by the initiator, to read what is missing',
  remarks: 'Remarks',
  addARemark: 'Add a remark',
  addIt: 'Add it',
  sign: 'Sign',
  roundIsStillUnder: (open: number) => `Round ${open + 1} is still under way: end it first.`,
  youSignAs: 'You sign as ',
  aSignedTestIs: '. A signed test is never changed; a newer one can supersede it.',
  notEveryPlannedRound: ' Not every planned round was run.',
  itWasNotSigned: 'It was not signed',
  yourPasswordAgain: 'Your password again',
  entriesWaitOnThis: (waiting: number) =>
    `${waiting} entries wait on this phone: they must arrive before anything is signed.`,
  sayFirstWhetherThe: 'Say first whether the instrument was proved after the test.',
  signing: 'Signing …',
  signThisTest: 'Sign this test',
  fingerprintOfWhatIs: (fingerprint: string) => `Fingerprint of what is shown: ${fingerprint}`,
};

export const shutdownTestPlanForm = {
  ratedVoltage: 'Rated voltage',
  thisDayIsStill: 'This day is still to come: enter the day of the newest calibration.',
};

export const shutdownTestRound = {
  transmitter: (name: undefined | string) => name ?? 'transmitter',
  invertersInput: 'inverter’s input',
  invertersInputHeldUp: 'inverter’s input; its capacitors may hold it up',
  invertersInputFlows: (currentA: number, strings: number) =>
    `inverter’s input; ${amperes(currentA)} flows: units ${isOne(strings) ? '' : `of its ${strings} strings `}pass`,
  invertersInputTooLong: 'inverter’s input, up for longer than its capacitors hold it',
  atTheHomeRun: 'at the home run',
  sumOfWhatIts: 'sum of what its units report',
  nothingReported: 'nothing reported',
  wholeZone: (initiator: string) => `${initiator}, whole zone`,
  offAlone: (transmitter: string) => `${transmitter} off alone`,
};

const theStrings = (names: readonly string[] | null, live: number, of: number): string =>
  names ? listed(names) : `${live} of ${counted(of, 'string')}`;

export const shutdownTestWords = {
  theTestOfWas: (zone: string) => `The test of ${zone} was ended without a signature`,
  itCountsAsNo: 'It counts as no test. What was written stays readable.',
  testOfWhoIs: (zone: string) => `Test of ${zone}: who is there, and what with?`,
  thisTestRepeatsWhat:
    'This test repeats what the one before left open; people, instrument and strings are taken from it.',
  itShowsWhetherBrings: (initiator: string) =>
    `It shows whether ${initiator} brings the home runs down in time.`,
  testOfOperates: (zone: string, operator: string, initiator: string) =>
    `Test of ${zone}: ${operator} operates ${initiator}`,
  changeWhatIsWrong: 'Change what is wrong; rounds that have begun stay.',
  theCautionWasAccepted: (caution: string) => `The caution was accepted by ${caution}`,
  readTheCautionBefore: 'Read the caution before anybody measures',
  acceptedByNameAnd: 'Accepted by name and time; it stays with the test.',
  noRoundHasBeen: 'No round has been watched yet',
  thereIsNoVerdict: 'There is no verdict to sign.',
  signItAllThe:
    'Sign it all the same: a failed test is a record. Then find the cause and repeat the test for what failed.',
  onlyTheInstrumentDecides: 'Only the instrument decides; reports of units stand beside it.',
  itCanBeSigned: 'It can be signed as it is; what is missing is listed below.',
  roundStepName: (step: number, name: string) => `Round ${step + 1}: ${name}`,
  startWatchingFirstThen: 'Start watching first; then a person operates it by hand.',
  roundIsOver: (step: number, name: string) => `Round ${step + 1} is over: ${name}`,
  goOnWithThe: 'Go on with the next round, repeat this one, or look at the verdict.',
  didNotShutDown: (names: readonly string[] | null, live: number, of: number) =>
    `${theStrings(names, live, of)} did not shut down`,
  stillAbove: (names: readonly string[] | null, live: number, of: number, limitV: number | null) =>
    `${theStrings(names, live, of)} ${isOne(live) ? 'is' : 'are'} still above ${limitV === null ? 'their limits' : volts(limitV)}`,
  notDown: (names: readonly string[] | null, live: number, of: number) =>
    `${theStrings(names, live, of)} ${isOne(live) ? 'has' : 'have'} not come down`,
  didNotComeDown: (names: readonly string[] | null, live: number, of: number) =>
    `${theStrings(names, live, of)} did not come down in time`,
  treatAsLiveRelease: (unknown: number, afterS: number) =>
    `Treat every string as live.${unknown === 0 ? '' : ` Of ${counted(unknown, 'string')} nothing is known since the ${afterS} s.`} Clear the roof, then release, end the round, and find the cause before anybody works there.`,
  watchingWaitingForPerson: (zone: string, operated: string) =>
    `Watching ${zone}: waiting for a person to operate ${operated}`,
  readToOfEach: 'Read + to − of each home run first: only a string that was live can be shown to shut down.',
  wasOperatedReadThe: (transmitter: null | string, initiator: string, name: string) =>
    `${transmitter === null ? initiator : name} was operated: read the home runs`,
  loggerReportsReadThe: 'The logger reports a shutdown: read the home runs',
  plusMinusAndEarth: (afterS: number) =>
    `+ to −, + to earth and − to earth at the inverter’s end, within ${afterS} s.`,
  releasedWatchComeBack: (zone: string) => `Released: watch ${zone} come back`,
  liveAgain: 'Every string is live again. End the round, and find the cause before anybody works there.',
  unitsThatDoNot: 'Units that do not come back are stuck; the verdict names them.',
};
