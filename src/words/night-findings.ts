import { DECISIVE_METHOD } from './domain-membership';
import { isOne } from './language';
import { capital } from './domain-counts';

/** What a night's judgement found, as causes say it. Names of parts are stored with their cause. */

const percent = (share: number): string => `${Math.round(100 * share)} %`;
const names = (strings: readonly string[]): string => strings.join(' and ');
const sentence = (clause: string): string => `${capital(clause)}.`;

export const nightParts = {
  strings: names,
  inputOf: (strings: readonly string[]) => `the input of ${names(strings)}`,
};

export const nightLowOutput = {
  headline: (strings: readonly string[], share: number, bySiblings: boolean) =>
    `${isOne(strings.length) ? 'String' : 'Strings'} ${names(strings)} ${isOne(strings.length) ? 'makes' : 'make'} ${percent(share)} less than ${bySiblings ? 'the strings of the same plane' : 'the modules should'}`,
  /** @param looks what it looks like, a clause; undefined: not clear */
  evidence: (looks: string | undefined, low: number, days: number, bySiblings: boolean) =>
    `${sentence(looks ?? 'what it looks like is not clear')} Low on ${low} of the last ${days} days with enough sun, held against ${bySiblings ? 'the strings of its plane' : 'its own model, since its plane has too few strings to compare'}.`,
};

export const nightLoop = {
  headline: (string: string, ohm: number) =>
    `Between the units and the input of ${string} there are ${ohm.toFixed(2)} Ω too many`,
};

export const nightWeakUnit = {
  bypassed: (string: string, position: number, subStrings: number) =>
    `Module ${position} of ${string} has ${isOne(subStrings) ? 'a bypassed sub-string of cells' : `${subStrings} bypassed sub-strings of cells`}`,
  low: (string: string, position: number, share: number) =>
    `Unit ${position} of ${string} gives ${percent(share)} less than its neighbours`,
  /** @param found a clause */
  evidence: (found: string, share: number) =>
    `${sentence(found)} So on ${percent(share)} of the quarters under load, on at least two of three days.`,
};

export const nightWrongString = {
  eachInTheOthers: (position: number, string: string, otherPosition: number, otherString: string) =>
    `Unit ${position} of ${string} and unit ${otherPosition} of ${otherString} stand in each other's string`,
  carriesAnothers: (position: number, string: string, other: string | null) =>
    `Unit ${position} of ${string} carries the current of ${other ?? 'another string'}`,
  /** How it is decided is said once, at the end. */
  evidence: (found: readonly string[]) =>
    [...found.map((words) => words.replace(` ${DECISIVE_METHOD}`, '')), DECISIVE_METHOD].join(' '),
  couldBe: ['the as-built names the wrong serial', "the unit's current measurement is off"],
};
