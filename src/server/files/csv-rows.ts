import { createReadStream } from 'node:fs';
import { PassThrough } from 'node:stream';
import Papa from 'papaparse';
import { breaksInside } from '../../domain/history-import/read';

export interface CsvRow {
  cells: string[];
  /** Line in the file, from 1. */
  line: number;
}

/** Rows that are handed on at a time. */
const ROWS_AT_ONCE = 1000;

/**
 * The rows of a text with separators, some at a time, from byte `start` of the file on; empty lines are left out and
 * counted. `bytes`: how far it has been read. Flat memory: the file waits for whoever takes the rows.
 */
export async function* rowsOf(
  path: string,
  start: number,
  separator: string,
  hasHeader: boolean,
): AsyncGenerator<{ rows: CsvRow[]; bytes: number }> {
  const source = createReadStream(path, { start, encoding: 'utf8' });
  const parser = Papa.parse(Papa.NODE_STREAM_INPUT, { delimiter: separator });
  const cells = source.pipe(parser).pipe(new PassThrough({ objectMode: true, highWaterMark: ROWS_AT_ONCE }));
  source.on('error', (error) => cells.destroy(error));
  parser.on('error', (error: Error) => cells.destroy(error));
  let line = 1;
  let header = hasHeader;
  let rows: CsvRow[] = [];
  try {
    for await (const row of cells as AsyncIterable<string[]>) {
      const at = line;
      line += 1 + breaksInside(row);
      if (row.every((cell) => cell.trim() === '')) continue;
      if (header) {
        header = false;
        continue;
      }
      rows.push({ cells: row, line: at });
      if (rows.length < ROWS_AT_ONCE) continue;
      yield { rows, bytes: start + source.bytesRead };
      rows = [];
    }
    yield { rows, bytes: start + source.bytesRead };
  } finally {
    source.destroy();
    parser.destroy();
  }
}
