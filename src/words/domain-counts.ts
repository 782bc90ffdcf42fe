import { isOne, LOCALE, pluralOf } from './language';

/** Counts in sentences that go into papers, letters and records as plain text: a space that may break before the word. */

/** "1,240". */
export const figure = (n: number): string => n.toLocaleString(LOCALE);
/** "1 unit", "1,240 units". */
export const counted = (n: number, one: string, many = pluralOf(one)): string =>
  `${figure(n)} ${isOne(n) ? one : many}`;
