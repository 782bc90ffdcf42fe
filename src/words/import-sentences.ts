import type { ImportColumn } from '../domain/commissioning/import/columns';
import type { Change } from '../domain/commissioning/import/plan';
import type { CellFault, FaultCode } from '../domain/commissioning/import/table';
import type { ChangeKind, ImportOutcome } from '../schemas/api/import';
import type { ImportStep } from '../schemas/lists-and-limits';
import { capital, counted } from './domain-counts';
import { COLUMN_LABELS } from './domain-import';

export const CHANGE_NAMES: Record<ChangeKind, (n: number) => string> = {
  placed: (n) => `${counted(n, 'unit')} placed`,
  moved: (n) => `${counted(n, 'unit')} moved`,
  replaced: (n) => `${counted(n, 'unit')} replaced`,
  string_made: (n) => `${counted(n, 'string')} made`,
  string_grows: (n) => `${counted(n, 'string')} made longer`,
  module_type: (n) => `${counted(n, 'module type')} changed`,
  roof_place: (n) => `${counted(n, 'place')} on the roof changed`,
};

/** One change in a sentence. */
export function changeWords(change: Change): string {
  switch (change.kind) {
    case 'string_made':
      return `new string with ${counted(change.slots, 'position')}`;
    case 'string_grows':
      return `grows from ${change.from} to ${counted(change.to, 'position')}`;
    case 'placed':
      return `${change.serial} comes to an empty slot`;
    case 'replaced':
      return `${change.serial} comes in for ${change.instead}`;
    case 'moved':
      return `${change.serial} moves here from ${change.from.string}, position ${change.from.position}${change.instead ? `, in for ${change.instead}` : ''}`;
    case 'module_type':
      return `module type ${change.from} becomes ${change.to}`;
    case 'roof_place':
      return 'another place on the roof';
  }
}

export const changePlace = (change: Change): string =>
  'position' in change ? `${change.string}, position ${change.position}` : change.string;

export const FAULT_NAMES: Record<FaultCode, string> = {
  string_empty: 'string empty',
  string_unknown: 'string not there yet',
  string_name: 'name of a string',
  string_incomplete: 'new string lacks something',
  string_contradicts: 'rows contradict each other',
  string_differs: 'differs from the as-built',
  position_empty: 'position empty',
  position_number: 'position no number',
  position_range: 'position out of range',
  position_double: 'position twice',
  position_missing: 'position missing',
  serial_format: 'no serial',
  serial_double: 'serial twice',
  serial_elsewhere: 'serial sits elsewhere',
  serial_type: 'serial of another type',
  serial_unlike: 'serial unlike the others',
  number_ambiguous: 'number with two meanings',
  number_fault: 'no number',
  name_unknown: 'name not known',
  text_long: 'text too long',
  column_doubtful: 'wrong column',
  unit_types_mixed: 'unit types mixed',
};

export const STEP_WORDS: Record<ImportStep, string> = {
  reading: 'The server reads the rows',
  comparing: 'Comparing with the as-built',
  strings: 'Making strings',
  slots: 'Writing slots',
  units: 'Placing units',
  kept: 'Keeping all of it',
};

export interface Finding {
  heading: string;
  sentence: string;
}

export interface Standing {
  /** Rows of the file; null: no file yet. */
  rows: number | null;
  missing: readonly ImportColumn[];
  faults: readonly CellFault[] | null;
  outcome: ImportOutcome | null;
}

/** What the page has to say at each point of the way. */
export function finding({ rows, missing, faults, outcome }: Standing): Finding {
  if (outcome?.written)
    return {
      heading: `${counted(outcome.rows, 'row')} ${outcome.rows === 1 ? 'is' : 'are'} in the as-built`,
      sentence: `${summary(outcome)}. The history keeps who did it and why.`,
    };
  if (rows === null)
    return {
      heading: 'Strings and serials from a file',
      sentence:
        'Choose a CSV or paste from a spreadsheet. Nothing is written before you have seen what would change.',
    };
  if (missing.length > 0)
    return {
      heading: `Which column is the ${missing.map((c) => COLUMN_LABELS[c]).join(', which the ')}?`,
      sentence: `${counted(rows, 'row')} ${rows === 1 ? 'is' : 'are'} read. Choose the columns below, then the cells are checked.`,
    };
  const bad = (outcome?.faults ?? faults ?? []).filter((f) => f.weight === 'fault').length;
  const badCount = outcome ? outcome.faultCount : bad;
  if (badCount > 0)
    return {
      heading: `${counted(badCount, 'cell')} of ${counted(rows, 'row')} ${badCount === 1 ? 'needs' : 'need'} a look`,
      sentence:
        'An import is all or nothing: each is marked below with its row, its column and what would do.',
    };
  if (!outcome)
    return faults
      ? {
          heading: `${counted(rows, 'row')} read without a fault`,
          sentence: 'The server compares them with the as-built.',
        }
      : {
          heading: `Checking ${counted(rows, 'row')}`,
          sentence: 'Every cell is looked at; nothing is written.',
        };
  const changes = Object.values(outcome.counts).reduce((a, b) => a + b, 0);
  if (changes === 0)
    return {
      heading: 'Nothing to change',
      sentence: `The as-built says the same as the ${counted(rows, 'row')} of this file already.`,
    };
  return {
    heading: `${counted(rows, 'row')} would make ${counted(changes, 'change')}`,
    sentence: `${summary(outcome)}. Look at them below, say why, then import.`,
  };
}

/** "9,996 units placed, 4 replaced, 2 rows as they were". */
export function summary(outcome: ImportOutcome): string {
  const parts = (Object.entries(outcome.counts) as [ChangeKind, number][]).map(([kind, n]) =>
    CHANGE_NAMES[kind](n),
  );
  if (outcome.unchanged > 0) parts.push(`${counted(outcome.unchanged, 'row')} as before`);
  return capital(parts.join(', '));
}
