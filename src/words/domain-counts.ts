import { listed } from '../drawings/numbers';
import { isOne, LOCALE, pluralOf } from './language';

/** Counts, lists and beginnings of sentences that go into papers, letters and records as plain text: a space that may break before the word. */

/** "1,240". */
export const figure = (n: number): string => n.toLocaleString(LOCALE);
/** "1 unit", "1,240 units". */
export const counted = (n: number, one: string, many = pluralOf(one)): string =>
  `${figure(n)} ${isOne(n) ? one : many}`;
/** "B1, B2 and B3"; of many the first: "B1, B2, B3 and 5 more". Never "and 1 more". */
export const listedUpTo = (most: number, names: readonly (string | number)[]): string =>
  names.length <= most + 1
    ? listed(names)
    : `${names.slice(0, most).join(', ')} and ${names.length - most} more`;
/** The same text with which a sentence or a heading can begin. */
export const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
