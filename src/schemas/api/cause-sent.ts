import { z } from 'zod';
import { causeNow, id, type CauseNow } from './now';

/**
 * Causes as they go to a browser. A logger that is away takes a hundred units with it and an outage some hundred loggers:
 * units of one string that are so since one moment are sent together, a tenth of what they are one by one.
 */
const unitsSent = z.object({
  stringId: id,
  stringName: z.string(),
  since: z.iso.datetime(),
  positions: z.array(z.int().nullable()),
  serials: z.array(z.string().nullable()),
});
export const causeSent = causeNow.omit({ units: true }).extend({ strings: z.array(unitsSent) });
export type CauseSent = z.infer<typeof causeSent>;

/** The causes of one site, all of them: in place of what was known of it. */
export const causesAt = z.object({ site: id, causes: z.array(causeSent) });
export type CausesAt = z.infer<typeof causesAt>;

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
