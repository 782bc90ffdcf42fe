/** Words of a test that the verdict puts together. */

/** "3", "3 and 5", "3, 5 and 9". */
export const listed = (items: readonly (string | number)[]): string =>
  items.length < 2 ? String(items[0] ?? '') : `${items.slice(0, -1).join(', ')} and ${items.at(-1)}`;

/** "1 unit", "3 units". */
export const counted = (n: number, one: string): string => `${n} ${one}${n === 1 ? '' : 's'}`;
