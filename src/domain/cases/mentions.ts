/** "@Name" in a comment. A mention is a person of the picker whose name stands in the text behind the sign. */

export interface Mentionable {
  id: string;
  name: string;
}

/** What somebody is typing behind an @ just before the cursor; null: nothing of the kind. */
export function mentionAt(text: string, cursor: number): { from: number; typed: string } | null {
  const before = text.slice(0, cursor);
  const from = before.lastIndexOf('@');
  if (from < 0 || (from > 0 && !/[\s(,;]/.test(before[from - 1] ?? ''))) return null;
  const typed = before.slice(from + 1);
  // two words at most: names have blanks, sentences have more
  return /^[^\n@]{0,40}$/.test(typed) && typed.split(' ').length <= 2 ? { from, typed } : null;
}

/** Whose name begins so, or has a word that does; the given order, at most `most`. */
export function mentionChoices<P extends Mentionable>(people: readonly P[], typed: string, most = 6): P[] {
  const wanted = typed.trim().toLocaleLowerCase();
  return people
    .filter(({ name }) => {
      const lower = name.toLocaleLowerCase();
      return lower.startsWith(wanted) || lower.split(/\s+/).some((word) => word.startsWith(wanted));
    })
    .slice(0, most);
}

/** The text with the name put in for what was typed, and where the cursor then stands. */
export function withMention(text: string, cursor: number, name: string): { text: string; cursor: number } {
  const at = mentionAt(text, cursor);
  if (!at) return { text, cursor };
  const put = `@${name} `;
  return { text: text.slice(0, at.from) + put + text.slice(cursor), cursor: at.from + put.length };
}

const isLetter = (sign: string | undefined): boolean => sign !== undefined && /[\p{L}\p{N}]/u.test(sign);

/** Who is mentioned in a text; of two names that begin alike the longer one counts. */
export function mentionedIn<P extends Pick<Mentionable, 'name'>>(text: string, people: readonly P[]): P[] {
  const longestFirst = [...people].sort((a, b) => b.name.length - a.name.length);
  const found = new Set<P>();
  for (let at = text.indexOf('@'); at >= 0; at = text.indexOf('@', at + 1)) {
    const rest = text.slice(at + 1);
    const person = longestFirst.find((p) => rest.startsWith(p.name) && !isLetter(rest[p.name.length]));
    if (person) found.add(person);
  }
  return people.filter((p) => found.has(p));
}
