import type { Actor } from '../../domain/access/permissions';
import type { AcknowledgeReply } from '../../schemas/api/fleet';
import type { CauseNow } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { acknowledgementsOf, addAcknowledgement, contactsOf } from '../queries/fleet';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { openHazard, takeOnHazards } from '../queries/causes-list';
import { visibleSite, type VisibleSite } from '../queries/visible-site';
import { causesNow } from './causes';
import { acknowledgeRefusals } from '../../words/refusals-cases';

export interface AcknowledgeCall {
  site: string;
  key: string;
  /** The name that is put to it. */
  person: string;
  address: string | null;
}

/**
 * Puts a person's name to a cause that holds now: an event of the site and an audit entry, neither of which is ever
 * changed. Who has it already keeps it; the second person is told so by name.
 * @throws AppError not_found for a site that the actor may not see, conflict when the cause has ended
 */
export async function acknowledge(
  tx: Tx,
  actor: Actor,
  call: AcknowledgeCall,
  at: Date,
): Promise<AcknowledgeReply> {
  const site = await visibleSite(tx, call.site);
  if (!site) throw new AppError('not_found', { message: acknowledgeRefusals.noSuchSite });
  const now = await causesNow(tx, at, [site.id]);
  const cause = now.find((c) => c.key === call.key) ?? (await storedHazard(tx, site, call.key));
  if (!cause)
    throw new AppError('conflict', {
      message: acknowledgeRefusals.endedMeanwhile,
    });
  const contact = (await contactsOf(tx, [site.id]))[0];
  if (!contact) throw new AppError('not_found', { message: acknowledgeRefusals.noSuchSite });
  const already = (await acknowledgementsOf(tx, [cause]))[0];
  if (already) return { acknowledgement: already, contact };

  await addAcknowledgement(tx, {
    siteId: site.id,
    at,
    key: cause.key,
    headline: cause.headline,
    person: call.person,
  });
  await takeOnHazards(
    tx,
    site.id,
    cause.units.map((u) => `${u.stringId} ${u.position ?? ''}`),
    { id: actor.personId, at },
  );
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: call.address,
    action: 'hazard.acknowledge',
    subject: `site ${site.ref}`,
    after: { key: cause.key, headline: cause.headline, person: call.person },
  });
  await tellSiteChanged(tx, site.id);
  return {
    acknowledgement: { key: cause.key, siteId: site.ref, at: at.toISOString(), person: call.person },
    contact,
  };
}

/** A hazard that stands on record though nobody sees it at this moment: it may be taken on from its own page. */
async function storedHazard(tx: Tx, site: VisibleSite, key: string): Promise<Acknowledged | undefined> {
  const row = await openHazard(tx, site.id, key);
  return row && { ...row, key, siteId: site.ref, since: row.since.toISOString() };
}
type Acknowledged = Pick<CauseNow, 'key' | 'siteId' | 'headline' | 'since' | 'units'>;
