import { z } from 'zod';
import { COMMANDS } from '../../domain/verdicts/codes';
import { id } from './now';

/** Voltages second by second after the newest command of a site or of one string. SI units; times ISO 8601 in UTC. */

const time = z.iso.datetime();

export const stringTrace = z.object({
  stringId: id,
  stringName: z.string(),
  measuringPoint: z.enum(['home_run', 'input', 'unit_sum']),
  accuracy: z.number(), // V
  voltage: z.array(z.number().nullable()), // V, one a second from the command on; null: not known
});
export type StringTrace = z.infer<typeof stringTrace>;

export const siteTraces = z.object({
  at: time, // when this was read
  command: z.object({ inForce: z.enum(COMMANDS), where: z.string(), since: time, by: z.string() }).nullable(),
  startedAt: time.nullable(), // null: no trace yet
  traces: z.array(stringTrace),
  limit: z.object({ voltage: z.number(), afterS: z.number(), source: z.string() }),
});
export type SiteTraces = z.infer<typeof siteTraces>;

export const tracesQuery = z.strictObject({ string: id.optional() });
