import { useState, type ReactNode } from 'react';
import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Fold } from '../../components/ui/Fold';
import { Segmented } from '../../components/ui/Segmented';
import { RANGES, chosen, type PanelProps } from '../../components/readings/form';
import { SHEETS, SHEET_KEYS } from '../../components/readings/sheets';
import { KIND_LABELS, stringWords } from '../../components/readings/words';

const OWN_FIELDS = [
  { key: 'voc', label: 'Open-circuit voltage at STC', unit: 'V' },
  { key: 'beta', label: 'Its change with temperature', unit: '%/K' },
  { key: 'cells', label: 'Cells in series', unit: '' },
  { key: 'groups', label: 'Bypass diodes', unit: '' },
] as const;

/** Which string: kind of unit, how many, which module. Folded away once it is right. */
export function StringPanel({ form, faults, typed, choose }: PanelProps) {
  // only at first: a field that is put right must not fold away under the hand
  const [wrong] = useState(['units', ...OWN_FIELDS.map((f) => f.key)].some((key) => faults[key]));
  const own = form.module === 'own';
  return (
    <Fold title={stringWords(form)} opens="Change" open={wrong} className="mb-3">
      <div className="space-y-4 pb-4 pt-2">
        <Labelled label="Kind of unit">
          <Segmented
            look="bold"
            name="kind"
            label="Kind of unit"
            value={chosen(UNIT_KINDS, form.kind, 'shutdown_only')}
            options={UNIT_KINDS.map((value) => ({ value, label: KIND_LABELS[value] }))}
            onChange={(kind) => choose({ kind })}
          />
        </Labelled>
        <Field
          label="Units in the string"
          name="units"
          inputMode="numeric"
          autoComplete="off"
          value={form.units}
          error={faults.units}
          onChange={(event) => typed({ units: event.target.value })}
        />
        <Choice
          label="Module"
          name="module"
          value={form.module}
          options={[
            ...SHEET_KEYS.map((key) => ({
              value: key,
              label: `Typical, ${SHEETS[key].name} (${SHEETS[key].vocRef} V)`,
            })),
            { value: 'own', label: 'Own values, from its datasheet' },
          ]}
          onChange={(module) => choose({ module })}
          hint="Open-circuit voltage and cells decide; a like sheet is near enough."
        />
        {own && (
          <div className="grid grid-cols-2 gap-3">
            {OWN_FIELDS.map(({ key, label, unit }) => (
              <Field
                key={key}
                label={label}
                name={key}
                unit={unit || undefined}
                inputMode={key === 'beta' ? 'text' : 'decimal'}
                autoComplete="off"
                placeholder={key === 'beta' ? '−0.27' : String(RANGES[key].min)}
                value={form[key]}
                error={faults[key]}
                onChange={(event) => typed({ [key]: event.target.value })}
              />
            ))}
          </div>
        )}
      </div>
    </Fold>
  );
}

export function Labelled({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div>
      <p aria-hidden="true" className="mb-1 font-medium">
        {label}
      </p>
      {children}
    </div>
  );
}
