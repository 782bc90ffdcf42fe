import { z } from 'zod';
import { PLACE_COLUMNS, QUANTITIES, UNITS, type KnownSubjects } from '../../domain/history-import/layout';
import type { HistoryFault } from '../../domain/history-import/read';
import { id } from './now';
import { historyFields } from '../../words/fields';

/** Readings of the time before Wakeline, from a file. */

const time = z.iso.datetime();

export const HISTORY_ROWS_MAX = 400_000;
export const HISTORY_READINGS_MAX = 1_000_000;
const COLUMNS_MAX = 200;

const name = z.string().min(1).max(200);
const subject = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('string'), string: name }),
  z.strictObject({ kind: z.literal('unit'), string: name, position: z.int().min(1).max(63) }),
  z.strictObject({ kind: z.literal('input'), inverter: name, input: z.int().min(1).max(64) }),
  z.strictObject({ kind: z.literal('inverter'), inverter: name }),
]);
const unitNames = new Set(Object.values(UNITS).flatMap((list) => list.map((u) => u.unit)));
const columnUse = z.union([
  z.strictObject({ as: z.literal('nothing') }),
  z.strictObject({ as: z.enum(PLACE_COLUMNS) }),
  z.strictObject({
    as: z.enum(QUANTITIES),
    unit: z.string().refine((u) => unitNames.has(u), historyFields.unknownUnit),
    of: subject.nullable(),
  }),
]);
const zone = z.string().max(64).refine(isZone, historyFields.unknownZone);

export const historyLayout = z.strictObject({
  columns: z.array(columnUse).min(1).max(COLUMNS_MAX),
  hasHeader: z.boolean(),
  timeZone: zone,
  dayFirst: z.boolean().nullable(),
  decimalMark: z.enum(['point', 'comma']).nullable(),
});

function isZone(text: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: text });
    return true;
  } catch {
    return false; // a RangeError is how Intl says no
  }
}

/** The first line of the body, as JSON; the file's text follows it. */
export const historyOrder = z.strictObject({
  fileName: z.string().trim().min(1).max(200),
  separator: z.enum(['\t', ';', ',', '|']),
  layout: historyLayout,
  note: z.string().trim().max(500, historyFields.noteTooLong).default(''),
  /** What the person looked at: where the server reads otherwise nothing is kept. */
  seen: z.strictObject({ rows: z.int(), readings: z.int(), leftOut: z.int() }),
});
export type HistoryOrder = z.infer<typeof historyOrder>;

export const historyImportView = z.object({
  id,
  fileName: z.string(),
  rows: z.int(),
  readings: z.int(),
  leftOut: z.int(),
  doubles: z.int(),
  from: time,
  to: time,
  /** "string A1", "Inverter 1, input 2". */
  of: z.array(z.string()),
  note: z.string(),
  madeBy: z.string(),
  madeAt: time,
  undoneBy: z.string().nullable(),
  undoneAt: time.nullable(),
});
export type HistoryImportView = z.infer<typeof historyImportView>;

export const historyPage = z.object({
  at: time,
  site: z.object({ id, name: z.string(), timeZone: z.string() }),
  imports: z.array(historyImportView),
});
export type HistoryPage = z.infer<typeof historyPage> & {
  known: KnownSubjects;
  timeZones: readonly string[];
};

export const HISTORY_STEPS = ['reading', 'adding_up', 'kept'] as const;
export type HistoryStep = (typeof HISTORY_STEPS)[number];

/** Lines of the answer (NDJSON); the last one is an outcome or a problem. */
export type HistoryLine =
  | { progress: { step: HistoryStep; done: number; of: number } }
  | { outcome: HistoryImportView }
  | {
      problem: {
        status: number;
        title: string;
        detail: string;
        fields: { field: string; message: string }[];
        requestId: string;
      };
    };

export const historyImportParams = z.object({ site: id, import: id });
export const undoImport = z.strictObject({ reason: z.string().trim().max(500).default('') });

export type { HistoryFault };
