import { z } from 'zod';
import { heardItem } from '../live';
import { stepNow } from './commissioning';
import { commandNow, gatewayNow, id, stringNow } from './now';
import { rollCallFields } from '../../words/fields';

/** The roll call of a site: who may have answered, who has, and who runs it. Times ISO 8601 in UTC. */

const time = z.iso.datetime();

export const rollCallRun = z.object({
  id,
  startedAt: time,
  startedBy: z.string(),
  personOnSite: z.string(),
  stoppedAt: time.nullable(),
  stoppedBy: z.string().nullable(),
});
export type RollCallRun = z.infer<typeof rollCallRun>;

export const rollCallPage = z.object({
  at: time, // when this was read
  site: z.object({
    id,
    name: z.string(),
    place: z.string(),
    timeZone: z.string(),
    stage: z.enum(['commissioning', 'operating']),
  }),
  run: rollCallRun.nullable(), // the open one, else the last; null: never started
  /** The as-built, string by string; units of shutdown-only strings cannot answer and are not on the roll. */
  strings: z.array(stringNow),
  answers: z.array(heardItem), // oldest first; each serial's first answer at this site
  gateways: z.array(gatewayNow),
  reportIntervalS: z.number(), // how often loggers here report
  loggers: z.array(z.object({ serial: z.string(), connected: z.boolean(), lastSpokeAt: time.nullable() })),
  commands: z.array(commandNow), // in force other than released: what a unit follows once it is heard
  /** Every step of the site, from as-built to handover. */
  steps: z.array(stepNow),
  /** Names of unit types here that pass full module voltage until they have answered, as entered in the catalogue. */
  passesUntilHeard: z.array(z.string()),
});
export type RollCallPage = z.infer<typeof rollCallPage>;

export const rollCallStart = z.strictObject({
  personOnSite: z
    .string({ error: rollCallFields.namePerson })
    .trim()
    .min(2, rollCallFields.namePerson)
    .max(120, rollCallFields.nameTooLong),
  onSite: z.literal(true, { error: rollCallFields.confirmOnSite }),
});
export type RollCallStart = z.infer<typeof rollCallStart>;

/** What the table of strings shows, as its address has it; what cannot be read is left at its default. */
export const rollCallView = z.object({
  strings: z.enum(['all', 'missing']).catch('all'),
  sort: z.enum(['name', 'heard', 'signal']).catch('name'),
  order: z.enum(['up', 'down']).catch('up'),
});
export type RollCallView = z.infer<typeof rollCallView>;
