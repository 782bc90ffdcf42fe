import type { HistoryQuantity } from '../schemas/api/string';
import { COLUMN_LABELS } from './domain-import';

/** Heads of the tables in a case's evidence. */

const QUANTITIES = {
  voltage: 'voltage',
  current: 'current',
  power: 'power',
} satisfies Record<HistoryQuantity, string>;

export const evidenceReadingHeads = {
  timeUtc: 'time (UTC)',
  quantity: (quantity: HistoryQuantity, unit: string) => `${QUANTITIES[quantity]} (${unit})`,
};

const { string, position, serial, unitType, moduleType, plane, inverter, input, zone, transmitters } =
  COLUMN_LABELS;
export const evidenceAsBuiltHeads = {
  string,
  position,
  serial,
  unitType,
  moduleType,
  plane,
  inverter,
  input,
  zone,
  transmitters,
  place: 'place',
};

export const evidenceEventHeads = {
  timeUtc: 'time (UTC)',
  string: 'string',
  kind: 'kind',
  what: 'what',
};

export const evidenceMeterHeads = {
  timeUtc: 'time (UTC)',
  string: 'string',
  stage: 'stage',
  between: 'between',
  voltageV: 'voltage (V)',
  whatItMeans: 'what it means',
  by: 'by',
};

/** The list of what is in the ZIP. */
export const evidenceContents = {
  title: (number: number, title: string) => `Evidence of case ${number}: ${title}`,
  madeBy: (site: string, at: string, person: string) => `${site}. Put together ${at} by ${person}.`,
  fingerprint: (sha256: string) => `Fingerprint of the data (SHA-256): ${sha256}`,
};
