import type { EquipmentFamily } from '../domain/equipment/families';
import { FIELDS } from '../domain/equipment/plausibility';
import { asKept, asTyped, type Entry, type EntryValue, type Field } from '../domain/equipment/fields';
import { typedNumber } from './typed-number';
import { typeEntry } from '../words/fields-of-types';

/** What a person typed, by field key; connectors by their public identifier. */
export type TypedEntry = Readonly<Record<string, string>>;

export interface ReadEntry {
  /** Fields that could be read; the rest is missing. */
  entry: Entry;
  /** What is wrong, by field key. */
  faults: Readonly<Record<string, string>>;
}

/** One comma before exactly three digits: a decimal mark or one between thousands. A point is always a decimal mark. */
const MAYBE_THOUSANDS = /^[-−–+]?[1-9]\d{0,2},\d{3}$/;

type ReadValue = { value: EntryValue } | { fault: string };

function readNumber(field: Extract<Field, { kind: 'number' }>, text: string): ReadValue {
  if (text === '' && field.emptyMeans) return { value: null };
  const bare = text.replace(/\s/g, '');
  const grouped = Number(bare.replace(',', '').replace(/[−–]/, '-'));
  if (MAYBE_THOUSANDS.test(bare) && grouped >= field.min && grouped <= field.max)
    return {
      fault: typeEntry.twoMeanings(
        field.label,
        text,
        grouped,
        Number(bare.replace(',', '.').replace(/[−–]/, '-')),
      ),
    };
  const read = typedNumber(text, field.label, {
    min: field.min,
    max: field.max,
    whole: field.whole,
    unit: field.unit,
  });
  return read.fault === null ? { value: asKept(field, read.value) } : { fault: read.fault };
}

/** One value as typed, or what is wrong with it and what to do. */
export function readValue(field: Field, typed: string): ReadValue {
  const text = typed.trim();
  switch (field.kind) {
    case 'number':
      return readNumber(field, text);
    case 'choice':
      return field.options.some((o) => o.value === text)
        ? { value: text }
        : {
            fault: typeEntry.chooseOne(field.label, field.options.map((o) => `"${o.label}"`).join(', ')),
          };
    case 'connector':
      return { value: text === '' ? null : text };
    case 'text':
      if (text === '' && !field.optional) return { fault: typeEntry.cannotBeEmpty(field.label) };
      return text.length > field.longest
        ? { fault: typeEntry.tooLong(field.label, text.length, field.longest) }
        : { value: text };
  }
}

/** A whole form or row, field by field. */
export function readEntry(family: EquipmentFamily, typed: TypedEntry): ReadEntry {
  const entry: Record<string, EntryValue> = {};
  const faults: Record<string, string> = {};
  for (const field of FIELDS[family]) {
    const read = readValue(field, typed[field.key] ?? '');
    if ('fault' in read) faults[field.key] = read.fault;
    else entry[field.key] = read.value;
  }
  return { entry, faults };
}

/** A kept value as a form or a file shows it. */
export function typedValue(field: Field, value: EntryValue | undefined): string {
  if (value === null || value === undefined) return '';
  return field.kind === 'number' && typeof value === 'number' ? String(asTyped(field, value)) : String(value);
}

export function typedEntry(family: EquipmentFamily, entry: Entry): Record<string, string> {
  return Object.fromEntries(FIELDS[family].map((f) => [f.key, typedValue(f, entry[f.key])]));
}
