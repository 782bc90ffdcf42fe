import {
  CASE_STATE_WORDS,
  CHECK_OUTCOME_WORDS,
  type CaseState,
  type CheckOutcome,
} from '../../domain/cases/cases';
import type { Tone } from '../../components/ui/Tag';
import { shortDate } from '../../drawings/times';
import type { CaseEntry, CaseItem } from '../../schemas/api/cases';

export const STATE_TONE: Record<CaseState, Tone> = {
  open: 'rust',
  waiting: 'slate',
  done: 'petrol',
  no_fault_found: 'plain',
};
export const STATE_SHAPE: Record<CaseState, string> = {
  open: '●',
  waiting: '◔',
  done: '✓',
  no_fault_found: '○',
};

/** What each column of the board is for. */
export const STATE_MEANS: Record<CaseState, string> = {
  open: 'Somebody is to act',
  waiting: 'For a part, a visit, an answer',
  done: 'Put right; Wakeline looks again',
  no_fault_found: 'Looked at, nothing wrong',
};

export const OUTCOME_TONE: Record<CheckOutcome, Tone> = {
  held: 'petrol',
  not_held: 'rust',
  cant_tell: 'plain',
};

/** "due 3 Dec", "overdue since 3 Dec". */
export function dueWords(c: Pick<CaseItem, 'dueOn' | 'overdue'>): string {
  if (!c.dueOn) return '';
  const day = shortDate(`${c.dueOn}T12:00:00Z`, 'UTC');
  return c.overdue ? `overdue since ${day}` : `due ${day}`;
}

const isState = (value: unknown): value is CaseState =>
  typeof value === 'string' && Object.hasOwn(CASE_STATE_WORDS, value);

export interface Said {
  field: string;
  from: string;
  to: string;
}
export const changesOf = (entry: CaseEntry): Said[] =>
  Array.isArray(entry.detail.changes) ? (entry.detail.changes as Said[]) : [];

const LONG = 80;
const short = (text: string): string => (text.length > LONG ? `${text.slice(0, LONG).trimEnd()}…` : text);

/** One line on what an entry says, without who and when. */
export function entryWords(entry: CaseEntry): string {
  const { detail } = entry;
  switch (entry.kind) {
    case 'opened':
      return detail.origin === 'customer' ? 'reported this' : 'opened the case';
    case 'comment':
      return 'wrote';
    case 'change':
      return `changed ${changesOf(entry)
        .map((c) =>
          c.field === 'what is wrong' ? 'what is wrong' : `${c.field}: ${short(c.from)} → ${short(c.to)}`,
        )
        .join('; ')}`;
    case 'checklist':
      return `${detail.done === true ? 'checked' : 'took back'}: ${String(detail.check ?? '')}`;
    case 'photo':
      return `added the photo ${String(detail.name ?? '')}`;
    case 'state':
      return isState(detail.to) ? `moved it to ${CASE_STATE_WORDS[detail.to].toLowerCase()}` : 'moved it';
    case 'checked': {
      const outcome = detail.outcome as CheckOutcome;
      return `looked again: ${CHECK_OUTCOME_WORDS[outcome] ?? ''}`;
    }
    case 'reopened':
      return 'opened the case again';
  }
}

/** Keys of the board and list, for the list of keys. */
export const CASES_KEYS = [
  ['n', 'Open a case'],
  ['b l', 'Board, list'],
  ['m u o', 'Mine, nobody’s, overdue'],
  ['[ ]', 'Move the card that has the focus'],
  ['← →', 'From column to column on the board'],
] as const;

/** Keys of one case. */
export const CASE_KEYS = [
  ['c', 'Write a comment'],
  ['e', 'Change what is wrong'],
  ['a', 'Give it to somebody'],
] as const;
