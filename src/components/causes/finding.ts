import { countAtStart } from '../../drawings/numbers';
import type { CauseNow } from '../../schemas/api/now';
import { concerned } from './places';

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
  return names.size === 1 ? `at ${[...names.values()][0]}` : `at ${countInside(names.size)} sites`;
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

/** What follows from a finding and what to do; `at`: "there", "at Kestrel Row School". */
export const WHAT_TO_DO: Record<CauseNow['verdict'], (at: string) => string> = {
  not_shutting_down: (at) => `Treat every string ${at} as live and call the site.`,
  stuck: (at) => `They hold back power ${at}; the causes below say which part they share.`,
  unconfirmed: (at) => `Treat their strings ${at} as live until a rated meter shows otherwise.`,
  silent: (at) => `Whether they follow a shutdown ${at} can't be confirmed until they are heard again.`,
};
