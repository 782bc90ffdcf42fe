/** Who was heard: against the as-built, by string and gateway, and how well. Signals in dBm. */

export interface HeardSerial {
  serial: string;
  gateway: number;
  signal: number | null;
}

/** Serials heard that are on no as-built of the site: a neighbour's units, or units recorded wrongly or not at all. */
export function heardButUnknown<T extends { serial: string }>(
  heard: readonly T[],
  asBuilt: ReadonlySet<string>,
): T[] {
  return heard.filter((h) => !asBuilt.has(h.serial));
}

export interface Tally {
  name: string;
  heard: number;
  total: number;
}
/** Heard over roster by string, in the order in which strings come. */
export function tallyByString(units: readonly { group: string; heardAtS: number | null }[]): Tally[] {
  const tallies = new Map<string, Tally>();
  for (const unit of units) {
    const tally = tallies.get(unit.group) ?? { name: unit.group, heard: 0, total: 0 };
    tally.total++;
    if (unit.heardAtS !== null) tally.heard++;
    tallies.set(unit.group, tally);
  }
  return [...tallies.values()];
}

/** Below this a link is likely to drop out in rain or with a door closed; from experience, a gateway's sheet overrides. */
export const WEAK_SIGNAL = -90;

/** The weakest signal of each string, weakest first; strings without any are left out. */
export function weakestByString<T extends { group: string; signal: number | null }>(
  units: readonly T[],
): T[] {
  const weakest = new Map<string, T>();
  for (const unit of units) {
    const known = weakest.get(unit.group);
    if (unit.signal !== null && (known?.signal == null || unit.signal < known.signal))
      weakest.set(unit.group, unit);
  }
  return [...weakest.values()].sort((a, b) => (a.signal ?? 0) - (b.signal ?? 0));
}
