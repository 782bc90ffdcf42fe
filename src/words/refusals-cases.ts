export const acknowledgeRefusals = {
  noSuchSite: 'No such site. Check the link, or go back to the fleet.',
  endedMeanwhile: 'This has ended or changed meanwhile. Load the page again to see how it stands.',
};

export const annotationRefusals = {
  noSuchString: 'No such string at this site.',
  aboutWhatWas: 'A note is about what was. For what is to come, enter a planned work.',
  inTheFuture: 'This lies in the future. For what is to come, enter a planned work.',
  anotherSites: 'A note with this reference is another site’s.',
};

export const caseEvidenceWords = {
  voltsOf: (name: string) => `Volts of ${name}`,
  watts: (name: string) => `Watts of ${name}`,
};

export const caseWords = {
  reported: (line: string) => `Reported: ${line}`,
  /** How a case's title begins. */
  ofString: (string: string) => `String ${string}`,
  ofPosition: (string: string, position: number) => `String ${string}, position ${position}`,
  couldAlsoBe: (alternatives: string) => `\nIt could also be: ${alternatives}.`,
};

export const causeWords = {
  eachAlone: (strings: number, names: string) =>
    `Each stands alone in ${strings > 4 ? `${strings} strings` : names}: no part that they share explains them.`,
};

export const changeCaseRefusals = {
  lineChanged: (who: string, done: boolean) =>
    `${who || 'Somebody'} changed this line meanwhile: ${done ? 'it is done' : 'it is open'}. Look at it, then send yours again.`,
  changedMeanwhile: (who: string) =>
    `${who || 'Somebody'} changed this case meanwhile. Look at what changed, then send yours again or leave it.`,
  whatIsWrong: 'what is wrong',
  noDay: 'no day',
  assignedTo: 'assigned to',
  sayWhatWasDone: 'Say what was done or found, so that the next person need not ask.',
  openedAgain: (person: string) => `${person} opened it again.`,
  checklistLine: 'line of the checklist',
};

export const isolationRefusals = {
  notOfSite: (site: string) => `This string is not one of ${site}. Choose it from the list.`,
  chooseString: 'Choose a string of this site.',
  watchedAlready: (string: string, person: string, onSite: string) =>
    `${string} is being watched already: ${person} started it, with ${onSite} on site. One string at a time; watch that one, or have it stopped first.`,
  startedMeanwhile: 'Somebody started another watch at this moment. Reload the page.',
  notWatched: (site: string) => `No string of ${site} is being watched: it was stopped already.`,
};

export const jobRefusals = {
  doneMeanwhile: 'This job is done meanwhile: nothing is left to try.',
  running: 'This job runs already. Look again in a minute.',
};

export const membershipWords = {
  noneWorthJudging: 'It reported no current worth judging: the string or the inverter did not run.',
  tooFewReports: 'Too few reports with current.',
  tooAlike: 'Its string and others carry the same current, closer than its accuracy can part them.',
  tooFewWhileAllRan: 'Too few reports while every string ran.',
};

export const openCaseRefusals = {
  personNotYours:
    'This person is not among those who look after your sites. Reload the page and choose again.',
  stringNotHere: 'One of the strings is not at this site. Reload the page and choose again.',
  noPosition: (string: string, position: number) =>
    `${string} has no position ${position}. Choose one of its positions.`,
  roleOpensNone: (role: string) => `The role ${role} does not open cases. Ask a manager.`,
  identifierTaken: 'Another case has this identifier. Open the form again.',
  causeElsewhere: 'The cause is not of this site.',
  openAlready: (number: number, title: string) =>
    `Case ${number} is open for this cause: ${title}. Go on there.`,
};

export const plannedWorkRefusals = {
  takenBack: (reason: string) => `taken back: ${reason}`,
  endedEarly: (reason: string) => `ended early: ${reason}`,
  giveDateAndTime: 'Give a date and a time.',
  endAfterBeginning: 'The end must come after the beginning.',
  overAlready: 'This is over already. Planned works are entered before they end.',
  tooLong: (days: number) =>
    `Works last ${days} days at most: enter longer ones in parts, so that none is forgotten.`,
  stringGone: 'One of these strings is not at this site any more. Load the page again.',
};

export const rollCallFormWords = {
  whoStarts: 'A manager or a technician starts and stops a roll call.',
};

export const savedViewRefusals = {
  nameTaken: (name: string) => `A view of yours is called “${name}” already. Choose another name.`,
  nameTakenShort: 'A view of yours is called that already. Choose another name.',
  notYours: 'No such view of yours. Only who made a view can change it.',
};

export const testEvidenceWords = {
  onlyInstrument: 'Only the instrument shows what happens.',
  tellNothing:
    'The units here tell nothing themselves, according to the type entered. The page shows the inverter’s inputs, which capacitors hold up for a while.',
  someTellNothing: (strings: number) =>
    `Reports arrive. The units of ${strings} strings tell nothing themselves: for those only their inputs show something.`,
  reportsArrive: 'Reports of the strings arrive.',
  noLogger: (only: string) => `No logger reports these strings. ${only}`,
  loggersQuiet: (loggers: string, only: string) =>
    `Logger ${loggers} is not speaking: nothing can be watched until it is back. ${only}`,
  noneReportedYet: (only: string) =>
    `The logger is there, but no unit of these strings has reported yet. ${only}`,
  unitsSilent: (only: string) =>
    `The logger speaks, but the units are silent: dark, unheard or out of reach. ${only}`,
};

export const testPageWords = {
  stands: (day: string) => `Not tested again: the result of ${day} stands.`,
};

export const testReportThings = {
  test: 'shutdown test',
  signed: 'signed shutdown test',
};

export const testSignRefusals = {
  cameInMeanwhile: 'Something has come in since this page was shown. Look at it again, then sign.',
  sayWhoAndWhat: 'Say first who is there and what is tested.',
  acceptCaution: 'Read and accept the caution first.',
  noRound: 'No round has been watched to its end yet.',
  roundUnderWay: (round: number) => `Round ${round} is still under way: end it first.`,
  proveAgain: 'Prove the instrument on a known source again, and say whether it was right.',
};

export const testWriteRefusals = {
  /** `startedBy` null: not known. */
  underWay: (zone: string, startedBy: string | null) =>
    `A test of ${zone} is under way already${startedBy === null ? '' : `: ${startedBy} started it`}. Go on with that one, or end it with a reason first.`,
  test: 'shutdown test',
  signedStays: 'This test is signed and stays as it is. Start a new one that supersedes it.',
  ended: (person: string, reason: string) => `This test was ended by ${person}: ${reason}. Start a new one.`,
  entryAhead: (entry: number) =>
    `The time of entry ${entry} lies in the future: set the phone's clock, then try again.`,
  inTheFuture: 'lies in the future',
};

export const sitePageRefusals = {
  noSuchSite: 'No such site. Check the link, or go back to the fleet.',
};

export const startRollCallRefusals = {
  running: (site: string, person: string, onSite: string) =>
    `The roll call at ${site} is running already: ${person} started it, with ${onSite} on site. Watch that one, or have it stopped first.`,
  startedMeanwhile: (site: string) =>
    `The roll call at ${site} was started by somebody else at this moment. Reload the page.`,
};

export const stopRollCallRefusals = {
  stopped: (site: string) => `No roll call is running at ${site}: it was stopped already.`,
};
