import { countInside, headingOf, WHAT_TO_DO } from '../../components/causes/finding';
import { GRAVITY } from '../../components/causes/words';
import { listed } from '../../drawings/numbers';
import type { CauseNow, SiteNow } from '../../schemas/api/now';
import { heldSites } from './groups';
import { sharedCausesFinding } from '../../words/shared-causes';
import { shutdownFindingWords } from '../../words/shutdown';

/** What is in shutdown without being a fault: "Lantern Works is in shutdown on purpose." */
function heldInWords(sites: readonly SiteNow[]): string {
  const { purpose, lost } = heldSites(sites);
  const parts: string[] = [];
  if (purpose.length > 0)
    parts.push(
      purpose.length <= 3
        ? shutdownFindingWords.inShutdownOnPurpose(listed(purpose.map((h) => h.site.name)), purpose.length)
        : shutdownFindingWords.sitesAreInShutdown(purpose.length),
    );
  if (lost.length > 0)
    parts.push(
      shutdownFindingWords.atLost3ListedSaid(
        lost.length,
        listed(lost.map((h) => h.site.name)),
        countInside(lost.length),
      ),
    );
  return parts.join(' ');
}

/** The finding of the Shutdown page, and what follows. */
export function shutdownFinding(
  sites: readonly SiteNow[],
  causes: readonly CauseNow[],
): { heading: string; sentence: string } {
  const held = heldInWords(sites);
  const worst = GRAVITY.find((verdict) => causes.some((c) => c.verdict === verdict));
  if (!worst)
    return {
      heading: shutdownFindingWords.noUnitIsStuck,
      sentence: held || shutdownFindingWords.noZoneIsIn,
    };
  const ofIt = causes.filter((c) => c.verdict === worst);
  const names = [...new Set(ofIt.map((c) => c.siteName))];
  const there = names.length === 1 ? 'there' : sharedCausesFinding.atNamed(names);
  const others = GRAVITY.filter((v) => v !== worst && causes.some((c) => c.verdict === v)).map((verdict) => {
    const units = causes.filter((c) => c.verdict === verdict).reduce((n, c) => n + c.units.length, 0);
    return `${shutdownFindingWords.countedUnitsUnit(units)} ${OTHER[verdict](units)}`;
  });
  return {
    heading: headingOf(worst, ofIt),
    sentence: [
      WHAT_TO_DO[worst](there),
      others.length > 0 ? shutdownFindingWords.besidesOthers(listed(others)) : '',
      held,
    ]
      .filter(Boolean)
      .join(' '),
  };
}

const is = (n: number): string => (n === 1 ? 'is' : 'are');
const OTHER: Record<CauseNow['verdict'], (n: number) => string> = {
  not_shutting_down: () => shutdownFindingWords.didNotShutDown,
  stuck: (n) => shutdownFindingWords.stuckInShutdown(is(n)),
  unconfirmed: () => shutdownFindingWords.cantBeConfirmed,
  silent: (n) => shutdownFindingWords.nSilent(is(n)),
};
