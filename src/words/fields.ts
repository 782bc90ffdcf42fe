export const accountFields = {
  giveEmail: 'Give your e-mail address',
  givePassword: 'Give your password',
};

export const annotationFields = {
  giveTime: 'Give a time as 2026-11-03T10:43Z',
  writeNote: 'Write what the note says.',
  noteTooLong: 'A note has up to 2,000 characters.',
  endBeforeBeginning: 'The end must lie after the beginning. Leave it empty for a note at one moment.',
};

export const asBuiltFields = {
  reasonTooLong: '500 characters at most',
  oneAtLeast: 'at least one',
  tooManyAtOnce: '50 at once at most',
  placeTooLong: '200 characters at most',
};

export const attachmentFields = {
  nameFile: 'Give the file a name',
  nameTooLong: 'At most 200 characters',
  noteTooLong: 'At most 2000 characters',
  giveTimeUtc: 'Give a time in UTC, as 2026-11-03T10:15:00Z',
};

export const caseFields = {
  giveDay: 'Give a day as 2026-11-03.',
  noControlCharacters: 'Leave control characters out.',
  giveTitle: 'Give a title.',
  titleTooLong: (most: number) => `Use at most ${most} characters.`,
  whatTooLong: (most: number) => `Use at most ${most} characters.`,
  chooseKind: 'Choose what is wrong.',
  tooManyUnits: 'At most 400 units.',
  tooManyStrings: 'At most 400 strings.',
  noteTooLong: 'Use at most 2000 characters.',
  sayWhatLooksWrong: 'Say in a few words what looks wrong.',
  writeSomething: 'Write something first.',
  commentTooLong: (most: number) => `Use at most ${most} characters.`,
  tooManyPeople: 'At most 40 people.',
  nameFile: 'Give the file a name',
  fileNameTooLong: 'At most 200 characters',
  fileNoteTooLong: 'At most 2000 characters',
};

export const checkFields = {
  giveTimeUtc: 'Give a time in UTC, as 2026-11-03T10:15:00Z',
  tooManyFigures: 'At most 20 figures',
  remarkTooLong: 'At most 500 characters',
  noteTooLong: 'At most 2000 characters',
  fingerprintLength: 'A fingerprint has 64 hexadecimal digits',
};

export const commissioningFields = {
  sayWhyOpen: 'Say why this may stand open; it goes into the pack.',
  reasonTooLong: 'Use at most 2,000 characters.',
};

export const equipmentFields = {
  nameFile: 'Give the file a name.',
  nameTooLong: 'At most 200 characters.',
  chooseFile: 'Choose a file or paste rows first.',
  fileTooLarge: 'Import at most 200 kB at once.',
  nameDocument: 'Name the document.',
  sayEdition: 'Say which edition or date.',
  sayPage: 'Say on which page or in which table.',
};

export const figureFields = {
  monthOrYear: 'A month like 2026-11, or a year like 2026.',
  month: 'A month like 2026-11.',
  day: 'A day like 2026-04-01.',
  price: 'Price a kWh',
};

export const handoverFields = {
  remarkTooLong: 'Use at most 2,000 characters.',
};

export const historyFields = {
  unknownUnit: 'is no unit that is known here',
  unknownZone: 'is no time zone that this server knows',
  noteTooLong: '500 characters at most',
};

export const importFields = {
  noRow: 'there is no row to import',
  oneLineARow: 'one line number a row',
  columnTwice: 'a column comes twice',
  columnsNeeded: (columns: string) => `the columns ${columns} are needed`,
  sayWhy: 'say why, in a few words: it stays in the history',
  checkFirst: 'check the file first, and look at what would change',
};

export const isolationFields = {
  chooseString: 'Choose the string that will be isolated.',
  nameIsolator: 'Enter the name of the person who isolates the string.',
  nameTooLong: 'Keep the name to 120 characters.',
  confirmDevice: 'Confirm that the string is isolated by a load-break device only.',
};

export const jobFields = {
  noSuchJob: 'No such job.',
};

export const loggerFields = {
  reasonTooLong: '500 characters at most',
  nameTooLong: '80 characters at most',
  giveHours: 'Give hours, as a number',
  wholeHours: 'whole hours',
  noHoursLess: 'at least 0 hours',
  hoursTooMany: (most: number) => `at most ${most} hours`,
};

export const myAccountFields = {
  enterPassword: 'Enter your password.',
  choosePassword: 'Choose a password.',
  passwordTooLong: 'Use at most 200 characters.',
  sixDigits: 'A code has six digits.',
};

export const noticeFields = {
  quietHoursEmpty: 'Quiet hours that end when they begin are none, or all day. Choose another hour, or none.',
  chooseSite: 'Choose at least one site, or every site.',
};

