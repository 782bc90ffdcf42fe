import { listed } from '../drawings/numbers';
import { capital, counted } from './domain-counts';
import { isOne } from './language';

/** What is said when a closed case is looked at again. */

const DOES: Record<string, string> = {
  stuck: 'stuck in shutdown',
  not_shutting_down: 'not shutting down',
  unconfirmed: 'unconfirmed',
  late: 'late',
  flapping: 'flapping',
  silent: 'silent',
};
const at = (string: string, positions: readonly number[]): string =>
  `${isOne(positions.length) ? 'position' : 'positions'} ${listed(positions)} of ${string}`;
const volts = (voltage: number): string => `${voltage.toFixed(1)} V`;
const share = (ratio: number): string => `${Math.round(ratio * 100)} %`;

/** Parts of `closedSaid.all`. */
export const wrongSaid = {
  are: (string: string, positions: readonly number[], verdict: string) =>
    `${at(string, positions)} ${isOne(positions.length) ? 'is' : 'are'} ${DOES[verdict] ?? verdict}`,
  wereAgain: (string: string, positions: readonly number[], verdict: string) =>
    `${at(string, positions)} ${isOne(positions.length) ? 'was' : 'were'} ${DOES[verdict] ?? verdict} again since the closing`,
  someDoNotPass: (string: string) => `some units of ${string} do not pass, positions unknown`,
  voltageStands: (string: string) => `voltage stands on ${string} while shutdown is commanded`,
  voltageNotExplained: (string: string) => `the voltage of ${string} is not explained`,
  causeStillHolds: 'the cause that it was opened from still holds',
};

/** Lines on figures. */
export const figuresSaid = {
  gives: (string: string, voltage: number, expected: number | null) =>
    `${string} gives ${volts(voltage)}${expected === null ? '' : ` of ${volts(expected)} expected`}`,
  made: (string: string, ratio: number, day: string) =>
    `${string} made ${share(ratio)} of what was expected on ${day}`,
  aStringWithin: 'a string',
  aString: 'A string',
};

export const closedSaid = {
  /** Several things that are wrong, as one sentence. */
  all: (parts: readonly string[]) => `${capital(listed(parts))}.`,
  closedJustNow: 'The case was closed a few minutes ago.',
  plannedWork: 'Planned work is going on.',
  tooLittleLight: 'There is too little light: dark units say nothing.',
  shutdownIsCommanded: 'Shutdown is commanded.',
  didNotReport: (strings: readonly string[]) => `${listed(strings)} did not report in the last ten minutes.`,
  wellUntilNow: 'All is well so far; three hours of daylight are waited for.',
  nothingAbnormal: 'Nothing abnormal was found in the daylight since the closing.',
  unitsWereRight: (units: number) =>
    `${isOne(units) ? 'The unit was' : `The ${counted(units, 'unit')} were`} right in the daylight since the closing.`,
  causeStillHolds: 'The cause that it was opened from still holds.',
  causeIsOver: 'The cause that it was opened from is over.',
  followedByTheirWord:
    'By what the units say they followed the shutdown that is in force. Only a meter on the conductors shows it.',
  noneWasFoundPassing:
    'Shutdown was commanded since the closing and no unit of the case was found passing. Only a meter on the conductors shows it.',
  noShutdownYet: 'No shutdown was commanded since the closing.',
  noShutdown:
    'No shutdown was commanded since the closing: whether the units shut down shows at the next shutdown test.',
  makeTooLittle: (strings: readonly string[]) =>
    `${listed(strings)} ${isOne(strings.length) ? 'makes' : 'make'} too little still.`,
  firstDayWasRight: 'The first day judged after the closing was as expected.',
  noDayYet: 'No day after the closing has been judged yet.',
  noCause: 'The case was opened without a cause: no judgement follows it.',
  nightIsWaitedFor: 'The night’s judgement is waited for.',
  nothingForAWeek: (headline: string) => `For a week nothing could be told. ${headline}`,
  namesNothing: 'The case names no string and no cause: no figure can show whether it held.',
};
