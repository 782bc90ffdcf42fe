import { concerned } from '../../components/causes/places';
import { GRAVITY } from '../../components/causes/words';
import { countAtStart, listed, number } from '../../drawings/numbers';
import type { CauseNow, SiteNow } from '../../schemas/api/now';

export interface Finding {
  heading: string;
  sentence: string;
}

const word = (n: number): string => countAtStart(n).toLowerCase();
const units = (n: number): string => (n === 1 ? 'unit' : 'units');

/** "Two units", "One string", "Two units and one string". */
function subject(of: { units: number; strings: number }): string {
  const parts: string[] = [];
  if (of.units > 0) parts.push(`${countAtStart(of.units)} ${units(of.units)}`);
  if (of.strings > 0) {
    const count = parts.length === 0 ? countAtStart(of.strings) : word(of.strings);
    parts.push(`${count} ${of.strings === 1 ? 'string' : 'strings'}`);
  }
  return parts.join(' and ');
}

/** "at Kestrel Row School", "at two sites". */
function place(causes: readonly CauseNow[]): string {
  const names = new Map(causes.map((c) => [c.siteId, c.siteName]));
  return names.size === 1 ? `at ${[...names.values()][0]}` : `at ${word(names.size)} sites`;
}

const total = (causes: readonly CauseNow[]) => concerned(causes.flatMap((c) => c.units));

function headingOf(verdict: CauseNow['verdict'], causes: readonly CauseNow[]): string {
  const of = total(causes);
  const single = of.units + of.strings === 1;
  const who = `${subject(of)} ${place(causes)}`;
  switch (verdict) {
    case 'not_shutting_down':
      return `${who} did not shut down`;
    case 'stuck':
      return of.units === 0
        ? `${who} ${single ? 'has' : 'have'} units stuck in shutdown`
        : `${who} ${single ? 'is' : 'are'} stuck in shutdown`;
    case 'unconfirmed':
      return `The shutdown of ${lowerFirst(subject(of))} ${place(causes)} can't be confirmed`;
    case 'silent':
      return `${who} ${single ? 'is' : 'are'} silent`;
  }
}
const lowerFirst = (text: string): string => text.charAt(0).toLowerCase() + text.slice(1);

const WHAT_TO_DO: Record<CauseNow['verdict'], (at: string) => string> = {
  not_shutting_down: (at) => `Treat every string ${at} as live and call the site.`,
  stuck: (at) => `They hold back power ${at}; the causes below say which part they share.`,
  unconfirmed: (at) => `Treat their strings ${at} as live until a rated meter shows otherwise.`,
  silent: (at) => `Whether they follow a shutdown ${at} can't be confirmed until they are heard again.`,
};

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
        stuckAt.length === 1 ? stuckAt[0]?.name : `${word(stuckAt.length)} sites`
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
  else if (held.length > 2) parts.push(`${word(held.length)} sites are in shutdown on purpose`);
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