export const peopleFields = {
  giveEmail: 'Give an e-mail address.',
  emailTooLong: 'Use at most 254 characters.',
  noEmail: 'This is no e-mail address: name@place.example',
  giveName: 'Give the name.',
  nameTooLong: 'Use at most 120 characters.',
  noControlCharacters: 'Leave control characters out.',
  chooseRole: 'Choose a role.',
  tooManySites: 'At most 500 sites.',
};

export const placingFields = {
  textTooLong: (most: number) => `Keep it to ${most} characters.`,
  sayWhatYouRead: 'Say what you read or saw on the module: its label, its place.',
  confirmLabels: 'Confirm that the labels were read on the roof.',
  sayWhy: 'Say why this changes.',
};

export const plannedWorkFields = {
  giveDateAndTime: 'Give a date and a time, for instance 2026-12-03 08:00.',
  sayWhatIsDone: 'Say what is done, for instance "New home run of B3".',
  reasonTooLong: 'Keep it under 500 characters.',
  chooseString: 'Choose at least one string, or the whole site.',
};

export const readingFields = {
  giveTimeUtc: 'Give a time in UTC, as 2026-11-03T10:15:00Z',
  giveVoltage: 'Give the voltage as a number',
  voltageRange: 'Give a voltage from −2000 to 2000 V',
  noteTooLong: 'At most 2000 characters',
};

export const rollCallFields = {
  namePerson: 'Enter the name of the person who is on site.',
  nameTooLong: 'Use at most 120 characters.',
  confirmOnSite: 'Confirm that this person is on site now.',
};

export const roofFields = {
  nameTooLong: '200 characters at most',
  reasonTooLong: '500 characters at most',
};

export const savedViewFields = {
  nameView: 'Give the view a name.',
  nameTooLong: 'A name has up to 80 characters.',
  addressTooLong: 'The address is too long to keep.',
};

export const searchFields = {
  typeMore: 'Type two letters or more',
};

export const settingFields = {
  nameOrganisation: 'Give the organisation a name.',
  nameTooLong: 'At most 120 characters.',
  phoneTooLong: 'At most 40 characters.',
  phoneCharacters: 'Digits, blanks and + ( ) / . - only.',
  chooseZone: 'Choose a time zone of the list.',
  wholeDays: 'Whole days.',
  oneDay: 'One day at least.',
  daysTooMany: 'Raw readings are kept for 90 days.',
};

export const shareFields = {
  giveFrameOrigin: 'Give scheme and host as https://screens.example, without a path, or leave it empty.',
  originTooLong: 'At most 200 characters.',
  labelMissing: 'A label is missing.',
  labelTooLong: 'At most 80 characters.',
  giveDay: 'Give a day, or leave it empty.',
  onlyScreensFramed: 'Only a lobby screen may stand in a frame.',
};

export const shutdownTestFields = {
  nameTooLong: 'Use at most 120 characters.',
  textTooLong: (most: number) => `Use at most ${most} characters.`,
  enterDay: 'Enter the day as year-month-day.',
  voltageRange: 'Type a voltage from −2000 to 2000 V.',
  makeAndModel: 'make and model of the instrument',
  serialNumber: 'the serial number of the instrument',
  ratedRange: 'Type the rated voltage from 50 to 2000 V.',
  personOnSite: 'the name of the person who is on site',
  personOperating: 'the name of the person who operates the initiator',
  chooseString: 'Choose at least one string.',
  keepRound: 'Keep at least one round.',
  yourName: 'your name',
  secondsRange: 'Type the seconds from 0 to 7200.',
  whyStruck: 'why it is struck',
  typeSomething: 'Type something.',
  sayWhyEnded: 'Say why the test is ended without a signature.',
  reasonTooLong: 'Use at most 2000 characters.',
  enterPassword: 'Enter your password.',
  reload: 'Reload the page.',
};

export const siteFields = {
  fromThePageBefore: 'take it from the page before',
};

export const stringFields = {
  giveDay: 'Give a day as 2026-11-03',
  givePositions: 'Give positions with commas, as 5,9',
};

export const tokenFields = {
  giveName: 'Give it a name.',
  whatWillUseIt: 'Give it a name: what will use it?',
  nameTooLong: 'Use at most 80 characters.',
  noControlCharacters: 'Leave control characters out.',
  chooseScope: 'Choose at least one thing that it may do.',
  tooManySites: 'At most 500 sites.',
  chooseDays: 'Choose how long it holds.',
  enterPassword: 'Enter your password.',
};

export const webhookFields = {
  nameIt: 'Give it a name, so that others know what is called.',
  nameTooLong: 'At most 80 characters.',
  enterAddress: 'Enter the address that is called.',
  chooseKind: 'Choose at least one kind.',
  kindNotTold: 'One of these kinds is not told to other systems.',
};

export const workbenchFields = {
  giveDay: 'Give a day as 2026-11-03',
};
