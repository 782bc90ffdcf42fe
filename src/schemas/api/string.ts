import { z } from 'zod';
import { eventItem, id, stringNow } from './now';
import { stringFields } from '../../words/fields';

/** What the page of one string shows and what its endpoints answer. SI units; instants ISO 8601 or epoch seconds. */

const time = z.iso.datetime();

export const stringParams = z.strictObject({ string: id });

/** Why units of the string are said to be what they are, as the judgement recorded it. */
export const unitEvidence = z.object({
  position: z.int(),
  basis: z.enum(['measured', 'claim', 'nothing_heard']),
  thresholdSource: z.string(),
  confidence: z.number(), // 0 … 1
  couldBe: z.array(z.string()),
});
export type UnitEvidence = z.infer<typeof unitEvidence>;

export const findingEvidence = z.object({
  scope: z.enum(['string', 'input']),
  measuredV: z.number(),
  expectedV: z.number().nullable(),
  thresholdV: z.number(),
  thresholdSource: z.string(),
  units: z.number().nullable(),
  unitsRange: z.tuple([z.number(), z.number()]).nullable(),
  ofN: z.number(),
  confidence: z.number(),
  couldBe: z.array(z.string()),
});

export const stringPage = z.object({
  at: time, // the server's clock
  site: z.object({
    id,
    name: z.string(),
    timeZone: z.string(),
    stage: z.enum(['commissioning', 'operating']),
  }),
  string: stringNow,
  plane: z.object({ name: z.string(), surfaceTilt: z.number(), surfaceAzimuth: z.number() }),
  unitType: z.object({
    name: z.string(),
    measures: z.enum(['none', 'input', 'output', 'both']),
    insulationTestMax: z.number().nullable(),
  }),
  moduleType: z.string(),
  /** W/m² and °C in this plane, where a sensor says. */
  light: z.object({ poaGlobal: z.number().nullable(), temperatureModule: z.number().nullable() }),
  evidence: z.object({ units: z.array(unitEvidence), finding: findingEvidence.nullable() }),
  lostToday: z.object({ wh: z.number(), since: time, against: z.string() }).nullable(),
  neighbours: z.object({
    previous: z.object({ id, name: z.string() }).nullable(),
    next: z.object({ id, name: z.string() }).nullable(),
  }),
  events: z.array(eventItem), // newest first
  /** Strings of the same plane, module type and way of working; none: compared with the model. */
  siblings: z.array(z.object({ id, name: z.string() })),
  /** The open case about this string, if there is one. */
  openCase: z.object({ id, number: z.int(), title: z.string() }).nullable(),
});
export type StringPage = z.infer<typeof stringPage>;

export const HISTORY_RANGES = ['day', 'week', 'month', 'year'] as const;
export type HistoryRange = (typeof HISTORY_RANGES)[number];

const day = z.iso.date(stringFields.giveDay);
export const HISTORY_QUANTITIES = ['voltage', 'current', 'power'] as const;
export type HistoryQuantity = (typeof HISTORY_QUANTITIES)[number];

export const historyQuery = z.strictObject({
  range: z.enum(HISTORY_RANGES).default('day'),
  quantity: z.enum(HISTORY_QUANTITIES).default('voltage'),
  /** Each sibling string's own line too. */
  siblings: z.enum(['each']).optional(),
  /** The last day of the range, at the site; absent: today. */
  on: day.optional(),
  /** A part of the range, which may come finer; both or neither. Epoch seconds. */
  from: z.coerce.number().int().min(1_500_000_000).max(4_102_444_800).optional(),
  to: z.coerce.number().int().min(1_500_000_000).max(4_102_444_800).optional(),
});
export type HistoryQuery = z.infer<typeof historyQuery>;

export const RESOLUTIONS = ['minute', 'quarter', 'day'] as const;

/** A mark on a chart: an instant, or a stretch of time. */
export const chartMark = z.object({
  from: z.number(), // epoch s
  to: z.number().nullable(), // null: an instant
  words: z.string(),
  tone: z.enum(['rust', 'crimson', 'plum', 'slate', 'petrol']),
});
export type ChartMark = z.infer<typeof chartMark>;

const series = z.array(z.number().nullable());
export const stringHistory = z.object({
  range: z.enum(HISTORY_RANGES),
  quantity: z.enum(HISTORY_QUANTITIES),
  /** V, A, W; kWh where a step is a day of power. */
  unit: z.string(),
  resolution: z.enum(RESOLUTIONS),
  from: z.number(), // epoch s
  to: z.number(),
  timeZone: z.string(),
  /** Epoch s, rising; a null value is a gap. */
  at: z.array(z.number()),
  values: series, // mean
  low: series, // lowest within the step; as the value where the step is a report
  high: series,
  energy: series, // Wh in the step; empty where the string's units tell nothing
  expected: z.object({
    at: z.array(z.number()),
    low: series,
    high: series,
    from: z.string(), // in words
  }),
  /** What the other strings of the plane gave, in the middle, as this string's modules would have. */
  middle: z.object({ at: z.array(z.number()), values: series, strings: z.int() }),
  /** Each of them by itself, where asked for. */
  siblings: z.array(z.object({ id, name: z.string(), at: z.array(z.number()), values: series })),
  /** Readings of the time before, from an imported file. */
  imported: z.object({ at: z.array(z.number()), values: series }),
  nights: z.array(z.tuple([z.number(), z.number()])),
  marks: z.array(chartMark),
  /** What the reader must know: "no minutes are kept so far back", "shared by two strings". */
  notes: z.array(z.string()),
});
export type StringHistory = z.infer<typeof stringHistory>;

export const UNIT_QUANTITIES = ['voltage', 'current', 'temperature', 'power'] as const;
export type UnitQuantity = (typeof UNIT_QUANTITIES)[number];

export const UNIT_RANGES = ['day', 'week', 'month'] as const;
export const unitsQuery = z.strictObject({
  quantity: z.enum(UNIT_QUANTITIES).default('voltage'),
  range: z.enum(UNIT_RANGES).default('day'),
  on: day.optional(),
  /** Positions with commas; absent: all. */
  positions: z
    .string()
    .regex(/^\d{1,2}(,\d{1,2}){0,62}$/, stringFields.givePositions)
    .optional(),
});
export type UnitsQuery = z.infer<typeof unitsQuery>;

export const stringUnits = z.object({
  quantity: z.enum(UNIT_QUANTITIES),
  unit: z.string(), // V, A, °C, W
  side: z.enum(['output', 'module']), // where a voltage is measured
  range: z.enum(UNIT_RANGES),
  resolution: z.enum(['minute', 'quarter']),
  /** Nothing was reported in this time: these come from an import. */
  imported: z.boolean(),
  from: z.number(),
  to: z.number(),
  timeZone: z.string(),
  at: z.array(z.number()),
  lines: z.array(z.object({ position: z.int(), values: series })),
  /** Units that came or went in this time, by position; what was read before is another unit's. */
  moves: z.array(
    z.object({
      position: z.int(),
      at: z.number(), // epoch s
      out: z.string().nullable(), // serials
      in: z.string().nullable(),
    }),
  ),
  nights: z.array(z.tuple([z.number(), z.number()])),
});
export type StringUnits = z.infer<typeof stringUnits>;
