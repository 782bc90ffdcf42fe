import { checklistTexts } from '../../words/domain-checklists';
import type { CaseKind } from './cases';

/**
 * What to look at before anybody is called, by what is wrong. Common practice of the trade throughout: no published
 * source stands behind a line, and a maker's manual or local code comes first. Keys are stored: none is renamed.
 */
export interface ChecklistItem {
  key: string;
  check: string;
  why: string;
  /** Where somebody might act on it. */
  caution?: string;
}

type ItemKey = keyof typeof checklistTexts;

const LISTS: Record<CaseKind, readonly ItemKey[]> = {
  not_shutting_down: ['told', 'commanded', 'left_out', 'cross_talk', 'roster', 'meter'],
  stuck: ['command', 'keep_alive', 'roster', 'replaced', 'module_leads', 'connectors'],
  unconfirmed: ['daylight', 'gateway_power', 'logger', 'roster', 'meter'],
  silent: ['daylight', 'gateway_power', 'logger', 'roster', 'replaced', 'module_leads'],
  low_output: ['inverter', 'siblings', 'shade', 'soiling', 'module_damage', 'fuses', 'connectors'],
  loop_resistance: ['same_meter', 'cable', 'connectors', 'long_leads', 'fuses'],
  wrong_string: ['roster', 'replaced', 'isolate_one'],
  weak_unit: ['shade', 'soiling', 'module_damage', 'module_leads', 'roster'],
  other: ['seen', 'daylight', 'logger', 'inverter', 'roster', 'meter'],
};

/** The lines to go through for a case of this kind, in their order. */
export const checklistOf = (kind: CaseKind): ChecklistItem[] =>
  LISTS[kind].map((key) => ({ key, ...checklistTexts[key] }));

/** A line by its key, also one of another kind's list: what was ticked stays readable. */
export function checklistItem(key: string): ChecklistItem | undefined {
  const known = Object.keys(checklistTexts).find((k): k is ItemKey => k === key);
  return known && { key: known, ...checklistTexts[known] };
}

export interface ChecklistLine extends ChecklistItem {
  /** Whether it is on the list of this kind. */
  own: boolean;
}
/** The lines of a case: those of its kind, then what was ticked while it was of another. */
export function checklistLines(
  kind: CaseKind,
  marks: readonly { key: string; done: boolean }[],
): ChecklistLine[] {
  const own = checklistOf(kind).map((item) => ({ ...item, own: true }));
  const others = marks.flatMap((m) => {
    const item = m.done && !own.some(({ key }) => key === m.key) ? checklistItem(m.key) : undefined;
    return item ? [{ ...item, own: false }] : [];
  });
  return [...own, ...others];
}
