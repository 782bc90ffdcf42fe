import { z } from 'zod';
import { COMMANDS, UNIT_STATES, VERDICTS } from '../../domain/verdicts/codes';
import { HISTORY_QUANTITIES, HISTORY_RANGES, UNIT_QUANTITIES } from './string';
import { id } from './now';
import type { WorkbenchView } from './workbench-view';
import { workbenchFields } from '../../words/fields';

/** A string looked into: what its page shows as its address says, and what the workbench's endpoints answer. */

const epoch = z.coerce.number().int().min(1_500_000_000).max(4_102_444_800);
const day = z.iso.date(workbenchFields.giveDay);

/** Every choice of the page, as it stands in the address; what can't be read there is as if it were left out. */
export const workbenchView: z.ZodType<WorkbenchView> = z.object({
  range: z.enum(HISTORY_RANGES).catch('day'),
  quantity: z.enum(HISTORY_QUANTITIES).catch('voltage'),
  /** The last day shown, at the site; empty: today. */
  on: day.or(z.literal('')).catch(''),
  /** The moment of the staircase, epoch s; empty: now. */
  at: epoch.transform(String).or(z.literal('')).catch(''),
  siblings: z.enum(['middle', 'each', 'off']).catch('middle'),
  /** Another string to lay over this one, by identifier. */
  beside: id.or(z.literal('')).catch(''),
  /** Another day of this string to lay over. */
  day: day.or(z.literal('')).catch(''),
  difference: z.enum(['', 'yes']).catch(''),
  /** Positions with commas; empty: those in trouble; none: no unit. */
  units: z
    .string()
    .regex(/^(none|\d{1,2}(,\d{1,2}){0,7})$/)
    .or(z.literal(''))
    .catch(''),
  unit: z.enum(UNIT_QUANTITIES).catch('voltage'),
  heat: z.enum(UNIT_QUANTITIES).catch('voltage'),
  /** The heat strip: against the string's middle, or the figures themselves. */
  scale: z.enum(['middle', 'figures']).catch('middle'),
});
export type { WorkbenchView };

export const momentQuery = z.strictObject({ at: epoch });
export const dayQuery = z.strictObject({ on: day.optional() });
export const heatQuery = dayQuery.extend({ quantity: z.enum(UNIT_QUANTITIES).default('voltage') });

const figure = z.number().nullable();
export const stringMoment = z.object({
  at: z.number(), // epoch s, asked for
  /** Where the figures come from; nothing: no report near. */
  source: z.enum(['report', 'quarter', 'input', 'nothing']),
  /** Epoch s of the report, or of the quarter's start. */
  reportAt: figure,
  slots: z.array(
    z.object({
      position: z.int(),
      serial: z.string().nullable(), // the unit that sat there then
      state: z.enum(UNIT_STATES).nullable(),
      verdict: z.enum(VERDICTS).nullable(),
      voltage: figure,
      voltageIn: figure,
      current: figure,
      temperature: figure,
      power: figure,
      assumed: z.boolean(),
      expected: figure,
    }),
  ),
  voltage: figure,
  current: figure,
  power: figure,
  expectedVoltage: figure,
  expectedInShutdown: figure,
  expectedFrom: z.string(),
  inForce: z.enum(COMMANDS).nullable(),
  light: z.object({ poaGlobal: figure, temperatureModule: figure }),
  notes: z.array(z.string()),
});
export type StringMoment = z.infer<typeof stringMoment>;

const series = z.array(figure);
export const stringHeat = z.object({
  quantity: z.enum(UNIT_QUANTITIES),
  unit: z.string(),
  side: z.enum(['output', 'module']),
  day: z.string(),
  timeZone: z.string(),
  from: z.number(),
  to: z.number(),
  stepS: z.number(),
  /** Nothing was reported on this day: these come from an import. */
  imported: z.boolean(),
  /** Epoch s at which steps begin; steps without any report are left out. */
  at: z.array(z.number()),
  rows: z.array(z.object({ position: z.int(), serial: z.string().nullable(), values: series })),
});
export type StringHeat = z.infer<typeof stringHeat>;

export const stringLoop = z.object({
  fromDay: z.string(),
  day: z.string(),
  timeZone: z.string(),
  /** Sum of the units less the input, V, over the string's own current, A. */
  points: z.array(z.object({ at: z.number(), ownA: z.number(), gapV: z.number() })),
  fit: z
    .object({
      ohm: z.number(),
      low: z.number(),
      high: z.number(),
      sharedOhm: figure,
      gain: z.number(),
      samples: z.int(),
      highestA: z.number(),
      /** V of the line at no current: what gains and offsets leave. */
      interceptV: z.number(),
    })
    .nullable(),
  /** Why there is no line. */
  why: z.string(),
  cableOhm: figure,
  outcome: z.enum(['usual', 'excess', 'growing', 'cant_tell']),
  words: z.string(),
  couldBe: z.array(z.string()),
  threshold: z.object({ ohm: z.number(), source: z.string() }),
  strings: z.int(), // on the input
});
export type StringLoop = z.infer<typeof stringLoop>;

/** One explanation, held against the figures. */
export const explanation = z.object({
  key: z.string(),
  title: z.string(),
  fit: z.enum(['fits', 'partly', 'does_not', 'cant_tell']),
  words: z.string(),
  figures: z.array(z.object({ name: z.string(), measured: z.string(), would: z.string() })),
  confidence: figure,
});
export type ExplanationFit = z.infer<typeof explanation>;
export const stringExplanations = z.object({
  /** The judged day, yyyy-mm-dd; null: not judged yet. */
  day: z.string().nullable(),
  outcome: z.enum(['low', 'as_expected', 'cant_tell']).nullable(),
  words: z.string(),
  method: z.enum(['siblings', 'model']).nullable(),
  lossKWh: z.object({ value: z.number(), low: z.number(), high: z.number() }).nullable(),
  threshold: z.object({ ratio: z.number(), source: z.string() }).nullable(),
  /** The days that decided. */
  days: z.array(z.object({ day: z.string(), ratio: z.number(), z: figure, low: z.boolean() })),
  explanations: z.array(explanation),
  weak: z.array(z.object({ position: z.int(), ratio: z.number(), share: z.number(), words: z.string() })),
});
export type StringExplanations = z.infer<typeof stringExplanations>;
