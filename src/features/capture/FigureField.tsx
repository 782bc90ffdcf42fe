import { useId } from 'react';
import type { Figure } from '../../domain/commissioning/checks/definition';
import { NumberPad } from '../../components/readings/NumberPad';
import { pressed } from '../../components/readings/form';
import { Choice } from '../../components/ui/Choice';
import { Segmented } from '../../components/ui/Segmented';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import { figureField } from '../../words/capture';

interface Props {
  figure: Figure;
  value: string;
  fault?: string;
  connectors: CaptureSnapshot['connectors'];
  /** Whether the number pad stands under this field. */
  pad: boolean;
  openPad: (open: boolean) => void;
  onChange: (value: string) => void;
}

/** One figure of a check: a number by the pad, one of a few words, or a connector type of the catalogue. */
export function FigureField({ figure, value, fault, connectors, pad, openPad, onChange }: Props) {
  const id = useId();
  const name = `${figure.name}${figure.needed ? '' : figureField.ifMeasured}`;
  if (figure.kind === 'connector')
    return (
      <Choice
        label={figure.name}
        value={value}
        options={[
          { value: '', label: figureField.notChosen },
          ...connectors
            .filter((c) => !c.archived || c.id === value)
            .map((c) => ({ value: c.id, label: `${c.name}, ${c.maker}` })),
        ]}
        error={fault}
        onChange={onChange}
      />
    );
  if (figure.kind === 'choice')
    return (
      <div>
        <p aria-hidden="true" className="mb-1 font-medium">
          {figure.name}
        </p>
        <Segmented
          look="bold"
          name={id}
          label={figure.name}
          value={value}
          options={figure.options.map((o) => ({ value: o.value, label: o.words }))}
          onChange={onChange}
        />
        {fault && (
          <p role="alert" className="mt-1 text-sm font-medium text-rust-ink">
            {fault}
          </p>
        )}
      </div>
    );
  return (
    <div>
      <label htmlFor={id} className="mb-1 block font-medium">
        {name}
      </label>
      <div className="flex items-center gap-2">
        {figure.min < 0 && (
          <button
            type="button"
            aria-label={figureField.changeTheSignOf(figure.name)}
            onClick={() => onChange(pressed(value, 'sign'))}
            className="h-[48px] w-[48px] shrink-0 rounded border border-rule bg-sheet text-2xl"
          >
            ±
          </button>
        )}
        <input
          id={id}
          value={value}
          inputMode="none"
          autoComplete="off"
          maxLength={20}
          aria-invalid={fault ? true : undefined}
          aria-describedby={fault ? `${id}-error` : undefined}
          onFocus={() => openPad(true)}
          onChange={(event) => onChange(event.target.value)}
          className={`min-h-[52px] w-full rounded border bg-sheet px-3 text-right text-[26px] font-semibold ${fault ? 'border-rust' : 'border-rule'}`}
        />
        <span className="w-[44px] text-[17px] text-ink-2">{figure.unit}</span>
      </div>
      {fault && (
        <p id={`${id}-error`} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {fault}
        </p>
      )}
      {pad && <NumberPad onKey={(key) => onChange(pressed(value, key))} onDone={() => openPad(false)} />}
    </div>
  );
}
