import { z } from 'zod';
import { id } from './now';

/** Sites under way, with what is known of each today. Times ISO 8601 in UTC. */

const time = z.iso.datetime();

export const siteUnderWay = z.object({
  id,
  name: z.string(),
  place: z.string(),
  timeZone: z.string(),
  stage: z.enum(['commissioning', 'operating']),
  strings: z.int(),
  slots: z.int(),
  placed: z.int(), // slots with a unit in them
  roster: z.int(), // units that can answer a roll call
  heard: z.int(), // of them
  heardUnknown: z.int(), // serials heard that are on no as-built
  rollCall: z
    .object({ startedAt: time, stoppedAt: time.nullable(), personOnSite: z.string(), startedBy: z.string() })
    .nullable(),
  checks: z.object({ strings: z.int(), failed: z.int() }), // strings with checks; newest check of a name failed
  readings: z.object({ strings: z.int(), lastAt: time.nullable() }), // strings with a meter reading
  lastTest: z
    .object({ at: time, result: z.enum(['passed', 'failed', 'consistent', 'not_witnessed']) })
    .nullable(),
});
export type SiteUnderWay = z.infer<typeof siteUnderWay>;
