import { countInside, headingOf, WHAT_TO_DO } from '../../components/causes/finding';
import { GRAVITY } from '../../components/causes/words';
import { counted, countAtStart, listed } from '../../drawings/numbers';
import type { CauseNow, SiteNow } from '../../schemas/api/now';
import { heldSites } from './groups';

/** What is in shutdown without being a fault: "Lantern Works is in shutdown on purpose." */
function heldInWords(sites: readonly SiteNow[]): string {
  const { purpose, lost } = heldSites(sites);
  const parts: string[] = [];
  if (purpose.length > 0)
    parts.push(
      purpose.length <= 3
        ? `${listed(purpose.map((h) => h.site.name))} ${purpose.length === 1 ? 'is' : 'are'} in shutdown on purpose, wholly or in part.`
        : `${countAtStart(purpose.length)} sites are in shutdown on purpose, wholly or in part.`,
    );
  if (lost.length > 0)
    parts.push(
      `At ${lost.length <= 3 ? listed(lost.map((h) => h.site.name)) : `${countInside(lost.length)} sites`} the keep-alive or the power of a zone went.`,
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
      heading: 'No unit is stuck, and none is known to pass against a command',
      sentence: held || 'No zone is in shutdown. What a home run carries only a rated meter shows.',
    };
  const ofIt = causes.filter((c) => c.verdict === worst);
  const names = [...new Set(ofIt.map((c) => c.siteName))];
  const there =
    names.length === 1 ? 'there' : `at ${listed(names.slice(0, 3))}${names.length > 3 ? ' and more' : ''}`;
  const others = GRAVITY.filter((v) => v !== worst && causes.some((c) => c.verdict === v)).map((verdict) => {
    const units = causes.filter((c) => c.verdict === verdict).reduce((n, c) => n + c.units.length, 0);
    return `${counted(units, 'unit')} ${OTHER[verdict](units)}`;
  });
  return {
    heading: headingOf(worst, ofIt),
    sentence: [WHAT_TO_DO[worst](there), others.length > 0 ? `Besides, ${listed(others)}.` : '', held]
      .filter(Boolean)
      .join(' '),
  };
}

const is = (n: number): string => (n === 1 ? 'is' : 'are');
const OTHER: Record<CauseNow['verdict'], (n: number) => string> = {
  not_shutting_down: () => 'did not shut down',
  stuck: (n) => `${is(n)} stuck in shutdown`,
  unconfirmed: () => "can't be confirmed",
  silent: (n) => `${is(n)} silent`,
};
