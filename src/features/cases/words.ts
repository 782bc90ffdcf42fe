import { type CaseState, type CheckOutcome } from '../../domain/cases/cases';
import { CASE_STATE_WORDS, CHECK_OUTCOME_WORDS } from '../../words/domain-cases';
import type { Tone } from '../../components/ui/Tag';
import { shortDate } from '../../drawings/times';
import type { CaseEntry, CaseItem } from '../../schemas/api/cases';
import { casesWords } from '../../words/cases';

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
  open: casesWords.somebodyIsToAct,
  waiting: casesWords.forAPartA,
  done: casesWords.putRightWakelineLooks,
  no_fault_found: casesWords.lookedAtNothingWrong,
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
  return c.overdue ? casesWords.overdueSince(day) : casesWords.dueDay(day);
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
      return detail.origin === 'customer' ? casesWords.reportedThis : casesWords.openedTheCase;
    case 'comment':
      return casesWords.wrote;
    case 'change':
      return casesWords.changedMap(
        changesOf(entry)
          .map((c) =>
            c.field === casesWords.whatIsWrong
              ? casesWords.whatIsWrong
              : `${c.field}: ${short(c.from)} → ${short(c.to)}`,
          )
          .join('; '),
      );
    case 'checklist':
      return `${detail.done === true ? casesWords.checked : casesWords.tookBack}: ${String(detail.check ?? '')}`;
    case 'photo':
      return casesWords.addedThePhoto(String(detail.name ?? ''));
    case 'state':
      return isState(detail.to) ? casesWords.movedItTo(CASE_STATE_WORDS[detail.to]) : casesWords.movedIt;
    case 'checked': {
      const outcome = detail.outcome as CheckOutcome;
      return casesWords.lookedAgain(CHECK_OUTCOME_WORDS[outcome]);
    }
    case 'reopened':
      return casesWords.openedTheCaseAgain;
  }
}

/** Keys of the board and list, for the list of keys. */
export const CASES_KEYS = [
  ['n', casesWords.openACase],
  ['b l', casesWords.boardList],
  ['m u o', casesWords.mineNobodysOverdue],
  ['[ ]', casesWords.moveTheCardThat],
  ['← →', casesWords.fromColumnToColumn],
] as const;

/** Keys of one case. */
export const CASE_KEYS = [
  ['c', casesWords.writeAComment],
  ['e', casesWords.changeWhatIsWrong],
  ['a', casesWords.giveItToSomebody],
] as const;
