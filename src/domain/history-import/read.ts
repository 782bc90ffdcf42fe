/**
 * Reads rows of a file of earlier readings, one after the other, so that a file of any length takes no more memory than
 * a short one. The browser reads it to show what would come in, the server reads it again to keep it.
 */
import { historyFaults as faults, historyRemedies as remedies } from '../../words/domain-history-import';
import { NameBook, nearestName } from '../commissioning/import/names';
import { readNumber, type DecimalMark, type ReadNumber } from '../commissioning/import/number';
import {
  isQuantity,
  QUANTITIES,
  RANGES,
  subjectKey,
  UNITS,
  type ColumnUse,
  type KnownSubjects,
  type Layout,
  type Quantity,
  type Subject,
} from './layout';
import { readTime } from './times';

export interface HistoryFault {
  /** Line in the file, from 1. */
  row: number;
  /** Index of the column. */
  column: number;
  cell: string;
  message: string;
  remedy: string;
  /** What is left out with it. */
  leaves: 'cell' | 'row';
}

/** SI units in the order of QUANTITIES; null: the file says nothing of it. */
export type Values = (number | null)[];
export type OnReading = (subject: Subject, key: string, at: number, values: Values) => void;

/** So many faults are listed; all are counted. */
export const FAULTS_LISTED = 300;
/** Earlier than this no logger of a plant reported (common practice). Epoch s of 2000-01-01. */
const OLDEST_S = 946_684_800;

const NOTHING = new Set(['', '-', '--', '–', '—', 'n/a', 'na', 'nan', 'null', 'none', 'nil', '#n/a', 'k.a.']);
export const isNothing = (text: string): boolean => NOTHING.has(text.trim().toLowerCase());

interface ValueColumn {
  index: number;
  slot: number;
  quantity: Quantity;
  factor: number;
  offset: number;
  unit: string;
}
/** Columns of one subject that the columns themselves name; `subject` null: the row names it. */
interface Group {
  subject: Subject | null;
  key: string;
  columns: ValueColumn[];
}

function groupsOf(columns: readonly ColumnUse[]): Group[] {
  const groups = new Map<string, Group>();
  columns.forEach((use, index) => {
    if (!isQuantity(use)) return;
    const key = use.of ? subjectKey(use.of) : '';
    const group = groups.get(key) ?? { subject: use.of, key, columns: [] };
    const unit = UNITS[use.as].find((u) => u.unit === use.unit) ?? UNITS[use.as][0];
    group.columns.push({
      index,
      slot: QUANTITIES.indexOf(use.as),
      quantity: use.as,
      factor: unit.factor,
      offset: unit.offset ?? 0,
      unit: unit.unit,
    });
    groups.set(key, group);
  });
  return [...groups.values()];
}

interface Named {
  subject: Subject;
  key: string;
}

const WITH_POINT = /^-?\d+(?:\.\d+)?$/;
const WITH_COMMA = /^-?\d+(?:,\d+)?$/;

/** What nearly every cell is, without the care that the others take; null: it is one of the others. */
function plainNumber(text: string, mark: DecimalMark | null): number | null {
  if (mark === 'comma') return WITH_COMMA.test(text) ? Number(text.replace(',', '.')) : null;
  return WITH_POINT.test(text) ? Number(text) : null;
}

export class HistoryReader {
  readonly faults: HistoryFault[] = [];
  rows = 0;
  readings = 0;
  /** Cells and rows that could not be read. */
  leftOut = 0;
  /** Readings of an instant that the subject has already, as far as neighbouring rows show it. */
  doubles = 0;
  private readonly groups: Group[];
  private readonly strings: NameBook;
  private readonly inverters: NameBook;
  private readonly slots: ReadonlyMap<string, number>;
  private readonly inputs: ReadonlyMap<string, readonly number[]>;
  private readonly place: Partial<Record<string, number>> = {};
  private readonly lastAt = new Map<string, number>();
  private readonly rowSubjects = new Map<string, Named>();
  private readonly byRow: boolean;

  /** `nowS`: readings later than this have not happened yet. */
  constructor(
    private readonly layout: Layout,
    known: KnownSubjects,
    private readonly nowS: number,
  ) {
    this.groups = groupsOf(layout.columns);
    this.byRow = this.groups.some((g) => g.subject === null);
    this.strings = new NameBook(known.strings.map((s) => s.name));
    this.inverters = new NameBook(known.inverters.map((v) => v.name));
    this.slots = new Map(known.strings.map((s) => [s.name, s.slots]));
    this.inputs = new Map(known.inverters.map((v) => [v.name, v.inputs]));
    layout.columns.forEach((use, i) => {
      if (use.as !== 'nothing' && !isQuantity(use)) this.place[use.as] ??= i;
    });
  }

  /** One row of cells; hands on what it reads in it. */
  row(cells: readonly string[], line: number, onReading: OnReading): void {
    this.rows++;
    const named = this.byRow ? this.subjectOf(cells, line) : null;
    if (this.byRow && named === null) return;
    const at = this.timeOf(cells, line, named?.key ?? '');
    if (at === null) return;
    for (const group of this.groups) {
      const subject = group.subject ?? named?.subject;
      if (!subject) continue;
      const values = this.valuesOf(group, cells, line);
      if (values === null) continue;
      const key = group.subject ? group.key : (named?.key ?? '');
      if (this.lastAt.get(key) === at) {
        this.doubles++;
        continue;
      }
      this.lastAt.set(key, at);
      this.readings++;
      onReading(subject, key, at, values);
    }
  }

