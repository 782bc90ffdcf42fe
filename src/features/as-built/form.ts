import { checkPart } from '../../domain/commissioning/as-built/check-part';
import {
  fieldOf,
  PART_FIELDS,
  type PartField,
  type PartKind,
} from '../../domain/commissioning/as-built/parts';
import type { PartValues } from '../../schemas/api/as-built';
import { typedNumber } from '../../schemas/typed-number';

/** A form holds what was typed: text as text, so that nothing typed is lost before it is understood. */
export type FormValue = string | boolean | readonly string[];
export type Form = Readonly<Record<string, FormValue>>;
export type Faults = Readonly<Record<string, string>>;

const asText = (value: unknown): string =>
  typeof value === 'number' ? String(value).replace('-', '−') : typeof value === 'string' ? value : '';

export function formOf(kind: PartKind, values: PartValues): Form {
  return Object.fromEntries(
    PART_FIELDS[kind].map((field) => {
      const value = values[field.key];
      if (field.kind === 'yes') return [field.key, value === true];
      if (field.kind === 'parts')
        return [field.key, Array.isArray(value) ? (value as readonly string[]) : []];
      return [field.key, asText(value)];
    }),
  );
}

export type ReadForm = { values: PartValues; faults: null } | { values: null; faults: Faults };

function typed(
  field: PartField,
  given: FormValue | undefined,
): { value: PartValues[string] } | { fault: string } {
  if (field.kind === 'number') {
    const text = typeof given === 'string' ? given : '';
    if (text.trim() === '' && field.optional) return { value: null };
    const { min, max, unit, whole } = field;
    const read = typedNumber(text, field.label, { min, max, unit, ...(whole ? { whole } : {}) });
    return read.fault === null ? { value: read.value } : { fault: read.fault };
  }
  if (field.kind === 'part') return { value: given === '' || given === undefined ? null : given };
  return { value: given ?? null };
}

/** What a form means, or what is wrong at which field. */
export function readForm(kind: PartKind, form: Form): ReadForm {
  const faults: Record<string, string> = {};
  const given: Record<string, PartValues[string]> = {};
  for (const field of PART_FIELDS[kind]) {
    const read = typed(field, form[field.key]);
    if ('fault' in read) faults[field.key] = read.fault;
    else given[field.key] = read.value;
  }
  // a number that could not be read is told in the words of typing; the rest is checked as the server does
  const checked = checkPart(kind, given, 'given');
  for (const f of checked.faults ?? []) faults[f.key] ??= f.message;
  return Object.keys(faults).length > 0 || checked.values === null
    ? { values: null, faults }
    : { values: checked.values, faults: null };
}

/** Faults that the server told, by field key. `values.name` and `body.values.name` are the same. */
export function serverFaults(fields: readonly { field: string; message: string }[]): Faults {
  const faults: Record<string, string> = {};
  for (const { field, message } of fields) {
    const key = field.replace(/^body\./, '').replace(/^values\./, '');
    faults[key] ??= message;
  }
  return faults;
}

/** The fields of an edit whose value is another than it was. */
export function changedKeys(kind: PartKind, before: PartValues, after: PartValues): string[] {
  return Object.keys(after).filter((key) => {
    if (!fieldOf(kind, key)) return false;
    const [a, b] = [before[key] ?? null, after[key] ?? null];
    return Array.isArray(a) && Array.isArray(b)
      ? [...(a as string[])].sort().join() !== [...(b as string[])].sort().join()
      : a !== b;
  });
}
