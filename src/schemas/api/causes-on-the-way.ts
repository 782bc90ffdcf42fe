import type { CausesAt, CauseSent } from './cause-sent';
import type { CauseNow } from './now';

// apart from their schema, which browsers do without

/** A cause with the units of each string that are so since one moment together: nothing of it is left out. */
export function sentCause({ units, ...cause }: CauseNow): CauseSent {
  const strings = new Map<string, CauseSent['strings'][number]>();
  for (const { stringId, stringName, since, position, serial } of units) {
    const key = `${stringId} ${since}`;
    let string = strings.get(key);
    if (!string) strings.set(key, (string = { stringId, stringName, since, positions: [], serials: [] }));
    string.positions.push(position);
    string.serials.push(serial);
  }
  return { ...cause, strings: [...strings.values()] };
}

/** The cause as it was, but that units of one string stand together. */
export const receivedCause = ({ strings, ...cause }: CauseSent): CauseNow => ({
  ...cause,
  units: strings.flatMap(({ stringId, stringName, since, positions, serials }) =>
    positions.map((position, i) => ({ stringId, stringName, position, serial: serials[i] ?? null, since })),
  ),
});

/** Something with causes, as it is sent. */
export type Sent<T extends { causes: CauseNow[] }> = Omit<T, 'causes'> & { causes: CauseSent[] };

export const sent = <T extends { causes: CauseNow[] }>(told: T): Sent<T> => ({
  ...told,
  causes: told.causes.map(sentCause),
});

export const received = <T extends { causes: CauseNow[] }>({ causes, ...rest }: Sent<T>): T =>
  ({ ...rest, causes: causes.map(receivedCause) }) as unknown as T;

/** Causes after what a change says of them: all of them, or those of some sites. */
export function causesAfter(
  causes: CauseNow[],
  change: { causes?: CauseSent[] | undefined; causesAt?: CausesAt[] | undefined },
): CauseNow[] {
  const all = change.causes ? change.causes.map(receivedCause) : causes;
  if (!change.causesAt || change.causesAt.length === 0) return all;
  const told = new Set(change.causesAt.map((at) => at.site));
  return [
    ...all.filter((c) => !told.has(c.siteId)),
    ...change.causesAt.flatMap((at) => at.causes.map(receivedCause)),
  ];
}
