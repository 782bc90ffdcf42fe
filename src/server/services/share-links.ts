import type { Actor } from '../../domain/access/permissions';
import type {
  MadeShareLink,
  ShareLinkBody,
  ShareLinkItem,
  ShareLinks,
  SharedSite,
} from '../../schemas/api/share';
import { paths } from '../../schemas/paths';
import { takeSharedRead, takeTokenTry } from '../auth/limits';
import { newToken, TOKEN_PATTERN, tokenHash } from '../auth/secret-link';
import { asActor, asSignIn, type Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { addAuditEntry } from '../queries/people';
import {
  addShareLink,
  endOfDay,
  endShareLink,
  openShareLink,
  shareLinksOf,
  siteRefOf,
  type ShareLinkRow,
} from '../queries/share-links';
import { visibleSite } from '../queries/visible-site';
import { customerSite } from './customer-page';
import { shareLinkRefusals } from '../../words/refusals-people';

/** Pages of a site for people who do not sign in: made and ended by a manager, read by whoever has the link. */

const item = (link: ShareLinkRow, at: Date): ShareLinkItem => ({
  id: link.ref,
  label: link.label,
  kiosk: link.kiosk,
  framedBy: link.framedBy,
  madeBy: link.madeBy,
  createdAt: link.createdAt.toISOString(),
  expiresAt: link.expiresAt?.toISOString() ?? null,
  endedAt: link.endedAt?.toISOString() ?? null,
  lastUsedAt: link.lastUsedAt?.toISOString() ?? null,
  state: link.endedAt ? 'ended' : link.expiresAt && link.expiresAt <= at ? 'expired' : 'open',
});

/** Every link of a site, also those that no longer work. @throws AppError not_found */
export async function siteShareLinks(tx: Tx, siteRef: string, at: Date): Promise<ShareLinks> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return {
    at: at.toISOString(),
    timeZone: site.timeZone,
    links: (await shareLinksOf(tx, site.id)).map((link) => item(link, at)),
  };
}

/**
 * Makes a link. Its address is in the answer and nowhere else: only a hash is kept.
 * @param origin where readers reach the product
 * @throws AppError not_found · invalid (field `endsOn`)
 */
export async function makeShareLink(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  wanted: ShareLinkBody,
  from: { at: Date; address: string; origin: string },
): Promise<MadeShareLink> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const expiresAt = wanted.endsOn === null ? null : await endOfDay(tx, site.timeZone, wanted.endsOn);
  if (expiresAt && expiresAt <= from.at) {
    const message = shareLinkRefusals.dayOver;
    throw new AppError('invalid', { message, fields: [{ field: 'endsOn', message }] });
  }
  const token = newToken();
  const link = await addShareLink(tx, {
    siteId: site.id,
    label: wanted.label,
    kiosk: wanted.kiosk,
    framedBy: wanted.framedBy,
    hash: tokenHash(token),
    createdBy: actor.personId,
    at: from.at,
    expiresAt,
  });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: from.address,
    action: 'share.made',
    subject: `shared page “${link.label}”`,
    siteId: site.id,
    after: { label: link.label, kiosk: link.kiosk, endsOn: wanted.endsOn, framedBy: wanted.framedBy },
  });
  return { link: item(link, from.at), address: `${from.origin}${paths.shared(token)}` };
}

/** Ends a link for good. @throws AppError not_found, also where it was ended before */
export async function withdrawShareLink(
  tx: Tx,
  actor: Actor,
  ref: string,
  at: Date,
  address: string,
): Promise<ShareLinkItem> {
  const link = await endShareLink(tx, ref, at);
  if (!link) throw new AppError('not_found', { message: shareLinkRefusals.endedBefore });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'share.ended',
    subject: `shared page “${link.label}”`,
    siteId: link.siteId,
    before: { label: link.label, kiosk: link.kiosk },
  });
  return item(link, at);
}

const gone = () =>
  new AppError('not_found', {
    message: shareLinkRefusals.notGood,
  });

/**
 * What somebody with a link sees, read as an actor who sees this one site and nothing else. Links that do not work
 * count as tries of an address; reads of one that works have a limit of their own, so that nobody's guesses darken a
 * screen behind the same connection.
 * @throws AppError not_found, in the same words for ended, run out and never made · too_many
 */
export async function sharedPage(token: string, at: Date, address: string): Promise<SharedSite> {
  const link = TOKEN_PATTERN.test(token)
    ? await asSignIn((tx) => openShareLink(tx, tokenHash(token), at))
    : undefined;
  if (!link) {
    await takeTokenTry(address);
    throw gone();
  }
  await takeSharedRead(link.id, address);
  return asActor({ organisationId: link.organisationId, sites: [link.siteId] }, async (tx) => {
    const ref = await siteRefOf(tx, link.siteId);
    if (!ref) throw gone();
    const { site, care, now, today, month, year, life } = await customerSite(tx, ref, at);
    return {
      name: site.name,
      timeZone: site.timeZone,
      organisation: care.organisation,
      kiosk: link.kiosk,
      framedBy: link.framedBy,
      now: { ...now, commands: now.commands.map(({ inForce, since }) => ({ inForce, since })) },
      today,
      month,
      year,
      life,
    };
  });
}
