/** A whole import read against the names of a site. The browser does it while the person looks, the server anew. */
import { importSaid } from '../../../words/domain-import';
import { fitOf, type ImportColumn } from './columns';
import { Faults, readRows, type RawRow } from './read-rows';
import {
  byString,
  checkKnown,
  checkPositions,
  freeInputs,
  readNewString,
  type StringRows,
} from './read-strings';
import type { CellFault, ImportChoices, ImportTable, KnownNames, NewString, ReadRow } from './table';

export interface ReadImport {
  rows: ReadRow[];
  newStrings: NewString[];
  /** In the order of the file. */
  faults: CellFault[];
}

/** A column of which hardly a cell is what it should be is the wrong column: said once instead of a thousand times. */
function doubtfulColumns(table: ImportTable, faults: CellFault[]): CellFault[] {
  const doubtful = new Map<ImportColumn, CellFault>();
  table.columns.forEach((column, i) => {
    const values = table.rows.map((r) => r[i] ?? '');
    const fit = fitOf(column, values);
    if (fit === null || fit > 0.2 || table.rows.length < 5) return;
    const sample = values.find((v) => v.trim() !== '')?.trim() ?? '';
    doubtful.set(column, {
      row: table.lines[0] ?? 1,
      column,
      code: 'column_doubtful',
      message: importSaid.columnDoubtful(column, sample.slice(0, 40)),
      remedy: importSaid.columnDoubtfulRemedy,
      suggestion: null,
      weight: 'fault',
    });
  });
  if (doubtful.size === 0) return faults;
  return [...doubtful.values(), ...faults.filter((f) => !doubtful.has(f.column))];
}

function checkSerials(rows: readonly RawRow[], faults: Faults): void {
  const first = new Map<string, RawRow>();
  for (const row of rows) {
    if (!row.serial) continue;
    const before = first.get(row.serial);
    if (!before) {
      first.set(row.serial, row);
      continue;
    }
    faults.add(
      row.line,
      'serial',
      'serial_double',
      before.string === undefined
        ? importSaid.serialTwice(row.serial, before.line)
        : importSaid.serialTwiceAt(row.serial, before.line, before.string, before.position),
      importSaid.serialTwiceRemedy,
    );
  }
}

/** Fewer serials than this have no length that is theirs. */
const ALIKE_FROM = 20;
/** So many of them must agree before one that differs is worth a word (our own measure). */
const ALIKE_SHARE = 0.95;

/** A serial that is longer or shorter than nearly all others is often one that was cut off or read double. */
function noteUnlike(rows: readonly RawRow[], faults: Faults): void {
  const serials = rows.flatMap((r) => (r.serial ? [{ line: r.line, serial: r.serial }] : []));
  const lengths = new Map<number, number>();
  for (const { serial } of serials) lengths.set(serial.length, (lengths.get(serial.length) ?? 0) + 1);
  const [usual, count] = [...lengths].sort((a, b) => b[1] - a[1])[0] ?? [0, 0];
  if (serials.length < ALIKE_FROM || count < ALIKE_SHARE * serials.length) return;
  for (const { line, serial } of serials)
    if (serial.length !== usual)
      faults.add(
        line,
        'serial',
        'serial_unlike',
        importSaid.serialUnlike(serial, serial.length, usual),
        importSaid.serialUnlikeRemedy,
        { weight: 'note' },
      );
}

/** A string is entered with one type of unit. */
function checkTypes(group: StringRows, typeOf: string | undefined, faults: Faults): void {
  if (typeOf === undefined) return;
  const other = group.rows.find((r) => r.unitType && r.unitType !== typeOf);
  if (other?.unitType)
    faults.add(
      other.line,
      'unitType',
      'unit_types_mixed',
      importSaid.typesMixed(group.name, typeOf, other.unitType),
      group.known ? importSaid.typesMixedKnown : importSaid.typesMixedNew,
      { suggestion: typeOf },
    );
}

/**
 * Reads a table of strings, positions and serials. Rows and strings with a fault of weight `fault` are not to be
 * written: an import is all or nothing.
 * @param onRow told the number of rows done, now and then
 */
export function readImport(
  table: ImportTable,
  choices: ImportChoices,
  names: KnownNames,
  onRow?: (done: number) => void,
): ReadImport {
  const faults = new Faults();
  const raw = readRows(table, choices, names, faults, onRow);
  checkSerials(raw, faults);
  noteUnlike(raw, faults);
  const nextFree = freeInputs(names);
  const newStrings: NewString[] = [];
  for (const group of byString(raw, names)) {
    checkPositions(group, faults);
    checkKnown(group, faults);
    const made = group.known ? undefined : readNewString(group, choices, names, nextFree, faults);
    if (made) newStrings.push(made);
    checkTypes(group, group.known?.unitType ?? made?.unitType, faults);
  }
  const rows = raw.flatMap((r): ReadRow[] =>
    r.string === undefined || r.position === undefined || r.serial === undefined
      ? []
      : [
          {
            line: r.line,
            string: r.string,
            position: r.position,
            serial: r.serial,
            unitType: r.unitType ?? null,
            moduleType: r.moduleType ?? null,
            roofX: r.roofX ?? null,
            roofY: r.roofY ?? null,
            roofPlace: r.roofPlace ?? null,
          },
        ],
  );
  const list = doubtfulColumns(table, faults.list);
  return { rows, newStrings, faults: list.sort((a, b) => a.row - b.row) };
}

export const hasFaults = (faults: readonly CellFault[]): boolean => faults.some((f) => f.weight === 'fault');
