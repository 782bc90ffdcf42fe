import { commissioningSteps } from '../../domain/commissioning/steps';
import type { SiteSteps } from '../../schemas/api/commissioning';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { commissioningFacts, lastHands, stepStarts } from '../queries/commissioning-facts';
import { sitesCommissioned } from '../queries/commissioning';
import { visibleSite, type VisibleSite } from '../queries/visible-site';

type Named = Pick<VisibleSite, 'id' | 'ref' | 'name' | 'place' | 'timeZone' | 'stage'>;

async function stepsOfSites(tx: Tx, sites: readonly Named[]): Promise<SiteSteps[]> {
  const ids = sites.map((s) => s.id);
  if (ids.length === 0) return [];
  const facts = await commissioningFacts(tx, ids);
  const hands = await lastHands(tx, ids);
  const starts = await stepStarts(tx, ids);
  return sites.flatMap((site) => {
    const known = facts.get(site.id);
    if (!known) return [];
    const hand = hands.get(site.id);
    return [
      {
        id: site.ref,
        name: site.name,
        place: site.place,
        timeZone: site.timeZone,
        stage: site.stage,
        units: known.strings.reduce((n, s) => n + s.slots, 0),
        strings: known.strings.length,
        rollCallRunning: known.rollCallRunning,
        steps: commissioningSteps(known).map((step) => ({
          ...step,
          startedAt: starts.get(site.id)?.[step.key]?.toISOString() ?? null,
        })),
        lastHand: hand ? { person: hand.person, at: hand.at.toISOString() } : null,
      },
    ];
  });
}

/** Every site under way, by name: what stands of each step, what blocks it, who is on it. */
export async function sitesAndTheirSteps(tx: Tx): Promise<SiteSteps[]> {
  return stepsOfSites(tx, await sitesCommissioned(tx));
}

/**
 * The steps of one site, whatever its stage.
 * @throws AppError not_found
 */
export async function siteAndItsSteps(tx: Tx, siteRef: string): Promise<SiteSteps> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return found((await stepsOfSites(tx, [site]))[0], 'site');
}
