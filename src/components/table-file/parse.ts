import Papa from 'papaparse';
import { SEPARATORS, type Separator } from './separators';
import { tableParse } from '../../words/table-file';
import { LOCALE } from '../../words/language';

/** Text with separators as rows of cells. */
export const ROWS_MAX = 20_000;
export const COLUMNS_MAX = 200;

export interface ParsedFile {
  separator: Separator;
  rows: string[][];
  /** The line in the file, from 1, at which each row begins: quoted cells may hold line breaks. */
  lines: number[];
  emptyLines: number;
  faults: { line: number; message: string }[];
}

/**
 * The separator: the one that the first row with anything in it has most of, outside quotes. A header has no decimals,
 * so that a comma in it separates.
 */
export function separatorOf(text: string): Separator {
  const counts = new Map<string, number>();
  let quoted = false;
  let any = false;
  for (const char of text) {
    if (char === '"') quoted = !quoted;
    else if (!quoted && (char === '\n' || char === '\r')) {
      if (any) break;
      counts.clear();
    } else if (!quoted && (SEPARATORS as readonly string[]).includes(char))
      counts.set(char, (counts.get(char) ?? 0) + 1);
    else if (char.trim() !== '') any = true;
  }
  return [...SEPARATORS].sort((a, b) => (counts.get(b) ?? 0) - (counts.get(a) ?? 0))[0] ?? ',';
}

/** Line breaks as a text editor counts them. */
function breaksIn(text: string): number {
  let count = 0;
  for (let i = 0; i < text.length; i++) {
    const char = text.charCodeAt(i);
    if (char === 10 || (char === 13 && text.charCodeAt(i + 1) !== 10)) count++;
  }
  return count;
}

/**
 * Rows and cells of a CSV or TSV text; empty lines are left out and counted. `onRow` is told how far it is, from 0 to 1.
 */
export function parseText(
  text: string,
  separator: Separator = separatorOf(text),
  onProgress?: (share: number) => void,
): ParsedFile {
  const parsed: ParsedFile = { separator, rows: [], lines: [], emptyLines: 0, faults: [] };
  // a line that tells a spreadsheet its separator is no row
  const hint = /^sep=.\r?\n/i.exec(text);
  const body = hint ? text.slice(hint[0].length) : text;
  let line = hint ? 2 : 1;
  let from = 0;
  Papa.parse<string[]>(body, {
    delimiter: separator,
    step: (result, parser) => {
      const cells = result.data;
      const to = result.meta.cursor;
      for (const error of result.errors)
        parsed.faults.push({
          line,
          message: error.code === 'MissingQuotes' ? tableParse.aQuoteIsOpened : tableParse.aQuoteStandsInside,
        });
      if (cells.every((c) => c.trim() === '')) {
        if (to <= body.length && from < body.length) parsed.emptyLines++;
      } else {
        parsed.rows.push(cells.slice(0, COLUMNS_MAX));
        parsed.lines.push(line);
      }
      line += breaksIn(body.slice(from, to));
      from = to;
      if (parsed.rows.length > ROWS_MAX + 1) {
        parsed.faults.push({
          line,
          message: tableParse.theFileHasMore(ROWS_MAX.toLocaleString(LOCALE)),
        });
        parser.abort();
      }
      if (onProgress && parsed.rows.length % 500 === 0) onProgress(to / body.length);
    },
  });
  return parsed;
}
