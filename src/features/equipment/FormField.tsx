import { Choice } from '../../components/ui/Choice';
import { Field as TextInput } from '../../components/ui/Field';
import type { Field } from '../../domain/equipment/fields';
import type { ConnectorItem } from '../../schemas/api/equipment';
import { formField } from '../../words/equipment';

interface Props {
  field: Field;
  value: string;
  error: string | null;
  /** What somebody else has saved meanwhile. */
  theirs: string | null;
  connectors: readonly ConnectorItem[];
  disabled: boolean;
  onChange: (value: string) => void;
  onLeave: () => void;
}

const range = (field: Extract<Field, { kind: 'number' }>): string =>
  formField.minToMaxUnit(field.min, field.max, field.unit).replaceAll('-', '−');

/** One field of a type's form, by what its table says. */
export function FormField({ field, value, error, theirs, connectors, disabled, onChange, onLeave }: Props) {
  const hint = (
    <>
      {field.hint ?? (field.kind === 'number' ? range(field) : null)}
      {theirs !== null && <strong className="block text-ink">{formField.savedBySomebodyElse(theirs)}</strong>}
    </>
  );
  const shared = { label: field.label, error, hint, disabled, onBlur: onLeave, 'data-field': field.key };
  switch (field.kind) {
    case 'number':
      return (
        <TextInput
          {...shared}
          unit={field.unit}
          inputMode={field.min < 0 ? 'text' : field.whole ? 'numeric' : 'decimal'}
          autoComplete="off"
          value={value}
          onChange={(event) => onChange(event.target.value)}
        />
      );
    case 'text':
      return (
        <TextInput
          {...shared}
          autoComplete="off"
          maxLength={field.longest + 20}
          value={value}
          onChange={(event) => onChange(event.target.value)}
        />
      );
    case 'choice':
      return <Choice {...shared} options={field.options} value={value} onChange={onChange} />;
    case 'connector':
      return (
        <Choice
          {...shared}
          options={[
            { value: '', label: formField.notEntered },
            ...connectors
              .filter((c) => !c.archived || c.id === value)
              .map((c) => ({ value: c.id, label: c.archived ? formField.nameArchived(c.name) : c.name })),
          ]}
          value={value}
          onChange={onChange}
        />
      );
  }
}
