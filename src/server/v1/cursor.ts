import { AppError } from '../errors';

/** Where a page ended: the values that its last item is sorted by. Opaque to whoever carries it. */
export type Key = readonly (string | number)[];

export const cursorOf = (key: Key): string => Buffer.from(JSON.stringify(key)).toString('base64url');

const isKey = (value: unknown, length: number): value is Key =>
  Array.isArray(value) &&
  value.length === length &&
  value.every((v) => typeof v === 'string' || Number.isSafeInteger(v));

/** @param length how many values the list is sorted by @throws AppError invalid, where it is none of this list's */
export function keyOfCursor(cursor: string | undefined, length: number): Key | null {
  if (cursor === undefined) return null;
  try {
    const value: unknown = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'));
    if (isKey(value, length) && !value.some((v) => typeof v === 'string' && v.includes('\0'))) return value;
  } catch {
    // no JSON: refused below, as any other text that is no cursor
  }
  const message = 'This is no cursor of this list. Begin without one, then send `next` as it came.';
  throw new AppError('invalid', { message, fields: [{ field: 'query.cursor', message }] });
}

/** One page of rows that were read one further than asked for. */
export function pageOf<Row, Item>(
  rows: readonly Row[],
  limit: number,
  key: (row: Row) => Key,
  item: (row: Row) => Item,
): { data: Item[]; next: string | null } {
  const shown = rows.slice(0, limit);
  const last = shown.at(-1);
  return {
    data: shown.map(item),
    next: rows.length > limit && last !== undefined ? cursorOf(key(last)) : null,
  };
}
