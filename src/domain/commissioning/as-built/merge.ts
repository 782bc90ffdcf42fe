/** Two people edit one thing: what each changed is kept where they changed different things, and told where not. */

export type Value = string | number | boolean | null | readonly string[];
export type Values = Readonly<Record<string, Value>>;

export interface Clash {
  key: string;
  /** What the editor saw, what stands now, and what the editor wants. */
  before: Value;
  theirs: Value;
  mine: Value;
}

export interface Merged {
  /** What to write: only keys whose value now is another. */
  changes: Record<string, Value>;
  clashes: Clash[];
}

/** Lists are sets of identifiers here: their order says nothing. */
export function sameValue(a: Value, b: Value): boolean {
  if (Array.isArray(a) && Array.isArray(b)) {
    const [left, right] = [[...(a as string[])].sort(), [...(b as string[])].sort()];
    return left.length === right.length && left.every((v, i) => v === right[i]);
  }
  return a === b;
}

/**
 * What an edit that began from `before` and wants `after` means for a thing that is `now`. A key that nobody else
 * touched is written; one that somebody else set to the same is done already; one that somebody else set to something
 * different clashes. Keys that `after` does not name are left alone.
 */
export function mergeEdit(before: Values, after: Values, now: Values): Merged {
  const changes: Record<string, Value> = {};
  const clashes: Clash[] = [];
  for (const [key, mine] of Object.entries(after)) {
    const theirs = now[key] ?? null;
    const seen = before[key] ?? null;
    if (sameValue(mine, seen) || sameValue(mine, theirs)) continue;
    if (sameValue(theirs, seen)) changes[key] = mine;
    else clashes.push({ key, before: seen, theirs, mine });
  }
  return { changes, clashes };
}
