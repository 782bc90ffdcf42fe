import { counted, percent } from '../drawings/numbers';

export const caseFile = {
  hasIt: (assignee: string) => `${assignee} has it`,
  nobodyHasItYet: 'Nobody has it yet',
  itWasClosedAnd: ' It was closed and did not hold: see the history.',
  wakelineLooksAgainOver:
    'Wakeline looks again over the following daylight and opens it again if it did not hold.',
  wakelineLookedAgain: (outcome: string) => `Wakeline looked again: ${outcome}.`,
  cases: 'Cases',
  caseN: (n: number) => `Case ${n}`,
  whatIsShownMay: 'What is shown may be old; what you typed is kept.',
  theCaseCouldNot: 'The case could not be read anew',
  forWhoeverIsCalled: 'For whoever is called next',
  whatIsWrongThe:
    'What is wrong, the as-built, readings, events, drawings, the checklist as done and photos.',
  evidenceAsPdf: 'Evidence as PDF',
  allAsZip: 'All as ZIP',
  sendMineOverIt: 'Send mine over it',
  leaveItAsIt: 'Leave it as it is now',
};

export const checklistSheet = {
  beforeCallingAnybody: 'Before calling anybody',
  ofLookedAt: (done: number, items: number) => `${done} of ${items} looked at`,
  stringsStayDangerousIn: 'Strings stay dangerous in light.',
  caution: (caution: string) => `Caution: ${caution}`,
  doneBy: (done: boolean, by: string) => `${done ? 'Looked at' : 'Taken back'} by ${by}, `,
  changeTheNote: 'Change the note',
  addANote: 'Add a note',
  toCheck: (check: string) => ` to: ${check}`,
  whatWasSeen: 'What was seen',
  keepTheNote: 'Keep the note',
  atSiteNameContact: (siteName: string, contact: string) => `At ${siteName}: ${contact}`,
};

export const commentBox = {
  comment: 'Comment',
  peopleToMention: 'People to mention',
  toChooseFrom: (offered: number, current: undefined | string) =>
    `${counted(offered, 'name')} to choose from: ${current ?? ''}`,
  andANameTells: '@ and a name tells somebody.',
  addTheComment: 'Add the comment',
};

export const factsSheet = {
  whereItStands: 'Where it stands',
  state: 'State',
  assignedTo: 'Assigned to',
  nobodyYet: 'Nobody yet',
  nameYou: (name: string) => `${name} (you)`,
  noLongerHere: (assignee: string) => `${assignee} (no longer here)`,
  kind: 'Kind',
  openedOriginOpenedBy: (origin: string, openedBy: string) => `Opened ${origin}, ${openedBy || 'Wakeline'}, `,
  cause: '. Cause: ',
  stillOpen: ', still open',
  over: ', over',
  due: 'Due',
};

export const figuresSheet = {
  beforeAndAfter: 'Before and after',
  figuresWhenItWas: 'Figures when it was opened',
  wakelineLooksAgainOver: 'Wakeline looks again over the following daylight',
  figuresBeforeAndAfter: 'Figures before and after',
  figure: 'Figure',
  stringVoltsAlongIts: (then: string, now: string) => `String ${then}: volts along its positions${now}`,
  beforeAndAfter2: ', before and after',
};

export const historySheet = {
  history: 'History',
  onlyAddedToNever: 'Only added to, never changed',
};

export const moveDialog = {
  closeCase: (move: number, to: string) => `Close case ${move}: ${to.toLowerCase()}`,
  whatWasDone: 'What was done',
  whatWasLookedAt: 'What was looked at',
  wakelineLooksAgainOver:
    'Wakeline looks again over the following daylight. Where the figures have not come right, it opens the case again.',
  closeTheCase: 'Close the case',
  leaveItOpen: 'Leave it open',
};

export const photosSheet = {
  itCouldNotBe: 'It could not be sent.',
  photos: 'Photos',
  countedPhotosPhoto: (photos: number) => counted(photos, 'photo'),
  fileShareSent: (file: string, share: number) => `${file}: ${percent(share)} sent`,
  sendAgain: 'Send again',
  leaveIt: 'Leave it',
  takeAPhoto: 'Take a photo',
  choosePhotos: 'Choose photos',
};

export const whatSheet = {
  whatIsWrong: 'What is wrong',
  change: 'Change',
  nothingIsWrittenDown: 'Nothing is written down yet.',
  title: 'Title',
  save: 'Save',
  leaveItAsIt: 'Leave it as it was',
  noStringIsNamed: 'No string is named: Wakeline can’t look again by itself.',
  stringName: (name: string) => `String ${name}`,
  theWholeString: 'the whole string',
  position: 'position ',
};

export const casesWords = {
  somebodyIsToAct: 'Somebody is to act',
  forAPartA: 'For a part, a visit, an answer',
  putRightWakelineLooks: 'Put right; Wakeline looks again',
  lookedAtNothingWrong: 'Looked at, nothing wrong',
  overdueSince: (day: string) => `overdue since ${day}`,
  dueDay: (day: string) => `due ${day}`,
  reportedThis: 'reported this',
  openedTheCase: 'opened the case',
  wrote: 'wrote',
  changedMap: (map: string) => `changed ${map}`,
  checked: 'checked',
  tookBack: 'took back',
  addedThePhoto: (which: string) => `added the photo ${which}`,
  movedItTo: (to: string) => `moved it to ${to.toLowerCase()}`,
  movedIt: 'moved it',
  lookedAgain: (outcome: string) => `looked again: ${outcome ?? ''}`,
  openedTheCaseAgain: 'opened the case again',
  openACase: 'Open a case',
  boardList: 'Board, list',
  mineNobodysOverdue: 'Mine, nobody’s, overdue',
  moveTheCardThat: 'Move the card that has the focus',
  fromColumnToColumn: 'From column to column on the board',
  writeAComment: 'Write a comment',
  changeWhatIsWrong: 'Change what is wrong',
  giveItToSomebody: 'Give it to somebody',
  whatIsWrong: 'what is wrong',
};
