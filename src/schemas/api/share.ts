import { z } from 'zod';
import { customerNow, customerSite } from './customer';
import { commandNow, id } from './now';
import { shareFields } from '../../words/fields';

/** Shared pages: what somebody with the link sees, and the links of a site. Times ISO 8601 in UTC. */

const time = z.iso.datetime();

/** The moment as on the owner's page, with no name of a zone, a transmitter or a person. */
export const sharedNow = customerNow.extend({
  commands: z.array(commandNow.pick({ inForce: true, since: true })),
});
export type SharedNow = z.infer<typeof sharedNow>;

/**
 * What a shared page rests on: less than the owner's page. No address, no place of the switch, no telephone, nobody's
 * name, no tests, no papers, no identifier of the site.
 */
export const sharedSite = z.strictObject({
  name: z.string(),
  timeZone: z.string(),
  organisation: z.string(),
  kiosk: z.boolean(),
  /** The page that may show a lobby screen in a frame, by its origin. */
  framedBy: z.string().nullable(),
  now: sharedNow,
  today: customerSite.shape.today,
  month: customerSite.shape.month,
  year: customerSite.shape.year,
  life: customerSite.shape.life,
});
export type SharedSite = z.infer<typeof sharedSite>;

export const shareLinkItem = z.object({
  id,
  label: z.string(),
  kiosk: z.boolean(),
  framedBy: z.string().nullable(),
  madeBy: z.string(),
  createdAt: time,
  expiresAt: time.nullable(), // null: until it is ended
  endedAt: time.nullable(),
  lastUsedAt: time.nullable(),
  state: z.enum(['open', 'ended', 'expired']),
});
export type ShareLinkItem = z.infer<typeof shareLinkItem>;

export const shareLinks = z.object({ at: time, timeZone: z.string(), links: z.array(shareLinkItem) });
export type ShareLinks = z.infer<typeof shareLinks>;

const ORIGIN = shareFields.giveFrameOrigin;
/** scheme://host or scheme://host:port as browsers write it, so that nothing else gets into a header. */
const origin = z
  .string()
  .trim()
  .max(200, shareFields.originTooLong)
  .transform((text) => text.replace(/\/$/, '').toLowerCase())
  .refine(
    (text) =>
      /^https?:\/\/[a-z0-9.:[\]-]+$/.test(text) && URL.canParse(text) && new URL(text).origin === text,
    ORIGIN,
  );

export const shareLinkBody = z
  .strictObject({
    label: z.string().trim().min(1, shareFields.labelMissing).max(80, shareFields.labelTooLong),
    kiosk: z.boolean(),
    /** The last day on which it works, at the site; null: until somebody ends it. */
    endsOn: z.iso.date(shareFields.giveDay).nullable(),
    /** Of a lobby screen: the origin of a page that may show it in a frame; null: none may. */
    framedBy: origin.nullable().default(null),
  })
  .refine((body) => body.kiosk || body.framedBy === null, {
    path: ['framedBy'],
    message: shareFields.onlyScreensFramed,
  });
export type ShareLinkBody = z.infer<typeof shareLinkBody>;

/** A link that was just made; its address is told this once. */
export const madeShareLink = z.object({ link: shareLinkItem, address: z.url() });
export type MadeShareLink = z.infer<typeof madeShareLink>;

export const shareLinkParams = z.object({ link: id });
export const sharedParams = z.object({ token: z.string() });
