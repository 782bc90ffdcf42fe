import { commissioningSteps } from '../../domain/commissioning/steps';
import type { Actor } from '../../domain/access/permissions';
import type { AcceptGap } from '../../schemas/api/commissioning';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { addAcceptedGap } from '../queries/handover';
import { commissioningFacts } from '../queries/commissioning-facts';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { visibleSite } from '../queries/visible-site';
import { acceptGapRefusals } from '../../words/refusals-as-built';

/**
 * A manager lets a point stand open, by name and with a reason. It stays in view and goes into the pack.
 * @throws AppError not_found · conflict where the point is no more, or is accepted already
 */
export async function acceptGap(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  { gap: key, reason }: AcceptGap,
  address: string | null,
): Promise<void> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const facts = found((await commissioningFacts(tx, [site.id])).get(site.id), 'site');
  const step = commissioningSteps(facts).find((s) => s.gaps.some((g) => g.key === key));
  const gap = step?.gaps.find((g) => g.key === key);
  if (!step || !gap)
    throw new AppError('conflict', {
      message: acceptGapRefusals.settledMeanwhile,
    });
  if (gap.accepted) throw new AppError('conflict', { message: acceptGapRefusals.acceptedAlready });
  await addAcceptedGap(tx, {
    siteId: site.id,
    step: step.key,
    gap: key,
    words: gap.words,
    reason,
    personId: actor.personId,
  });
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    action: 'commissioning.gap_accepted',
    subject: `site ${site.ref}`,
    siteId: site.id,
    reason,
    after: { gap: key, words: gap.words },
  });
  await tellSiteChanged(tx, site.id);
}
