import { countInside, headingOf, WHAT_TO_DO } from '../../components/causes/finding';
import { GRAVITY } from '../../components/causes/words';
import { countAtStart, listed, number } from '../../drawings/numbers';
import type { CauseNow, SiteNow } from '../../schemas/api/now';

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
      ? `all ${number(all)} units pass`
      : `${number(passing)} of ${number(all)} units pass`,
  ];
  if (stuck > 0)
    parts.push(
      `${number(stuck)} ${stuck === 1 ? 'is' : 'are'} stuck in shutdown at ${
        stuckAt.length === 1 ? stuckAt[0]?.name : `${countInside(stuckAt.length)} sites`
      }`,
    );
  if (unconfirmed > 0) parts.push(`${number(unconfirmed)} can't be confirmed`);
  if (silent > 0) parts.push(`${number(silent)} ${silent === 1 ? 'is' : 'are'} silent`);
  if (unheard > 0) parts.push(`${number(unheard)} unheard`);
  if (dark > 0) parts.push(`${number(dark)} in the dark`);
  if (mute > 0) parts.push(`${number(mute)} ${mute === 1 ? 'tells' : 'tell'} nothing themselves`);
  const held = sites.filter((s) => s.inShutdownSince !== null);
  if (held.length > 0 && held.length <= 2)
    parts.push(
      `${listed(held.map((s) => s.name))} ${held.length === 1 ? 'is' : 'are'} in shutdown on purpose`,
    );
  else if (held.length > 2) parts.push(`${countInside(held.length)} sites are in shutdown on purpose`);
  const last = parts.pop() ?? '';
  return parts.length === 0 ? last : `${parts.join(', ')}${parts.length > 1 ? ', and ' : ' and '}${last}`;
}

/** The fleet's finding: the gravest thing that holds, as a heading, and one sentence on what follows. */
export function fleetFinding(sites: readonly SiteNow[], causes: readonly CauseNow[]): Finding {
  if (sites.length === 0)
    return {
      heading: 'No site is set up yet',
      sentence: 'Sites appear here as soon as their plant is entered.',
    };
  const worst = GRAVITY.find((verdict) => causes.some((c) => c.verdict === verdict));
  const away = sites.filter((s) => !s.loggerConnected);
  if (worst) {
    const ofIt = causes.filter((c) => c.verdict === worst);
    const names = new Set(ofIt.map((c) => c.siteName));
    const there =
      names.size === 1 ? 'there' : `at ${listed([...names].slice(0, 3))}${names.size > 3 ? ' and more' : ''}`;
    return {
      heading: headingOf(worst, ofIt),
      sentence: `${WHAT_TO_DO[worst](there)} Elsewhere ${standing(sites, worst)}.`,
    };
  }
  if (away.length > 0)
    return {
      heading:
        away.length === 1
          ? `${away[0]?.name} does not report`
          : `${countAtStart(away.length)} of ${number(sites.length)} sites do not report`,
      sentence: `Nothing newer is known of ${away.length === 1 ? 'it' : 'them'}. By the last reports ${standing(sites, null)}.`,
    };
  const text = standing(sites, null);
  return { heading: 'Nothing needs attention', sentence: `${text.charAt(0).toUpperCase()}${text.slice(1)}.` };
}
