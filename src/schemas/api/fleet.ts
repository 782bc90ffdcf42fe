import { z } from 'zod';
import { EVENT_KINDS } from '../../domain/verdicts/codes';
import { causeNow, id, siteNow } from './now';

const time = z.iso.datetime();

export const FLEET_SORTS = ['need', 'name', 'stage', 'units', 'ratio', 'power'] as const;
export const FLEET_SHOWS = ['all', 'attention', 'shutdown'] as const;

/** What the fleet's table shows, as it stands in the address. What an old link gets wrong falls back. */
export const fleetView = z.object({
  q: z.string().trim().max(80).catch(''),
  stage: z.enum(['any', 'commissioning', 'operating']).catch('any'),
  show: z.enum(FLEET_SHOWS).catch('all'),
  sort: z.enum(FLEET_SORTS).catch('need'),
  order: z.enum(['down', 'up']).catch('down'),
});
export type FleetView = z.infer<typeof fleetView>;

/** The same for a download, where a wrong word is refused and not guessed at. */
export const fleetCsvQuery = z.strictObject({
  q: z.string().trim().max(80).default(''),
  stage: z.enum(['any', 'commissioning', 'operating']).default('any'),
  show: z.enum(FLEET_SHOWS).default('all'),
  sort: z.enum(FLEET_SORTS).default('need'),
  order: z.enum(['down', 'up']).default('down'),
});

/** Whom to call at a site, and where its switch is. */
export const siteContact = z.object({
  siteId: id,
  name: z.string(),
  phone: z.string(),
  shutdownSwitchPlace: z.string(),
});
export type SiteContact = z.infer<typeof siteContact>;

/** Somebody has taken a cause on: by its key, while it lasts. */
export const acknowledgement = z.object({ key: z.string(), siteId: id, at: time, person: z.string() });
export type Acknowledgement = z.infer<typeof acknowledgement>;

/** What happened at one site while somebody was away, one line a kind. */
export const missedItem = z.object({
  siteId: id,
  siteName: z.string(),
  timeZone: z.string(),
  kind: z.enum(EVENT_KINDS),
  events: z.int(),
  units: z.int(),
  newestAt: time,
});
export type MissedItem = z.infer<typeof missedItem>;

export const sinceLastLook = z.object({ since: time, items: z.array(missedItem), more: z.int() });
export type SinceLastLook = z.infer<typeof sinceLastLook>;

export const fleetNow = z.object({
  at: time,
  sites: z.array(siteNow),
  causes: z.array(causeNow),
  contacts: z.array(siteContact),
  acknowledgements: z.array(acknowledgement),
});
export type FleetNow = z.infer<typeof fleetNow>;

export const acknowledgeBody = z.strictObject({ key: z.string().min(1).max(300) });
export const acknowledgeReply = z.object({ acknowledgement, contact: siteContact });
export type AcknowledgeReply = z.infer<typeof acknowledgeReply>;
