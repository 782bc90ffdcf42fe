import type { EquipmentFamily } from '../domain/equipment/families';
import { headerOf, type Entry, type EntryValue, type Field } from '../domain/equipment/fields';
import { DEFAULTS, FIELDS } from '../domain/equipment/plausibility';
import type { ImportFault } from './api/equipment';
import { readValue, typedValue } from './equipment-entry';
import { typeFile } from '../words/fields-of-types';

/** A table of types as a file has it: which column is which field, and what each cell says. */

const plain = (text: string): string =>
  text
    .toLocaleLowerCase('en')
    .replace(/\(.*\)/g, '')
    .replace(/[^\p{L}\p{N}]+/gu, '');
const unitIn = (header: string): string | null => /\(([^)]*)\)\s*$/.exec(header)?.[1]?.trim() ?? null;
const sameUnit = (a: string, b: string): boolean =>
  a.replace(/\s|°/g, '').toLocaleLowerCase('en') === b.replace(/\s|°/g, '').toLocaleLowerCase('en');

/** Heads of columns that a download has and that no import needs; the same in every language, as those of fields are. */
const OURS_ALONE = new Set(['archived', 'strings', 'sites']);

export interface ReadHeader {
  /** Field of each column; null: none of ours. */
  fields: readonly (Field | null)[];
  faults: ImportFault[];
  ignored: string[];
}

/** Which column is which field, by its head in a download, its label or its short name. */
export function readHeader(family: EquipmentFamily, header: readonly string[]): ReadHeader {
  const fields: (Field | null)[] = [];
  const faults: ImportFault[] = [];
  const ignored: string[] = [];
  for (const title of header) {
    const name = plain(title);
    const field = FIELDS[family].find((f) =>
      [f.head ?? f.label, f.label, f.key, f.column].some((known) => name !== '' && plain(known) === name),
    );
    const unit = unitIn(title);
    if (field && fields.includes(field))
      faults.push({
        column: title,
        typed: title,
        why: typeFile.sameFieldTwice,
        remedy: typeFile.deleteOne,
      });
    else if (field?.kind === 'number' && unit !== null && !sameUnit(unit, field.unit))
      faults.push({
        column: title,
        typed: title,
        why: typeFile.columnUnit(unit),
        remedy: field.unit
          ? typeFile.convertColumn(field.unit, headerOf(field))
          : typeFile.fieldHasNoUnit(headerOf(field)),
      });
    if (!field && title.trim() !== '' && !OURS_ALONE.has(name)) ignored.push(title.trim());
    fields.push(field ?? null);
  }
  if (!fields.some((f) => f?.key === 'name'))
    faults.push({
      column: 'Name',
      typed: '',
      why: typeFile.noName,
      remedy: typeFile.nameColumns,
    });
  return { fields, faults, ignored };
}

/** A sentence of what is wrong as two: why, and what to do. */
function inTwo(label: string, fault: string): { why: string; remedy: string } {
  const bare = fault.startsWith(`${label}: `) ? fault.slice(label.length + 2) : fault;
  const cut = /^(.+?[.!?]) (?=[A-Z])/.exec(bare);
  const capital = (text: string) => text.charAt(0).toLocaleUpperCase('en') + text.slice(1);
  return cut?.[1]
    ? { why: capital(cut[1]), remedy: bare.slice(cut[0].length) }
    : { why: typeFile.unreadable, remedy: capital(bare) };
}

export interface ReadRow {
  entry: Record<string, EntryValue>;
  faults: ImportFault[];
}

/** A spreadsheet guards text that looks like a formula with an apostrophe: it is no part of the text. */
const unguarded = (cell: string): string => cell.replace(/^'(?=[=+\-@])/, '').trim();

/**
 * One row by its fields. What the file has no column for keeps what the entry of that name has, or what a new form
 * begins with.
 */
export function readRow(
  family: EquipmentFamily,
  header: ReadHeader,
  cells: readonly string[],
  around: { before: Entry | undefined; connectorByName: ReadonlyMap<string, string> },
): ReadRow {
  const entry: Record<string, EntryValue> = {};
  const faults: ImportFault[] = [];
  for (const field of FIELDS[family]) {
    const at = header.fields.indexOf(field);
    if (at < 0) {
      const kept = around.before ? around.before[field.key] : DEFAULTS[family][field.key];
      if (kept !== undefined) entry[field.key] = kept;
      else
        faults.push({
          column: field.label,
          typed: '',
          why: typeFile.noSuchColumn,
          remedy: typeFile.addColumn(headerOf(field)),
        });
      continue;
    }
    const typed = unguarded(cells[at] ?? '');
    const fault = (why: string, remedy: string) =>
      faults.push({ column: headerOf(field), typed, why, remedy });
    if (field.kind === 'connector' && typed !== '') {
      const ref = around.connectorByName.get(typed.toLocaleLowerCase('en'));
      if (ref) entry[field.key] = ref;
      else fault(typeFile.noConnectorType(typed), typeFile.enterConnectorType);
      continue;
    }
    if (typed === '' && field.kind === 'number' && !field.emptyMeans) {
      fault(
        typeFile.emptyCell,
        typeFile.typeNumber(field.min, field.max, field.unit ? ` ${field.unit}` : '').replaceAll('-', '−'),
      );
      continue;
    }
    if (typed === '' && field.kind === 'text' && !field.optional) {
      fault(typeFile.emptyCell, typeFile.fillIn);
      continue;
    }
    const choice =
      field.kind === 'choice'
        ? field.options.find((o) => [plain(o.value), plain(o.label)].includes(plain(typed)))?.value
        : undefined;
    if (field.kind === 'choice' && choice === undefined) {
      fault(
        typed === '' ? typeFile.emptyCell : typeFile.noSuchWord(typed),
        typeFile.writeOneOf(field.options.map((o) => o.label).join('; ')),
      );
      continue;
    }
    const read = readValue(field, choice ?? typed);
    if ('fault' in read) {
      const { why, remedy } = inTwo(field.label, read.fault);
      fault(why, remedy);
    } else entry[field.key] = read.value;
  }
  return { entry, faults };
}

/** A kept value as a file shows it: choices by their words, connectors by their names. */
export function writtenValue(
  field: Field,
  value: EntryValue | undefined,
  connectorNames: ReadonlyMap<string, string>,
): string {
  if (field.kind === 'choice') return field.options.find((o) => o.value === value)?.label ?? '';
  if (field.kind === 'connector') return typeof value === 'string' ? (connectorNames.get(value) ?? '') : '';
  return typedValue(field, value);
}
