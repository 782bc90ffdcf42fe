import { countInside, headingOf, WHAT_TO_DO } from '../../components/causes/finding';
import { GRAVITY } from '../../components/causes/words';
import { listed } from '../../drawings/numbers';
import type { CauseNow, SiteNow } from '../../schemas/api/now';
import { sharedCausesFinding } from '../../words/shared-causes';
import { fleetFindingWords } from '../../words/fleet';

export interface Finding {
  heading: string;
  sentence: string;
}

const sum = (sites: readonly SiteNow[], of: (site: SiteNow) => number): number =>
  sites.reduce((all, site) => all + of(site), 0);

/** How the rest of the fleet stands: "4,587 of 5,100 units pass, 48 are silent, 23 unheard". */
function standing(sites: readonly SiteNow[], told: CauseNow['verdict'] | null): string {
  const all = sum(sites, (s) => s.counts.units);
  // what passes against a command is told of by itself
  const passing = sum(sites, (s) => Math.max(0, s.counts.passing - s.counts.notShuttingDown));
  const stuck = told === 'stuck' ? 0 : sum(sites, (s) => s.counts.stuck);
  const stuckAt = sites.filter((s) => s.counts.stuck > 0);
  const unconfirmed = told === 'unconfirmed' ? 0 : sum(sites, (s) => s.counts.unconfirmed);
  const silent = told === 'silent' ? 0 : sum(sites, (s) => s.counts.silent);
  const unheard = sum(sites, (s) => s.counts.unheard);
  const dark = sum(sites, (s) => s.counts.dark);
  const mute = Math.max(
    0,
    all - sum(sites, ({ counts: c }) => c.passing + c.shutdown + c.silent + c.unheard + c.dark),
  );
  const parts = [
    passing === all && all > 0
      ? fleetFindingWords.allUnitsPass(all)
      : fleetFindingWords.ofUnitsPass(passing, all),
  ];
  if (stuck > 0)
    parts.push(
      fleetFindingWords.stuckInShutdownAt(
        stuck,
        stuckAt.length,
        stuckAt[0]?.name,
        countInside(stuckAt.length),
      ),
    );
  if (unconfirmed > 0) parts.push(fleetFindingWords.cantBeConfirmed(unconfirmed));
  if (silent > 0) parts.push(fleetFindingWords.areSilent(silent));
  if (unheard > 0) parts.push(fleetFindingWords.unheard(unheard));
  if (dark > 0) parts.push(fleetFindingWords.inTheDark(dark));
  if (mute > 0) parts.push(fleetFindingWords.nothingThemselves(mute));
  const held = sites.filter((s) => s.inShutdownSince !== null);
  if (held.length > 0 && held.length <= 2)
    parts.push(fleetFindingWords.inShutdownOnPurpose(listed(held.map((s) => s.name)), held.length));
  else if (held.length > 2) parts.push(fleetFindingWords.sitesAreInShutdown(countInside(held.length)));
  const last = parts.pop() ?? '';
  return parts.length === 0
    ? last
    : `${parts.join(', ')}${parts.length > 1 ? fleetFindingWords.and : ' and '}${last}`;
}

/** The fleet's finding: the gravest thing that holds, as a heading, and one sentence on what follows. */
export function fleetFinding(sites: readonly SiteNow[], causes: readonly CauseNow[]): Finding {
  if (sites.length === 0)
    return {
      heading: fleetFindingWords.noSiteIsSet,
      sentence: fleetFindingWords.sitesAppearHereAs,
    };
  const worst = GRAVITY.find((verdict) => causes.some((c) => c.verdict === verdict));
  const away = sites.filter((s) => !s.loggerConnected);
  if (worst) {
    const ofIt = causes.filter((c) => c.verdict === worst);
    const names = new Set(ofIt.map((c) => c.siteName));
    const there = names.size === 1 ? 'there' : sharedCausesFinding.atNamed([...names]);
    const others = sites.filter((s) => !ofIt.some((c) => c.siteId === s.id));
    const what = WHAT_TO_DO[worst](there);
    return {
      heading: headingOf(worst, ofIt),
      sentence:
        others.length === 0 ? what : fleetFindingWords.thereElsewhereSites(what, standing(others, worst)),
    };
  }
  if (away.length > 0)
    return {
      heading:
        away.length === 1
          ? fleetFindingWords.doesNotReport(away[0]?.name)
          : fleetFindingWords.ofSitesDoNot(away.length, sites.length),
      sentence: fleetFindingWords.nothingNewerIsKnown(away.length, standing(sites, null)),
    };
  const text = standing(sites, null);
  return {
    heading: fleetFindingWords.nothingNeedsAttention,
    sentence: `${text.charAt(0).toUpperCase()}${text.slice(1)}.`,
  };
}
