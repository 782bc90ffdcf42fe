import { number } from '../drawings/numbers';

export const changesSheet = {
  whatWouldChange: 'What would change',
  rowsStayAsThey: (unchanged: number) => `${number(unchanged)} rows stay as they are`,
  kindOfChange: 'Kind of change',
  allTotal: (total: number) => `All ${number(total)}`,
  changes: 'Changes',
  changesGravestFirst: 'Changes, gravest first',
  where: 'Where',
  what: 'What',
  row: 'Row',
  noneOfThisKind: 'None of this kind is among the first listed.',
  theGravestOfAre: (changes: number, total: number) =>
    `The gravest ${number(changes)} of ${number(total)} are listed.`,
  compareWithTheRoof:
    'Compare with the roof before you go on: the as-built must say what is installed. The history keeps where each was.',
  leavingSlot: (leaving: number) =>
    `${number(leaving)} ${leaving === 1 ? 'unit leaves its' : 'units leave their'} slot`,
  why: 'Why',
  itStaysInThe: 'It stays in the history, with your name and the time.',
  asInstalledListOf: 'As installed, list of 30 November',
  importRows: (rows: number) => `Import ${number(rows)} ${rows === 1 ? 'row' : 'rows'}`,
};

export const columnsSheet = {
  columns: 'Columns',
  notUsed: (unused: string, unused2: number) => `Not used: ${unused}${unused2 > 6 ? ' …' : ''}`,
  columnNeeded: (column: string, needed: boolean) => `${column}${needed ? ' (needed)' : ''}`,
  chooseColumn: (column: string) => `Choose the column that holds the ${column}.`,
  chooseAColumn: 'choose a column',
  notInTheFile: 'not in the file',
  emptyInTheFirst: 'empty in the first rows',
};

export const decisionsSheet = {
  whatOnlyYouCan: 'What only you can say',
  beforeTheDecimalsStands: 'Before the decimals stands',
  choose1234Has: 'choose: 1,234 has two meanings',
  aComma1234: 'a comma: 1,234 is a little over one',
  aPoint1234: 'a point: 1,234 is over a thousand',
  blankStringCellsMean: 'Blank string cells mean the string above',
  namesInTheFile: 'Names in the file that mean nothing here yet',
  whichOneIsMeant: 'which one is meant?',
  nLikely: (n: string) => `${n} (likely)`,
  inRows: (rows: number) => `in ${number(rows)} ${rows === 1 ? 'row' : 'rows'}`,
  columnTextMeans: (column: string, text: string) => `${column} “${text}” means `,
  takeBack: 'take back',
  andMore: (newStrings: number) => ` and ${number(newStrings - 8)} more`,
  newStrings1OneString: (newStrings: number) =>
    `${newStrings === 1 ? 'One string is' : `${number(newStrings)} strings are`} not in the as-built yet`,
  ifTheNamesAre: (some: string, more: string) =>
    `${some}${more}. If the names are right, they can be made with this import.`,
  makeNewStrings: (newStrings: number) => `Make ${newStrings === 1 ? 'it' : 'them'}`,
  asTheFileSays: 'as the file says',
  noneIsEnteredYet: 'none is entered yet',
  newStringsAreMade: (newStrings: number) => `New strings (${number(newStrings)}) are made with`,
  whatTheFileSays: (some: string, more: string) =>
    `${some}${more}. What the file says goes first; this is for the rest. Planes, inputs and zones are entered on the `,
  asBuiltPage: 'as-built page',
  plane: 'Plane',
  input: 'Input',
  eachTheNextOne: 'each the next one without a string',
  zone: 'Zone',
  unitType: 'Unit type',
  moduleType: 'Module type',
  logger: 'Logger',
  transmitters: 'Transmitters',
  makeNoNewStrings: 'Make no new strings',
};

export const faultsSheet = {
  cellsThatClashWith: 'Cells that clash with the as-built',
  cellsThatNeedA: 'Cells that need a look',
  worthALookAnd: 'Worth a look, and no bar to the import',
  asCsv: 'As CSV',
  kind: 'Kind',
  allCount: (count: number) => `all (${number(count)})`,
  find: 'Find',
  rowStringSerial: 'row, string, serial',
  takeProposed1The: (proposed: number) =>
    `Take ${proposed === 1 ? 'the proposal' : `all ${number(proposed)} proposals`}`,
  noFaultOfThis: 'No fault of this kind, or none that has this in it.',
  showMoreOf: (list: number) => `Show more of ${number(list)}`,
  theFirstOfAre: (faults: number, count: number) =>
    `The first ${number(faults)} of ${number(count)} are listed.`,
  rowColumn: (row: number, column: string) => `row ${row}, ${column}`,
  row: (row: number) => `Row ${number(row)}`,
  cellIn: (where: string) => `Cell in ${where}`,
  asYouWroteIt: ' (as you wrote it)',
  writeSuggestion: (suggestion: string) => `Write ${suggestion}`,
  whatIsWrong: 'what is wrong',
  whatWouldDo: 'what would do',
};

export const importAsBuilt = {
  sayWhyInA: 'Say why, in a few words: it stays in the history.',
  commissioning: 'Commissioning',
  asBuilt: 'As-built',
  import: 'Import',
  stopKeepTheAs: 'Stop: keep the as-built as it is',
  checkTheFileAgain: 'Check the file again',
  theSameFileOnce: 'The same file once more would change nothing.',
  allOfItIs: 'All of it is kept',
  lookAtTheAs: 'Look at the as-built',
  layTheStringsOn: 'Lay the strings on the roof',
  history: 'History',
  theAsBuiltSays: 'The as-built says the same already',
  oneRowASlot:
    'One row a slot: string, position, serial, and what else you have. Comma, semicolon or tab; any common encoding. ',
  asAPatternIt: ' as a pattern: it comes back in unchanged.',
  takeTheAsBuilt: 'Take the as-built as it stands',
};

export const importDesk = {
  columnI: (i: number) => `column ${i + 1}`,
};

export const importSend = {
  theConnectionBrokeBefore: 'The connection broke before the server had answered',
  nothingIsHalfDone:
    'Nothing is half done: either all of the file is in the as-built or nothing of it. Check the file again to see which.',
};

export const importUseImport = {
  readingTheFile: 'Reading the file',
  itHasMBAnd: (round: number) =>
    `It has ${round} MB, and 20 MB is the most. 10,000 slots are about 1 MB: is this the right file?`,
  pastedCells: 'pasted cells',
  checkingTheCells: 'Checking the cells',
  sendingTheRows: 'Sending the rows',
  stopped: 'Stopped',
  theAsBuiltIs: 'The as-built is as it was, unless the server had finished already: check again to see.',
};
