import type { Actor } from '../../domain/access/permissions';
import { readSerial } from '../../domain/commissioning/import/serial';
import type { HistoryPage } from '../../schemas/api/as-built';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { historyItems, historyPeople, staysOf, type HistoryFilter } from '../queries/as-built-history';
import { stringNames } from '../queries/string-facts';
import { visibleSite } from '../queries/visible-site';

/**
 * The history of a site's as-built, newest first; where the search is a serial, with that unit's whole life.
 * @throws AppError not_found
 */
export async function historyPage(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  filter: HistoryFilter,
  at: Date,
): Promise<HistoryPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const items = await historyItems(tx, site.id, { ...filter, limit: filter.limit + 1 });
  const shown = items.slice(0, filter.limit);
  const read = readSerial(filter.find);
  return {
    at: at.toISOString(),
    site: { id: site.ref, name: site.name, timeZone: site.timeZone },
    items: shown,
    before: items.length > filter.limit ? (shown.at(-1)?.id ?? null) : null,
    stays:
      read.kind === 'serial' && filter.before === undefined
        ? await staysOf(tx, actor.organisationId, read.serial)
        : [],
    people: await historyPeople(tx, site.id),
    strings: await stringNames(tx, site.id),
  };
}
