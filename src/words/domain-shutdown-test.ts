import type { TestResult } from '../domain/commissioning/test-results';
import { isOne } from './language';

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

export const testCautions = [
  'Shutdown is not isolation: each module and its leads to its unit stay at module voltage.',
  'A result speaks of the day of the test. Local code and the authority having jurisdiction come first.',
];

/** What a test says of itself; volts and seconds as they are written. */
export const shutdownTestSaid = {
  takeOffAlone: (names: readonly string[]) =>
    `Take each transmitter off alone once: ${names.join(', ')} ${isOne(names.length) ? 'was' : 'were'} not. A string that hears a neighbour's transmitter shows itself only so.`,
  readAtInverterEnds: (timeLimitS: number) =>
    `Read + to −, + to earth and − to earth with a rated instrument at the inverter end of each home run, within ${timeLimitS} s.`,
  testInLight: 'Test again in light that powers the units: without it a dead string proves nothing.',
  limitSources: {
    rapid_shutdown_10s: 'NEC 690.12, 2014 edition: 30 V within 10 s',
    rapid_shutdown_30s: 'NEC 690.12(B)(1), 2017 and later editions: 30 V within 30 s',
    yardstick: 'no time limit applies to this site; 30 V within 30 s taken as a yardstick',
  },
  headlines: {
    failed: (names: readonly string[], all: number) =>
      `${names.length} of ${all} strings did not shut down as required: ${names.slice(0, 4).join(', ')}${names.length > 4 ? ` and ${names.length - 4} more` : ''}`,
    passed: (all: number) => `All ${all} strings were measured below the limit in time`,
    consistent:
      'What was reported is consistent with a shutdown; a rated instrument has not shown it for every string',
    notWitnessed: 'The shutdown was not witnessed',
  },
};

/** What a test says of one string. */
export const stringTestSaid = {
  tooHigh: (volts: string, afterS: string, limitV: number, timeLimitS: number) =>
    `${volts} V stood on the home run ${afterS} s after the command; at most ${limitV} V are allowed after ${timeLimitS} s.`,
  passedOn: (passing: number, units: number, timeLimitS: number) =>
    `${passing} of ${units} units passed on past ${timeLimitS} s.`,
  inputLive: (volts: string, afterS: string) =>
    `${volts} V stood at its input ${afterS} s after the command, longer than capacitors hold it up.`,
  unitLate: (atLeastS: number, timeLimitS: number) =>
    `A unit took at least ${atLeastS} s; ${timeLimitS} s are allowed.`,
  passed: (fromV: string, toV: string, afterS: string) =>
    `From ${fromV} V to ${toV} V at most, ${afterS} s after the command, by a rated instrument.`,
  conductorsStayUp: "Its units claim shutdown, but the input's voltage stays up: measure at the home run.",
  tooDark: 'Too little light to power the units: a dead string proves nothing.',
  allInTime: (units: number, withinS: number) => `All ${units} units reported shutdown within ${withinS} s.`,
  allButWhen: (units: number, fromS: number, toS: number, timeLimitS: number) =>
    `All ${units} units reported shutdown; the slowest took between ${fromS} and ${toS} s, so the limit of ${timeLimitS} s can not be judged from reports.`,
  inverterFell: (fromV: string, toV: string, withinS: number) =>
    `The inverter's own measurement fell from ${fromV} V to ${toV} V within ${withinS} s; it can not read a few volts.`,
  nothingReported: 'Nothing reported whether its units followed.',
  someReported: (followed: number, units: number) =>
    `${followed} of ${units} units reported shutdown; of the others nothing is known.`,
};
