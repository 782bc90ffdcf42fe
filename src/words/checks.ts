import { countAtStart, counted, percent, volts } from '../drawings/numbers';

export const checksBoard = {
  all: 'All',
  notSigned: 'Not signed',
  blocked: 'Blocked',
  readyToSign: 'Ready to sign',
  signed: 'Signed',
  commissioning: 'Commissioning',
  recordOnTheRoof: 'Record on the roof',
  theChecksCouldNot: 'The checks could not be read again',
  strings: 'Strings',
  whichStrings: 'Which strings',
  checksAsCsv: 'Checks as CSV',
  findAStringA: 'Find a string, a note or a person',
  chooseAllThatAre: 'Choose all that are ready',
  signChosenStrings: 'Sign chosen strings',
  signWhich: (which: undefined | string) => `Sign ${which ?? ''}`,
  signStrings: (toSign: number) => `Sign ${toSign} strings`,
  noStringHasSlots: 'No string has slots yet',
  noStringFitsWhat: 'No string fits what you look for',
  enterTheAsBuilt: 'Enter the as-built',
  showAll: 'Show all',
  dcStringsStayDangerous:
    'DC strings stay dangerous in light. Isolate, lock out and prove dead with a rated meter before you touch anything; local code and the authority having jurisdiction come first; qualified people only.',
  aSignatureSaysWhat: 'A signature says what was checked, not that the string is dead.',
};

export const evidence = {
  recordTheDocumentThat: 'Record the document that allows this pair',
  document: 'Document',
  bothMakersMustStand: (pair: string) =>
    `${pair} Both makers must stand by it; that the halves click together proves nothing. It counts for every string of the organisation.`,
  editionOrDate: 'Edition or date',
  pageOrTable: 'Page or table',
  note: 'Note',
  theDocumentItselfAs: 'The document itself, as PDF or picture',
  thePairIsRecorded: 'The pair is recorded, its document is not',
  notRecorded: 'Not recorded',
  leaveTheDocumentOut: 'Leave the document out',
  recordTheEvidence: 'Record the evidence',
  cancel: 'Cancel',
};

export const figureFields = {
  notChosen: 'not chosen',
};

export const matrix = {
  installChecksByString: 'Install checks by string',
  chosenForSigning: 'Chosen for signing',
  string: 'String',
  checks: 'Checks',
  done: 'Done',
  stands: 'Stands',
  signWhich: (which: string) => `Sign ${which}`,
  ofChecksRecorded: (which: string, recorded: number, asked: number) =>
    `${which}: ${recorded} of ${asked} checks recorded`,
  signatureNoLongerHolds: 'signature no longer holds',
};

export const checksPhotos = {
  thePictureCarriesIts: ' The picture carries its place.',
  previousPhoto: 'Previous photo',
  nextPhoto: 'Next photo',
  itIsLargerThan: (limit: number) => `It is larger than ${limit} MB. Take it with a lower resolution.`,
  photo: 'Photo',
  fileSent: (file: string) => `${file} sent`,
  sendAgain: 'Send again',
  leaveItOut: 'Leave it out',
};

export const readingDetail = {
  openWhich: (which: string) => `Open ${which}`,
  close: 'Close',
  nothingWasReadHere: 'Nothing was read here',
  recordOnTheRoof: 'Record on the roof',
  readingsToEarthTogether: (earth: string) => `Readings to earth together: ${earth}`,
  charAtLightMeterModeCommanded: (charAt: string, light: string, meterMode: string, commanded: string) =>
    `${charAt.toUpperCase() + light} light${meterMode === 'low_impedance' ? ', low-impedance input' : ''}${commanded === 'unknown' ? '' : `, ${commanded}`}.`,
  expected: (expected: string) => `Expected: ${expected}. `,
  thatReadsTo: (expectedLowV: number, expectedHighV: number) =>
    `That reads ${volts(expectedLowV)} to ${volts(expectedHighV)}. `,
  comparedWith: (siblings: string) => `Compared with ${siblings}. `,
  under: `under ${percent(0.01)}`,
  addPhotos: 'Add photos',
  withMeasuredBesideIt: (siblings: string, outcome: string, now: string) =>
    `With ${siblings}, measured beside it: ${outcome}. ${now}.`,
  keepThisJudgement: 'Keep this judgement',
};

