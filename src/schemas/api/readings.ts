import { z } from 'zod';
import { READING_KINDS, READING_STAGES } from '../../domain/commissioning/readings/stages';
import { id } from './now';
import { readingFields } from '../../words/fields';

/** Meter readings as taken, with what they mean. Volts; times ISO 8601 in UTC. */

const time = z.iso.datetime(readingFields.giveTimeUtc);
const LIGHTS = ['bright', 'dull', 'snow', 'night'] as const;
const METERS = ['high_impedance', 'low_impedance'] as const;
const COMMANDED = ['released', 'shutdown', 'unknown'] as const;

export const readingInput = z.strictObject({
  ref: id,
  stringId: id,
  stage: z.enum(READING_STAGES),
  kind: z.enum(READING_KINDS),
  light: z.enum(LIGHTS),
  meterMode: z.enum(METERS).default('high_impedance'),
  commanded: z.enum(COMMANDED).default('unknown'),
  /** A negative voltage is a finding: reversed. */
  voltage: z
    .number(readingFields.giveVoltage)
    .min(-2000, readingFields.voltageRange)
    .max(2000, readingFields.voltageRange),
  note: z.string().trim().max(2000, readingFields.noteTooLong).default(''),
  at: time, // by the clock of who took it
  supersedes: id.nullable().default(null),
});
export type ReadingInput = z.infer<typeof readingInput>;

export const readingFinding = z.object({
  outcome: z.enum(['as_expected', 'finding', 'cant_tell', 'proves_nothing']),
  headline: z.string(),
  /** What should be at that stage, in words. */
  expected: z.string(),
  likely: z.array(
    z.object({
      kind: z.string(),
      count: z.number(),
      words: z.string(),
      probability: z.number(),
      expectedV: z.number().nullable(),
    }),
  ),
  expectedV: z.number().nullable(),
  /** Two standard deviations to either side. */
  expectedLowV: z.number().nullable(),
  expectedHighV: z.number().nullable(),
  /** Names of the strings whose readings were used. */
  siblings: z.array(z.string()),
  /** How many units had answered when it was taken. */
  heard: z.int(),
  earth: z.object({ outcome: z.enum(['no_fault_seen', 'fault', 'cant_tell']), words: z.string() }).nullable(),
  obeysInitiator: z.boolean().nullable(),
  cautions: z.array(z.string()),
});
export type ReadingFinding = z.infer<typeof readingFinding>;

export const readingRecord = z.object({
  ref: id,
  stringId: id,
  stage: z.enum(READING_STAGES),
  kind: z.enum(READING_KINDS),
  light: z.enum(LIGHTS),
  meterMode: z.enum(METERS),
  commanded: z.enum(COMMANDED),
  voltage: z.number(),
  note: z.string(),
  at: time,
  recordedAt: time,
  person: z.string(),
  supersedes: id.nullable(),
  finding: readingFinding.nullable(), // null: stored before it was judged
});
export type ReadingRecord = z.infer<typeof readingRecord>;
