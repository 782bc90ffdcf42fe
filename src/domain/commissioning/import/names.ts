/** Names in a file against names that are known. */
import { bareName } from './table';

/** Edits that make `a` into `b`, at most `limit + 1`. */
function distance(a: string, b: string, limit: number): number {
  if (Math.abs(a.length - b.length) > limit) return limit + 1;
  let before = Array.from({ length: b.length + 1 }, (_, i) => i);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++)
      row[j] = Math.min(
        (before[j] ?? 0) + 1,
        (row[j - 1] ?? 0) + 1,
        (before[j - 1] ?? 0) + (a[i - 1] === b[j - 1] ? 0 : 1),
      );
    before = row;
  }
  return before[b.length] ?? limit + 1;
}

const digits = (text: string): string => text.replace(/\D/g, '');

/**
 * The known name that `text` is probably meant to be; null where none is near or two are as near. Other figures are
 * another name: "Slate 425" is no slip for "Slate 420".
 */
export function nearestName(text: string, known: readonly string[]): string | null {
  const bare = bareName(text);
  const squeezed = bare.replace(/[^\p{L}\p{N}]/gu, '');
  if (squeezed === '') return null;
  const limit = Math.max(1, Math.floor(bare.length / 4));
  const scored = known
    .filter((name) => digits(name) === digits(text))
    .map((name) => {
      const other = bareName(name);
      const score = other.replace(/[^\p{L}\p{N}]/gu, '') === squeezed ? 0 : distance(bare, other, limit);
      return { name, score };
    })
    .filter((s) => s.score <= limit)
    .sort((a, b) => a.score - b.score);
  const [best, next] = scored;
  return best && (!next || next.score > best.score) ? best.name : null;
}

/** Looks names up, with what the person has said about foreign ones. */
export class NameBook {
  private readonly byBare = new Map<string, string>();
  /** Files say the same name thousands of times. */
  private readonly seen = new Map<string, string | undefined>();
  constructor(
    readonly names: readonly string[],
    private readonly meanings: Readonly<Record<string, string>> = {},
  ) {
    for (const name of names) this.byBare.set(bareName(name), name);
  }
  /** The name as we write it; undefined: unknown here. */
  find(text: string): string | undefined {
    if (this.seen.has(text)) return this.seen.get(text);
    const bare = bareName(text);
    const meant = Object.hasOwn(this.meanings, bare) ? this.meanings[bare] : undefined;
    const found =
      this.byBare.get(bare) ?? (meant === undefined ? undefined : this.byBare.get(bareName(meant)));
    this.seen.set(text, found);
    return found;
  }
}