export const recordForm = {
  sayWhyNot: 'Say why the check does not apply here.',
  pass: 'Pass',
  fail: 'Fail',
  notApplicable: 'Not applicable',
  howItStands: (check: string) => `${check}: how it stands`,
  whyItDoesNot: 'Why it does not apply',
  whatIsWrong: 'What is wrong',
  note: 'Note',
  theseFiguresContradictA: 'These figures contradict a pass. ',
  whatYouTypedIs: (booleanSaid: string) => `${booleanSaid || 'No note'}. What you typed is still here.`,
  recordedThisMeanwhile: (person: string, replace: string) => `${person} recorded this meanwhile: ${replace}`,
  notSaved: 'Not saved',
  saveMineInPlace: 'Save mine in place of theirs',
  saveTheCheck: 'Save the check',
  keepTheirs: 'Keep theirs',
  cancel: 'Cancel',
};

export const stringChecks = {
  ofChecksRecorded: (which: string, recorded: number, asked: number) =>
    `${which}: ${recorded} of ${asked} checks recorded`,
  openWhich: (which: string) => `Open ${which}`,
  close: 'Close',
  signedBy: (person: string) => `Signed by ${person}, `,
  somethingWasRecordedSince: 'Something was recorded since: the signature no longer holds.',
  signOff: (which: string) => `Sign ${which} off`,
  stillToRecordBefore: (missing: number) =>
    `${missing} ${missing === 1 ? 'check' : 'checks'} still to record before it can be signed.`,
  worthKnowingBeforeSigning: (remarks: number) => `Worth knowing before signing (${remarks})`,
  photosKeepThePlace: 'Photos keep the place that the camera wrote',
  aManagerCanRecord: 'A manager can record the document that allows this pair, if there is one.',
  recordAgain: 'Record again',
  record: 'Record',
  addPhotos: 'Add photos',
};

export const checksRows = {
  aTypeThatIs: 'a type that is gone',
};

export const checksWords = {
  pass: 'pass',
  fail: 'fail',
  passAndItsFigures: 'pass, and its figures contradict it',
  passWithARemark: 'pass, with a remark',
  notApplicable: 'not applicable',
  notRecorded: 'not recorded',
  signedOff: 'signed off',
  readyToSign: 'ready to sign',
  blocked: 'blocked',
  underWay: 'under way',
  notBegun: 'not begun',
  andMore: (listedSaid: string, rows: number) => `${listedSaid} and ${rows - 3} more`,
  noStringHasSlots: 'No string has slots to check yet',
  noInstallCheckIs: 'No install check is recorded yet',
  theOnlyStringIs: 'The only string is signed off',
  allAreSignedOff: (rows: number) => `All ${counted(rows, 'string')} are signed off`,
  noneOfIsSigned: (rows: number) => `None of ${counted(rows, 'string')} is signed off`,
  ofSignedOff: (signed: number, rows: number) =>
    `${signed} of ${counted(rows, 'string')} ${signed === 1 ? 'is' : 'are'} signed off`,
  drawOrImportThe: 'Draw or import the strings and their slots first.',
  checkThatDidNot: (amiss: string, amiss2: number) =>
    `${amiss} ${amiss2 === 1 ? 'has' : 'have'} a check that did not pass.`,
  readyToSignWords: (ready: number, ready2: string, stale: number, stale2: string) =>
    `${countAtStart(ready)} ${ready === 1 ? 'is' : 'are'} ready to sign: ${ready2}${stale > 0 ? ` (${stale2} again: something was recorded since)` : ''}.`,
  nothingIsLeftTo: 'Nothing is left to check.',
  recordTheChecksOn:
    'Record the checks on the roof, string by string; the phone’s page works without a network.',
  connectorsThatNoDocument: (risk: string, risk2: number) =>
    `${risk} ${risk2 === 1 ? 'mates' : 'mate'} connectors that no document allows: a fire risk.`,
};
