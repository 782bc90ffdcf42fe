import { countInside, subject, total, WHAT_TO_DO } from '../../components/causes/finding';
import { GRAVITY } from '../../components/causes/words';
import { countAtStart, number, power } from '../../drawings/numbers';
import { clockOrDate } from '../../drawings/times';
import type { CauseNow, SiteNow } from '../../schemas/api/now';

const of = (n: number, all: number): string =>
  n === all && all > 1 ? `All ${number(all)} units` : `${countAtStart(n)} of ${number(all)} units`;

function headingOf(verdict: CauseNow['verdict'], causes: readonly CauseNow[], site: SiteNow): string {
  const sum = total(causes);
  const all = site.counts.units;
  const who = sum.strings > 0 || sum.units === 0 ? subject(sum) : of(sum.units, all);
  // nothing but the part is known: its own words
  if (sum.units + sum.strings === 0) return causes[0]?.headline ?? '';
  const single = sum.units + sum.strings === 1;
  switch (verdict) {
    case 'not_shutting_down':
      return `${who} did not shut down`;
    case 'stuck':
      return sum.units === 0
        ? `${who} ${single ? 'has' : 'have'} units stuck in shutdown`
        : `${who} ${single ? 'is' : 'are'} stuck in shutdown`;
    case 'unconfirmed':
      return `The shutdown of ${who.charAt(0).toLowerCase()}${who.slice(1)} can't be confirmed`;
    case 'silent':
      return `${who} ${single ? 'is' : 'are'} silent`;
  }
}

const making = ({ power: watts, acPowerMax }: SiteNow): string =>
  watts === null
    ? 'What the inverters make is not known just now.'
    : `The inverters make ${power(watts)} of ${power(acPowerMax)}.`;

/** What holds at a site, as a heading, and what follows. Times in the site's zone. */
export function siteFinding(
  site: SiteNow,
  causes: readonly CauseNow[],
  now: Date,
): { heading: string; sentence: string } {
  const { counts } = site;
  const at = (time: string) => clockOrDate(time, now, site.timeZone);
  const worst = GRAVITY.find((verdict) => causes.some((c) => c.verdict === verdict));
  if (worst)
    return {
      heading: headingOf(
        worst,
        causes.filter((c) => c.verdict === worst),
        site,
      ),
      sentence: `${WHAT_TO_DO[worst]('here')} ${making(site)}`,
    };
  if (!site.loggerConnected)
    return {
      heading: site.reportedAt
        ? `Nothing has been reported since ${at(site.reportedAt)}`
        : 'Nothing has been reported yet',
      sentence: 'The logger is not connected. What is shown is what it said last; nothing newer is known.',
    };
  if (site.inShutdownSince)
    return {
      heading: `In shutdown since ${at(site.inShutdownSince)}, on command`,
      sentence: `${number(counts.shutdown)} of ${number(counts.units)} units say that they are in shutdown. A home run is dead only when a rated meter shows it.`,
    };
  if (site.stage === 'commissioning' && counts.unheard > 0)
    return {
      heading: `${number(counts.units - counts.unheard)} of ${number(counts.units)} units have answered the roll call`,
      sentence: 'Until the roll call is complete, treat every string as live.',
    };
  if (counts.units > 0 && counts.dark === counts.units)
    return {
      heading: `All ${number(counts.units)} units are in the dark`,
      sentence:
        'Too little light reaches the modules to power their units. The strings are live again at sunrise.',
    };
  if (counts.units > 0 && counts.passing === counts.units)
    return {
      heading: `All ${number(counts.units)} units pass`,
      sentence: `${making(site)} Nothing needs attention.`,
    };
  const rest = [
    counts.dark > 0 ? `${countInside(counts.dark)} in the dark` : '',
    counts.unheard > 0 ? `${countInside(counts.unheard)} not heard yet` : '',
    counts.shutdown > 0 ? `${countInside(counts.shutdown)} in shutdown` : '',
  ].filter(Boolean);
  return {
    heading:
      counts.passing > 0
        ? `${number(counts.passing)} of ${number(counts.units)} units pass`
        : 'Nothing needs attention',
    sentence: `${rest.length > 0 ? `Of the others ${rest.join(', ')}. ` : ''}${making(site)}`,
  };
}
