import { causeHeadlines } from '../../words/domain-causes';
import { isHazardKind, PATIENCE, type CauseKind } from './kinds';

/** What becomes of the causes that are written down, seen what is found now. Instants are epoch seconds. */

export interface FoundUnit {
  stringId: string;
  stringName: string;
  /** null: the string as a whole, positions unknown. */
  position: number | null;
  serial: string | null;
  sinceS: number;
}

/** One explanation as it is found at one moment. */
export interface FoundCause {
  key: string;
  kind: CauseKind;
  sharedPart: { kind: string; name: string } | null;
  headline: string;
  evidence: string;
  figures: Record<string, unknown>;
  alternatives: string[];
  /** 0 … 1 */
  confidence: number;
  units: FoundUnit[];
  sinceS: number;
  /** null: not known. */
  lossWhDay: number | null;
}

/** One that is written down. */
export interface StoredCause extends FoundCause {
  id: number;
  openedS: number;
  changedS: number;
  closedS: number | null;
  /** Since when nothing shows it any more, while it is open. */
  clearSinceS: number | null;
}

/**
 * What a unit says of a cause it belongs to: `shows` it, is `well`, says neither (`unknown`: too dark, not heard), or is
 * `gone` from its slot.
 */
export type UnitSays = 'shows' | 'well' | 'unknown' | 'gone';

export type CauseChange =
  | { do: 'open'; cause: FoundCause }
  | { do: 'reopen'; stored: StoredCause; cause: FoundCause }
  | { do: 'change'; stored: StoredCause; cause: FoundCause }
  | { do: 'close'; stored: StoredCause; because: 'over' | 'explained_otherwise' }
  /** Nothing to tell: evidence and figures of this moment, or that it shows no more. */
  | { do: 'note'; stored: StoredCause; cause: FoundCause; clearSinceS: number | null };

export interface Situation {
  nowS: number;
  /** Open ones, and those closed lately. */
  stored: readonly StoredCause[];
  found: readonly FoundCause[];
  says: (kind: CauseKind, unit: FoundUnit) => UnitSays;
  /** Planned works are going on at this unit: what happens there is told afterwards, if it is still so. */
  atRest: (unit: FoundUnit) => boolean;
}

const unitKey = (u: FoundUnit): string => `${u.stringId} ${u.position ?? ''} ${u.serial ?? ''}`;
const keysOf = (units: readonly FoundUnit[]): Set<string> => new Set(units.map(unitKey));
const sameSet = (a: ReadonlySet<string>, b: ReadonlySet<string>): boolean =>
  a.size === b.size && [...a].every((k) => b.has(k));
const shared = (a: ReadonlySet<string>, b: ReadonlySet<string>): number =>
  [...a].filter((k) => b.has(k)).length;

/**
 * The changes that bring what is written down to what is found, kind by kind. A cause lives on while its units can't be
 * seen (night, snow, silence): it grows by what joins it, shrinks by what is seen to be well, and ends when all of it
 * is. An explanation that gives way to another keeps its row. The same situation twice changes nothing more.
 */
export function causeChanges(situation: Situation): CauseChange[] {
  const kinds = new Set([...situation.stored, ...situation.found].map((c) => c.kind));
  return [...kinds].flatMap((kind) => changesOfKind(kind, situation));
}

function changesOfKind(kind: CauseKind, situation: Situation): CauseChange[] {
  const { nowS } = situation;
  const atRest = isHazardKind(kind) ? () => false : situation.atRest;
  const open = situation.stored.filter((c) => c.kind === kind && c.closedS === null);
  // what planned works touch stays as it is until they are over
  const still = open.filter((c) => c.units.some(atRest));
  const asleep = keysOf(still.flatMap((c) => c.units));
  const found = situation.found
    .filter((c) => c.kind === kind)
    .map((c) => ({ ...c, units: c.units.filter((u) => !atRest(u) && !asleep.has(unitKey(u))) }))
    .filter((c) => c.units.length > 0 && !still.some((s) => s.key === c.key));
  const seen = keysOf(found.flatMap((c) => c.units));
  const awake = open.filter((c) => !still.includes(c));
  const matches = matched(awake, found, (c) => unseen(c, seen, situation).length > 0);
  const changes: CauseChange[] = [];
  const taken = new Set(matches.flatMap((m) => m.found));
  for (const { stored, found: its } of matches)
    changes.push(...changesOf(stored, its, unseen(stored, seen, situation), seen, nowS));
  const closed = situation.stored.filter((c) => c.kind === kind && c.closedS !== null);
  for (const cause of found) if (!taken.has(cause)) changes.push(...begins(cause, closed, nowS));
  return changes;
}

/** Units of a cause that no explanation of now has and that don't show that they are well. */
const unseen = (c: StoredCause, seen: ReadonlySet<string>, { says }: Situation): FoundUnit[] =>
  c.units.filter((u) => !seen.has(unitKey(u)) && ['unknown', 'shows'].includes(says(c.kind, u)));

interface Match {
  stored: StoredCause;
  found: FoundCause[];
}

/**
 * Which of the found belong to which row: one whose units are all among a row's that is only seen in part, then the one
 * of the same key, then the one with most units in common.
 */
