import { countAtStart, counted } from '../drawings/numbers';

export const importPage = {
  importFromFile: (one: string) => `Import ${one}s from a file`,
  theFirstRowNames:
    'The first row names the columns. Every row is looked at before anything is written: all of it is imported, or nothing.',
  newChanged: (n: number, changed: number) => `${countAtStart(n)} new, ${changed} changed`,
  saidWhatTheCatalogue: (unchanged: number) =>
    `${counted(unchanged, 'row')} said what the catalogue says already. The same file once more would change nothing.`,
  theColumnsCantBe: 'The columns can’t be read as they are',
  correctTheFirstRow: 'Correct the first row, then look again. Nothing was written.',
  ofRowsCantBe: (faulty: number, rows: number) => `${countAtStart(faulty)} of ${rows} rows can’t be imported`,
  correctTheMarkedCells:
    'Correct the marked cells in the file or below, then look again. Nothing was written.',
  theCatalogueSaysAll: 'The catalogue says all of this already',
  readNothingToChange: (unchanged: number) =>
    `${countAtStart(unchanged)} ${unchanged === 1 ? 'row' : 'rows'} read, nothing to change.`,
  newToChange: (n: number, changed: number) => `${countAtStart(n)} new, ${changed} to change`,
  alreadyThereAndThe: (unchanged: number) =>
    `${counted(unchanged, 'row')} already there and the same. Look through what would change, then import.`,
  hasKbImportAt: (chosen: string, ceil: number, mostBytes: number) =>
    `${chosen} has ${ceil} kB. Import at most ${mostBytes / 1000} kB at once: a catalogue is a short list.`,
  isNoTextSave: (chosen: string) =>
    `${chosen} is no text. Save the spreadsheet as CSV, or copy its cells and paste them here.`,
  equipment: 'Equipment',
  notRead: 'Not read',
  imported: 'Imported',
  toTheList: 'To the list',
  importN: (n: number, changed: number) => `Import ${counted(n + changed, 'row')}`,
  rows: 'Rows',
  chooseAFile: 'Choose a file',
  downloadTheListAs: 'Download the list as a pattern',
  orPasteTheCells: 'Or paste the cells of a spreadsheet, with the row of column names',
  looking: 'Looking…',
  lookAgain: 'Look again',
  lookAtTheRows: 'Look at the rows',
  everyRowIsBeing: 'Every row is being read…',
  columnsThatAreUnderstood: 'Columns that are understood',
  decimalPointsOrCommas: (headerOf: string) =>
    `${headerOf}. Decimal points or commas; separated by comma, semicolon or tab. Columns that a type has already may be left out.`,
};

export const previewSheet = {
  new: 'New',
  changes: 'Changes',
  unchanged: 'Unchanged',
  faulty: 'Faulty',
  cellsToCorrect: 'Cells to correct',
  countedFaultsCell: (faults: number) => counted(faults, 'cell'),
  cellsThatCantBe: 'Cells that can’t be imported, with why and what to do',
  row: 'Row',
  column: 'Column',
  empty: 'empty',
  whyAndWhatTo: 'Why, and what to do',
  whatWasImported: 'What was imported',
  whatWouldHappen: 'What would happen',
  rowsOfTheFile: 'Rows of the file and what becomes of each',
  outcome: 'Outcome',
  type: 'Type',
  noName: 'no name',
  restOnIt: (strings: number) => `${counted(strings, 'string')} rest on it.`,
  unusualD: (d: string) => `Unusual: ${d}`,
  columnsThatAreNone: (ignoredColumns: string) =>
    `Columns that are none of ours were left aside: ${ignoredColumns}.`,
};
