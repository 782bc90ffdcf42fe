import type { EventsPage, SitePage } from '../../schemas/api/site';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { acknowledgementsOf } from '../queries/fleet';
import { gatewaysNow, invertersNow, stringsNow } from '../queries/now';
import { eventsOfSite, loggersNow, siteFacts, zonesNow, type EventsWanted } from '../queries/site';
import { sitesNow } from '../queries/sites-now';
import { visibleSite } from '../queries/visible-site';
import { causesNow } from './causes';
import { sitePageRefusals } from '../../words/refusals-cases';

const noSuchSite = () => new AppError('not_found', { message: sitePageRefusals.noSuchSite });

/**
 * Everything that a site's page shows now. A fixed number of statements, however many strings.
 * @throws AppError not_found alike for what does not exist and what is another organisation's
 */
export async function readSite(tx: Tx, ref: string, at: Date): Promise<SitePage> {
  const facts = await siteFacts(tx, ref);
  if (!facts) throw noSuchSite();
  const site = (await sitesNow(tx, at, [facts.id]))[0];
  if (!site) throw noSuchSite();
  const causes = await causesNow(tx, at, [facts.id]);
  return {
    at: at.toISOString(),
    site,
    contact: {
      siteId: facts.ref,
      name: facts.contactName,
      phone: facts.contactPhone,
      shutdownSwitchPlace: facts.shutdownSwitchPlace,
    },
    ruleSet: facts.ruleSet,
    switchedOnOn: facts.switchedOnOn,
    strings: await stringsNow(tx, at, { siteId: facts.id }),
    inverters: await invertersNow(tx, at, facts.id),
    gateways: await gatewaysNow(tx, at, facts.id),
    loggers: await loggersNow(tx, facts.id),
    zones: await zonesNow(tx, facts.id),
    causes,
    acknowledgements: await acknowledgementsOf(tx, causes),
    rollCall: facts.rollCall,
    lastShutdownTest: facts.lastShutdownTest,
  };
}

/** @throws AppError not_found as `readSite` */
export async function readEvents(tx: Tx, ref: string, wanted: EventsWanted): Promise<EventsPage> {
  const site = await visibleSite(tx, ref);
  if (!site) throw noSuchSite();
  return eventsOfSite(tx, site.id, wanted);
}
