import { counted } from '../drawings/numbers';

export const readingsBoard = {
  string: 'String',
  to: '+ to −',
  againstWhatIsExpected: 'Against what is expected',
  andToEarth: '+ and − to earth',
  whatItMeans: 'What it means',
  read: 'Read',
  commissioning: 'Commissioning',
  recordOnTheRoof: 'Record on the roof',
  theReadingsCouldNot: 'The readings could not be read again',
  stringsByStage: 'Strings by stage',
  whichReadings: 'Which readings',
  allHere: (here: number) => `All ${here}`,
  notAsExpected: (here: number) => `Not as expected ${here}`,
  notRead: (here: number) => `Not read ${here}`,
  readingsAsCsv: 'Readings as CSV',
  findAStringA: 'Find a string, a meaning or a person',
  stage: 'Stage',
  everyStage: 'every stage',
  meterReadingsByString: 'Meter readings by string and stage',
  noStringHasSlots: 'No string has slots yet',
  noReadingFitsWhat: 'No reading fits what you look for',
  showAll: 'Show all',
  theWashIsWhat:
    'The wash is what should be at that stage, two standard deviations to either side; dashes are other explanations. Expected values are according to the types entered.',
};

export const readingsWords = {
  asExpected: 'as expected',
  notAsExpected: 'not as expected',
  cantTell: 'can’t tell',
  provesNothing: 'proves nothing',
  notRead: 'not read',
  noStringHasSlots: 'No string has slots to read yet',
  noMeterReadingIs: 'No meter reading is recorded yet',
  allReadAsExpected: (here: number, stage: string) =>
    `All ${counted(here, 'string')} read as expected ${stage}`,
  ofAsExpected: (expected: number, here: number, stage: string) =>
    `${expected} of ${counted(here, 'string')} ${expected === 1 ? 'reads' : 'read'} as expected ${stage}`,
  andMore: (listedSaid: string, names: number) => `${listedSaid} and ${names - 3} more`,
  whatTheReadingMeans: (unclear: string) =>
    `${unclear}: what the reading means can’t be told; measure again beside a sibling in good light.`,
  notRead2: (unread: string, unread2: number) => `${unread} ${unread2 === 1 ? 'is' : 'are'} not read.`,
  aReadingAsExpected: 'A reading as expected is no proof that a conductor is dead.',
  doNotReadAs: (few: string) => `${few} do not read as they should.`,
};
