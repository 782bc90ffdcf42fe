import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Fold } from '../../components/ui/Fold';
import {
  OTHERS_MAX,
  othersOf,
  othersText,
  type OtherString,
  type PanelProps,
} from '../../components/readings/form';

/** What makes an answer firmer: other strings under the same light, light and temperature measured. */
export function KnownMore({ form, faults, typed }: PanelProps) {
  const others = othersOf(form.others);
  const set = (next: readonly OtherString[]) => typed({ others: othersText(next) });
  const edit = (i: number, some: Partial<OtherString>) =>
    set(others.map((other, k) => (k === i ? { ...other, ...some } : other)));
  // only at first: a field that is emptied must not fold away under the hand
  const [used] = useState(form.others !== '' || form.poa !== '' || form.cell !== '');
  return (
    <Fold title="Do you know more?" opens="Add it" open={used}>
      <div className="space-y-5 pb-4 pt-1">
        <fieldset>
          <legend className="font-medium">Other strings of the same types, read under the same light</legend>
          <input type="hidden" name="others" value={form.others} />
          <div className="mt-2 space-y-3">
            {others.map((other, i) => (
              <div key={i} className="grid grid-cols-[1fr_1fr_auto] items-start gap-2">
                <Field
                  label="Units"
                  aria-label={`Units of other string ${i + 1}`}
                  inputMode="numeric"
                  autoComplete="off"
                  value={other.units}
                  error={faults[`others.${i}.units`]}
                  onChange={(event) => edit(i, { units: event.target.value })}
                />
                <Field
                  label="Reading"
                  aria-label={`Reading of other string ${i + 1}, volts`}
                  unit="V"
                  inputMode="decimal"
                  autoComplete="off"
                  value={other.volts}
                  error={faults[`others.${i}.volts`]}
                  onChange={(event) => edit(i, { volts: event.target.value })}
                />
                <Button
                  className="mt-6 !min-h-[44px]"
                  aria-label={`Take other string ${i + 1} out`}
                  onClick={() => set(others.filter((_, k) => k !== i))}
                >
                  ×
                </Button>
              </div>
            ))}
          </div>
          {others.length < OTHERS_MAX && (
            <Button
              className="mt-2 !min-h-[44px]"
              onClick={() => set([...others, { units: form.units, volts: '' }])}
            >
              Add a string
            </Button>
          )}
        </fieldset>
        <fieldset>
          <legend className="mb-2 font-medium">Measured now</legend>
          <div className="grid grid-cols-2 gap-3">
            <Field
              label="Light on the modules"
              name="poa"
              unit="W/m²"
              inputMode="decimal"
              autoComplete="off"
              value={form.poa}
              error={faults.poa}
              onChange={(event) => typed({ poa: event.target.value })}
            />
            <Field
              label="Cell temperature"
              name="cell"
              unit="°C"
              inputMode="text"
              autoComplete="off"
              value={form.cell}
              error={faults.cell}
              onChange={(event) => typed({ cell: event.target.value })}
            />
          </div>
        </fieldset>
      </div>
    </Fold>
  );
}
