import type { SiteCondition } from '../../domain/causes/site';
import type { Tx } from '../db/transaction';
import { addSiteEvents, type CauseSiteFacts } from '../queries/causes-stored';
import { gatewaysOf, markGateways } from '../queries/gateways';
import { keptWithEvents } from '../../words/domain-verdicts-events';

/**
 * Gateways that nobody is heard through while their units should speak, and those that are heard again: an event each,
 * once. A gateway whose units are all dark is no news: the night silences them. Of one whose logger is cut off nothing is
 * known.
 */
export async function judgeGateways(
  tx: Tx,
  site: CauseSiteFacts,
  condition: SiteCondition,
  at: Date,
): Promise<number> {
  const atS = at.getTime() / 1000;
  const limitS = 3 * condition.reportIntervalS;
  const reached = new Map<string, { units: number; silent: number }>();
  for (const string of condition.strings)
    for (const slot of string.slots) {
      if (slot.gateway === null) continue;
      const of = reached.get(slot.gateway) ?? { units: 0, silent: 0 };
      of.units++;
      if (slot.state === 'silent') of.silent++;
      reached.set(slot.gateway, of);
    }
  const gateways = await gatewaysOf(tx, site.id);
  const cutOff = new Set(condition.loggers.filter((l) => !l.connected).map((l) => l.name));
  const fallen: { id: number; name: string; units: number; sinceS: number }[] = [];
  const back: { id: number; name: string; sinceS: number }[] = [];
  for (const g of gateways) {
    const lastS = g.lastHeardS;
    if (lastS === null) continue;
    const of = reached.get(g.name);
    if (g.silentSinceS === null) {
      if (!cutOff.has(g.logger) && atS - lastS >= limitS && of && of.silent > 0 && of.silent === of.units)
        fallen.push({ id: g.id, name: g.name, units: of.units, sinceS: lastS });
    } else if (lastS > g.silentSinceS) back.push({ id: g.id, name: g.name, sinceS: lastS });
  }
  // a site under construction has gateways that come and go: said when it is built
  const told = site.stage === 'operating' ? fallen : [];
  if (told.length + back.length === 0) return 0;
  await markGateways(tx, [
    ...told.map((g) => ({ id: g.id, silentSinceS: g.sinceS })),
    ...back.map((g) => ({ id: g.id, silentSinceS: null })),
  ]);
  await addSiteEvents(tx, site, [
    ...told.map((g) => ({
      at: new Date(g.sinceS * 1000),
      kind: 'gateway_silent',
      stringRef: null,
      detail: {
        gateway: g.name,
        units: g.units,
        follows: keptWithEvents.unitsOfSilentGateway,
      },
    })),
    ...back.map((g) => ({
      at: new Date(g.sinceS * 1000),
      kind: 'gateway_back',
      stringRef: null,
      detail: { gateway: g.name, units: reached.get(g.name)?.units ?? 0 },
    })),
  ]);
  return told.length + back.length;
}
