import { countAtStart, counted } from '../drawings/numbers';
import { clockOrDate, fullTime } from '../drawings/times';

export const capture = {
  wakelineOnThisPhone: 'Wakeline on this phone',
  waiting: 'Waiting',
  stringWhich: (which: string) => `String ${which}`,
  whatIsRecorded: 'What is recorded',
  readings: 'Readings',
  checks: 'Checks',
  allStrings: 'All strings',
};

export const checkForm = {
  pass: 'Pass',
  fail: 'Fail',
  notApplicable: 'Not applicable',
  keptWhich: (which: string) => `Kept: ${which}.`,
  itCouldNotBe: 'It could not be kept.',
  thePhotoCouldNot: 'The photo could not be kept.',
  recordedNewRecordTakes: (result: string, at: string, at2: string, timeZone: string, person: string) =>
    `Recorded: ${result}, ${clockOrDate(at, at2, timeZone)}, ${person}. A new record takes its place; this one is kept in the history.`,
  reasonForFailAnd: 'Reason (for fail and not applicable)',
  note: 'Note',
  photo: 'Photo',
  notApplicable2: (offersNotApplicable: string) => `Not applicable: ${offersNotApplicable}`,
  source: (source: string) => `Source: ${source}`,
};

export const checkScreen = {
  whileTheUnitsGo: 'While the units go up',
  beforeEnergising: 'Before energising',
  onceCurrentFlows: 'Once current flows',
  notApplicable: 'not applicable',
  theTypesOfThis: 'The types of this string are not on this phone yet.',
  everyCheckOf: (which: string) => `All checks of ${which} are recorded`,
  somethingBlocksTheSign: (which: string) => `Something blocks the sign-off of ${which}`,
  ofChecksOpenAt: (open: number, checks: number, which: string) =>
    `${countAtStart(open)} of ${checks} checks ${open === 1 ? 'is' : 'are'} open at ${which}`,
  openACheckDo: 'Open a check, do it, and say how it stands. It is kept on this phone at once.',
  open: 'open',
  waiting: ', waiting',
};

export const decision = {
  itCouldNotBe: 'It could not be kept.',
  recordedThisToo: (person: string, at: string, timeZone: string) =>
    `${person} recorded this too, ${fullTime(at, timeZone)}.`,
  yours: 'Yours',
  keepMine: 'Keep mine',
  yoursGoesAgainAnd: 'Yours goes again and takes its place.',
  keepTheirs: 'Keep theirs',
  theRecordOfStands: (person: string) => `The record of ${person} stands.`,
  putBothIntoOne: 'Put both into one record',
  theServerRefusedIt: 'The server refused it.',
  changeIt: 'Change it',
  sendWithTheTime: 'Send with the time of now',
  itGoesAgainWith: 'It goes again with the time of now.',
  sendAgain: 'Send again',
  itGoesAgain: 'It goes again.',
  yesLeaveItOut: 'Yes, leave it out',
  leftOut: 'Left out.',
  leaveItOut: 'Leave it out',
};

export const figureField = {
  ifMeasured: ' (if measured)',
  notChosen: 'not chosen',
  changeTheSignOf: (figure: string) => `Change the sign of ${figure}`,
};

export const head = {
  toTheListOf: 'To the list of strings',
  sendNow: 'Send now',
  sending: 'Sending…',
  signInAgain: 'Sign in again',
};

export const capturePhotos = {
  onThisPhoneWaiting: (photos: number) => `${counted(photos, 'photo')} on this phone, waiting to be sent`,
  sentOfIt: 'Sent of it',
};

