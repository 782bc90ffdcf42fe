import { useState, type ReactNode } from 'react';
import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Fold } from '../../components/ui/Fold';
import { Segmented } from '../../components/ui/Segmented';
import { RANGES, type PanelProps } from '../../components/readings/form';
import { chosen } from '../../components/readings/form-choices';
import { SHEETS, SHEET_KEYS } from '../../components/readings/sheets';
import { KIND_LABELS } from '../../components/readings/kind-labels';
import { stringWords } from '../../components/readings/words';
import { stringPanel } from '../../words/readings';

const OWN_FIELDS = [
  { key: 'voc', label: stringPanel.openCircuitVoltageAt, unit: 'V' },
  { key: 'beta', label: stringPanel.itsChangeWithTemperature, unit: '%/K' },
  { key: 'cells', label: stringPanel.cellsInSeries, unit: '' },
  { key: 'groups', label: stringPanel.bypassDiodes, unit: '' },
] as const;

/** Which string: kind of unit, how many, which module. Folded away once it is right. */
export function StringPanel({ form, faults, typed, choose }: PanelProps) {
  // only at first: a field that is put right must not fold away under the hand
  const [wrong] = useState(['units', ...OWN_FIELDS.map((f) => f.key)].some((key) => faults[key]));
  const own = form.module === 'own';
  return (
    <Fold title={stringWords(form)} opens={stringPanel.change} open={wrong} className="mb-3">
      <div className="space-y-4 pb-4 pt-2">
        <Labelled label={stringPanel.kindOfUnit}>
          <Segmented
            look="bold"
            name="kind"
            label={stringPanel.kindOfUnit}
            value={chosen(UNIT_KINDS, form.kind, 'shutdown_only')}
            options={UNIT_KINDS.map((value) => ({ value, label: KIND_LABELS[value] }))}
            onChange={(kind) => choose({ kind })}
          />
        </Labelled>
        <Field
          label={stringPanel.unitsInTheString}
          name="units"
          inputMode="numeric"
          autoComplete="off"
          value={form.units}
          error={faults.units}
          onChange={(event) => typed({ units: event.target.value })}
        />
        <Choice
          label={stringPanel.module}
          name="module"
          value={form.module}
          options={[
            ...SHEET_KEYS.map((key) => ({
              value: key,
              label: stringPanel.typicalKeyVocRefV(SHEETS[key].name, SHEETS[key].vocRef),
            })),
            { value: 'own', label: stringPanel.ownValuesFromIts },
          ]}
          onChange={(module) => choose({ module })}
          hint={stringPanel.openCircuitVoltageAnd}
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
