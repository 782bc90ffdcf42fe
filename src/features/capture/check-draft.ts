import type { CheckKey, CheckResult, Figure, Figures } from '../../domain/commissioning/checks/definition';
import { figureFaults } from '../../domain/commissioning/checks/figures';
import { typedNumber } from '../../schemas/typed-number';
import type { CheckRecord } from '../../schemas/api/checks';
import type { CheckFacts } from './records';
import { checkDraft } from '../../words/capture';

/** What is typed of one check: all text, kept for this tab so that a reload loses nothing. */
export interface CheckDraft {
  figures: Record<string, string>;
  reason: string;
  note: string;
}
export const EMPTY_DRAFT: CheckDraft = { figures: {}, reason: '', note: '' };

const text = (value: string | number): string => String(value).replace('-', '−');
/** A record as it would be typed again. */
export const draftOf = (record: Pick<CheckRecord, 'figures' | 'reason' | 'note'>): CheckDraft => ({
  figures: Object.fromEntries(
    Object.entries(record.figures).map(([key, value]) => [
      key,
      typeof value === 'number' ? text(value) : value,
    ]),
  ),
  reason: record.reason,
  note: record.note,
});

/** Two people's records of one check in one form: the own figures first, both notes. */
export function mergedDraft(
  mine: Pick<CheckRecord, 'figures' | 'reason' | 'note'>,
  theirs: Pick<CheckRecord, 'figures' | 'reason' | 'note'>,
): CheckDraft {
  const both = (a: string, b: string): string => (a === b || b === '' ? a : a === '' ? b : `${a}\n${b}`);
  return draftOf({
    figures: { ...theirs.figures, ...mine.figures },
    reason: both(mine.reason, theirs.reason),
    note: both(mine.note, theirs.note),
  });
}

export type DraftRead = { facts: CheckFacts; faults: null } | { facts: null; faults: Record<string, string> };

/** The facts of a draft, or what is wrong with which figure, `reason` or `note`. */
export function readDraft(
  check: CheckKey,
  figures: readonly Figure[],
  result: CheckResult,
  draft: CheckDraft,
  knows: (connector: string) => boolean,
): DraftRead {
  const faults: Record<string, string> = {};
  const values: Record<string, number | string> = {};
  for (const figure of figures) {
    const typed = (draft.figures[figure.key] ?? '').trim();
    if (typed === '') continue;
    if (figure.kind !== 'number') {
      values[figure.key] = typed;
      continue;
    }
    const { value, fault } = typedNumber(typed, figure.name, {
      min: figure.min,
      max: figure.max,
      unit: figure.unit,
    });
    if (fault !== null) faults[figure.key] = fault;
    else values[figure.key] = value;
  }
  const read: Figures = values;
  for (const { figure, message } of figureFaults(check, result, read, knows)) faults[figure] ??= message;
  const reason = draft.reason.trim();
  if (result === 'not_applicable' && reason === '') faults.reason = checkDraft.sayWhyItDoes;
  if (result === 'fail' && reason === '') faults.reason = checkDraft.sayWhatIsWrong;
  if (reason.length > 500) faults.reason = checkDraft.atMost500Characters;
  if (draft.note.trim().length > 2000) faults.note = checkDraft.atMost2000Characters;
  if (Object.keys(faults).length > 0) return { facts: null, faults };
  return { facts: { check, result, reason, note: draft.note.trim(), figures: read }, faults: null };
}

const keyOf = (person: string, string: string, check: string): string =>
  checkDraft.wakelineCheck(person, string, check);

/** What was typed and not saved in this tab; null: nothing. */
export function keptDraft(person: string, string: string, check: string): CheckDraft | null {
  try {
    const kept = window.sessionStorage.getItem(keyOf(person, string, check));
    return kept ? (JSON.parse(kept) as CheckDraft) : null;
  } catch {
    return null; // a browser that keeps nothing: the head of the page says so
  }
}
export function keepDraft(person: string, string: string, check: string, draft: CheckDraft | null): void {
  try {
    if (draft) window.sessionStorage.setItem(keyOf(person, string, check), JSON.stringify(draft));
    else window.sessionStorage.removeItem(keyOf(person, string, check));
  } catch {
    return; // as above
  }
}
