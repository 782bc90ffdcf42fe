import { z } from 'zod';
import { id, stringNow } from './now';

/** Where to go on a roof, what to bring, what to expect at the meter. Times ISO 8601 in UTC, metres, volts. */

const reading = z.object({ volts: z.number(), low: z.number(), high: z.number() });

export const walkRoofString = z.object({
  stringId: id,
  plane: z.string(),
  /** Place of each slot in order of position; null: not drawn. */
  x: z.array(z.number().nullable()),
  y: z.array(z.number().nullable()),
  unitType: z.string(),
  moduleType: z.string(),
  /** Connector types by name; null: not entered. Module leads, the unit's side to the module, its side to neighbours. */
  connectors: z.object({
    module: z.string().nullable(),
    unitIn: z.string().nullable(),
    unitOut: z.string().nullable(),
  }),
  readings: z.object({
    inShutdown: reading,
    passing: reading,
    now: reading.extend({ words: z.string() }),
  }),
});
export type WalkRoofString = z.infer<typeof walkRoofString>;

export const walkPage = z.object({
  at: z.iso.datetime(),
  site: z.object({
    id,
    name: z.string(),
    place: z.string(),
    timeZone: z.string(),
    stage: z.enum(['commissioning', 'operating']),
    contactName: z.string(),
    contactPhone: z.string(),
    shutdownSwitchPlace: z.string(),
  }),
  /** Roof outline, y to the north; empty: not drawn. */
  outline: z.array(z.tuple([z.number(), z.number()])),
  strings: z.array(stringNow),
  roof: z.array(walkRoofString),
  /** Serials that have answered a roll call here. */
  answered: z.array(z.string()),
  rollCalled: z.boolean(), // whether units were ever asked to answer
  /** What the light is taken to be for the readings, in words. */
  light: z.string(),
});
export type WalkPage = z.infer<typeof walkPage>;

/** What the page shows, as its address has it. `stops`: keys with commas; empty: all. */
export const walkView = z.object({
  stops: z.string().max(2000).catch(''),
  view: z.enum(['walk', 'card']).catch('walk'),
  string: z.string().max(40).catch(''),
});
export type WalkView = z.infer<typeof walkView>;
