import { counted, number } from '../drawings/numbers';

export const badCellsSheet = {
  title: 'Cells that would be left out',
  firstOf: (faults: number, leftOut: number) => `the first ${number(faults)} of ${number(leftOut)}`,
  cellsLeftOut: (leftOut: number) => counted(leftOut, 'cell'),
  mendOrImportRest: 'Mend them in the file and choose it again, or import the rest without them.',
  row: 'Row',
  column: 'Column',
  columnWords: (column: number) => `column ${column + 1}`,
  cell: 'Cell',
  empty: 'empty',
  whyAndWhatWould: 'Why, and what would do',
  theRowIsLeft: 'The row is left out.',
  theCellAloneIs: 'The cell alone is left out.',
};

export const importHistory = {
  fleet: 'Fleet',
  earlierReadings: 'Earlier readings',
  stop: 'Stop: keep nothing of it',
  whereItShows: 'Strings show it in their history, marked as imported. It can be taken back below.',
  allKept: 'All of it is kept',
  lookAtTheSite: 'Look at the site',
  oneRowATime:
    'One row a time, with a column for each string; or one row a string and time. Voltage, current, power, energy or temperature of strings, single units, inputs or inverters, by the names of the as-built.',
};

export const importsSheet = {
  andMore: (ofSaid: string, n: number) => `${ofSaid} and ${n - 2} more`,
  importedFiles: 'Imported files',
  newestFirst: 'newest first',
  noFileHasBeen: 'No file has been imported at this site',
  file: 'File',
  what: 'What',
  readings: 'Readings',
  leftOut: (leftOut: number) => `${counted(leftOut, 'cell')} left out`,
  state: 'State',
  takenBack: 'taken back',
  takeBack: 'Take back',
  takeBackFile: (fileName: string) => `Take ${fileName} back`,
  notTakenBackTryAgain: 'It could not be taken back. Try again.',
  takingBackMeans: (readings: number) =>
    `Its ${counted(readings, 'reading')} go from every page and figure. What Wakeline measured stays, and so do other imports. The file can be imported again.`,
  why: 'Why',
  aFewWordsIf: 'A few words, if you like; they stay in the audit.',
  itWasNotTaken: 'It was not taken back',
  takingBack: 'Taking back …',
  takeItBack: 'Take it back',
  keepIt: 'Keep it',
};

export const layoutSheet = {
  columnsClockAndNumbers: 'Columns, clock and numbers',
  timesFollowTheClock: 'Times follow the clock of',
  theSite: (z: string) => `${z} (the site)`,
  timesWithZone: 'Times that name a zone themselves, such as 14:15+01:00, keep it.',
  in342026: 'In 3/4/2026',
  asTheDatesShow: 'as the dates show',
  theDayComesFirst: 'the day comes first',
  theMonthComesFirst: 'the month comes first',
  beforeDecimalsStands: 'Before decimals stands',
  whatTheNumbersShow: 'what the numbers show',
  decimalPoint: 'a point: 410.5',
  decimalComma: 'a comma: 410,5',
  emptyInTheFirst: 'empty in the first rows',
  of: 'of',
  ofWhat: (header: string) => `${header}: of what`,
};

export const previewSheet = {
  whatWouldComeIn: 'What would come in',
  rowsCount: (rows: number) => counted(rows, 'row'),
  readingsByStringUnit: 'Readings by string, unit, input and inverter',
  of: 'Of',
  what: 'What',
  readings: 'Readings',
  fromAndToAt: 'From and to, at the site',
  showAll: (series: number) => `Show all ${number(series)}`,
  doubles: (doubles: number) =>
    `${counted(doubles, 'reading')} of an instant that came before: the first one counts.`,
  whereTheyComeFrom: 'Where they come from',
  theLoggerBeforeOurs: 'the logger before ours, portal export, …',
  importReadings: (readings: number) => `Import ${counted(readings, 'reading')}`,
  leaveOut: (leftOut: number) => `, leave ${counted(leftOut, 'cell')} out`,
};

export const historyImportDesk = {
  columnI: (i: number) => `column ${i + 1}`,
  quotesAroundACell: 'quotes around a cell must be its first and last mark',
};

export const historyImportSend = {
  theConnectionBrokeBefore: 'The connection broke before the server had answered',
  nothingIsHalfDone:
    'Nothing is half done: either all of the file is kept or nothing of it. Load the page again to see which.',
};

export const historyImportUseHistoryImport = {
  pastedCells: 'pasted cells',
  checkingTheCells: 'Checking the cells',
  readingTheFile: 'Reading the file',
  fileTooLarge: (round: number, historyFileMaxBytes: number) =>
    `It has ${round} MB, and ${historyFileMaxBytes / 1024 / 1024} MB is the most. Import it in parts, such as a year at a time.`,
  sendingTheFile: 'Sending the file',
  stopped: 'Stopped',
  nothingOfTheFile: 'Nothing of the file is kept, unless the server had finished already.',
};

export const historyImportWords = {
  serverReads: 'The server reads and keeps the rows',
  addingUpDays: 'Adding up days',
  keepingAllOfIt: 'Keeping all of it',
  fromTo: (from: string, to: string) => `${from} to ${to}`,
  readingsImported: (readings: number) =>
    `${counted(readings, 'reading')} ${readings === 1 ? 'is' : 'are'} imported`,
  spanOf: (span: string, listedSaid: string, n: number) =>
    `${span}: ${listedSaid}${n > 5 ? ` and ${n - 5} more` : ''}. Pages show them where Wakeline measured nothing, and mark them.`,
  noneYet: 'Earlier readings are not imported yet',
  reduceFromInForce: (reduce: number, inForce: number) =>
    `${counted(reduce, 'earlier reading')} from ${counted(inForce, 'file')}`,
  chooseAcsvOf:
    'Choose a CSV of an earlier logger, or paste from a spreadsheet. Nothing is kept before you have seen what would come in, and each import can be taken back.',
  readTheirColumnsNeed: (rows: number) => `${counted(rows, 'row')} read; their columns need a word`,
  checkingRows: (rows: number) => `Checking ${counted(rows, 'row')}`,
  everyCellIsLooked: 'Every cell is looked at; nothing is kept.',
  noneReadable: 'No reading could be read from this file',
  lookAtTheColumns:
    'Look at the columns, the time zone and the names below: each row says what is wrong with it.',
  wouldComeIn: (readings: number) => `${counted(readings, 'reading')} would come in`,
  everyCellRead: (period: string) => `${period}. Every cell could be read.`,
  cellsUnreadable: (period: string, leftOut: number) =>
    `${period}. ${counted(leftOut, 'cell')} can't be read and would be left out: they are listed below.`,
  notUsed: 'not used',
  qInUnit: (q: string, unit: string) => `${q} in ${unit}`,
  whatTheRowNames: 'what the row names',
  chooseOfWhat: 'choose of what',
};
