import { countAtStart } from '../../drawings/numbers';
import type { CauseNow } from '../../schemas/api/now';
import { concerned } from './places';
import { sharedCausesFinding } from '../../words/shared-causes';

/** A count in the middle of a sentence: a word up to twelve, figures above. */
export const countInside = (n: number): string => countAtStart(n).toLowerCase();
const units = (n: number): string => (n === 1 ? 'unit' : 'units');

/** "Two units", "One string", "Two units and one string", to begin a sentence. */
export function subject(of: { units: number; strings: number }): string {
  const parts: string[] = [];
  if (of.units > 0) parts.push(`${countAtStart(of.units)} ${units(of.units)}`);
  if (of.strings > 0) {
    const count = parts.length === 0 ? countAtStart(of.strings) : countInside(of.strings);
    parts.push(`${count} ${of.strings === 1 ? 'string' : 'strings'}`);
  }
  return parts.join(' and ');
}

/** "at Kestrel Row School", "at two sites". */
function place(causes: readonly CauseNow[]): string {
  const names = new Map(causes.map((c) => [c.siteId, c.siteName]));
  return names.size === 1
    ? sharedCausesFinding.atX([...names.values()][0])
    : sharedCausesFinding.atSites(countInside(names.size));
}

export const total = (causes: readonly CauseNow[]) => concerned(causes.flatMap((c) => c.units));

/** The finding of one verdict over its causes: "Two units at Kestrel Row School did not shut down". */
export function headingOf(verdict: CauseNow['verdict'], causes: readonly CauseNow[]): string {
  const of = total(causes);
  if (of.units + of.strings === 0) return `${causes[0]?.headline ?? ''} ${place(causes)}`;
  const single = of.units + of.strings === 1;
  const who = `${subject(of)} ${place(causes)}`;
  switch (verdict) {
    case 'not_shutting_down':
      return sharedCausesFinding.didNotShutDown(who);
    case 'stuck':
      return of.units === 0
        ? sharedCausesFinding.unitsStuckInShutdown(who, single)
        : sharedCausesFinding.stuckInShutdown(who, single);
    case 'unconfirmed':
      return sharedCausesFinding.theShutdownOfCant(lowerFirst(subject(of)), place(causes));
    case 'silent':
      return sharedCausesFinding.whoSingleSilent(who, single);
  }
}
const lowerFirst = (text: string): string => text.charAt(0).toLowerCase() + text.slice(1);

/** What follows from a finding and what to do; `at`: "there", "at Kestrel Row School". */
export const WHAT_TO_DO: Record<CauseNow['verdict'], (at: string) => string> = {
  not_shutting_down: (at) => sharedCausesFinding.treatEveryStringAs(at),
  stuck: (at) => sharedCausesFinding.theyHoldBackPower(at),
  unconfirmed: (at) => sharedCausesFinding.treatTheirStringsAs(at),
  silent: (at) => sharedCausesFinding.whetherTheyFollowShutdown(at),
};
