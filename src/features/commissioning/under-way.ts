import { currentStep, openGaps } from '../../domain/commissioning/steps';
import type { SiteSteps, UnderWayView } from '../../schemas/api/commissioning';
import { underWay } from '../../words/commissioning';

export const UNDER_WAY_DEFAULTS: UnderWayView = { q: '', step: 'all', sort: 'name' };

const DAY_MS = 86_400_000;
const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });

/** Whole days since the step that is worked on began; null: it has not. */
export function daysInStep(site: SiteSteps, at: string): number | null {
  const started = currentStep(site.steps)?.startedAt;
  if (!started) return null;
  return Math.max(0, Math.floor((Date.parse(at) - Date.parse(started)) / DAY_MS));
}

/** The sites of a view: filtered and sorted; names settle what is equal. */
export function listedSites(sites: readonly SiteSteps[], view: UnderWayView, at: string): SiteSteps[] {
  const words = view.q.trim().toLocaleLowerCase();
  const rank: Record<UnderWayView['sort'], (site: SiteSteps) => number> = {
    name: () => 0,
    days: (site) => -(daysInStep(site, at) ?? -1),
    blocks: (site) => -openGaps(site.steps).length,
  };
  return sites
    .filter((site) => view.step === 'all' || currentStep(site.steps)?.key === view.step)
    .filter((site) =>
      `${site.name} ${site.place} ${site.lastHand?.person ?? ''}`.toLocaleLowerCase().includes(words),
    )
    .sort((a, b) => rank[view.sort](a) - rank[view.sort](b) || byName.compare(a.name, b.name));
}

/** The heading of the list of sites under way. */
export function underWayHeading(sites: readonly SiteSteps[]): string {
  const running = sites.filter((s) => s.rollCallRunning);
  if (sites.length === 0) return underWay.noSiteIsBeing;
  const [only] = running;
  if (only && running.length === 1) {
    const roll = only.steps.find((s) => s.key === 'roll_call');
    return underWay.theRollCallIs(only.name, roll ? `: ${roll.words}` : '');
  }
  if (running.length > 1) return underWay.rollCallsAreRunning(running.length);
  return sites.length === 1 ? underWay.oneSiteIsBeing : underWay.sitesAreBeingCommissioned(sites.length);
}

const LIVE_UNTIL_MEASURED = underWay.reportsProveNothingDead;
/** Whether every unit that can answer has. */
export const rollCalled = (site: SiteSteps): boolean =>
  site.steps.every((s) => s.key !== 'roll_call' || s.state === 'done');

/** The heading of one site's page. */
export function siteHeading(site: SiteSteps): { finding: string; sentence: string } {
  const gaps = openGaps(site.steps);
  const done = site.steps.filter((s) => s.state === 'done').length;
  if (site.steps.every((s) => s.state === 'done'))
    return {
      finding: underWay.isHandedOver(site.name),
      sentence: underWay.itsPapersStayHere,
    };
  if (gaps.length === 0)
    return {
      finding: underWay.isReadyToBe(site.name),
      sentence: underWay.everyStepBeforeIt,
    };
  return {
    finding: underWay.ofDone(done, site.steps.length),
    sentence: underWay.theHandover(gaps.length, rollCalled(site), LIVE_UNTIL_MEASURED),
  };
}
