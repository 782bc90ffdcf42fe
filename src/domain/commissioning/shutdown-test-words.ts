import type { TestResult } from './shutdown-test';

/** Words of a test that pages, papers and the verdict share. */

/** "3", "3 and 5", "3, 5 and 9". */
export const listed = (items: readonly (string | number)[]): string =>
  items.length < 2 ? String(items[0] ?? '') : `${items.slice(0, -1).join(', ')} and ${items.at(-1)}`;

/** "1 unit", "3 units". */
export const counted = (n: number, one: string): string => `${n} ${one}${n === 1 ? '' : 's'}`;

export const RESULT_WORDS: Record<TestResult, string> = {
  passed: 'Passed',
  failed: 'Failed',
  consistent: 'Consistent, not decided',
  not_witnessed: 'Not witnessed',
};

/** What a result stands for, in a sentence. */
export const RESULT_MEANS: Record<TestResult, string> = {
  passed: 'A rated instrument at the home run showed it within the limit of voltage and time.',
  failed: 'Something stood on the home run, or a unit kept passing, past the time limit.',
  consistent: 'Reports agree with a shutdown; no rated instrument has shown it.',
  not_witnessed: 'Nothing has shown whether it shut down.',
};

/** Seconds as reports give them: "within 12 s", "between 18 and 78 s". */
export const intervalWords = ([from, to]: readonly [number, number]): string =>
  Math.floor(from) <= 0 ? `within ${Math.ceil(to)} s` : `between ${Math.floor(from)} and ${Math.ceil(to)} s`;
