import Papa from 'papaparse';
import { decode } from '../../components/table-file/decode';
import type { TableFacts } from '../../components/table-file/FileSheet';
import { COLUMNS_MAX, separatorOf } from '../../components/table-file/parse';
import type { Separator } from '../../components/table-file/separators';
import {
  QUANTITIES,
  subjectWords,
  type KnownSubjects,
  type Layout,
  type Quantity,
} from '../../domain/history-import/layout';
import { guessLayout, looksLikeHeader } from '../../domain/history-import/match';
import { breaksInside, HistoryReader, type HistoryFault } from '../../domain/history-import/read';
import type { HistoryOrder } from '../../schemas/api/history-import';
import { historyImportDesk } from '../../words/history-import';

export interface HistoryFacts extends TableFacts {
  /** The first rows of values. */
  samples: string[][];
  layout: Layout;
}

/** Its layout is only read here. */
export type OrderToSend = Omit<HistoryOrder, 'layout'> & { layout: Layout };

/** What would come in of one string, unit, input or inverter. */
export interface SeriesSeen {
  words: string;
  readings: number;
  quantities: Quantity[];
  /** Epoch s. */
  from: number;
  to: number;
}

export interface CheckedHistory {
  rows: number;
  readings: number;
  leftOut: number;
  doubles: number;
  /** The first of them. */
  faults: HistoryFault[];
  series: SeriesSeen[];
  from: number | null;
  to: number | null;
}

const SAMPLES = 40;
const PROGRESS_EVERY = 2000;
/** A line that tells a spreadsheet its separator is no row. */
const SEPARATOR_HINT = /^sep=.\r?\n/i;

/** Holds a file while the person looks at it: in a worker, so that 200,000 rows never make the page wait. */
export class HistoryDesk {
  private text = '';
  private encoding: TableFacts['encoding'] = null;
  private separator: Separator = ',';
  private known: KnownSubjects = { strings: [], inverters: [] };
  private timeZone = 'UTC';

  /** Takes the bytes of a file, or what was pasted. @throws Error in words for what is no text */
  take(
    content: Uint8Array | string,
    known: KnownSubjects,
    timeZone: string,
    onProgress?: (share: number) => void,
  ): HistoryFacts {
    let text = content;
    this.encoding = null;
    if (typeof text !== 'string') {
      const decoded = decode(text);
      if ('fault' in decoded) throw new Error(decoded.fault);
      text = decoded.text;
      this.encoding = decoded.encoding;
    }
    this.text = text.replace(SEPARATOR_HINT, '');
    this.known = known;
    this.timeZone = timeZone;
    return this.split(separatorOf(this.text), undefined, onProgress);
  }

  /** The same file with another separator, or with its first row taken otherwise. */
  split(separator: Separator, header?: boolean, onProgress?: (share: number) => void): HistoryFacts {
    this.separator = separator;
    const first: string[][] = [];
    const faults: TableFacts['faults'] = [];
    let rows = 0;
    let emptyLines = 0;
    this.each((cells, line, error) => {
      if (error && faults.length < 20) faults.push({ line, message: error });
      if (cells === null) emptyLines++;
      else {
        rows++;
        if (first.length <= SAMPLES) first.push(cells.slice(0, COLUMNS_MAX));
      }
    }, onProgress);
    const top = first[0];
    if (!top) throw new Error('There is nothing in it but empty lines. Choose another file.');
    const hasHeader = header ?? looksLikeHeader(top);
    const width = Math.max(...first.map((r) => r.length));
    const named = Array.from({ length: width }, (_, i) => (hasHeader ? (top[i] ?? '').trim() : ''));
    const samples = hasHeader ? first.slice(1) : first.slice(0, SAMPLES);
    if (samples.length === 0)
      throw new Error('There is a header in it and no row below. Choose another file.');
    return {
      encoding: this.encoding,
      separator,
      rows: hasHeader ? rows - 1 : rows,
      emptyLines,
      headers: named.map((n, i) => n || historyImportDesk.columnI(i)),
      hasHeader,
      samples,
      faults,
      layout: guessLayout(named, samples, this.known, hasHeader, this.timeZone),
    };
  }

  /** Reads every row as the server will. `nowS`: epoch s. */
  check(layout: Layout, nowS: number, onProgress?: (share: number) => void): CheckedHistory {
    const reader = new HistoryReader(layout, this.known, nowS);
    const series = new Map<string, Omit<SeriesSeen, 'quantities'> & { has: boolean[] }>();
    let header = layout.hasHeader;
    this.each((cells, line) => {
      if (cells === null) return;
      if (header) {
        header = false;
        return;
      }
      reader.row(cells, line, (subject, key, at, values) => {
        let seen = series.get(key);
        if (!seen) {
          seen = {
            words: subjectWords(subject),
            readings: 0,
            from: at,
            to: at,
            has: QUANTITIES.map(() => false),
          };
          series.set(key, seen);
        }
        seen.readings++;
        if (at < seen.from) seen.from = at;
        if (at > seen.to) seen.to = at;
        for (let i = 0; i < values.length; i++) if (values[i] !== null) seen.has[i] = true;
      });
    }, onProgress);
    const list = [...series.values()].map(({ has, ...s }) => ({
      ...s,
      quantities: QUANTITIES.filter((_, i) => has[i]),
    }));
    const { rows, readings, leftOut, doubles, faults } = reader;
    return {
      rows,
      readings,
      leftOut,
      doubles,
      faults,
      series: list,
      from: list.length > 0 ? Math.min(...list.map((s) => s.from)) : null,
      to: list.length > 0 ? Math.max(...list.map((s) => s.to)) : null,
    };
  }

  /** What is sent: the order in the first line, the file's text below it. */
  body(order: OrderToSend): Blob {
    return new Blob([`${JSON.stringify({ ...order, separator: this.separator })}\n`, this.text]);
  }

  private each(
    onRow: (cells: string[] | null, line: number, error: string | null) => void,
    onProgress?: (share: number) => void,
  ): void {
    let line = 1;
    let count = 0;
    Papa.parse<string[]>(this.text, {
      delimiter: this.separator,
      step: ({ data, errors, meta }) => {
        const at = line;
        line += 1 + breaksInside(data);
        const broken = errors.length > 0 ? historyImportDesk.quotesAroundACell : null;
        const empty = data.every((cell) => cell.trim() === '');
        // what follows the last line break is no line
        if (!empty || meta.cursor < this.text.length) onRow(empty ? null : data, at, broken);
        if (onProgress && ++count % PROGRESS_EVERY === 0) onProgress(meta.cursor / this.text.length);
      },
    });
  }
}
