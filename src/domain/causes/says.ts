import { CAUSE_VERDICTS, type CauseVerdict, type SiteCondition } from './site';
import type { FoundUnit, UnitSays } from './changes';
import type { CauseKind } from './kinds';

const isLive = (kind: CauseKind): kind is CauseVerdict =>
  (CAUSE_VERDICTS as readonly CauseKind[]).includes(kind);

/**
 * What the units of a site say of causes that follow reports. Stuck ends when a unit is seen to pass; what is dark or
 * not heard shows neither. A shutdown that nobody confirmed, or that did not happen, ends with the verdict: it is ok
 * only where the unit is down or shutdown is no longer commanded.
 */
export function unitsSay(site: SiteCondition): (kind: CauseKind, unit: FoundUnit) => UnitSays {
  const strings = new Map(site.strings.map((s) => [s.id, s]));
  return (kind, unit) => {
    if (!isLive(kind)) return 'unknown';
    const string = strings.get(unit.stringId);
    if (!string) return 'gone';
    if (unit.position === null) {
      const wanted = kind === 'stuck' ? 'stuck_positions_unknown' : kind;
      return string.finding?.kind === wanted ? 'shows' : 'well';
    }
    const slot = string.slots.find((s) => s.position === unit.position);
    if (slot?.serial !== unit.serial) return 'gone';
    const { state, verdict } = slot;
    switch (kind) {
      case 'stuck':
        if (verdict === 'stuck') return 'shows';
        return state === 'passing' && (verdict === 'ok' || verdict === 'late') ? 'well' : 'unknown';
      case 'silent':
        if (state === 'silent') return 'shows';
        return state === 'passing' || state === 'shutdown' ? 'well' : 'unknown';
      case 'not_shutting_down':
        if (verdict === 'not_shutting_down') return 'shows';
        // a unit that can't be seen while shutdown is commanded is `unconfirmed`: the hazard stands
        return verdict === 'ok' || verdict === 'late' || verdict === 'stuck' ? 'well' : 'unknown';
      case 'unconfirmed':
        if (verdict === 'unconfirmed') return 'shows';
        return verdict === 'flapping' ? 'unknown' : 'well';
    }
  };
}

/** Shutdown of what is dark, tells nothing or was never heard can't be confirmed by its nature: said, but no alarm. */
const BY_NATURE = ['night', 'tells_nothing', 'not_heard_yet'];
export const isAlarm = (cause: { key: string; verdict: CauseVerdict }): boolean =>
  cause.verdict !== 'unconfirmed' || !BY_NATURE.includes(cause.key.split(':')[1] ?? '');
