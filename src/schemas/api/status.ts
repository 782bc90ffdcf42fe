import { z } from 'zod';

const time = z.iso.datetime();

/** How this installation runs, for a manager. */
export const installationStatus = z.object({
  at: time,
  database: z.object({
    version: z.string(),
    bytes: z.int(),
    /** False: all runs with one database account, so the second wall between organisations is missing. */
    rowSecurity: z.boolean(),
  }),
  /** The replica that answers readers of history and reports; null: none is set up. */
  replica: z.object({ state: z.enum(['serves', 'behind', 'away']), lagS: z.number().nullable() }).nullable(),
  /** Processes that serve loggers now. */
  processes: z.array(z.object({ name: z.string(), loggers: z.int(), until: time })),
  /** Connections tried with a token that nobody knows, at the process that answers and since it started; null: it takes no loggers. */
  unknownTokens: z.int().nullable(),
  loggers: z.array(
    z.object({
      siteId: z.uuid(),
      siteName: z.string(),
      timeZone: z.string(),
      serial: z.string(),
      firmware: z.string().nullable(),
      connected: z.boolean(),
      lastSpokeAt: time.nullable(),
      lastAddress: z.string().nullable(),
      refused: z.int(),
      lastRefusal: z.object({ at: time.nullable(), field: z.string(), reason: z.string() }).nullable(),
    }),
  ),
  work: z.object({
    newestFrameAt: time.nullable(),
    /** Oldest newest frame that has not been judged; null: all have. */
    unjudgedSince: time.nullable(),
    unjudgedStrings: z.int(),
    /** Quarters before this instant are rolled up; null: none ever was. */
    rolledUpTo: time.nullable(),
    quartersWaiting: z.int(),
    lateFrames: z.int(),
    /** Last UTC day for which frames have a place. */
    preparedTo: z.string().nullable(),
  }),
});
export type InstallationStatus = z.infer<typeof installationStatus>;
