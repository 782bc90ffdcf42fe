import { byGravity, isHazard } from '../../components/causes/words';
import type { FleetNow, FleetView } from '../../schemas/api/fleet';
import { fleetFinding, type Finding } from './finding';
import { fleetLines } from './list';

/** Lines of the table before somebody asks for more. */
export const LINES_AT_ONCE = 50;
/** Causes that are no hazard, of a fleet that has many: the gravest. Hazards are all shown. */
export const CAUSES_AT_ONCE = 12;

/** What is known of the whole while a browser has only its first page: the rest comes with the first word of /live. */
export interface Whole {
  finding: Finding;
  /** Sites there are, and those that the view asks for. */
  sites: number;
  lines: number;
}

/** As many causes as a page begins with: every hazard, and of the others the first ones. Sorted by gravity before. */
export const causesAtFirst = <C extends Parameters<typeof isHazard>[0]>(causes: readonly C[]): C[] =>
  causes.filter((c, i) => i < CAUSES_AT_ONCE || isHazard(c));

/**
 * What a page of a large fleet is sent with: the lines that it shows first, and what is told of the whole. A small fleet
 * goes as it is.
 */
export function firstPage<F extends Pick<FleetNow, 'sites' | 'causes'>>(
  fleet: F,
  view: FleetView,
): { fleet: F; whole: Whole | null } {
  if (fleet.sites.length <= LINES_AT_ONCE) return { fleet, whole: null };
  const lines = fleetLines(fleet.sites, fleet.causes, view);
  const sites = lines.slice(0, LINES_AT_ONCE).map((l) => l.site);
  const shown = new Set(sites.map((s) => s.id));
  const first = new Set(causesAtFirst([...fleet.causes].sort(byGravity)));
  const causes = fleet.causes.filter((c) => shown.has(c.siteId) || first.has(c));
  return {
    fleet: { ...fleet, sites, causes },
    whole: {
      finding: fleetFinding(fleet.sites, fleet.causes),
      sites: fleet.sites.length,
      lines: lines.length,
    },
  };
}
