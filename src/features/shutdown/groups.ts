import { groupedBy } from '../../domain/grouped-by';
import { byGravity, isHazard } from '../../components/causes/words';
import type { CauseNow, CommandNow, SiteNow } from '../../schemas/api/now';
import type { ShutdownView } from '../../schemas/api/shutdown';

/** One question of the page with its causes: each a site and a shared part, the oldest first. */
export interface Group {
  verdict: CauseNow['verdict'];
  causes: CauseNow[];
}

/** Causes of one question before somebody asks for all of them. */
export const CAUSES_AT_ONCE = 20;

/** The causes of a group that are drawn: hazards all, of the others the first ones, or all where that was asked for. */
export const shownOf = ({ verdict, causes }: Group, whole: ReadonlySet<Group['verdict']>): CauseNow[] =>
  whole.has(verdict) || isHazard({ verdict }) ? causes : causes.slice(0, CAUSES_AT_ONCE);

const oldestFirst = (a: CauseNow, b: CauseNow): number =>
  a.since.localeCompare(b.since) || a.siteName.localeCompare(b.siteName);

const holds = (text: string | null, wanted: string): boolean =>
  text !== null && text.toLowerCase().includes(wanted);

/** A cause with only the units that match, or undefined. A match of site or part keeps all its units. */
function searched(cause: CauseNow, wanted: string): CauseNow | undefined {
  if (wanted === '' || holds(cause.siteName, wanted) || holds(cause.sharedPart?.name ?? null, wanted))
    return cause;
  const units = cause.units.filter((u) => holds(u.stringName, wanted) || holds(u.serial, wanted));
  return units.length > 0 ? { ...cause, units } : undefined;
}

/** The causes that a view shows, gravest question first; questions without any are left out. */
export function shutdownGroups(causes: readonly CauseNow[], view: ShutdownView): Group[] {
  const wanted = view.q.toLowerCase();
  const shown = [...causes].sort(byGravity).flatMap((cause) => {
    if (view.show !== 'all' && cause.verdict !== view.show) return [];
    return searched(cause, wanted) ?? [];
  });
  return [...groupedBy(shown, (cause) => cause.verdict)].map(([verdict, list]) => ({
    verdict,
    causes: list.sort(oldestFirst),
  }));
}

/** A site with something other than a release in force. */
export interface Held {
  site: SiteNow;
  commands: CommandNow[];
}

/** A person opened an initiator: on purpose. A keep-alive or power that went is not. */
export const onPurpose = (command: Pick<CommandNow, 'inForce'>): boolean => command.inForce === 'initiator';

/** Sites in shutdown on purpose and sites whose command was lost, each by how long it has held. */
export function heldSites(sites: readonly SiteNow[]): { purpose: Held[]; lost: Held[] } {
  const of = (keep: (command: CommandNow) => boolean): Held[] =>
    sites
      .map((site) => ({
        site,
        commands: site.commands.filter(keep).sort((a, b) => a.since.localeCompare(b.since)),
      }))
      .filter((held) => held.commands.length > 0)
      .sort((a, b) => (a.commands[0]?.since ?? '').localeCompare(b.commands[0]?.since ?? ''));
  return { purpose: of(onPurpose), lost: of((c) => !onPurpose(c)) };
}

/** One row of the download: a unit, or a string whose positions are unknown. */
export interface ShutdownRow {
  cause: CauseNow;
  unit: CauseNow['units'][number] | null;
}

export const shutdownRows = (groups: readonly Group[]): ShutdownRow[] =>
  groups.flatMap((group) =>
    group.causes.flatMap((cause): ShutdownRow[] =>
      cause.units.length > 0 ? cause.units.map((unit) => ({ cause, unit })) : [{ cause, unit: null }],
    ),
  );
