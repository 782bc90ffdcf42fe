import { concerned } from '../../components/causes/places';
import { siteClock } from '../../components/ui/reader-zone';
import type { CauseNow, SiteNow } from '../../schemas/api/now';
import { fleetNeed } from '../../words/fleet';

/** What of a site asks for somebody, gravest first; what is lower in this list is worse. */
export type Need =
  | 'not_shutting_down'
  | 'stuck'
  | 'unconfirmed'
  | 'no_report'
  | 'silent'
  | 'unheard'
  | 'in_shutdown'
  | 'nothing';
const ORDER: readonly Need[] = [
  'not_shutting_down',
  'stuck',
  'unconfirmed',
  'no_report',
  'silent',
  'unheard',
  'in_shutdown',
  'nothing',
];

/** Units that hang on something besides the site's own counts: strings whose positions are unknown. */
const stringLevel = (causes: readonly CauseNow[], verdict: CauseNow['verdict']): number =>
  causes.filter((c) => c.verdict === verdict).reduce((sum, c) => sum + concerned(c.units).strings, 0);

/** The gravest need of a site. `causes`: those of this site. */
export function needOf(site: SiteNow, causes: readonly CauseNow[]): Need {
  const { counts } = site;
  const has = (verdict: CauseNow['verdict']) => causes.some((c) => c.verdict === verdict);
  if (counts.notShuttingDown > 0 || has('not_shutting_down')) return 'not_shutting_down';
  if (counts.stuck > 0 || has('stuck')) return 'stuck';
  if (counts.unconfirmed > 0 || has('unconfirmed')) return 'unconfirmed';
  if (!site.loggerConnected) return 'no_report';
  if (counts.silent > 0 || site.silentGateways > 0) return 'silent';
  if (counts.unheard > 0) return 'unheard';
  if (site.inShutdownSince || site.commands.length > 0) return 'in_shutdown';
  return 'nothing';
}

/** Roll call under way and shutdown on purpose are work in hand: they ask for nobody. */
export const asksForSomebody = (need: Need): boolean => ORDER.indexOf(need) < ORDER.indexOf('unheard');

/** Lower is more urgent. */
export const urgency = (need: Need): number => ORDER.indexOf(need);

/** How much is concerned, to order sites of one need. */
export function concernedAt(site: SiteNow, causes: readonly CauseNow[]): number {
  const { counts } = site;
  return (
    counts.notShuttingDown +
    counts.stuck +
    counts.unconfirmed +
    counts.silent +
    counts.unheard +
    causes.reduce((sum, c) => sum + concerned(c.units).strings, 0)
  );
}

/** ", one cause" where a single explanation stands behind several units. */
function behind(causes: readonly CauseNow[], verdict: CauseNow['verdict'], units: number): string {
  const ofIt = causes.filter((c) => c.verdict === verdict);
  if (ofIt.length !== 1 || units < 2) return '';
  const part = ofIt[0]?.sharedPart;
  return part && part.kind !== 'unit' ? fleetNeed.oneKind(part.kind) : fleetNeed.oneCause;
}

/**
 * What is open at a site, for a table's cell: "23 unheard · 2 stuck", "nothing". Times in the site's zone, which is named
 * unless the reader's clock shows the same.
 */
export function openAt(
  site: SiteNow,
  causes: readonly CauseNow[],
  now: Date,
  readerZone: string | null,
): string {
  const { counts } = site;
  const parts: string[] = [];
  const stringsLive = stringLevel(causes, 'not_shutting_down');
  const stringsStuck = stringLevel(causes, 'stuck');
  if (counts.notShuttingDown > 0) parts.push(fleetNeed.didNotShutDown(counts.notShuttingDown));
  if (stringsLive > 0) parts.push(fleetNeed.stringsLive11String(stringsLive));
  if (counts.stuck > 0)
    parts.push(fleetNeed.stuckCauses(counts.stuck, behind(causes, 'stuck', counts.stuck)));
  if (stringsStuck > 0) parts.push(fleetNeed.stringsStuck11String(stringsStuck));
  if (counts.unconfirmed > 0) parts.push(fleetNeed.unconfirmed(counts.unconfirmed));
  if (counts.silent > 0)
    parts.push(fleetNeed.silentCauses(counts.silent, behind(causes, 'silent', counts.silent)));
  if (counts.unheard > 0) parts.push(fleetNeed.unheard(counts.unheard));
  if (!site.loggerConnected)
    parts.push(
      site.reportedAt
        ? fleetNeed.noReportSince(siteClock(site.reportedAt, now, site.timeZone, readerZone))
        : fleetNeed.hasNotReportedYet,
    );
  if (site.inShutdownSince)
    parts.push(fleetNeed.inShutdownSince(siteClock(site.inShutdownSince, now, site.timeZone, readerZone)));
  else
    for (const where of [...new Set(site.commands.map((c) => c.where))].slice(0, 2))
      parts.push(fleetNeed.inShutdown(where));
  return parts.length > 0 ? parts.join(' · ') : 'nothing';
}
