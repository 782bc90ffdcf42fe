import { currentStep, openGaps } from '../../domain/commissioning/steps';
import { countAtStart, counted, number } from '../../drawings/numbers';
import type { SiteSteps, UnderWayView } from '../../schemas/api/commissioning';

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
  if (sites.length === 0) return 'No site is being commissioned';
  const [only] = running;
  if (only && running.length === 1) {
    const roll = only.steps.find((s) => s.key === 'roll_call');
    return `The roll call is running at ${only.name}${roll ? `: ${roll.words}` : ''}`;
  }
  if (running.length > 1) return `Roll calls are running at ${counted(running.length, 'site')}`;
  return sites.length === 1
    ? 'One site is being commissioned'
    : `${number(sites.length)} sites are being commissioned`;
}

const LIVE_UNTIL_MEASURED = 'Reports prove nothing dead: isolate and measure before touching a conductor.';
/** Whether every unit that can answer has. */
export const rollCalled = (site: SiteSteps): boolean =>
  site.steps.every((s) => s.key !== 'roll_call' || s.state === 'done');

/** The heading of one site's page. */
export function siteHeading(site: SiteSteps): { finding: string; sentence: string } {
  const gaps = openGaps(site.steps);
  const done = site.steps.filter((s) => s.state === 'done').length;
  if (site.steps.every((s) => s.state === 'done'))
    return {
      finding: `${site.name} is handed over`,
      sentence: 'Its papers stay here; a later change makes a new version.',
    };
  if (gaps.length === 0)
    return {
      finding: `${site.name} is ready to be handed over`,
      sentence: 'Every step before it is done, or its gaps are accepted by name.',
    };
  return {
    finding: `${countAtStart(done)} of ${counted(site.steps.length, 'step')} ${done === 1 ? 'is' : 'are'} done`,
    sentence: `${counted(gaps.length, 'point blocks', 'points block')} the handover. ${rollCalled(site) ? LIVE_UNTIL_MEASURED : 'Until the roll call is complete, treat every string as live.'}`,
  };
}
