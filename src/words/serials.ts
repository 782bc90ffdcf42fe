export const camera = {
  theCameraWasRefused:
    'The camera was refused. Allow it for this page in the browser’s settings, or type the serial.',
  noCameraWasFound: 'No camera was found. Type the serial.',
  anotherProgramHasThe: 'Another program has the camera. Close it, or type the serial.',
  theCameraCouldNot: (message: string) => `The camera could not be started (${message}). Type the serial.`,
  camera: 'Camera',
  gettingReady: 'Getting ready …',
  holdTheBarCode: 'Hold the bar code or matrix code of the label in the frame.',
  lightOn: (on: boolean) => `Light ${on ? 'off' : 'on'}`,
  closeTheCamera: 'Close the camera',
};

export const clashList = {
  place: (string: string | undefined, position: number) =>
    `${string ?? 'a string that is gone'}, position ${position}`,
  atWasNotKept: (serial: null | string, place: string) => `${serial ?? 'Empty'} at ${place} was not kept.`,
  whyYoursIsRight: 'Why yours is right',
  putThere: (serial: null | string) => `Put ${serial ?? 'it'} there`,
  sayWhyInA: 'Say why, in a few words: it stays in the history.',
  leaveItAsIt: 'Leave it as it is',
};

export const positionStrip = {
  positionsOf: (which: string) => `Positions of ${which}`,
  n1IsAtThe: '1 is at the negative end',
  positionSerial: (position: number, serial: null | string) =>
    `Position ${position}: ${serial ?? 'no serial yet'}`,
  noSerialYet: 'no serial yet',
};

export const serials = {
  unitReplaced: 'Unit replaced',
  misreadBefore: 'Misread before',
  wrongOnTheDrawing: 'Wrong on the drawing',
  thisSiteHasNo: 'This site has no strings yet',
  makeThemFirstThen: 'Make them first, then read the serials.',
  bringThemInFrom: 'Bring them in from a file',
  enterThemByHand: 'Enter them by hand',
  isAtPosition: (serial: string, which: string, position: number) =>
    `${serial} is at ${which}, position ${position}.`,
  isThereAlready: (now: null | string) => `${now ?? ''} is there already.`,
  takenBack: 'Taken back.',
  positionOf: (which: string, position: number, slots: number) =>
    `${which}, position ${position} of ${slots}`,
  onThisPhone: (waiting: number) =>
    `${waiting} ${waiting === 1 ? 'serial waits' : 'serials wait'} on this phone`,
  sendNow: 'Send now',
  onTheWayTo: 'On the way to the server.',
  serialAtPosition: (which: string, position: number) => `Serial at ${which}, position ${position}`,
  now: (now: string) => `now: ${now}`,
  empty: 'empty',
  serial: 'Serial',
  asOnTheLabel: 'as on the label',
  saveAndGoOn: 'Save and go on',
  skip: 'Skip',
  undo: 'Undo',
  readWithTheCamera: 'Read with the camera',
  string: 'String',
  nameFilterOfSlots: (name: string, filter: number, slots: number) => `${name}: ${filter} of ${slots}`,
  goTo: (follow: string) => `Go to ${follow}`,
  noOtherStringHas: 'No other string has a gap: look at the as-built',
  commissioning: 'Commissioning',
  serialsOnSite: 'Serials on site',
  writeSuggestion: (suggestion: string) => `Write ${suggestion}`,
  isEnteredAt: (serial: string, place: string) => `${serial} is entered at ${place}.`,
  isEnteredHere: (now: string) => `${now} is entered here.`,
  readTheLabelAgain: 'Read the label again. If it is here, say why, and it is taken from there.',
  ifIsRightSay: (serial: string) => `If ${serial} is right, say why: the history keeps both.`,
};

export const serialsSettings = {
  saveAtOnceWhat: 'Save at once what the camera reads',
  beepWhenASerial: 'Beep when a serial is kept',
  trembleWhenASerial: 'Tremble when a serial is kept',
  howThisPhoneBehaves: 'How this phone behaves',
};

export const serialsModel = {
  nothingIsTyped: 'Nothing is typed',
  typeTheSerialOr: 'Type the serial, or skip this position.',
  whichPosition: (which: string, position: number) => `${which}, position ${position}`,
  everySerialOf: (n: number, which: string) => `All ${n} serials of ${which} are read`,
  theOneSerialOf: (which: string) => `The one serial of ${which} is still to be read`,
  serialsStillOf: (n: number, which: string) => `${n} serials of ${which} are still to be read`,
  ofReadToGo: (n: number, left: number, left2: undefined | string) =>
    `${n - left} of ${n} read, ${left2 ?? left} to go`,
};

export const serialsUseSerials = {
  youAreSignedOut: 'You are signed out. Sign in again on this phone: what you read is kept and is sent then.',
  takenBackOnSite: 'Taken back on site',
};
