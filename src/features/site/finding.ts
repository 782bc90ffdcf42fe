import { countInside, subject, total, WHAT_TO_DO } from '../../components/causes/finding';
import { GRAVITY } from '../../components/causes/words';
import { clockOrDate } from '../../drawings/times';
import type { CauseNow, SiteNow } from '../../schemas/api/now';
import { siteFindingWords } from '../../words/site';

const of = (n: number, all: number): string =>
  n === all && all > 1 ? siteFindingWords.allUnits(all) : siteFindingWords.ofUnits(n, all);

function headingOf(verdict: CauseNow['verdict'], causes: readonly CauseNow[], site: SiteNow): string {
  const sum = total(causes);
  const all = site.counts.units;
  const who = sum.strings > 0 || sum.units === 0 ? subject(sum) : of(sum.units, all);
  // nothing but the part is known: its own words
  if (sum.units + sum.strings === 0) return causes[0]?.headline ?? '';
  const single = sum.units + sum.strings === 1;
  switch (verdict) {
    case 'not_shutting_down':
      return siteFindingWords.didNotShutDown(who);
    case 'stuck':
      return sum.units === 0
        ? siteFindingWords.unitsStuckInShutdown(who, single)
        : siteFindingWords.stuckInShutdown(who, single);
    case 'unconfirmed':
      return siteFindingWords.theShutdownOfCant(who.charAt(0), who.slice(1));
    case 'silent':
      return siteFindingWords.whoSingleSilent(who, single);
  }
}

const making = ({ power: watts, madeLast, acPowerMax }: SiteNow, at: (time: string) => string): string =>
  watts !== null
    ? siteFindingWords.theInvertersMakeOf(watts, acPowerMax)
    : madeLast
      ? siteFindingWords.theInvertersMadeOf(madeLast.power, acPowerMax, at(madeLast.at))
      : siteFindingWords.whatTheInvertersMake;

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
      sentence: [
        WHAT_TO_DO[worst](siteFindingWords.here),
        // a hazard says it by itself
        counts.unheard > 0 && worst !== 'not_shutting_down' ? siteFindingWords.untilTheRollCall : '',
        making(site, at),
      ]
        .filter(Boolean)
        .join(' '),
    };
  if (!site.loggerConnected)
    return {
      heading: site.reportedAt
        ? siteFindingWords.nothingHasBeenReported(at(site.reportedAt))
        : siteFindingWords.nothingHasBeenReportedYet,
      sentence: siteFindingWords.theLoggerIsNot,
    };
  if (site.inShutdownSince)
    return {
      heading: siteFindingWords.inShutdownSinceOn(at(site.inShutdownSince)),
      sentence: siteFindingWords.ofUnitsSayThat(counts.shutdown, counts.units),
    };
  if (site.stage === 'commissioning' && counts.unheard > 0)
    return {
      heading: siteFindingWords.ofUnitsHaveAnswered(counts.units, counts.unheard),
      sentence: siteFindingWords.untilTheRollCall,
    };
  if (counts.units > 0 && counts.dark === counts.units)
    return {
      heading: siteFindingWords.allUnitsAreIn(counts.units),
      sentence: siteFindingWords.tooLittleLightReaches,
    };
  if (counts.units > 0 && counts.passing === counts.units)
    return {
      heading: siteFindingWords.allUnitsPass(counts.units),
      sentence: siteFindingWords.nothingNeedsAttention(making(site, at)),
    };
  const rest = [
    counts.dark > 0 ? siteFindingWords.inTheDark(countInside(counts.dark)) : '',
    counts.unheard > 0 ? siteFindingWords.notHeardYet(countInside(counts.unheard)) : '',
    counts.shutdown > 0 ? siteFindingWords.inShutdown(countInside(counts.shutdown)) : '',
  ].filter(Boolean);
  return {
    heading:
      counts.passing > 0
        ? siteFindingWords.ofUnitsPass(counts.passing, counts.units)
        : siteFindingWords.nothingNeedsAttention2,
    sentence: `${rest.length > 0 ? siteFindingWords.ofTheOthers(rest.join(', ')) : ''}${making(site, at)}`,
  };
}
