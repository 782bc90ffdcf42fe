import type { RollCallPage } from '../../schemas/api/roll-call';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import {
  answersOf,
  latestRollCall,
  loggersOf,
  reportIntervalOf,
  typesPassingUntilHeard,
} from '../queries/roll-call';
import { visibleSite } from '../queries/visible-site';
import { siteAndItsSteps } from './commissioning';
import { gatewaysNow, stringsNow } from '../queries/now';
import { sitesNow } from '../queries/sites-now';

/**
 * The roll call of a site as it stands.
 * @throws AppError not_found
 */
export async function rollCallPage(tx: Tx, siteRef: string, at: Date): Promise<RollCallPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const [now] = await sitesNow(tx, at, [site.id]);
  return {
    at: at.toISOString(),
    site: { id: site.ref, name: site.name, place: site.place, timeZone: site.timeZone, stage: site.stage },
    run: (await latestRollCall(tx, site.id)) ?? null,
    strings: await stringsNow(tx, at, { siteId: site.id }),
    answers: await answersOf(tx, site.id),
    gateways: await gatewaysNow(tx, at, site.id),
    reportIntervalS: await reportIntervalOf(tx, site.id),
    loggers: await loggersOf(tx, site.id, at),
    commands: now?.commands ?? [],
    steps: (await siteAndItsSteps(tx, siteRef)).steps,
    passesUntilHeard: await typesPassingUntilHeard(tx, site.id),
  };
}
