import { fieldOf, PART_KINDS, type PartKind } from '../domain/commissioning/as-built/parts';
import { PART_WORDS } from './domain-as-built-parts';
import type { HistoryItem } from '../schemas/api/as-built';
import { capital } from './domain-counts';

/** What an entry of the history says, in words. */

const SOURCES: Record<string, string> = {
  import: 'from a file',
  on_site: 'read on site',
  roll_call: 'at the roll call',
  capture: 'on the phone',
};
export const sourceWords = (source: string | null): string => (source && SOURCES[source]) ?? '';

const partOfAction = (action: string): { kind: PartKind; done: string } | null => {
  const kind = PART_KINDS.find((k) => action.startsWith(`${k}_`));
  return kind ? { kind, done: action.slice(kind.length + 1) } : null;
};
const textOf = (value: unknown): string => (typeof value === 'string' ? value : '');

/** One sentence: what was done to what. */
export function historyTitle(item: HistoryItem): string {
  const before = textOf(item.before.serial);
  const after = textOf(item.after.serial);
  const from = textOf(item.after.from);
  switch (item.action) {
    case 'unit_placed':
      return `${after} placed in ${item.of}`;
    case 'unit_removed':
      return `${before} taken out of ${item.of}`;
    case 'unit_replaced':
      return `${before} replaced by ${after} in ${item.of}`;
    case 'unit_moved':
      return `${after} moved ${from ? `from ${from} ` : ''}to ${item.of}${before ? `, in the place of ${before}` : ''}`;
    case 'slots_changed':
      return `Slots of ${item.of} changed`;
    case 'token_made':
      return `New token for logger ${item.of}`;
    case 'token_ended':
      return `Token of logger ${item.of} ended`;
  }
  const part = partOfAction(item.action);
  if (!part) return `${capital(item.action.replaceAll('_', ' '))}: ${item.of}`;
  const { one } = PART_WORDS[part.kind];
  return `${capital(one)} ${item.of} ${part.done}`;
}

/** A value as a person reads it. */
export function valueWords(kind: PartKind | null, key: string, value: unknown): string {
  const field = kind === null ? undefined : fieldOf(kind, key);
  if (value === null || value === undefined || value === '') return 'empty';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (Array.isArray(value)) return value.length === 0 ? 'none' : value.map(String).join(', ');
  if (field?.kind === 'choice') return field.options.find((o) => o.value === value)?.label ?? String(value);
  if (field?.kind === 'number')
    return `${String(value).replace('-', '−')}${field.unit ? ` ${field.unit}` : ''}`;
  if (typeof value === 'object')
    return Object.entries(value)
      .map(([k, v]) => `${SLOT_WORDS[k] ?? k} ${valueWords(null, k, v)}`)
      .join(', ');
  return typeof value === 'string' || typeof value === 'number' ? String(value) : '';
}

const SLOT_WORDS: Record<string, string> = {
  moduleType: 'module type',
  roofPlace: 'place on the roof',
  roofX: 'x (m)',
  roofY: 'y (m)',
};

export interface ChangedField {
  label: string;
  before: string | null;
  after: string;
}

/** The fields that an entry tells of; what units did is in the title. */
export function changedFields(item: HistoryItem): ChangedField[] {
  if (item.action.startsWith('unit_') || item.action.startsWith('token_')) return [];
  const part = partOfAction(item.action);
  const kind = part?.kind ?? null;
  const deleted = part?.done === 'deleted';
  const values = deleted ? item.before : item.after;
  return Object.entries(values)
    .filter(([key, value]) => part?.done !== 'added' || (value !== null && value !== '' && key !== 'name'))
    .map(([key, value]) => ({
      label: (kind && fieldOf(kind, key)?.label) ?? (key === 'serials' ? 'Serials' : key),
      before: part?.done === 'added' || deleted ? null : valueWords(kind, key, item.before[key]),
      after: valueWords(kind, key, value),
    }));
}

/** The change in one cell. */
export const changeText = (item: HistoryItem): string =>
  changedFields(item)
    .map((f) => `${f.label}: ${f.before === null ? '' : `${f.before} → `}${f.after}`)
    .join('; ');
