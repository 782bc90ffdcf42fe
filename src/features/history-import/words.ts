import {
  QUANTITIES,
  UNITS,
  type Quantity,
  type Subject,
  subjectKey,
} from '../../domain/history-import/layout';
import { counted, listed } from '../../drawings/numbers';
import { longDate } from '../../drawings/times';
import type { HistoryImportView, HistoryStep } from '../../schemas/api/history-import';
import type { CheckedHistory } from './desk';

export const STEP_WORDS: Record<HistoryStep, string> = {
  reading: 'The server reads and keeps the rows',
  adding_up: 'Adding up days',
  kept: 'Keeping all of it',
};

/** "1 January 2024 to 31 December 2024", or the one day. */
export function span(fromMs: number, toMs: number, timeZone: string): string {
  const from = longDate(fromMs, timeZone);
  const to = longDate(toMs, timeZone);
  return from === to ? from : `${from} to ${to}`;
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
      heading: `${counted(made.readings, 'reading')} ${made.readings === 1 ? 'is' : 'are'} imported`,
      sentence: `${span(Date.parse(made.from), Date.parse(made.to), timeZone)}: ${listed(made.of.slice(0, 5))}${made.of.length > 5 ? ` and ${made.of.length - 5} more` : ''}. Pages show them where Wakeline measured nothing, and mark them.`,
    };
  if (rows === null) {
    const inForce = imports.filter((i) => i.undoneAt === null);
    return {
      heading:
        inForce.length === 0
          ? 'Earlier readings are not imported yet'
          : `${counted(
              inForce.reduce((n, i) => n + i.readings, 0),
              'earlier reading',
            )} from ${counted(inForce.length, 'file')}`,
      sentence:
        'Choose a CSV of an earlier logger, or paste from a spreadsheet. Nothing is kept before you have seen what would come in, and each import can be taken back.',
    };
  }
  if (layoutFault)
    return { heading: `${counted(rows, 'row')} read; their columns need a word`, sentence: layoutFault };
  if (!checked)
    return {
      heading: `Checking ${counted(rows, 'row')}`,
      sentence: 'Every cell is looked at; nothing is kept.',
    };
  if (checked.readings === 0)
    return {
      heading: 'No reading could be read from this file',
      sentence:
        'Look at the columns, the time zone and the names below: each row says what is wrong with it.',
    };
  const period =
    checked.from === null || checked.to === null
      ? ''
      : span(checked.from * 1000, checked.to * 1000, timeZone);
  return {
    heading: `${counted(checked.readings, 'reading')} would come in`,
    sentence:
      checked.leftOut === 0
        ? `${period}. Every cell could be read.`
        : `${period}. ${counted(checked.leftOut, 'cell')} can't be read and would be left out: they are listed below.`,
  };
}

/** Choices of what a column is: its place, or a quantity in a unit. */
export const columnOptions = (places: readonly { value: string; label: string }[]) => [
  { value: 'nothing', label: 'not used' },
  ...places,
  ...QUANTITIES.flatMap((q) =>
    UNITS[q].map(({ unit }) => ({ value: `${q}:${unit}`, label: `${q} in ${unit}` })),
  ),
];

export const isQuantityName = (text: string): text is Quantity =>
  (QUANTITIES as readonly string[]).includes(text);

export const subjectOptions = (
  subjects: readonly Subject[],
  words: (s: Subject) => string,
  rowsNamed: boolean,
) => [
  { value: '', label: rowsNamed ? 'what the row names' : 'choose of what' },
  ...subjects.map((s) => ({ value: subjectKey(s), label: words(s) })),
];
