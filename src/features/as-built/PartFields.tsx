import { useId } from 'react';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import type { PartField, PartKind } from '../../domain/commissioning/as-built/parts';
import { PART_FIELDS } from '../../domain/commissioning/as-built/parts';
import type { AsBuilt } from '../../schemas/api/as-built';
import { namedOptions } from '../../schemas/as-built-values';
import type { Faults, Form, FormValue } from './form';
import { partFields } from '../../words/as-built';

interface Props {
  kind: PartKind;
  /** null: nothing is there yet that a field could name. */
  parts: Omit<AsBuilt, 'at'> | null;
  form: Form;
  faults: Faults;
  timeZones: readonly string[];
  /** A new part, not an edit. */
  adding?: boolean;
  /** Left out here: shown elsewhere. */
  without?: readonly string[];
  only?: readonly string[];
  onChange: (key: string, value: FormValue) => void;
}

/** The fields of a part, each with its hint and what is wrong with it. */
export function PartFields({ kind, without = [], only, ...rest }: Props) {
  const fields = PART_FIELDS[kind].filter(
    (f) => !without.includes(f.key) && (only === undefined || only.includes(f.key)),
  );
  return (
    <>
      {fields.map((field) => (
        <OneField key={field.key} field={field} {...rest} />
      ))}
    </>
  );
}

const wide = (field: PartField): boolean => field.kind === 'parts' || field.kind === 'yes';

function OneField({
  field,
  parts,
  form,
  faults,
  timeZones,
  adding = false,
  onChange,
}: Omit<Props, 'kind' | 'without' | 'only'> & { field: PartField }) {
  const value = form[field.key];
  const text = typeof value === 'string' ? value : '';
  const fault = faults[field.key] ?? null;
  const common = { label: labelWithMark(field), hint: field.hint, error: fault };
  switch (field.kind) {
    case 'text':
    case 'serial':
    case 'number':
      return (
        <Field
          {...common}
          name={field.key}
          value={text}
          unit={field.kind === 'number' ? field.unit : undefined}
          inputMode={field.kind === 'number' ? 'decimal' : field.key === 'contactPhone' ? 'tel' : undefined}
          autoComplete="off"
          autoCapitalize={field.kind === 'serial' ? 'characters' : undefined}
          spellCheck={false}
          onChange={(e) => onChange(field.key, e.target.value)}
        />
      );
    case 'choice':
      return (
        <Choice
          {...common}
          name={field.key}
          options={field.options}
          value={text}
          onChange={(chosen) => onChange(field.key, chosen)}
        />
      );
    case 'time_zone':
      return (
        <Choice
          {...common}
          name={field.key}
          options={(timeZones.includes(text) ? timeZones : [text, ...timeZones]).map((z) => ({
            value: z,
            label: z.replaceAll('_', ' '),
          }))}
          value={text}
          onChange={(chosen) => onChange(field.key, chosen)}
        />
      );
    case 'part': {
      const options = parts ? namedOptions(parts, field.of, text === '' ? [] : [text]) : [];
      // a new string has one module type; several are what single slots were given since
      const several = field.key === 'moduleType';
      const none =
        field.optional && !(several && adding) ? (field.none ?? partFields.none) : partFields.choose;
      return (
        <Choice
          {...common}
          name={field.key}
          options={[
            ...((field.optional && !several) || text === '' ? [{ value: '', label: none }] : []),
            ...options.map((o) => ({ value: o.id, label: o.name })),
          ]}
          value={text}
          onChange={(chosen) => onChange(field.key, chosen)}
        />
      );
    }
    case 'yes':
      return (
        <label className="flex min-h-[44px] items-center gap-3 sm:col-span-2">
          <input
            type="checkbox"
            name={field.key}
            checked={value === true}
            onChange={(e) => onChange(field.key, e.target.checked)}
            className="h-5 w-5 flex-none accent-petrol"
          />
          <span>{field.label}</span>
        </label>
      );
    case 'parts':
      return (
        <Several
          field={field}
          options={parts ? namedOptions(parts, field.of) : []}
          chosen={Array.isArray(value) ? (value as readonly string[]) : []}
          fault={fault}
          onChange={(ids) => onChange(field.key, ids)}
          className={wide(field) ? 'sm:col-span-2' : ''}
        />
      );
  }
}

const labelWithMark = (field: PartField): string =>
  'optional' in field && field.optional && field.kind !== 'part'
    ? partFields.mayStayEmpty(field.label)
    : field.label;

function Several({
  field,
  options,
  chosen,
  fault,
  onChange,
  className,
}: {
  field: PartField;
  options: readonly { id: string; name: string }[];
  chosen: readonly string[];
  fault: string | null;
  onChange: (ids: string[]) => void;
  className: string;
}) {
  const id = useId();
  return (
    <fieldset
      className={className}
      aria-describedby={fault ? `${id}-error` : field.hint ? `${id}-hint` : undefined}
    >
      <legend className="mb-1 font-medium">{field.label}</legend>
      {options.length === 0 ? (
        <p className="text-ink-2">{partFields.thereIsNoneYet}</p>
      ) : (
        <div className="flex max-h-[220px] flex-wrap gap-x-4 overflow-y-auto">
          {options.map((o) => (
            <label key={o.id} className="flex min-h-[44px] items-center gap-2">
              <input
                type="checkbox"
                name={`${field.key}.${o.name}`}
                checked={chosen.includes(o.id)}
                onChange={(e) =>
                  onChange(e.target.checked ? [...chosen, o.id] : chosen.filter((c) => c !== o.id))
                }
                className="h-5 w-5 flex-none accent-petrol"
              />
              {o.name}
            </label>
          ))}
        </div>
      )}
      {field.hint && (
        <p id={`${id}-hint`} className="mt-1 text-sm text-ink-2">
          {field.hint}
        </p>
      )}
      {fault && (
        <p id={`${id}-error`} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {fault}
        </p>
      )}
    </fieldset>
  );
}
