import type { ImportColumn } from '../domain/commissioning/import/columns';
import type { NameColumn } from '../domain/commissioning/import/table';

/** What our own columns are called in sentences; also accepted in files. Heads of files that we write stand beside the reader. */
export const COLUMN_LABELS: Record<ImportColumn, string> = {
  string: 'string',
  position: 'position',
  serial: 'serial',
  unitType: 'unit type',
  moduleType: 'module type',
  plane: 'plane',
  inverter: 'inverter',
  input: 'input',
  zone: 'zone',
  logger: 'logger',
  transmitters: 'transmitters',
  roofX: 'roof x (m)',
  roofY: 'roof y (m)',
  roofPlace: 'place on the roof',
};

/** One of what a column names. */
const ONE_OF: Record<NameColumn, string> = {
  unitType: 'unit type',
  moduleType: 'module type',
  plane: 'plane',
  inverter: 'inverter',
  zone: 'zone',
  logger: 'logger',
  transmitters: 'transmitter',
};

/** What is wrong with a number, before a remedy. */
export const numberSaid = {
  noNumber: (text: string) => `"${text}" is no number`,
  marks: (text: string) => `"${text}" has marks that don't fit one number`,
};

/** What is wrong with a serial, and what would do. */
export const serialSaid = {
  turnedNumber: (text: string) => `"${text}" is a serial that the spreadsheet has turned into a number`,
  turnedNumberRemedy:
    'Its digits are lost. Set the column to text in the spreadsheet, enter the serials again and export once more.',
  decimals: (text: string) => `"${text}" has decimals`,
  decimalsRemedy: 'Set the column to text in the spreadsheet.',
  address: 'it is a web address',
  addressRemedy: 'The code on the label carries an address; type the serial beside it.',
  long: (characters: number) => `it has ${characters} characters`,
  longRemedy: 'Serials have 4 to 32. Is this one serial, and the right column?',
  short: (text: string) => `"${text}" is too short`,
  shortRemedy: 'Serials have 4 to 32 letters, digits and dashes.',
  blanks: 'it has blanks in it',
  blanksRemedy: 'Type it without blanks, or check that it is one serial.',
  strange: (characters: string) => `it has ${characters} in it`,
  strangeRemedy: 'Serials are letters A to Z, digits and dashes. Compare with the label on the unit.',
  noSerial: (text: string) => `"${text}" is no serial`,
  noSerialRemedy: 'Serials are 4 to 32 letters, digits and dashes and begin with a letter or digit.',
};

/** What is wrong with a cell, and what would do. */
export const importCellSaid = {
  positionEmpty: 'the position is empty',
  positionRange: (most: number) => `Positions count from 1 at the negative end to ${most}.`,
  positionNotWhole: (text: string) => `"${text}" is no whole number`,
  positionImpossible: (position: number) => `position ${position} can't be`,
  positionImpossibleRemedy: (most: number) =>
    `Positions count from 1 at the negative end to ${most}. Is this the right column?`,
  metresRemedy: 'Write metres as a number, like 12.5.',
  ambiguous: (text: string, one: number, other: number) => `"${text}" could be ${one} or ${other}`,
  ambiguousRemedy: 'Say above which mark stands before the decimals in this file.',
  offRoof: (metres: number) => `${metres} m is no place on a roof`,
  offRoofRemedy: 'Metres from one corner of the roof are expected; is this the right column?',
  inputWhose: (text: string) => `input "${text}" names no inverter, and the site has several`,
  noInput: (inverter: string, text: string) => `${inverter} has no input "${text}"`,
  inputsHere: (inputs: readonly string[]) =>
    `Inputs here: ${inputs.join(', ')}. Add others on the as-built page.`,
  noInputsHere: 'Enter the inverter and its inputs on the as-built page first.',
  noSuch: (column: NameColumn, text: string) => `there is no ${ONE_OF[column]} "${text}"`,
  isMeant: (name: string) => `Is "${name}" meant?`,
  known: (names: readonly string[], more: number) =>
    `Known: ${names.join(', ')}${more > 0 ? ` and ${more} more` : ''}. Say above which one is meant.`,
  noneInCatalogue: 'None is entered yet. Enter it on the equipment page first.',
  noneOnSite: 'None is entered yet. Enter it on the as-built page first.',
  stringEmpty: 'the string is empty',
  stringEmptyRemedy: 'Enter its name.',
  stringEmptyBelow: 'Enter its name, or say above that blank cells mean the string above.',
  nameLong: (characters: number) => `the name has ${characters} characters`,
  nameLongRemedy: 'A string has a name of at most 40, like B3. Is this the right column?',
  placeLong: (characters: number) => `the place has ${characters} characters`,
  placeLongRemedy: (most: number) => `Say it in at most ${most}.`,
};