function matched(
  stored: readonly StoredCause[],
  found: readonly FoundCause[],
  inPart: (c: StoredCause) => boolean,
): Match[] {
  const matches = stored.map((s): Match & { keys: Set<string> } => ({
    stored: s,
    found: [],
    keys: keysOf(s.units),
  }));
  const left = new Set(found);
  const take = (m: Match, f: FoundCause): void => {
    m.found.push(f);
    left.delete(f);
  };
  for (const m of matches)
    if (inPart(m.stored)) for (const f of left) if (f.units.every((u) => m.keys.has(unitKey(u)))) take(m, f);
  for (const m of matches) for (const f of left) if (f.key === m.stored.key) take(m, f);
  const pairs = matches
    .flatMap((m) => [...left].map((f) => ({ m, f, n: shared(m.keys, keysOf(f.units)) })))
    .filter((p) => p.n > 0)
    .sort((a, b) => b.n - a.n || a.m.stored.id - b.m.stored.id || (a.f.key < b.f.key ? -1 : 1));
  for (const { m, f } of pairs) if (left.has(f) && m.found.length === 0) take(m, f);
  return matches;
}

function changesOf(
  stored: StoredCause,
  found: readonly FoundCause[],
  unknown: readonly FoundUnit[],
  seen: ReadonlySet<string>,
  nowS: number,
): CauseChange[] {
  const patience = PATIENCE[stored.kind];
  const before = keysOf(stored.units);
  const byKey = found.find((f) => f.key === stored.key);
  const named = byKey ?? found[0];
  const units = unique([...found.flatMap((f) => f.units), ...unknown]);
  const last = Math.max(stored.changedS, stored.openedS);
  if (units.length === 0) {
    // another row has its units now
    if (stored.units.some((u) => seen.has(unitKey(u))))
      return [{ do: 'close', stored, because: 'explained_otherwise' }];
    const clearSinceS = stored.clearSinceS ?? nowS;
    if (nowS - clearSinceS >= patience.closeS) return [{ do: 'close', stored, because: 'over' }];
    return stored.clearSinceS === null ? [{ do: 'note', stored, cause: stored, clearSinceS }] : [];
  }
  // seen in part, it is still what it was; whole, it is what is found
  const keeps = unknown.length > 0 || !named;
  const after = keysOf(units);
  const same = sameSet(before, after);
  const text: FoundCause =
    named && (!keeps || (byKey !== undefined && sameSet(keysOf(byKey.units), after)))
      ? named
      : { ...stored, headline: same ? stored.headline : shrunk(stored, units) };
  const cause: FoundCause = {
    ...text,
    units,
    sinceS: Math.min(stored.sinceS, text.sinceS),
    lossWhDay: text.lossWhDay ?? stored.lossWhDay,
  };
  const told = same && cause.key === stored.key && samePart(cause, stored);
  const grows = [...after].some((k) => !before.has(k));
  const atOnce = isHazardKind(stored.kind) && grows;
  if (!told && (atOnce || nowS - last >= patience.changeS)) return [{ do: 'change', stored, cause }];
  const noted: FoundCause = told ? cause : stored;
  return stored.clearSinceS === null && alike(noted, stored)
    ? []
    : [{ do: 'note', stored, cause: noted, clearSinceS: null }];
}

/** A new row, or one that ended lately and is back: the same explanation of at least one of the same units. */
function begins(cause: FoundCause, closed: readonly StoredCause[], nowS: number): CauseChange[] {
  const patience = PATIENCE[cause.kind];
  if (nowS - Math.min(...cause.units.map((u) => u.sinceS)) < patience.settleS) return [];
  const keys = keysOf(cause.units);
  const before = closed
    .filter((c) => c.key === cause.key && nowS - (c.closedS ?? 0) <= patience.reopenS)
    .filter((c) => shared(keysOf(c.units), keys) > 0)
    .sort((a, b) => (b.closedS ?? 0) - (a.closedS ?? 0))[0];
  return [before ? { do: 'reopen', stored: before, cause } : { do: 'open', cause }];
}

const unique = (units: readonly FoundUnit[]): FoundUnit[] => [
  ...new Map(units.map((u) => [unitKey(u), u])).values(),
];

const samePart = (a: FoundCause, b: FoundCause): boolean =>
  a.sharedPart?.kind === b.sharedPart?.kind && a.sharedPart?.name === b.sharedPart?.name;

/** A headline that was made for other units counts those that are left. */
function shrunk(stored: StoredCause, units: readonly FoundUnit[]): string {
  const before = stored.units.filter((u) => u.position !== null).length;
  const left = units.filter((u) => u.position !== null).length;
  if (before === left || before < 2 || left === 0) return stored.headline;
  const [was, is] = [causeHeadlines.units(before), causeHeadlines.units(left)];
  // as words of their own: "12 units" is not in "112 units"
  return stored.headline.replace(new RegExp(`(?<![\\p{L}\\p{N}])${was}(?![\\p{L}\\p{N}])`, 'u'), is);
}

function alike(a: FoundCause, b: FoundCause): boolean {
  const text = (c: FoundCause): string =>
    JSON.stringify([
      c.key,
      c.headline,
      c.evidence,
      c.alternatives,
      Math.round(c.confidence * 100),
      c.lossWhDay === null ? null : Math.round(c.lossWhDay),
      c.figures,
      c.sinceS,
    ]);
  return a === b || text(a) === text(b);
}
