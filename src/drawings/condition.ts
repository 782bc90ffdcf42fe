import type { UnitState, Verdict } from '../domain/verdicts/codes';
import { drawingsStringsCondition } from '../words/drawings-strings';

/** What a drawing needs to know of one slot; the SlotNow of the API satisfies it. */
export interface DrawnSlot {
  position: number;
  serial: string | null;
  state: UnitState | null;
  verdict: Verdict | null;
  /** V, output side */
  voltage: number | null;
  /** V, module side */
  voltageIn: number | null;
  /** The output is inferred from the unit's claim. */
  assumed: boolean;
  /** V, if it were passing now */
  expected: number | null;
}

/** How a slot is drawn. */
export type Condition =
  'empty' | 'untold' | 'passing' | 'not_shutting_down' | 'stuck' | 'shutdown' | 'silent' | 'unheard' | 'dark';

export function conditionOf(slot: DrawnSlot): Condition {
  if (slot.serial === null) return 'empty';
  if (slot.verdict === 'not_shutting_down') return 'not_shutting_down';
  if (slot.verdict === 'stuck') return 'stuck';
  return slot.state ?? 'untold';
}

/**
 * V that this slot adds to its string; null where nothing says. Where the output is not measured it follows
 * from the claim: the module's voltage while passing, nothing while in shutdown.
 */
export function rise(slot: DrawnSlot): number | null {
  if (slot.serial === null) return 0;
  const condition = conditionOf(slot);
  if (condition === 'silent' || condition === 'unheard' || condition === 'untold') return null;
  if (condition === 'dark') return 0;
  if (slot.voltage !== null) return slot.voltage;
  if (!slot.assumed) return null;
  return slot.state === 'passing' ? slot.voltageIn : 0;
}

export const CONDITION_WORDS: Record<Condition, string> = {
  empty: drawingsStringsCondition.noUnit,
  untold: drawingsStringsCondition.tellsNothing,
  passing: drawingsStringsCondition.passing,
  not_shutting_down: drawingsStringsCondition.notShuttingDown,
  stuck: drawingsStringsCondition.stuck,
  shutdown: drawingsStringsCondition.inShutdown,
  silent: drawingsStringsCondition.silent,
  unheard: drawingsStringsCondition.unheard,
  dark: drawingsStringsCondition.dark,
};
