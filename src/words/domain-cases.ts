import type { CaseKind, CaseOrigin, CaseState, CheckOutcome } from '../domain/cases/cases';

/** Words of a case that pages, papers and its history share. */

export const CASE_KIND_WORDS: Record<CaseKind, string> = {
  not_shutting_down: 'Not shutting down',
  stuck: 'Stuck in shutdown',
  unconfirmed: 'Shutdown not confirmed',
  silent: 'Silent units',
  low_output: 'Low output',
  loop_resistance: 'Connector or lead resistance',
  wrong_string: 'In another string than drawn',
  weak_unit: 'Weak module or unit',
  other: 'Something else',
};
export const CASE_ORIGIN_WORDS: Record<CaseOrigin, string> = {
  cause: 'from a cause',
  string: 'from a string',
  hand: 'by hand',
  customer: 'by the customer',
};
export const CASE_STATE_WORDS: Record<CaseState, string> = {
  open: 'Open',
  waiting: 'Waiting',
  done: 'Done',
  no_fault_found: 'No fault found',
};
/** What was found at the second look after a closing. */
export const CHECK_OUTCOME_WORDS: Record<CheckOutcome, string> = {
  held: 'it held',
  not_held: 'it did not hold',
  cant_tell: 'can’t tell',
};
