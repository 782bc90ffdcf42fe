import type { MembershipOutcome } from '../domain/output/membership';
import type { HistoryQuantity } from '../schemas/api/string';

/** Heads of the tables of a site and its strings that people download. */

export const asBuiltHistoryHeads = {
  atUtc: 'at (UTC)',
  person: 'person',
  what: 'what',
  change: 'change',
  reason: 'reason',
  how: 'how',
};

export const checkHeads = {
  string: 'string',
  check: 'check',
  result: 'result',
  reason: 'reason',
  figures: 'figures',
  whatTheFiguresSay: 'what the figures say',
  source: 'source',
  note: 'note',
  person: 'person',
  timeUtc: 'time (UTC)',
  recordedUtc: 'recorded (UTC)',
  stringSignedBy: 'string signed by',
  stringSignedUtc: 'string signed (UTC)',
  signatureHolds: 'signature holds',
  stringMayBeSigned: 'string may be signed',
  notRecorded: 'not recorded',
};

export const readingHeads = {
  notRead: 'not read',
  string: 'string',
  units: 'units',
  stage: 'stage',
  between: 'between',
  voltageV: 'voltage (V)',
  expectedFromV: 'expected from (V)',
  expectedToV: 'expected to (V)',
  outcome: 'outcome',
  whatItMeans: 'what it means',
  light: 'light',
  commanded: 'commanded',
  unitsHeard: 'units heard',
  stringsComparedWith: 'strings compared with',
  note: 'note',
  person: 'person',
  timeUtc: 'time (UTC)',
  recordedUtc: 'recorded (UTC)',
};

export const designHeads = {
  outcome: 'outcome',
  check: 'check',
  strings: 'strings',
  figure: 'figure',
  limit: 'limit',
  unit: 'unit',
  matterOf: 'matter of',
  safety: 'safety or maker’s limit',
  energy: 'energy',
  found: 'found',
  clause: 'clause',
  remedy: 'remedy',
  alternatives: 'alternatives',
};

export const eventHeads = {
  atUtc: 'at (UTC)',
  reportedUtc: 'reported (UTC)',
  site: 'site',
  string: 'string',
  kind: 'kind',
  whatHappened: 'what happened',
};

export const historyImportHeads = {
  file: 'file',
  importedUtc: 'imported (UTC)',
  by: 'by',
  of: 'of',
  fromUtc: 'from (UTC)',
  toUtc: 'to (UTC)',
  rows: 'rows',
  readings: 'readings',
  leftOut: 'left out',
  twiceThere: 'twice there',
  note: 'note',
  takenBackUtc: 'taken back (UTC)',
  takenBackBy: 'taken back by',
};

export const loggerHeads = {
  logger: 'logger',
  connected: 'connected',
  lastSpokeUtc: 'last spoke (UTC)',
  from: 'from',
  firmware: 'firmware',
  messagesRefused: 'messages refused',
  refusedLastUtc: 'refused last (UTC)',
  refusedLastWhy: 'refused last, why',
  token: 'token',
  tokenIs: 'token is',
  tokenMadeUtc: 'token made (UTC)',
  tokenMadeBy: 'token made by',
  tokenLastUsedUtc: 'token last used (UTC)',
  tokenEndsUtc: 'token ends (UTC)',
};

export const membershipHeads = {
  string: 'string',
  position: 'position',
  serial: 'serial',
  finding: 'finding',
  otherString: 'other string',
  apartFromItsString: 'apart from its string (%)',
  apartFromTheOther: 'apart from the other (%)',
  reportsWithCurrent: 'reports with current',
  inWords: 'in words',
  findings: {
    here: 'carries the current of its string',
    elsewhere: 'carries the current of another string',
    cant_tell: 'can’t tell',
    fits_none: 'fits no string',
  } satisfies Record<MembershipOutcome, string>,
  severalFit: 'not its string; several others fit alike',
};

export const plannedWorkHeads = {
  fromUtc: 'from (UTC)',
  toUtc: 'to (UTC)',
  what: 'what',
  strings: 'strings',
  wholeSite: 'whole site',
  enteredBy: 'entered by',
  endedEarlyBy: 'ended early by',
};

export const rollCallHeads = {
  string: 'string',
  position: 'position',
  serial: 'serial',
  placeOnTheRoof: 'place on the roof',
  answered: 'answered',
  firstAnswerUtc: 'first answer (UTC)',
  gateway: 'gateway',
  signalDBm: 'signal (dBm)',
};

export const shutdownTestHeads = {
  zone: 'zone',
  state: 'state',
  timeUtc: 'time (UTC)',
  result: 'result',
  strings: 'strings',
  stringsFailed: 'strings failed',
  stringsCarried: 'strings carried from an earlier test',
  signedOrStartedBy: 'signed or started by',
  reasonOfTheEnd: 'reason of the end',
  fingerprintSHA256: 'fingerprint (SHA-256)',
};

const QUANTITIES = {
  voltage: 'voltage',
  current: 'current',
  power: 'power',
} satisfies Record<HistoryQuantity, string>;

export const stringHeads = {
  timeUtc: 'time (UTC)',
  stringCurrentA: 'string current (A)',
  sumLessTheInputV: 'sum of the units less the input (V)',
  mean: (quantity: HistoryQuantity, unit: string) => `${QUANTITIES[quantity]}, mean (${unit})`,
  lowest: (quantity: HistoryQuantity, unit: string) => `${QUANTITIES[quantity]}, lowest (${unit})`,
  highest: (quantity: HistoryQuantity, unit: string) => `${QUANTITIES[quantity]}, highest (${unit})`,
  energyInTheStepWh: 'energy in the step (Wh)',
  expectedFrom: (unit: string) => `expected from (${unit})`,
  expectedTo: (unit: string) => `expected to (${unit})`,
  position: (position: number, unit: string) => `position ${position} (${unit})`,
};

export const walkHeads = {
  stop: 'stop',
  string: 'string',
  position: 'position',
  serial: 'serial',
  what: 'what',
  placeOnTheRoof: 'place on the roof',
  roofXM: 'roof x (m)',
  roofYM: 'roof y (m)',
};
