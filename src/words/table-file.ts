import { number } from '../drawings/numbers';

export const fileSheet = {
  theFile: 'The file',
  aFile: 'A file: CSV or tab-separated',
  orPasteCellsFrom: 'Or paste cells from a spreadsheet',
  readWhatIsPasted: 'Read what is pasted',
  thisCantBeRead: "This can't be read",
  headersColumns: (headers: number) => `, ${headers} columns`,
  rows: (rows: number) => `${number(rows)} rows`,
  emptyLeftOut: (emptyLines: number) =>
    `${number(emptyLines)} empty ${emptyLines === 1 ? 'line' : 'lines'} left out`,
  cellsAreSeparatedBy: 'Cells are separated by',
  theFirstRowNames: 'The first row names the columns',
  partsOfTheFile: 'Parts of the file could not be split into cells',
  rowLineMessage: (line: number, message: string) => `Row ${number(line)}: ${message}.`,
};

export const tableDecode = {
  utf16BigEndian: 'UTF-16 (big-endian)',
  windows1252WesternEuropean: 'Windows-1252 (Western European)',
  aSpreadsheetFileSuch: 'a spreadsheet file (such as .xlsx or .ods)',
  aSpreadsheetFileOf: 'a spreadsheet file of an older kind (.xls)',
  aPdf: 'a PDF',
  aPhoto: 'a photo',
  aPicture: 'a picture',
  thisIsSaveThe: (what: string) =>
    `This is ${what}. Save the sheet as CSV (UTF-8), or copy its cells and paste them here.`,
  thisFileIsNo: 'This file is no text. Save the sheet as CSV (UTF-8), or copy its cells and paste them here.',
};

export const tableParse = {
  aQuoteIsOpened: 'a quote is opened and never closed: the rest of the file would be one cell',
  aQuoteStandsInside: 'a quote stands inside a cell: quotes around a cell must be its first and last mark',
  theFileHasMore: (toLocaleString: string) =>
    `the file has more than ${toLocaleString} rows: import it in parts`,
};

export const tableSeparators = {
  tab: 'tab',
  semicolon: 'semicolon ;',
  comma: 'comma ,',
  bar: 'bar |',
};

export const tableDesk = {
  notLoaded: 'The part of this page that reads files could not be loaded. Reload the page.',
  notRead: 'The file could not be read.',
};