export const readingScreen = {
  theTypesOfThis: 'The types of this string are not on this phone yet.',
  typeWhatTheMeter: 'type what the meter shows.',
  keptMap: (map: string) => `Kept: ${map}.`,
  itCouldNotBe: 'It could not be kept.',
  meterPlace: (place: string) => `meter, ${place}`,
  thePhotoCouldNot: 'The photo could not be kept.',
  whatDoesTheMeter: 'What does the meter say?',
  ofTheMeter: (capital: string, meter: string) => `${capital}; ${meter} of the meter`,
  change: 'Change',
  stage: 'Stage',
  otherStringsUsedRead: (map: string) => `Other strings used: ${map}, read under the same light.`,
  ofUnitsHadAnswered: (heard: number, units: number) =>
    `${heard} of ${units} units had answered the roll call when this phone last heard.`,
  saveTheCorrection: 'Save the correction',
  saveAndGoTo: (next: string) => `Save and go to ${next}`,
  saveAndGoToThe: 'Save and go to the list',
  photoPhotos: (photos: number) => `Photo (${photos})`,
  photo: 'Photo',
};

export const recordedReadings = {
  recordedStage: (stage: string) => `Recorded ${stage}`,
  waitingToBeSent: ', waiting to be sent',
  correct: 'Correct',
  correctKind: (kind: string) => `Correct ${kind}`,
};

export const shell = {
  readingWhatThisPhone: 'Reading what this phone keeps…',
  thisSiteIsNot: 'This site is not on this phone yet',
  nobodyIsSignedIn: 'Nobody is signed in on this phone',
  openItOnceWhile: 'Open it once while there is a network; from then on it opens without one.',
  withoutANetworkNobody:
    'Without a network nobody can sign in. What was recorded on this phone is kept until its person signs in again.',
  tryAgain: 'Try again',
  sitesOnThisPhone: 'Sites on this phone',
  noSiteIsKept: 'No site is kept on this phone',
  onThisPhone: (sites: number) => `${counted(sites, 'site')} on this phone`,
  openASitesPage:
    'Open a site’s page for the phone while there is a network: scan its code on the commissioning page.',
  theseOpenWithoutA: 'These open without a network.',
  signInWhileThere: 'Sign in while there is a network.',
  asOf: (strings: number, at: string) => `${counted(strings, 'string')}, as of ${at}`,
  toTheCommissioningPages: 'To the commissioning pages',
};

export const signOffSheet = {
  waits1OneRecord: (waits: number) =>
    `${waits === 1 ? 'One record' : `${waits} records`} of this string must reach the server first.`,
  signingNeedsANetwork: 'Signing needs a network. Everything else is kept until then.',
  theServerIsAsked: 'The server is asked for the checks as it has them.',
  signedOffTheInstall: (which: string) => `Signed off: the install checks of ${which}.`,
  itCouldNotBe: 'It could not be signed. Try again.',
  nothingBlocksTheSign: 'Nothing blocks the sign-off',
  whatBlocksTheSign: 'What blocks the sign-off',
  notRecordedYet: (listedSaid: string) => `Not recorded yet: ${listedSaid}.`,
  openCheck: (check: string) => `Open ${check.toLowerCase()}`,
  signedBy: (person: string, at: string, timeZone: string) =>
    `Signed by ${person}, ${fullTime(at, timeZone)}.`,
  somethingWasRecordedSince: ' Something was recorded since: sign again.',
  signOffTheChecks: (which: string, person: string) => `Sign off the checks of ${which} as ${person}`,
};

