import type { ShutdownNow, ShutdownView } from '../../schemas/api/shutdown';
import { shutdownFinding } from './finding';
import { shownOf, shutdownGroups, type Group } from './groups';

/** How much a question of the page holds. */
export interface Count {
  causes: number;
  units: number;
}

/** What is known of the whole while a browser has only its first page: the rest comes with the first word of /live. */
export interface Whole {
  finding: ReturnType<typeof shutdownFinding>;
  groups: Partial<Record<Group['verdict'], Count>>;
}

export const countOf = ({ causes }: Pick<Group, 'causes'>): Count => ({
  causes: causes.length,
  units: causes.reduce((n, c) => n + c.units.length, 0),
});

/** What the page of a large fleet is sent with: the causes that it draws at first, and what is told of the others. */
export function firstPage<S extends Pick<ShutdownNow, 'sites' | 'causes'>>(
  now: S,
  view: ShutdownView,
): { shutdown: S; whole: Whole | null } {
  const groups = shutdownGroups(now.causes, view);
  // a cause that the search cut is drawn with the units that match, and kept with all of them
  const drawn = new Set(groups.flatMap((g) => shownOf(g, new Set())).map((c) => c.key));
  const causes = now.causes.filter((c) => drawn.has(c.key));
  if (causes.length === now.causes.length) return { shutdown: now, whole: null };
  const concerned = new Set(causes.map((c) => c.siteId));
  return {
    shutdown: {
      ...now,
      causes,
      sites: now.sites.filter((s) => concerned.has(s.id) || s.commands.length > 0),
    },
    whole: {
      finding: shutdownFinding(now.sites, now.causes),
      groups: Object.fromEntries(groups.map((g) => [g.verdict, countOf(g)])),
    },
  };
}
