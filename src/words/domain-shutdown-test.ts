import type { TestResult } from '../domain/commissioning/shutdown-test';

/** Words of a shutdown test that pages, papers and the verdict share. */

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
