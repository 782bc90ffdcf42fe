/** What a case is: its kinds, and its states. Kinds and states are stored: none is renamed. */

/** What is wrong, as the judgements name it; `other` where none of them says. Names the checklist. */
export const CASE_KINDS = [
  'not_shutting_down',
  'stuck',
  'unconfirmed',
  'silent',
  'low_output',
  'loop_resistance',
  'wrong_string',
  'weak_unit',
  'other',
] as const;
export type CaseKind = (typeof CASE_KINDS)[number];

/** The kind of a cause as a case has it; what is not known here is `other`. */
export const caseKindOf = (kind: string): CaseKind => CASE_KINDS.find((k) => k === kind) ?? 'other';

export const CASE_ORIGINS = ['cause', 'string', 'hand', 'customer'] as const;
export type CaseOrigin = (typeof CASE_ORIGINS)[number];

export const CASE_STATES = ['open', 'waiting', 'done', 'no_fault_found'] as const;
export type CaseState = (typeof CASE_STATES)[number];
export const isClosed = (state: CaseState): boolean => state === 'done' || state === 'no_fault_found';

/** What Wakeline found when it looked again after closing. */
export const CHECK_OUTCOMES = ['held', 'not_held', 'cant_tell'] as const;
export type CheckOutcome = (typeof CHECK_OUTCOMES)[number];

/** A unit or a whole string that a case is about. */
export interface CasePart {
  /** Public identifier of the string. */
  stringId: string;
  stringName: string;
  /** null: somewhere in the string. */
  position: number | null;
  serial: string | null;
}
