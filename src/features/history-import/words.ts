import {
  QUANTITIES,
  UNITS,
  type Quantity,
  type Subject,
  subjectKey,
} from '../../domain/history-import/layout';
import { listed } from '../../drawings/numbers';
import { longDate } from '../../drawings/times';
import type { HistoryImportView, HistoryStep } from '../../schemas/api/history-import';
import type { CheckedHistory } from './desk';
import { QUANTITY_NAMES } from '../../words/domain-history-import';
import { historyImportWords } from '../../words/history-import';

export const STEP_WORDS: Record<HistoryStep, string> = {
  reading: historyImportWords.serverReads,
  adding_up: historyImportWords.addingUpDays,
  kept: historyImportWords.keepingAllOfIt,
};

/** "1 January 2024 to 31 December 2024", or the one day. */
export function span(fromMs: number, toMs: number, timeZone: string): string {
  const from = longDate(fromMs, timeZone);
  const to = longDate(toMs, timeZone);
  return from === to ? from : historyImportWords.fromTo(from, to);
}

export interface Standing {
  imports: readonly HistoryImportView[];
  rows: number | null;
  layoutFault: string | null;
  checked: CheckedHistory | null;
  made: HistoryImportView | null;
  timeZone: string;
}

/** What the page has to say at each point of the way. */
export function finding({ imports, rows, layoutFault, checked, made, timeZone }: Standing): {
  heading: string;
  sentence: string;
} {
  if (made)
    return {
      heading: historyImportWords.readingsImported(made.readings),
      sentence: historyImportWords.spanOf(
        span(Date.parse(made.from), Date.parse(made.to), timeZone),
        listed(made.of.slice(0, 5)),
        made.of.length,
      ),
    };
  if (rows === null) {
    const inForce = imports.filter((i) => i.undoneAt === null);
    return {
      heading:
        inForce.length === 0
          ? historyImportWords.noneYet
          : historyImportWords.reduceFromInForce(
              inForce.reduce((n, i) => n + i.readings, 0),
              inForce.length,
            ),
      sentence: historyImportWords.chooseAcsvOf,
    };
  }
  if (layoutFault) return { heading: historyImportWords.readTheirColumnsNeed(rows), sentence: layoutFault };
  if (!checked)
    return {
      heading: historyImportWords.checkingRows(rows),
      sentence: historyImportWords.everyCellIsLooked,
    };
  if (checked.readings === 0)
    return {
      heading: historyImportWords.noneReadable,
      sentence: historyImportWords.lookAtTheColumns,
    };
  const period =
    checked.from === null || checked.to === null
      ? ''
      : span(checked.from * 1000, checked.to * 1000, timeZone);
  return {
    heading: historyImportWords.wouldComeIn(checked.readings),
    sentence:
      checked.leftOut === 0
        ? historyImportWords.everyCellRead(period)
        : historyImportWords.cellsUnreadable(period, checked.leftOut),
  };
}

/** Choices of what a column is: its place, or a quantity in a unit. */
export const columnOptions = (places: readonly { value: string; label: string }[]) => [
  { value: 'nothing', label: historyImportWords.notUsed },
  ...places,
  ...QUANTITIES.flatMap((q) =>
    UNITS[q].map(({ unit }) => ({
      value: `${q}:${unit}`,
      label: historyImportWords.qInUnit(QUANTITY_NAMES[q], unit),
    })),
  ),
];

export const isQuantityName = (text: string): text is Quantity =>
  (QUANTITIES as readonly string[]).includes(text);

export const subjectOptions = (
  subjects: readonly Subject[],
  words: (s: Subject) => string,
  rowsNamed: boolean,
) => [
  { value: '', label: rowsNamed ? historyImportWords.whatTheRowNames : historyImportWords.chooseOfWhat },
  ...subjects.map((s) => ({ value: subjectKey(s), label: words(s) })),
];
