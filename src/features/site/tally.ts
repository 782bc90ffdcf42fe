import type { StringNow } from '../../schemas/api/now';

export interface Hearing {
  heard: number;
  units: number;
  /** dBm of the faintest unit; null: nothing carries a signal. */
  weakest: { signal: number; position: number } | null;
}

/** How well a string is heard: units that have answered ever, and the faintest of them. */
export function hearingOf(string: StringNow): Hearing {
  const filled = string.slots.filter((s) => s.serial !== null);
  let weakest: Hearing['weakest'] = null;
  for (const slot of filled)
    if (slot.signal !== null && (weakest === null || slot.signal < weakest.signal))
      weakest = { signal: slot.signal, position: slot.position };
  return {
    heard: filled.filter((s) => s.state !== null && s.state !== 'unheard' && s.state !== 'silent').length,
    units: filled.length,
    weakest,
  };
}

/** Strings with a verdict come before those without, the gravest first. */
export function urgencyOf({ counts, finding }: StringNow): number {
  if (counts.notShuttingDown > 0 || finding?.kind === 'not_shutting_down') return 0;
  if (counts.stuck > 0 || finding?.kind === 'stuck_positions_unknown') return 1;
  if (counts.unconfirmed > 0) return 2;
  if (finding) return 3;
  if (counts.silent > 0) return 4;
  if (counts.unheard > 0) return 5;
  return 6;
}

const NUMBER_ORDER = new Intl.Collator('en', { numeric: true });

export type StringSort = 'need' | 'name' | 'voltage' | 'current' | 'power' | 'signal';

const FIGURE: Record<Exclude<StringSort, 'need' | 'name'>, (s: StringNow) => number | null> = {
  voltage: (s) => s.voltage,
  current: (s) => s.current,
  power: (s) => s.power,
  signal: (s) => hearingOf(s).weakest?.signal ?? null,
};

/** Strings by name, need or a figure; what is not known comes last. */
export function sortedStrings(
  strings: readonly StringNow[],
  sort: StringSort,
  descending: boolean,
): StringNow[] {
  const byName = (a: StringNow, b: StringNow) => NUMBER_ORDER.compare(a.name, b.name);
  const way = descending ? -1 : 1;
  return [...strings].sort((a, b) => {
    if (sort === 'name') return byName(a, b) * way;
    if (sort === 'need') return (urgencyOf(a) - urgencyOf(b)) * way || byName(a, b);
    const [x, y] = [FIGURE[sort](a), FIGURE[sort](b)];
    if (x === null || y === null) return x === y ? byName(a, b) : x === null ? 1 : -1;
    return (x - y) * way || byName(a, b);
  });
}