/** What is wrong with a whole file, or with a unit in it. */
export const importSaid = {
  columnDoubtful: (column: ImportColumn, sample: string) =>
    `hardly a cell of the column chosen as ${COLUMN_LABELS[column]} looks like one ("${sample}")`,
  columnDoubtfulRemedy: 'Choose another column for it above.',
  serialTwice: (serial: string, row: number) => `${serial} is in row ${row} already`,
  serialTwiceAt: (serial: string, row: number, string: string, position: number | undefined) =>
    `${serial} is in row ${row} already (${string}, position ${position ?? '?'})`,
  serialTwiceRemedy: 'A unit sits in one place. Read the label at one of the two, and correct it.',
  serialUnlike: (serial: string, characters: number, usual: number) =>
    `${serial} has ${characters} characters, nearly all others have ${usual}`,
  serialUnlikeRemedy: 'Compare with the label on the unit. If it is right, nothing needs to be done.',
  typesMixed: (string: string, type: string, other: string) =>
    `${string} is a string of ${type}, the file has ${other} in it`,
  typesMixedKnown: 'If the file is right, change the unit type of the string on the as-built page first.',
  typesMixedNew: 'A string has one unit type. Correct the type, or the name of the string.',
  elsewhereUnseen: (serial: string) => `${serial} sits on another site, which you don't see`,
  elsewhere: (serial: string, site: string, string: string, position: number) =>
    `${serial} sits on ${site}, ${string}, position ${position}`,
  elsewhereRemedy: 'Take it out of the as-built there first, or read the label again.',
  serialType: (serial: string, onRecord: string, string: string, type: string) =>
    `${serial} is on record as ${onRecord}, and ${string} is a string of ${type}`,
  serialTypeRemedy:
    'Read the label again. If the record is wrong, correct the unit type on the as-built page first.',
};

/** What is wrong with the rows of one string together. */
export const importStringSaid = {
  positionTwice: (position: number, string: string, row: number) =>
    `position ${position} of ${string} is in row ${row} already`,
  positionTwiceRemedy: 'One of the two is another position or another string.',
  positionsMissing: (string: string, positions: string) => `${string} has no position ${positions}`,
  positionsMissingKnown: (string: string, slots: number, positions: string, last: number) =>
    `${string} has ${slots} positions, and ${positions} would be missing before ${last}`,
  positionsMissingRemedy:
    'Add the missing rows (the serial may stay empty until the unit is there), or correct the position.',
  contradicts: (string: string, column: ImportColumn, before: string, now: string) =>
    `${string} is on ${COLUMN_LABELS[column]} "${before}" in a row above and on "${now}" here`,
  contradictsRemedy: (column: ImportColumn) =>
    `A string has one ${COLUMN_LABELS[column]}. Correct one of the two, or the name of the string.`,
  /** `is` null: none. */
  differs: (string: string, column: ImportColumn, is: string | null, said: string) =>
    `${string} is on ${COLUMN_LABELS[column]} "${is ?? 'none'}" in the as-built, the file says "${said}"`,
  differsRemedy:
    'If the file is right, change the string on the as-built page first; otherwise correct the file.',
  unknown: (string: string) => `there is no string "${string}" here yet`,
  unknownNear: (near: string) => `Is "${near}" meant? Or say above what new strings are made with.`,
  unknownRemedy: 'Say above what new strings are made with, or correct the name.',
  incomplete: (string: string, column: ImportColumn) =>
    `new string ${string} has no ${COLUMN_LABELS[column]}`,
  incompleteRemedy: 'Choose one for all new strings above, or give it in the file.',
  noInputLeft: (string: string) => `no input without a string is left for ${string}`,
  noInputLeftRemedy: 'Add inputs on the as-built page, or choose one input for all new strings.',
};
