import { counted } from '../drawings/numbers';

/** Whoever made a change; null: a person whose account is gone. */
export const changedBy = (person: string | null): string => person ?? 'somebody who is gone';

export const historyBoard = {
  everything: 'Everything',
  units: 'Units',
  stringsAndSlots: 'Strings and slots',
  otherParts: 'Other parts',
  theSite: 'The site',
  noChangeFits: 'No change fits',
  nothingHasBeenChanged: 'Nothing has been changed here yet',
  commissioning: 'Commissioning',
  asBuilt: 'As-built',
  history: 'History',
  filteredPersonAt: (filtered: boolean, person: string) =>
    `${filtered ? 'The newest change that fits, by ' : 'The newest change, by '}${person} at `,
  everyChangeOfThe: 'Every change of the as-built is kept with who made it, when and why.',
  serialNameOrReason: 'Serial, name or reason',
  what: 'What',
  string: 'String',
  everyString: 'Every string',
  person: 'Person',
  everybody: 'Everybody',
  theHistoryCouldNot: 'The history could not be read',
  changes: 'Changes',
  newestFirstTimesIn: (replaceAll: string) => `newest first, times in ${replaceAll}`,
  showEverything: 'Show everything',
  reading: 'Reading …',
  olderChanges: 'Older changes',
  countedFieldsField: (fields: number) => counted(fields, 'field'),
  serialToNullSits: (serial: string, to: null | string, which: string, position: number) =>
    `${serial} ${to === null ? `sits in ${which}, position ${position}` : 'sits in no slot now'}`,
  whichPosition: (which: string, position: number) => `${which}, position ${position}`,
  from: 'from ',
  stillThere: ', still there',
  to: ' to ',
};
