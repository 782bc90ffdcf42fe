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
import { knownMore } from '../../words/readings';

/** What makes an answer firmer: other strings under the same light, light and temperature measured. */
export function KnownMore({ form, faults, typed }: PanelProps) {
  const others = othersOf(form.others);
  const set = (next: readonly OtherString[]) => typed({ others: othersText(next) });
  const edit = (i: number, some: Partial<OtherString>) =>
    set(others.map((other, k) => (k === i ? { ...other, ...some } : other)));
  // only at first: a field that is emptied must not fold away under the hand
  const [used] = useState(form.others !== '' || form.poa !== '' || form.cell !== '');
  return (
    <Fold title={knownMore.doYouKnowMore} opens={knownMore.addIt} open={used}>
      <div className="space-y-5 pb-4 pt-1">
        <fieldset>
          <legend className="font-medium">{knownMore.otherStringsOfThe}</legend>
          <input type="hidden" name="others" value={form.others} />
          <div className="mt-2 space-y-3">
            {others.map((other, i) => (
              <div key={i} className="grid grid-cols-[1fr_1fr_auto] items-start gap-2">
                <Field
                  label={knownMore.units}
                  aria-label={knownMore.unitsOfOtherString(i)}
                  inputMode="numeric"
                  autoComplete="off"
                  value={other.units}
                  error={faults[`others.${i}.units`]}
                  onChange={(event) => edit(i, { units: event.target.value })}
                />
                <Field
                  label={knownMore.reading}
                  aria-label={knownMore.readingOfOtherString(i)}
                  unit="V"
                  inputMode="decimal"
                  autoComplete="off"
                  value={other.volts}
                  error={faults[`others.${i}.volts`]}
                  onChange={(event) => edit(i, { volts: event.target.value })}
                />
                <Button
                  className="mt-6 !min-h-[44px]"
                  aria-label={knownMore.takeOtherStringOut(i)}
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
              {knownMore.addAString}
            </Button>
          )}
        </fieldset>
        <fieldset>
          <legend className="mb-2 font-medium">{knownMore.measuredNow}</legend>
          <div className="grid grid-cols-2 gap-3">
            <Field
              label={knownMore.lightOnTheModules}
              name="poa"
              unit="W/m²"
              inputMode="decimal"
              autoComplete="off"
              value={form.poa}
              error={faults.poa}
              onChange={(event) => typed({ poa: event.target.value })}
            />
            <Field
              label={knownMore.cellTemperature}
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
