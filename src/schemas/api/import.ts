import { z } from 'zod';
import { IMPORT_COLUMNS, REQUIRED_COLUMNS } from '../../domain/commissioning/import/columns';
import type { Change } from '../../domain/commissioning/import/plan';
import { NAME_COLUMNS, type CellFault, type KnownNames } from '../../domain/commissioning/import/table';
import { type ImportStep } from '../lists-and-limits';
import { importFields } from '../../words/fields';

/** Rows and cells of one import. */
export const IMPORT_ROWS_MAX = 20_000;
/** 20,000 rows of fourteen columns with names in all of them. */
export const IMPORT_BODY_MAX_BYTES = 12 * 1024 * 1024;
/** So many faults and changes are listed; their number is told whole. */
export const IMPORT_LISTED_MAX = 500;

const name = z.string().max(200);
const cells = z.array(z.string().max(4000)).max(IMPORT_COLUMNS.length);

export const importTable = z
  .object({
    columns: z.array(z.enum(IMPORT_COLUMNS)).max(IMPORT_COLUMNS.length),
    lines: z.array(z.int().min(1)).max(IMPORT_ROWS_MAX),
    rows: z.array(cells).min(1, importFields.noRow).max(IMPORT_ROWS_MAX),
  })
  .refine((t) => t.lines.length === t.rows.length, { path: ['lines'], message: importFields.oneLineARow })
  .refine((t) => new Set(t.columns).size === t.columns.length, {
    path: ['columns'],
    message: importFields.columnTwice,
  })
  .refine((t) => REQUIRED_COLUMNS.every((c) => t.columns.includes(c)), {
    path: ['columns'],
    message: importFields.columnsNeeded(REQUIRED_COLUMNS.join(', ')),
  });

export const importChoices = z.object({
  decimalMark: z.enum(['point', 'comma']).nullable(),
  fillDown: z.boolean(),
  meanings: z.partialRecord(z.enum(NAME_COLUMNS), z.record(name, name)),
  newStrings: z
    .object({
      plane: name.nullable(),
      input: name.nullable(),
      zone: name.nullable(),
      unitType: name.nullable(),
      moduleType: name.nullable(),
      logger: name.nullable(),
      transmitters: z.array(name).max(64),
    })
    .nullable(),
});

/**
 * `check` writes nothing and tells what would change; `apply` writes all or nothing. `seen` is the fingerprint of the
 * changes that the person looked at: where the as-built has changed since, nothing is written.
 */
export const importBody = z
  .object({
    mode: z.enum(['check', 'apply']),
    table: importTable,
    choices: importChoices,
    reason: z.string().trim().max(500).default(''),
    seen: z.string().max(100).nullable().default(null),
  })
  .refine((b) => b.mode === 'check' || b.reason.length >= 3, {
    path: ['reason'],
    message: importFields.sayWhy,
  })
  .refine((b) => b.mode === 'check' || b.seen !== null, {
    path: ['seen'],
    message: importFields.checkFirst,
  });
export type ImportBody = z.input<typeof importBody>;
export type ImportOrder = z.infer<typeof importBody>;

export type ChangeKind = Change['kind'];

/** What an import would change or has changed. */
export interface ImportOutcome {
  /** Whether it has been written. */
  written: boolean;
  rows: number;
  unchanged: number;
  counts: Partial<Record<ChangeKind, number>>;
  /** The first of the changes, gravest first. */
  changes: Change[];
  faultCount: number;
  faults: CellFault[];
  /** Of the changes: give it back with `apply`. */
  fingerprint: string;
}

/** Lines of the answer where it is asked for as application/x-ndjson; the last one is an outcome or a problem. */
export type ImportLine =
  | { progress: { step: ImportStep; done: number; of: number } }
  | { outcome: ImportOutcome }
  | {
      problem: {
        status: number;
        title: string;
        detail: string;
        fields: { field: string; message: string }[];
        requestId: string;
      };
    };

/** What the page of the import knows before a file is there. */
export interface ImportPage {
  site: { id: string; name: string; timeZone: string; stage: 'commissioning' | 'operating' };
  names: KnownNames;
}