export const stringList = {
  thisSiteHasNo: 'This site has no strings yet',
  everyStringHasIts: 'Every string has its reading + to −',
  noStringHasA: 'No string has a reading + to − yet',
  ofNoReadingTo: (without: number, rows: number) =>
    `${countAtStart(without)} of ${counted(rows, 'string')} ${without === 1 ? 'has' : 'have'} no reading + to − yet`,
  openStringForIts: (site: string, place: string) =>
    `${site}, ${place}. Open a string for its readings and its install checks; both work without a network.`,
  findAString: 'Find a string',
  emptyTheFieldTo: 'Empty the field to see all.',
  noStringIsCalled: (q: string) => `No string is called like "${q}"`,
  ofReadingsOfChecks: (readings: number, checks: number, asked: number) =>
    `${readings} of 3 readings, ${checks} of ${asked} checks`,
  signedOff: ', signed off',
  failed1OneCheck: (failed: number) =>
    `${failed === 1 ? 'One check blocks' : `${failed} checks block`} the sign-off`,
  readings: 'Readings',
  readingsOf: (which: string) => `Readings of ${which}`,
  checks: 'Checks',
  checksOf: (which: string) => `Checks of ${which}`,
  whatYouRecordIs: 'What you record is kept on this phone until the server has it.',
  thisBrowserKeepsNothing: 'This browser keeps nothing: do not close this page while something waits.',
  theSitesCommissioningPage: 'The site’s commissioning page',
};

export const waitingScreen = {
  readingWhatThisPhone: 'Reading what this phone keeps…',
  nothingWaitsTheServer: 'Nothing waits: the server has everything',
  ofYourDecision: (decisions: number, mine: number) =>
    `${countAtStart(decisions)} of ${mine} ${decisions === 1 ? 'wants' : 'want'} your decision`,
  mine1OneRecord: (mine: number) =>
    `${mine === 1 ? 'One record waits' : `${countAtStart(mine)} records wait`} to be sent`,
  whatYouRecordNext: 'What you record next is kept here until it is sent.',
  theyAreKeptOn:
    'They are kept on this phone, in the order in which they were made, also when the page is closed.',
  thisBrowserKeepsNothing: 'This browser keeps nothing: do not close this page before they are sent.',
  allSent: 'All sent',
  recordedMadeAt: (madeAt: string) => `Recorded ${madeAt}`,
  atAnotherSite: ', at another site',
  triedTimes: (tries: number) => `, tried ${tries} times`,
  sending: 'sending',
  waiting: 'waiting',
  twoVersions: 'two versions',
  refused: 'refused',
};

export const checkDraft = {
  sayWhyItDoes: 'Say why it does not apply here; without a reason it stays open.',
  sayWhatIsWrong: 'Say what is wrong, for whoever puts it right.',
  atMost500Characters: 'At most 500 characters. Put the rest into the note.',
  atMost2000Characters: 'At most 2000 characters.',
  wakelineCheck: (person: string, which: string, check: string) =>
    `wakeline-check ${person} ${which} ${check}`,
};

export const captureRecords = {
  passed: 'passed',
  failed: 'failed',
  notApplicable: 'not applicable',
  whichPhotoOfSaid: (which: string, ofSaid: string) => `${which}, photo: ${ofSaid}`,
};

export const captureSave = {
  hasAtMostCan: (file: string, file2: string, most: string) =>
    `${file || 'A photo'} has ${file2}; at most ${most} can be kept. Take it at a lower resolution.`,
  heldNothingTakeThe: (empty: number) => `${counted(empty, 'file')} held nothing. Take the photo again.`,
};

export const captureWords = {
  countedUnitsUnit: (units: number) => counted(units, 'unit'),
  yourSessionHasEnded: (all: number) =>
    `Your session has ended. Sign in again${all > 0 ? ', then what waits is sent' : ''}; nothing is lost.`,
  anotherPersonIsSigned:
    'Another person is signed in on this phone by now. Load this page again to see theirs; yours is kept.',
  noNetworkSinceWhat: (unreachableSince: string) =>
    `No network since ${unreachableSince}. What you record is kept on this phone and sent when it returns.`,
  oneRecordWantsYour: 'One record wants your decision.',
  recordsWantYourDecision: (decisions: number) => `${decisions} records want your decision.`,
  asOf: (at: string) => `As of ${at}`,
  allWaiting: (all: number) => `${all} waiting`,
  waitingFromAnotherPerson: (ofOthers: number) =>
    `${ofOthers} waiting from another person: kept on this phone, sent when that person signs in here.`,
};
