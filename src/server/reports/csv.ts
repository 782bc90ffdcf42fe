import { harmlessCell } from '../../schemas/csv-cell';
import { csvCells } from '../../words/csv-heads';

/**
 * The one CSV writer. RFC 4180: CRLF ends every record, a field with a quote, comma or line break is quoted
 * and its quotes doubled. UTF-8 with a byte-order mark, without which spreadsheets misread units and names.
 *
 * Text that a spreadsheet would take for a formula gets an apostrophe in front. Numbers are written as numbers.
 */
export type Cell = string | number | boolean | Date | null | undefined;

export interface Column<Row> {
  /** With the unit where there is one: "voltage (V)". */
  header: string;
  value: (row: Row) => Cell;
}

const NEEDS_QUOTES = /[",\r\n]|^\s|\s$/;

/** One cell. Times are ISO 8601 in UTC; null, undefined and what is not finite are empty. */
export function csvField(cell: Cell): string {
  if (cell === null || cell === undefined) return '';
  if (typeof cell === 'number') return Number.isFinite(cell) ? String(cell) : '';
  if (typeof cell === 'boolean') return cell ? 'yes' : 'no';
  if (cell instanceof Date) return Number.isNaN(cell.getTime()) ? '' : cell.toISOString();
  const harmless = harmlessCell(cell);
  return NEEDS_QUOTES.test(harmless) ? `"${harmless.replaceAll('"', '""')}"` : harmless;
}

/** The same for people: yes and no in their language. */
const readField = (cell: Cell): string =>
  csvField(typeof cell === 'boolean' ? (cell ? csvCells.yes : csvCells.no) : cell);

/** A cell of a time as answers write it; empty where there is none. */
export const timeCell = (at: string | null | undefined): Date | null => (at ? new Date(at) : null);

/** The records one by one, the header first, each with its CRLF. */
export function* csvRecords<Row>(columns: readonly Column<Row>[], rows: Iterable<Row>): Generator<string> {
  yield `${columns.map((c) => csvField(c.header)).join(',')}\r\n`;
  for (const row of rows) yield `${columns.map((c) => readField(c.value(row))).join(',')}\r\n`;
}

export const BYTE_ORDER_MARK = '\uFEFF';

export function csvText<Row>(columns: readonly Column<Row>[], rows: Iterable<Row>): string {
  let text = BYTE_ORDER_MARK;
  for (const record of csvRecords(columns, rows)) text += record;
  return text;
}

/** A name for a download: what a header or a file system would choke on becomes a dash. */
export const fileName = (name: string): string =>
  name
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replace(/[^A-Za-z0-9._-]+/g, '-')
    .replace(/^[-.]+|-+$/g, '') || 'wakeline';

/** A download. `name` without ending. */
export function csvResponse<Row>(
  name: string,
  columns: readonly Column<Row>[],
  rows: Iterable<Row>,
): Response {
  return new Response(csvText(columns, rows), {
    headers: {
      'content-type': 'text/csv; charset=utf-8; header=present',
      'content-disposition': `attachment; filename="${fileName(name)}.csv"`,
      'cache-control': 'no-store',
      'x-content-type-options': 'nosniff',
    },
  });
}
