import { groupedBy } from '../../domain/grouped-by';
import type { FleetView } from '../../schemas/api/fleet';
import type { CauseNow, SiteNow } from '../../schemas/api/now';
import { asksForSomebody, concernedAt, needOf, urgency, type Need } from './need';

export interface FleetLine {
  site: SiteNow;
  causes: readonly CauseNow[];
  need: Need;
  /** How much is concerned. */
  concerned: number;
}

const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });

/** Unknown figures come last whichever way one sorts. */
function byFigure(a: number | null, b: number | null, order: FleetView['order']): number {
  if (a === null || b === null) return a === b ? 0 : a === null ? 1 : -1;
  return order === 'down' ? b - a : a - b;
}

const SORT: Record<FleetView['sort'], (a: FleetLine, b: FleetLine, order: FleetView['order']) => number> = {
  need: (a, b, order) => {
    const gap = urgency(a.need) - urgency(b.need) || b.concerned - a.concerned;
    return order === 'down' ? gap : -gap;
  },
  name: (a, b, order) => byName.compare(a.site.name, b.site.name) * (order === 'down' ? 1 : -1),
  stage: (a, b, order) => a.site.stage.localeCompare(b.site.stage) * (order === 'down' ? 1 : -1),
  units: (a, b, order) => byFigure(a.site.counts.units, b.site.counts.units, order),
  ratio: (a, b, order) => byFigure(a.site.performanceRatio30d, b.site.performanceRatio30d, order),
  power: (a, b, order) => byFigure(a.site.power, b.site.power, order),
};

const NONE: readonly CauseNow[] = [];
const grouped = new WeakMap<readonly CauseNow[], Map<string, CauseNow[]>>();
function causesBySite(causes: readonly CauseNow[]): Map<string, CauseNow[]> {
  const known = grouped.get(causes);
  if (known) return known;
  const made = groupedBy(causes, (cause) => cause.siteId);
  grouped.set(causes, made);
  return made;
}

const lines = new WeakMap<SiteNow, FleetLine>();
/** The same object while nothing came for its site: its row is then not drawn again. */
function lineOf(site: SiteNow, causes: readonly CauseNow[]): FleetLine {
  const known = lines.get(site);
  if (known?.causes === causes) return known;
  const line = { site, causes, need: needOf(site, causes), concerned: concernedAt(site, causes) };
  lines.set(site, line);
  return line;
}

/** The lines of the fleet's table for a view: filtered, searched, sorted; names settle what is equal. */
export function fleetLines(
  sites: readonly SiteNow[],
  causes: readonly CauseNow[],
  view: FleetView,
): FleetLine[] {
  const ofSite = causesBySite(causes);
  const wanted = view.q.toLowerCase();
  return sites
    .map((site) => lineOf(site, ofSite.get(site.id) ?? NONE))
    .filter(
      ({ site, need }) =>
        (view.stage === 'any' || site.stage === view.stage) &&
        (view.show !== 'attention' || asksForSomebody(need)) &&
        (view.show !== 'shutdown' || site.inShutdownSince !== null || site.commands.length > 0) &&
        (wanted === '' || `${site.name} ${site.place}`.toLowerCase().includes(wanted)),
    )
    .sort((a, b) => SORT[view.sort](a, b, view.order) || byName.compare(a.site.name, b.site.name));
}
