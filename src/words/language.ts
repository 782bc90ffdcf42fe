/** The language of this folder; the names of its numbers and lengths of time. Every page says it in `<html lang>`. */
export const LANGUAGE = 'en';
/** How numbers, money, days and clocks are written (BCP 47). */
export const LOCALE = 'en-GB';

/** Counts that begin a sentence, from none up. */
export const COUNTS: readonly string[] = [
  'No',
  'One',
  'Two',
  'Three',
  'Four',
  'Five',
  'Six',
  'Seven',
  'Eight',
  'Nine',
  'Ten',
  'Eleven',
  'Twelve',
];
/** The plural of a word that is counted, where none is given. */
export const pluralOf = (one: string): string => `${one}s`;
/** Which of two forms a count takes. */
export const isOne = (n: number): boolean => n === 1;

export const lists = {
  lastTwo: (earlier: string, last: string | number) => `${earlier} and ${last}`,
};

export const lengths = {
  seconds: (n: number) => `${n} s`,
  minutes: (n: number) => `${n} min`,
  hours: (n: number) => `${n} h`,
  days: (n: number) => `${n} days`,
  justNow: 'just now',
  ago: (length: string) => `${length} ago`,
};
