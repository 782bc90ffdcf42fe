import { z } from 'zod';
import { causesAt, causeSent } from './api/cause-sent';
import { eventItem, gatewayNow, inverterNow, siteNow, stringNow } from './api/now';

/**
 * /live, browser side. One socket carries several topics: `fleet`, `notices` (one's own), `site:ID`, `string:ID`,
 * `roll-call:ID`.
 * Each subscription gets a snapshot with a cursor, then deltas, each with the cursor to come back with.
 */
export const CLOSE_COME_BACK = 4001; // too slow to keep up: reconnect with the cursor
export const CLOSE_SIGNED_OUT = 4003;

export const topic = z
  .string()
  .regex(/^(fleet|notices|(site|string|roll-call):[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12})$/);

export const clientMessage = z.discriminatedUnion('type', [
  z.strictObject({ type: z.literal('subscribe'), topic, cursor: z.string().max(80).optional() }),
  z.strictObject({ type: z.literal('unsubscribe'), topic }),
]);
export type ClientMessage = z.infer<typeof clientMessage>;

export const heardItem = z.object({
  serial: z.string(),
  at: z.iso.datetime(),
  stringId: z.uuid().nullable(), // null: on no as-built of this site
  position: z.int().nullable(),
  gateway: z.string(),
  signal: z.number().nullable(),
});
export type HeardItem = z.infer<typeof heardItem>;

/** One's own notices, as the shell of every page shows them. */
export const noticesNow = z.object({
  unread: z.int(), // at most a hundred
  hazards: z.int(), // unread and not over
  newest: z
    .object({
      id: z.uuid(),
      headline: z.string(),
      href: z.string(),
      hazard: z.boolean(),
      siteName: z.string().nullable(),
    })
    .nullable(), // of those unread
});
export type NoticesNow = z.infer<typeof noticesNow>;

/** What changed; a part that is absent did not. Arrays replace by `id` (or name, number, key), they are not whole lists. */
export const change = z.object({
  sites: z.array(siteNow).optional(), // fleet
  causes: z.array(causeSent).optional(), // fleet, site: the whole list
  causesAt: z.array(causesAt).optional(), // fleet: of the sites where they changed
  site: siteNow.optional(), // site
  strings: z.array(stringNow).optional(), // site, string, roll-call
  inverters: z.array(inverterNow).optional(), // site, string
  gateways: z.array(gatewayNow).optional(), // site
  events: z.array(eventItem).optional(), // newest last
  leftOut: z.literal(true).optional(), // older events than these came too, more than are sent: read what is stored
  heard: z.array(heardItem).optional(), // roll-call, newest last
  rollCallStopped: z.boolean().optional(),
  notices: noticesNow.optional(), // notices
});
export type Change = z.infer<typeof change>;

export const liveMessage = z.discriminatedUnion('type', [
  z.object({ type: z.literal('snapshot'), topic, cursor: z.string(), change }),
  z.object({ type: z.literal('delta'), topic, cursor: z.string(), change }),
  z.object({ type: z.literal('refused'), topic: z.string(), reason: z.string() }),
]);
export type LiveMessage = z.infer<typeof liveMessage>;
