import { z } from 'zod';
import { CHECK_KEYS, CHECK_RESULTS } from '../../domain/commissioning/checks/definition';
import { id } from './now';
import { checkFields } from '../../words/fields';

/** Install checks: what a person says of one thing at one string. Times ISO 8601 in UTC. */

const time = z.iso.datetime(checkFields.giveTimeUtc);

/** Numbers as measured, words chosen, public identifiers of connector types; keys in domain/commissioning/checks. */
export const figures = z
  .record(z.string().max(40), z.union([z.number(), z.string().max(80)]))
  .refine((f) => Object.keys(f).length <= 20, checkFields.tooManyFigures);

/** `ref` is made where it is recorded: sent twice is stored once. `supersedes`: the newest record that the person saw. */
export const checkInput = z.strictObject({
  ref: id,
  stringId: id,
  check: z.enum(CHECK_KEYS),
  result: z.enum(CHECK_RESULTS),
  reason: z.string().trim().max(500, checkFields.remarkTooLong).default(''),
  note: z.string().trim().max(2000, checkFields.noteTooLong).default(''),
  figures: figures.default({}),
  at: time, // by the clock of who recorded it
  supersedes: id.nullable().default(null),
});
export type CheckInput = z.infer<typeof checkInput>;

export const checkRecord = z.object({
  ref: id,
  stringId: id,
  check: z.enum(CHECK_KEYS),
  result: z.enum(CHECK_RESULTS),
  reason: z.string(),
  note: z.string(),
  figures: z.record(z.string(), z.union([z.number(), z.string()])),
  at: time,
  recordedAt: time, // by the server's clock
  person: z.string(),
  supersedes: id.nullable(),
});
export type CheckRecord = z.infer<typeof checkRecord>;

/** Signs the checks of a string as they stood when the person looked: `fingerprint` is theirs. */
export const signOffInput = z.strictObject({
  ref: id,
  fingerprint: z.string().regex(/^[0-9a-f]{64}$/, checkFields.fingerprintLength),
});
export type SignOffInput = z.infer<typeof signOffInput>;

export const signOff = z.object({
  ref: id,
  stringId: id,
  person: z.string(),
  at: time,
  fingerprint: z.string(),
  /** Something was recorded since. */
  stale: z.boolean(),
});
export type SignOff = z.infer<typeof signOff>;