  private fault(fault: Omit<HistoryFault, 'cell'>, cell: string): null {
    this.leftOut++;
    if (this.faults.length < FAULTS_LISTED)
      this.faults.push({ ...fault, cell: cell.length > 60 ? `${cell.slice(0, 59)}…` : cell });
    return null;
  }

  private timeOf(cells: readonly string[], line: number, key: string): number | null {
    const { at: atColumn, date, clock } = this.place;
    const column = atColumn ?? date ?? 0;
    const text = cells[column] ?? '';
    const time = atColumn === undefined && clock !== undefined ? (cells[clock] ?? '') : null;
    const read = readTime(text, time, this.layout.timeZone, this.layout.dayFirst);
    const wrong = (message: string, remedy: string) =>
      this.fault({ row: line, column, message, remedy, leaves: 'row' }, text);
    if (read.kind === 'empty') return wrong(faults.timeMissing, remedies.fillIn);
    if (read.kind === 'fault') return wrong(read.message, read.remedy);
    // an hour that the clock repeats: rows run on in time, so the second time it is the later one
    const last = this.lastAt.get(key) ?? this.lastAt.get(this.groups[0]?.key ?? '');
    const at =
      read.kind === 'instant' ? read.at : last !== undefined && last >= read.at[0] ? read.at[1] : read.at[0];
    if (at > this.nowS) return wrong(faults.inTheFuture, remedies.lookAtYearAndOrder);
    if (at < OLDEST_S) return wrong(faults.beforeTheYear2000, remedies.lookAtYear);
    return at;
  }

  private subjectOf(cells: readonly string[], line: number): Named | null {
    const { string, inverter, input, position } = this.place;
    const column = string ?? inverter ?? 0;
    const name = (cells[column] ?? '').trim();
    const cell = (i: number | undefined): string => (i === undefined ? '' : (cells[i] ?? '').trim());
    const cacheKey = `${name}\u0000${cell(position)}\u0000${cell(input)}`;
    const known = this.rowSubjects.get(cacheKey);
    if (known) return known;
    const wrong = (at: number, message: string, remedy: string) =>
      this.fault({ row: line, column: at, message, remedy, leaves: 'row' }, cells[at] ?? '');
    const what = string === undefined ? 'inverter' : 'string';
    if (name === '') return wrong(column, faults.nameMissing(what), remedies.fillIn);
    const book = string === undefined ? this.inverters : this.strings;
    const found = book.find(name);
    if (found === undefined) {
      const near = nearestName(name, book.names);
      return wrong(
        column,
        faults.nobodyIsCalled(what, name.slice(0, 40)),
        near ? remedies.isMeant(near) : remedies.asBuiltHas(book.names),
      );
    }
    let subject: Subject;
    if (string === undefined) {
      const number = readNumber(cell(input));
      const inputs = this.inputs.get(found) ?? [];
      if (input === undefined || number.kind === 'empty') subject = { kind: 'inverter', inverter: found };
      else if (number.kind !== 'number' || !inputs.includes(number.value))
        return wrong(input, faults.noSuchInput(found), remedies.inputs(inputs));
      else subject = { kind: 'input', inverter: found, input: number.value };
    } else {
      const number = readNumber(cell(position));
      const slots = this.slots.get(found) ?? 0;
      if (position === undefined || number.kind === 'empty') subject = { kind: 'string', string: found };
      else if (
        number.kind !== 'number' ||
        !Number.isInteger(number.value) ||
        number.value < 1 ||
        number.value > slots
      )
        return wrong(position, faults.noSuchPosition(found), remedies.positions(slots));
      else subject = { kind: 'unit', string: found, position: number.value };
    }
    const made = { subject, key: subjectKey(subject) };
    if (this.rowSubjects.size < 20_000) this.rowSubjects.set(cacheKey, made);
    return made;
  }

  /** null: nothing in the row is known of this subject. */
  private valuesOf(group: Group, cells: readonly string[], line: number): Values | null {
    const values: Values = [null, null, null, null, null];
    let any = false;
    for (const column of group.columns) {
      const value = this.valueOf(column, cells[column.index] ?? '', line);
      if (value === null) continue;
      values[column.slot] = value;
      any = true;
    }
    return any ? values : null;
  }

  private valueOf(column: ValueColumn, text: string, line: number): number | null {
    const plain = plainNumber(text, this.layout.decimalMark);
    if (plain === null && isNothing(text)) return null;
    const read: ReadNumber =
      plain === null ? readNumber(text, this.layout.decimalMark) : { kind: 'number', value: plain };
    const wrong = (message: string, remedy: string) =>
      this.fault({ row: line, column: column.index, message, remedy, leaves: 'cell' }, text);
    if (read.kind === 'empty') return null;
    if (read.kind === 'fault') return wrong(read.message, remedies.writeANumber);
    if (read.kind === 'ambiguous')
      return wrong(faults.twoNumbers(text.trim(), read.asDecimal, read.asThousands), remedies.sayTheMark);
    const value = read.value * column.factor + column.offset;
    const [low, high] = RANGES[column.quantity];
    if (value < low || value > high)
      return wrong(faults.beyond(text.trim(), column.unit, column.quantity), remedies.otherUnit);
    return value;
  }
}

/** Line breaks inside quoted cells: the next row begins so many lines further down. */
export function breaksInside(cells: readonly string[]): number {
  let count = 0;
  for (const cell of cells) if (cell.includes('\n')) for (const char of cell) if (char === '\n') count++;
  return count;
}
