import { replaced, tells } from '../../lib/patch';
import { api } from '../../lib/api';
import type { Change } from '../../schemas/live';
import type { WalkPage } from '../../schemas/api/walk';
import { paths } from '../../schemas/paths';

export const walkKey = (site: string): string[] => ['walk', site];
export const walkQuery = (initial: WalkPage) => ({
  queryKey: walkKey(initial.site.id),
  queryFn: ({ signal }: { signal: AbortSignal }) =>
    api<WalkPage>(paths.api.walk(initial.site.id), { signal }),
  initialData: initial,
});

/** The page with what /live brought; answers of a roll call make serials heard. */
export function patchWalk(page: WalkPage, change: Change, at: string): WalkPage {
  const strings = replaced(page.strings, change.strings, (s) => s.id);
  const fresh = (change.heard ?? []).map((h) => h.serial).filter((s) => !page.answered.includes(s));
  if (strings === page.strings && fresh.length === 0) return page;
  return { ...page, at, strings, answered: [...page.answered, ...fresh] };
}

/** The as-built was changed: places, serials and readings have to be read again. */
export const asBuiltChanged = (change: Change): boolean => tells(change, (e) => e.kind === 'roster_changed');
