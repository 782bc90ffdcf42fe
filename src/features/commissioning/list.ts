import type { Sorting } from '../../components/ui/Table';
import type { DrawnSlot } from '../../drawings/condition';
import type { RollCallView } from '../../schemas/api/roll-call';
import type { StringTally } from './tally';

export const LIST_DEFAULTS: RollCallView = { strings: 'all', sort: 'name', order: 'up' };

const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });
const missingOf = (s: StringTally): number => s.units.length - s.heard;

const SORT: Record<RollCallView['sort'], (a: StringTally, b: StringTally) => number> = {
  name: (a, b) => byName.compare(a.string.name, b.string.name),
  // fewest heard first
  heard: (a, b) => missingOf(b) - missingOf(a),
  // weakest first; without any signal before all
  signal: (a, b) => (a.weakest?.signal ?? -Infinity) - (b.weakest?.signal ?? -Infinity) || 0,
};

/** The strings of a view: filtered and sorted; names settle what is equal. */
export function listedStrings(strings: readonly StringTally[], view: RollCallView): StringTally[] {
  const sign = view.order === 'down' ? -1 : 1;
  return strings
    .filter((s) => view.strings === 'all' || missingOf(s) > 0)
    .sort((a, b) => sign * (SORT[view.sort](a, b) || 0) || byName.compare(a.string.name, b.string.name));
}

export const sortingOf = (view: RollCallView): Sorting => ({
  key: view.sort,
  descending: view.order === 'down',
});

/**
 * A string's slots as the roll call draws them: a unit that has answered and not reported since is heard and
 * untold, no longer unheard.
 */
export function heardSlots(tally: StringTally): DrawnSlot[] {
  const answered = new Set(tally.units.filter((u) => u.answer).map((u) => u.position));
  return tally.string.slots.map((slot) =>
    slot.state === 'unheard' && answered.has(slot.position) ? { ...slot, state: null } : slot,
  );
}
