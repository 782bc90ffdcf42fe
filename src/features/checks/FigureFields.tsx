import type { Figure } from '../../domain/commissioning/checks/definition';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Segmented } from '../../components/ui/Segmented';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import { figureFields } from '../../words/checks';

/** What was typed or chosen so far, as text; empty: nothing. */
export type Typed = Readonly<Record<string, string>>;

interface Props {
  figures: readonly Figure[];
  typed: Typed;
  faults: Readonly<Record<string, string>>;
  connectors: CaptureSnapshot['connectors'];
  onType: (key: string, text: string) => void;
}

/** Fields for what a check takes: numbers with their unit, a few words, connector types of the catalogue. */
export function FigureFields({ figures, typed, faults, connectors, onType }: Props) {
  if (figures.length === 0) return null;
  return (
    <div className="grid gap-3 sm:grid-cols-2">
      {figures.map((f) => {
        const value = typed[f.key] ?? '';
        if (f.kind === 'number')
          return (
            <Field
              key={f.key}
              label={f.name}
              unit={f.unit}
              inputMode="decimal"
              autoComplete="off"
              maxLength={20}
              value={value}
              error={faults[f.key]}
              onChange={(event) => onType(f.key, event.target.value)}
            />
          );
        if (f.kind === 'choice')
          return (
            <div key={f.key}>
              <p className="mb-1 font-medium" aria-hidden="true">
                {f.name}
              </p>
              <Segmented
                look="bold"
                label={f.name}
                value={value}
                options={f.options.map((o) => ({ value: o.value, label: o.words }))}
                onChange={(chosen) => onType(f.key, chosen)}
              />
              {faults[f.key] && (
                <p role="alert" className="mt-1 text-sm font-medium text-rust-ink">
                  {faults[f.key]}
                </p>
              )}
            </div>
          );
        return (
          <Choice
            key={f.key}
            label={f.name}
            value={value}
            error={faults[f.key]}
            options={[
              { value: '', label: figureFields.notChosen },
              ...connectors
                .filter((c) => !c.archived || c.id === value)
                .map((c) => ({ value: c.id, label: `${c.name} (${c.maker} ${c.family})` })),
            ]}
            onChange={(chosen) => onType(f.key, chosen)}
          />
        );
      })}
    </div>
  );
}
