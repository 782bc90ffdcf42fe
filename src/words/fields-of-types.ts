export const typeEntry = {
  twoMeanings: (label: string, text: string, one: number, other: number) =>
    `${label}: "${text}" may be ${one} or ${other}. Type ${one}, or the decimals with one digit more or less.`,
  chooseOne: (label: string, options: string) => `${label}: choose one of ${options}.`,
  cannotBeEmpty: (label: string) => `${label}: type it; it can’t be empty.`,
  tooLong: (label: string, characters: number, most: number) =>
    `${label}: ${characters} characters are too many. Shorten it to ${most}.`,
};

export const typedNumbers = {
  span: (min: string, max: string, unit: string) => `from ${min} to ${max}${unit ? ` ${unit}` : ''}`,
  typeNumber: (name: string, span: string) => `${name}: type a number ${span}.`,
  twoMarks: (name: string, text: string) =>
    `${name}: "${text}" has two marks. Type it with one comma or point, before the decimals.`,
  noNumber: (name: string, text: string, span: string) =>
    `${name}: "${text}" is no number. Type a number ${span}.`,
  notWhole: (name: string, value: string, span: string) =>
    `${name}: ${value} is no whole number. Type one ${span}.`,
  outside: (name: string, value: string, span: string) =>
    `${name}: ${value} is outside what is possible. Type a number ${span}.`,
};

export const typeFile = {
  sameFieldTwice: 'Two columns are the same field.',
  deleteOne: 'Delete one.',
  columnUnit: (unit: string) => `The column is in ${unit || 'no unit'}.`,
  convertColumn: (unit: string, header: string) =>
    `This field takes ${unit}: convert the column, and call it "${header}".`,
  fieldHasNoUnit: (header: string) => `This field has no unit: call the column "${header}".`,
  noName: 'No column is called "Name".',
  nameColumns: 'Put the names of the columns into the first row; a download of the list shows them.',
  unreadable: 'It can’t be read as it is.',
  noSuchColumn: 'The file has no such column.',
  addColumn: (header: string) => `Add a column "${header}".`,
  noConnectorType: (typed: string) => `No connector type is called "${typed}".`,
  enterConnectorType: 'Enter the connector type first, or correct the name.',
  emptyCell: 'The cell is empty.',
  typeNumber: (min: number, max: number, unit: string) => `Type a number from ${min} to ${max}${unit}.`,
  fillIn: 'Fill it in: every type needs one.',
  noSuchWord: (typed: string) => `"${typed}" is none of the words of this column.`,
  writeOneOf: (words: string) => `Write one of: ${words}.`,
};
