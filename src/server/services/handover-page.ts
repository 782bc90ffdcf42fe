import type { HandoverPage } from '../../schemas/api/handover';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { customersOf, packsOf } from '../queries/handover';
import { visibleSite } from '../queries/visible-site';
import { siteAndItsSteps } from './commissioning';
import { packItem } from './make-handover';

/**
 * How the handover of a site stands.
 * @throws AppError not_found
 */
export async function handoverPage(tx: Tx, siteRef: string, at: Date): Promise<HandoverPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return {
    at: at.toISOString(),
    site: await siteAndItsSteps(tx, siteRef),
    packs: (await packsOf(tx, site.id)).map(packItem),
    customers: (await customersOf(tx, site.id)).map((c) => c.name),
  };
}
