import { z } from 'zod';
import { id } from './now';
import { loggerFields } from '../../words/fields';

/** A site's loggers with their tokens: who may speak, when each last did, what was refused. Times ISO 8601 in UTC. */

const time = z.iso.datetime();

export const OVERLAP_HOURS_MAX = 168;

export const tokenState = z.enum(['in_force', 'ending', 'ended']);

export const loggerTokenView = z.object({
  id,
  name: z.string(),
  madeAt: time,
  madeBy: z.string().nullable(), // null: with the demo or by a program
  lastUsedAt: time.nullable(),
  lastAddress: z.string().nullable(),
  state: tokenState,
  /** When it ends or ended. */
  endsAt: time.nullable(),
  endedBy: z.string().nullable(),
});
export type LoggerTokenView = z.infer<typeof loggerTokenView>;

export const loggerView = z.object({
  id,
  serial: z.string(),
  firmware: z.string().nullable(),
  connected: z.boolean(),
  byHttps: z.boolean(),
  lastSpokeAt: time.nullable(),
  lastAddress: z.string().nullable(),
  refused: z.int(),
  /** By what was wrong, newest first. */
  refusals: z.array(
    z.object({ field: z.string(), reason: z.string(), count: z.int(), firstAt: time, lastAt: time }),
  ),
  /** Attempts with a token that nobody knows, from the address that this logger last spoke from. */
  wrongTokens: z.object({ count: z.int(), firstAt: time, lastAt: time }).nullable(),
  tokens: z.array(loggerTokenView),
});
export type LoggerView = z.infer<typeof loggerView>;

export const loggersPage = z.object({
  at: time,
  site: z.object({
    id,
    name: z.string(),
    timeZone: z.string(),
    stage: z.enum(['commissioning', 'operating']),
  }),
  loggers: z.array(loggerView),
});
export type LoggersPage = z.infer<typeof loggersPage>;

export const tokenParams = z.object({ site: id, logger: id, token: id });

const reason = z.string().trim().max(500, loggerFields.reasonTooLong).default('');
export const newToken = z.strictObject({
  name: z.string().trim().max(80, loggerFields.nameTooLong).default(''),
  overlapHours: z
    .number(loggerFields.giveHours)
    .int(loggerFields.wholeHours)
    .min(0, loggerFields.noHoursLess)
    .max(OVERLAP_HOURS_MAX, loggerFields.hoursTooMany(OVERLAP_HOURS_MAX)),
  reason,
});
export type NewToken = z.input<typeof newToken>;
/** The token itself is told this once. */
export const newTokenReply = z.object({
  token: z.string(),
  /** Tokens that were in force before, and when they end. */
  ending: z.int(),
  endsAt: time,
});
export type NewTokenReply = z.infer<typeof newTokenReply>;

export const endToken = z.strictObject({ reason });
