/** What is said of a unit whose current is held against the strings'. */

export const DECISIVE_METHOD =
  "Decisive: a qualified person isolates one string by the site's procedure, and whose current goes to zero?";

export const membershipSaid = {
  noCurrent: 'Its string carried no current in these hours: it can not be told.',
  tooFewSamples: 'Too few samples with current: before the inverter runs this can not be told.',
  twoFit: (own: string, one: string, other: string) =>
    `It does not carry the current of ${own}; ${one} and ${other} fit alike. ${DECISIVE_METHOD}`,
  elsewhere: (own: string, other: string) =>
    `It carries the current of ${other}, not of ${own}. ${DECISIVE_METHOD}`,
  fitsNone: 'Its current is that of no string of this site: its measurement may be wrong.',
  notParted: (own: string, from: readonly string[]) =>
    `Its current fits ${own}, and its accuracy can't part it from ${from.join(', ')}.`,
  here: (own: string) => `It carries the current of ${own}.`,
};
