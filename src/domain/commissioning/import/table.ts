/** What an import works on: the rows of a file under our columns, the names that a site knows, and what is wrong. */
import type { UnitKind } from '../../equipment/unit-type';
import type { ImportColumn } from './columns';
import type { DecimalMark } from './number';

/** The matched part of a file. `lines[i]` is the line in the file, counted from 1, at which row i begins. */
export interface ImportTable {
  columns: readonly ImportColumn[];
  lines: readonly number[];
  /** Cells in the order of `columns`, as typed. */
  rows: readonly (readonly string[])[];
}

/** Columns whose cells name something that the site or the catalogue has. */
export const NAME_COLUMNS = [
  'unitType',
  'moduleType',
  'plane',
  'inverter',
  'zone',
  'logger',
  'transmitters',
] as const satisfies readonly ImportColumn[];
export type NameColumn = (typeof NAME_COLUMNS)[number];

/** What strings that are not there yet are made with, where the file does not say. */
export interface NewStringDefaults {
  plane: string | null;
  /** `Inverter 1/2`, or `each_next`: every new string on the next input without one. */
  input: string | null;
  zone: string | null;
  unitType: string | null;
  moduleType: string | null;
  logger: string | null;
  transmitters: readonly string[];
}

/** What the person has decided about the file. */
export interface ImportChoices {
  /** null: as the column says itself, and ambiguous ones are asked. */
  decimalMark: DecimalMark | null;
  /** Blank string cells mean the one above (merged cells of a spreadsheet). */
  fillDown: boolean;
  /** What a name in the file means here: `meanings.plane['sud'] = 'South roof'`; keys as `bareName` gives them. */
  meanings: Partial<Record<NameColumn, Record<string, string>>>;
  /** null: unknown strings are faults. */
  newStrings: NewStringDefaults | null;
}

export const NO_CHOICES: ImportChoices = {
  decimalMark: null,
  fillDown: false,
  meanings: {},
  newStrings: null,
};

export interface KnownString {
  name: string;
  slots: number;
  plane: string;
  inverter: string;
  input: number;
  zone: string;
  unitType: string;
  kind: UnitKind;
  logger: string | null;
  transmitters: readonly string[];
}

/** The names that a file may use at a site. */
export interface KnownNames {
  strings: readonly KnownString[];
  planes: readonly string[];
  inputs: readonly { inverter: string; number: number }[];
  zones: readonly string[];
  loggers: readonly string[];
  transmitters: readonly string[];
  unitTypes: readonly { name: string; kind: UnitKind }[];
  moduleTypes: readonly string[];
}

export const FAULT_CODES = [
  'string_empty',
  'string_unknown',
  'string_name',
  'string_incomplete',
  'string_contradicts',
  'string_differs',
  'position_empty',
  'position_number',
  'position_range',
  'position_double',
  'position_missing',
  'serial_format',
  'serial_double',
  'serial_elsewhere',
  'serial_type',
  'serial_unlike',
  'number_ambiguous',
  'number_fault',
  'name_unknown',
  'text_long',
  'column_doubtful',
  'unit_types_mixed',
] as const;
export type FaultCode = (typeof FAULT_CODES)[number];

/** What is wrong with one cell, and what would do. */
export interface CellFault {
  /** Line in the file, from 1. */
  row: number;
  column: ImportColumn;
  code: FaultCode;
  message: string;
  remedy: string;
  /** What was probably meant. */
  suggestion: string | null;
  /** note: worth knowing, and no bar to the import. */
  weight: 'fault' | 'note';
}

/** One row as understood; null: the file says nothing about it. */
export interface ReadRow {
  line: number;
  /** As the as-built writes it, where it is there already. */
  string: string;
  position: number;
  serial: string | null;
  unitType: string | null;
  moduleType: string | null;
  roofX: number | null;
  roofY: number | null;
  roofPlace: string | null;
}

export interface NewString {
  name: string;
  line: number;
  slots: number;
  plane: string;
  inverter: string;
  input: number;
  zone: string;
  unitType: string;
  kind: UnitKind;
  moduleType: string;
  logger: string | null;
  transmitters: readonly string[];
}

/** A name without case and double blanks: how names in a file are compared. */
export const bareName = (text: string): string => text.trim().replace(/\s+/g, ' ').toLowerCase();

/** As `inputName` writes an input everywhere in an import. */
export const inputName = (inverter: string, number: number): string => `${inverter}/${number}`;
