import type { EventItem } from '../schemas/api/now';
import type { Change } from '../schemas/live';

/** Whether a change tells of one of these events; where some were left out it may. */
export const tells = (change: Change, which: (event: EventItem) => boolean): boolean =>
  change.leftOut === true || (change.events ?? []).some(which);

/** Whether a change tells of causes. */
export const tellsOfCauses = ({ causes, causesAt }: Change): boolean =>
  causes !== undefined || causesAt !== undefined;

/**
 * A list with what has come in: entries of the same key replaced in place, new ones added at the end. The list
 * itself comes back when nothing came, so that nothing is drawn again.
 */
export function replaced<T>(
  list: T[],
  incoming: readonly T[] | undefined,
  keyOf: (entry: T) => string | number,
): T[] {
  if (!incoming || incoming.length === 0) return list;
  const news = new Map(incoming.map((entry) => [keyOf(entry), entry]));
  const kept = list.map((entry) => {
    const fresh = news.get(keyOf(entry));
    if (fresh !== undefined) news.delete(keyOf(entry));
    return fresh ?? entry;
  });
  return news.size > 0 ? [...kept, ...news.values()] : kept;
}
