import {
  IMPORT_COLUMNS,
  looksLikeHeader,
  matchColumns,
  REQUIRED_COLUMNS,
  type ColumnMatch,
  type ImportColumn,
} from '../../domain/commissioning/import/columns';
import { readImport } from '../../domain/commissioning/import/read-import';
import {
  bareName,
  NAME_COLUMNS,
  type CellFault,
  type ImportChoices,
  type ImportTable,
  type KnownNames,
  type NameColumn,
} from '../../domain/commissioning/import/table';
import { decode, type Encoding } from '../../components/table-file/decode';
import { parseText, ROWS_MAX, separatorOf, type ParsedFile } from '../../components/table-file/parse';
import type { Separator } from '../../components/table-file/separators';
import { importDesk } from '../../words/import';

/** What the desk says of a file before anything is checked. */
export interface FileFacts {
  encoding: Encoding | null;
  separator: Separator;
  /** Rows without the header. */
  rows: number;
  emptyLines: number;
  /** The first row, or names made up where the file has no header. */
  headers: string[];
  hasHeader: boolean;
  /** The first rows of values. */
  samples: string[][];
  match: ColumnMatch;
  faults: { line: number; message: string }[];
}

export interface CheckOrder {
  match: ColumnMatch;
  hasHeader: boolean;
  choices: ImportChoices;
  /** Cells that the person has written anew: `LINE:COLUMN`. */
  edits: Readonly<Record<string, string>>;
}

export interface CheckedFile {
  table: ImportTable;
  faults: CellFault[];
  /** Cells as they stand, for those that have a fault: `LINE:COLUMN`. */
  texts: Record<string, string>;
  newStrings: string[];
  /** Names in the file that mean nothing here, by column, and how often. */
  unknownNames: { column: NameColumn; text: string; rows: number; suggestion: string | null }[];
}

export const cellKey = (line: number, column: ImportColumn): string => `${line}:${column}`;
const SAMPLES = 40;

/** Holds a file while the person looks at it: in a worker, so that 10,000 rows never make the page wait. */
export class Desk {
  private text = '';
  private encoding: Encoding | null = null;
  private file: ParsedFile | null = null;

  /** Takes the bytes of a file, or what was pasted. @throws Error in words for what is no text */
  take(content: Uint8Array | string, onProgress?: (share: number) => void): FileFacts {
    this.file = null;
    if (typeof content === 'string') {
      this.text = content;
      this.encoding = null;
    } else {
      const decoded = decode(content);
      if ('fault' in decoded) throw new Error(decoded.fault);
      this.text = decoded.text;
      this.encoding = decoded.encoding;
    }
    return this.split(separatorOf(this.text), undefined, onProgress);
  }

  /** The same file with another separator, or with its first row taken otherwise. */
  split(separator: Separator, header?: boolean, onProgress?: (share: number) => void): FileFacts {
    if (this.file?.separator !== separator) this.file = parseText(this.text, separator, onProgress);
    const { rows, lines: _lines, ...rest } = this.file;
    const first = rows[0];
    if (!first) throw new Error('There is nothing in it but empty lines. Choose another file.');
    const hasHeader = header ?? looksLikeHeader(first);
    const width = Math.max(...rows.slice(0, 200).map((r) => r.length));
    const headers = Array.from({ length: width }, (_, i) =>
      hasHeader ? (first[i] ?? '').trim() || importDesk.columnI(i) : importDesk.columnI(i),
    );
    const data = hasHeader ? rows.slice(1) : rows;
    if (data.length === 0) throw new Error('There is a header in it and no row below. Choose another file.');
    return {
      encoding: this.encoding,
      separator: rest.separator,
      rows: Math.min(data.length, ROWS_MAX),
      emptyLines: rest.emptyLines,
      headers,
      hasHeader,
      samples: data.slice(0, SAMPLES),
      match: matchColumns(hasHeader ? headers : headers.map(() => ''), data.slice(0, 50)),
      faults: rest.faults,
    };
  }

  private tableOf({ match, hasHeader, edits }: CheckOrder): ImportTable {
    if (!this.file) throw new Error('Choose a file first.');
    const columns = IMPORT_COLUMNS.filter((c) => match[c] !== null);
    const skip = hasHeader ? 1 : 0;
    const lines = this.file.lines.slice(skip, skip + ROWS_MAX);
    const rows = this.file.rows
      .slice(skip, skip + ROWS_MAX)
      .map((cells, n) => columns.map((c) => edits[cellKey(lines[n] ?? 0, c)] ?? cells[match[c] ?? -1] ?? ''));
    return { columns, lines, rows };
  }

  /** Checks all that the browser knows about. @throws Error where a column that is needed is not chosen */
  check(order: CheckOrder, names: KnownNames, onProgress?: (share: number) => void): CheckedFile {
    const missing = REQUIRED_COLUMNS.filter((c) => order.match[c] === null);
    if (missing.length > 0) throw new Error(`Choose the column for ${missing.join(' and ')}.`);
    const table = this.tableOf(order);
    const read = readImport(table, order.choices, names, (done) => onProgress?.(done / table.rows.length));
    const at = new Map(table.columns.map((c, i) => [c, i]));
    const rowOf = new Map(table.lines.map((line, i) => [line, i]));
    const textAt = (line: number, column: ImportColumn): string =>
      table.rows[rowOf.get(line) ?? -1]?.[at.get(column) ?? -1] ?? '';
    const texts: Record<string, string> = {};
    const unknown = new Map<string, CheckedFile['unknownNames'][number]>();
    for (const fault of read.faults) {
      const text = textAt(fault.row, fault.column);
      texts[cellKey(fault.row, fault.column)] = text;
      const column = NAME_COLUMNS.find((c) => c === fault.column);
      if (fault.code !== 'name_unknown' || !column) continue;
      const key = `${column} ${bareName(text)}`;
      const before = unknown.get(key);
      if (before) before.rows++;
      else unknown.set(key, { column, text: text.trim(), rows: 1, suggestion: fault.suggestion });
    }
    const newNames = new Set(read.newStrings.map((s) => s.name));
    for (const f of read.faults)
      if (f.code === 'string_unknown' || f.code === 'string_incomplete')
        newNames.add(textAt(f.row, 'string').trim());
    newNames.delete('');
    return {
      table,
      faults: read.faults,
      texts,
      newStrings: [...newNames],
      unknownNames: [...unknown.values()],
    };
  }
}
