import { useState } from 'react';
import { Field } from '../ui/Field';
import { Segmented } from '../ui/Segmented';
import { NumberPad } from './NumberPad';
import { pressed, type PanelProps } from './form';
import { COMMANDED, FIELD_AT, LIGHTS, METERS, PLACES, chosen, type Place } from './form-choices';
import { LIGHT_LABELS, METER_LABELS, PLACE_LABELS, commandedLabels } from './words';
import { meterPanel } from '../../words/shared-readings';

interface Props extends PanelProps {
  place: Place;
  /** Where the pad's last key leads: the next kind of reading of this string; without it the pad folds. */
  then?: Place | null;
  /** What is asked besides the reading: not what is known already, or asked elsewhere. */
  asks?: { heard: boolean; meter: boolean };
}

/** Circumstances and the number itself, big enough for sun and gloves. */
export function MeterPanel({
  form,
  faults,
  place,
  then = null,
  asks = { heard: true, meter: true },
  typed,
  choose,
}: Props) {
  const field = FIELD_AT[place];
  const text = form[field] ?? '';
  const fault = faults[field];
  const [pad, setPad] = useState(text === '');
  const key = (name: string) => typed({ [field]: pressed(text, name) });
  const commanded = commandedLabels(form.kind);
  const tells = form.kind !== 'shutdown_only';
  return (
    <div className="space-y-2">
      <Segmented
        look="bold"
        name="at"
        label={meterPanel.kindOfReading}
        value={place}
        options={PLACES.map((value) => ({ value, label: PLACE_LABELS[value] }))}
        onChange={(at) => choose({ at })}
      />
      <div className="flex flex-wrap gap-x-5 gap-y-2">
        <Segmented
          look="bold"
          name="commanded"
          label={tells ? meterPanel.whatIsCommanded : meterPanel.keepAlive}
          value={chosen(COMMANDED, form.commanded, 'unknown')}
          options={COMMANDED.map((value) => ({ value, label: commanded[value] }))}
          onChange={(value) => choose({ commanded: value })}
        />
        <Segmented
          look="bold"
          name="light"
          label={meterPanel.lightOnTheModules}
          value={chosen(LIGHTS, form.light, 'bright')}
          options={LIGHTS.map((value) => ({ value, label: LIGHT_LABELS[value] }))}
          onChange={(light) => choose({ light })}
        />
        {asks.meter && <MeterInput value={form.meter} onChange={(meter) => choose({ meter })} />}
      </div>
      {tells && asks.heard && (
        <Field
          label={meterPanel.unitsThatHaveAnswered}
          name="heard"
          inputMode="numeric"
          autoComplete="off"
          className="max-w-[320px] pt-1"
          value={form.heard}
          error={faults.heard}
          hint={meterPanel.aUnitThatNothing}
          onChange={(event) => typed({ heard: event.target.value })}
        />
      )}
      <div className="flex items-end gap-2 border-b-[3px] border-ink pb-1.5 pt-2">
        <button
          type="button"
          aria-label={meterPanel.changeTheSign}
          onClick={() => key('sign')}
          className="h-[48px] w-[48px] shrink-0 rounded border border-rule bg-sheet text-2xl"
        >
          ±
        </button>
        <button
          type="button"
          aria-label={meterPanel.numberPad}
          aria-expanded={pad}
          onClick={() => setPad(!pad)}
          className="h-[48px] w-[48px] shrink-0 rounded border border-rule bg-sheet lg:hidden"
        >
          <PadMark />
        </button>
        <label htmlFor="reading-volts" className="sr-only">
          {meterPanel.readingVolts(PLACE_LABELS[place])}
        </label>
        <input
          id="reading-volts"
          name={field}
          value={text}
          inputMode="decimal"
          autoComplete="off"
          maxLength={20}
          placeholder="0.0"
          aria-invalid={fault ? true : undefined}
          aria-describedby={fault ? 'reading-volts-error' : undefined}
          onChange={(event) => typed({ [field]: event.target.value })}
          className={`w-full min-w-0 bg-transparent text-right text-[56px] font-semibold leading-[60px] tracking-[-0.03em] placeholder:text-rule ${fault ? 'text-rust-ink' : 'text-ink'}`}
        />
        <span aria-hidden="true" className="pb-1.5 text-[26px] leading-8 text-ink-2">
          V
        </span>
      </div>
      {PLACES.filter((other) => other !== place).map((other) => (
        <input key={other} type="hidden" name={FIELD_AT[other]} value={form[FIELD_AT[other]]} />
      ))}
      {fault && (
        <p id="reading-volts-error" role="alert" className="font-medium text-rust-ink">
          {fault}
        </p>
      )}
      {(form.pe !== '' || form.ne !== '' || place !== 'between') && (
        <dl className="flex flex-wrap gap-x-4 text-sm text-ink-2">
          {PLACES.map((item) => (
            <div key={item} className="flex gap-1">
              <dt>{PLACE_LABELS[item]}</dt>
              <dd className={faults[FIELD_AT[item]] ? 'text-rust-ink' : 'text-ink'}>
                {form[FIELD_AT[item]] ? `${form[FIELD_AT[item]]}\u00a0V` : '–'}
              </dd>
            </div>
          ))}
        </dl>
      )}
      {pad && (
        <NumberPad
          onKey={key}
          doneWords={then && text !== '' ? meterPanel.nextPlace(PLACE_LABELS[then]) : meterPanel.done}
          onDone={() => (then && text !== '' ? choose({ at: then }) : setPad(false))}
        />
      )}
    </div>
  );
}

/** How the meter's input loads the string: units in shutdown are pulled down by a low impedance. */
export function MeterInput({ value, onChange }: { value: string; onChange: (meter: string) => void }) {
  return (
    <Segmented
      look="bold"
      name="meter"
      label={meterPanel.meterInput}
      value={chosen(METERS, value, 'high_impedance')}
      options={METERS.map((mode) => ({ value: mode, label: METER_LABELS[mode] }))}
      onChange={onChange}
    />
  );
}

function PadMark() {
  return (
    <svg viewBox="0 0 20 20" width="20" height="20" aria-hidden="true" className="mx-auto fill-current">
      {[3, 9, 15].flatMap((y) =>
        [3, 9, 15].map((x) => <rect key={`${x} ${y}`} x={x - 1} y={y - 1} width="3" height="3" />),
      )}
    </svg>
  );
}
