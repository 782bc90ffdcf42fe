/** Where a module lies on a roof, and what is wrong with a roof's outline. */

/** Eight winds from north clockwise. */
export const WINDS = [
  'north',
  'north-east',
  'east',
  'south-east',
  'south',
  'south-west',
  'west',
  'north-west',
];

const ORDINALS = [
  'first',
  'second',
  'third',
  'fourth',
  'fifth',
  'sixth',
  'seventh',
  'eighth',
  'ninth',
  'tenth',
  'eleventh',
  'twelfth',
];

/** "fifth", "21st": words as far as they are shorter to hear than figures. */
export function ordinal(n: number): string {
  const word = ORDINALS[n - 1];
  if (word !== undefined) return word;
  const ends = n % 100 >= 11 && n % 100 <= 13 ? 'th' : (['th', 'st', 'nd', 'rd'][n % 10] ?? 'th');
  return `${n}${ends}`;
}

export const roofPlaceSaid = {
  /** In the order of laying, from 1. */
  row: (row: number) => `${ordinal(row)} row`,
  upper: 'upper row',
  middle: 'middle row',
  lower: 'lower row',
  top: 'top row',
  bottom: 'bottom row',
  fromTop: (row: number) => `${ordinal(row)} row from the top`,
  /** Of the only row. */
  inOnlyRow: (column: number, side: string) => `${ordinal(column)} from the ${side}`,
  inRow: (row: string, column: number, side: string) => `${row}, ${ordinal(column)} from the ${side}`,
  sideAt: (wind: string) => `${wind} end`,
};

export const outlineSaid = {
  fewPoints: 'An outline has three points at least. Set more, or remove all.',
  manyPoints: (most: number) => `An outline has ${most} points at most. Leave some out.`,
  farPoints: (most: number) => `Points lie from −${most} to ${most} m.`,
  crossing: (after: number, other: number) =>
    `The line after point ${after} crosses the line after point ${other}. Move one of the points.`,
  small: 'The outline holds less than a square metre. Are these metres?',
};
