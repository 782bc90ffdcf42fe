import { nameFieldTexts } from '../../words/domain-equipment-fields';

/**
 * What a catalogue entry is made of, field by field: forms, CSV and what is held against each other all read these
 * tables. An entry travels as a flat record by field key; connectors are named by their public identifier.
 */
export type EntryValue = string | number | null;
export type Entry = Readonly<Record<string, EntryValue>>;

/** What is said of a field. */
export interface FieldTexts {
  label: string;
  hint?: string;
  /** Fields of one group stand together under its title. */
  group: string;
  /** What an empty number means; without it the field must be filled. */
  emptyMeans?: string;
}

interface Common extends Omit<FieldTexts, 'emptyMeans'> {
  key: string;
  /** Of the table's row. */
  column: string;
  /** Of its column in a file, without the unit; see `heads.ts`. */
  head?: string;
}
export interface TextField extends Common {
  kind: 'text';
  longest: number;
  /** May be left empty. */
  optional?: boolean;
}
export interface NumberField extends Common {
  kind: 'number';
  /** As typed and shown. */
  unit: string;
  /** Limits as typed. */
  min: number;
  max: number;
  whole?: boolean;
  /** Kept value = typed value × scale (0.01 for per cent). */
  scale?: number;
  emptyMeans?: string;
}
export interface ChoiceField extends Common {
  kind: 'choice';
  options: readonly { value: string; label: string }[];
}
export interface ConnectorField extends Common {
  kind: 'connector';
}
export type Field = TextField | NumberField | ChoiceField | ConnectorField;

/** The name field that every family begins with. */
export const NAME_FIELD: TextField = {
  kind: 'text',
  key: 'name',
  column: 'name',
  ...nameFieldTexts,
  longest: 80,
};

/** A kept number as it is typed and shown: without the dust of binary fractions. */
export function asTyped(field: NumberField, kept: number): number {
  return Number((kept / (field.scale ?? 1)).toPrecision(7));
}

/** A typed number as it is kept. */
export function asKept(field: NumberField, typed: number): number {
  return Number((typed * (field.scale ?? 1)).toPrecision(9));
}

/** The header of a field's column in a CSV file: the same in every language, and its unit in brackets. */
export function headerOf(field: Field): string {
  const head = field.head ?? field.label;
  return field.kind === 'number' && field.unit ? `${head} (${field.unit})` : head;
}

/** The number under a key; an entry that has none there is a fault of the program. */
export function numberOf(entry: Entry, key: string): number {
  const value = entry[key];
  if (typeof value !== 'number') throw new RangeError(`${key} must be a number, but is ${String(value)}`);
  return value;
}

/** The text under a key. */
export function textOf(entry: Entry, key: string): string {
  const value = entry[key];
  if (typeof value !== 'string') throw new RangeError(`${key} must be text, but is ${String(value)}`);
  return value;
}

/** A number field in one line of a family's table. */
export const figure = (
  key: string,
  column: string,
  texts: FieldTexts,
  unit: string,
  min: number,
  max: number,
  more: Partial<NumberField> = {},
): NumberField => ({ kind: 'number', key, column, ...texts, unit, min, max, ...more });
