import { z } from 'zod';
import { EVENT_KINDS } from '../../domain/verdicts/codes';
import { acknowledgement, siteContact } from './fleet';
import { causeNow, commandNow, eventItem, gatewayNow, id, inverterNow, siteNow, stringNow } from './now';
import { siteFields } from '../../words/fields';

const time = z.iso.datetime();

export const siteParams = z.object({ site: id });

/** A zone or a transmitter and the newest command that was reported of it; null: none yet. */
export const zoneNow = z.object({
  name: z.string(),
  initiator: z.string(),
  initiatorPlace: z.string(),
  command: commandNow.nullable(),
  strings: z.array(z.string()),
  /** Transmitters whose own command differs from the zone's. */
  transmitters: z.array(commandNow),
});
export type ZoneNow = z.infer<typeof zoneNow>;

export const loggerNow = z.object({
  serial: z.string(),
  firmware: z.string().nullable(),
  connectedAt: time.nullable(),
  lastSpokeAt: time.nullable(),
});
export type LoggerNow = z.infer<typeof loggerNow>;

export const eventsPage = z.object({
  events: z.array(eventItem), // newest first
  /** Pass it as `before` for older ones; null: there are none. */
  before: z.string().nullable(),
});
export type EventsPage = z.infer<typeof eventsPage>;

/** Which events a site's page shows, as it stands in the address. */
export const eventsView = z.object({ kind: z.enum(['all', ...EVENT_KINDS]).catch('all') });

export const eventsQuery = z.strictObject({
  kind: z.enum(EVENT_KINDS).optional(),
  before: z
    .string()
    .regex(/^\d{1,16}\.\d{1,18}$/, siteFields.fromThePageBefore)
    .optional(),
  limit: z.coerce.number().int().min(1).max(200).default(25),
});

export const sitePage = z.object({
  at: time,
  site: siteNow,
  contact: siteContact,
  ruleSet: z.enum(['rapid_shutdown_30s', 'rapid_shutdown_10s', 'hazard_control', 'none']),
  switchedOnOn: z.string().nullable(),
  strings: z.array(stringNow),
  inverters: z.array(inverterNow),
  gateways: z.array(gatewayNow),
  loggers: z.array(loggerNow),
  zones: z.array(zoneNow),
  causes: z.array(causeNow),
  acknowledgements: z.array(acknowledgement),
  rollCall: z.object({ startedAt: time, personOnSite: z.string() }).nullable(),
  lastShutdownTest: z
    .object({
      at: time,
      result: z.enum(['passed', 'failed', 'consistent', 'not_witnessed']),
      madeBy: z.string(),
    })
    .nullable(),
});
export type SitePage = z.infer<typeof sitePage>;
