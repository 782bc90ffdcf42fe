import { groupedBy } from '../../domain/grouped-by';
import type { OperationShown } from '../../schemas/api/developers';

const textOf = (o: OperationShown): string =>
  [
    o.method,
    o.path,
    o.id,
    o.group,
    o.summary,
    o.words,
    o.scope ?? '',
    ...o.takes.map((f) => `${f.name} ${f.words}`),
    ...o.answers.flatMap((a) => [a.words, ...a.fields.map((f) => `${f.name} ${f.words}`)]),
  ]
    .join(' ')
    .toLowerCase();

/** Operations in which every word typed occurs somewhere. */
export function operationsFound(operations: readonly OperationShown[], typed: string): OperationShown[] {
  const words = typed.toLowerCase().split(/\s+/).filter(Boolean);
  return operations.filter((o) => {
    const text = textOf(o);
    return words.every((w) => text.includes(w));
  });
}

/** Groups in the order in which they first occur. */
export function groupsOf(
  operations: readonly OperationShown[],
): { group: string; operations: OperationShown[] }[] {
  return [...groupedBy(operations, (o) => o.group)].map(([group, of]) => ({ group, operations: of }));
}
