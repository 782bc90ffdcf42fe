import type { Actor } from '../../domain/access/permissions';
import { checkPart } from '../../domain/commissioning/as-built/check-part';
import type { PartValues } from '../../schemas/api/as-built';
import type { Tx } from '../db/transaction';
import { insertPart, insertSite } from '../queries/as-built-parts';
import { addAuditEntry } from '../queries/people';
import { inWords, refuseFaults } from './as-built-words';
import { faultsAt, tellAll } from './edit-as-built';
import { newSiteNames } from '../../words/refusals-as-built';

/** What a new site begins with, so that strings have a zone to be in. */
export const FIRST_INITIATOR = newSiteNames.mainInitiator;
export const FIRST_ZONE = newSiteNames.wholeSite;

/**
 * A new site in the stage commissioning, with one initiator at the shutdown switch and one zone for the whole of it.
 * @throws AppError invalid · conflict (the name is taken), with fields `values.KEY`
 */
export async function createSite(
  tx: Tx,
  actor: Actor,
  given: PartValues,
  address: string | null,
): Promise<{ id: string; siteId: number }> {
  const checked = checkPart('site', given);
  if (checked.faults) refuseFaults(faultsAt('values.', checked.faults));
  const values = checked.values ?? {};
  const made = await inWords('values.', () => insertSite(tx, actor.organisationId, values));
  const initiator = await insertPart(tx, 'initiator', {
    site_id: made.id,
    name: FIRST_INITIATOR,
    place: values.shutdownSwitchPlace,
  });
  await insertPart(tx, 'zone', { site_id: made.id, name: FIRST_ZONE, initiator_id: initiator.id });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'as_built.site_added',
    subject: `site ${made.ref}`,
    siteId: made.id,
    after: { of: String(values.name), ...values, source: 'forms' },
  });
  await tellAll(tx, made.id);
  return { id: made.ref, siteId: made.id };
}
