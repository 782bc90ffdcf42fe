import { useMemo, useState } from 'react';
import { Field } from '../../components/ui/Field';
import { Segmented } from '../../components/ui/Segmented';
import { EXAMPLES, type ExampleKey } from './examples';
import { startOf, tried } from './example';
import { liveExample } from '../../words/method-examples';

/** A judgement to try out: its own function, with figures that the reader can change. */
export function LiveExample({ which }: { which: ExampleKey }) {
  const example = EXAMPLES[which];
  const start = useMemo(() => startOf(example), [example]);
  const [text, setText] = useState(start);
  const { outcome, faults } = useMemo(() => tried(example, text), [example, text]);
  const set = (key: string, value: string) => setText((old) => ({ ...old, [key]: value }));
  const changed = Object.keys(start).some((key) => start[key] !== text[key]);
  return (
    <div className="border border-rule bg-film p-3 sm:p-4">
      <div className="mb-3 flex min-h-[24px] items-baseline justify-between gap-2">
        <h3 className="font-semibold">{liveExample.tryIt}</h3>
        {changed && (
          <button
            type="button"
            className="text-sm text-petrol underline underline-offset-[3px]"
            onClick={() => setText(start)}
          >
            {liveExample.backToTheStart}
          </button>
        )}
      </div>
      <div className="grid gap-3 sm:grid-cols-2">
        {example.inputs.map((input) =>
          input.kind === 'number' ? (
            <Field
              key={input.key}
              label={input.label}
              unit={input.unit}
              inputMode={input.min < 0 ? 'text' : input.whole ? 'numeric' : 'decimal'}
              autoComplete="off"
              value={text[input.key] ?? ''}
              error={faults[input.key]}
              onChange={(event) => set(input.key, event.target.value)}
            />
          ) : (
            <div key={input.key} className="sm:col-span-2">
              <p aria-hidden="true" className="mb-1 font-medium">
                {input.label}
              </p>
              <Segmented
                look="bold"
                name={`${which} ${input.key}`}
                label={input.label}
                options={input.options}
                value={text[input.key] ?? input.start}
                onChange={(value) => set(input.key, value)}
              />
            </div>
          ),
        )}
      </div>
      <div role="status" className="mt-4 border-t border-rule pt-3">
        {outcome ? (
          <>
            <p className="text-[15px] font-semibold leading-5">{outcome.finding}</p>
            <dl className="mt-2 space-y-1">
              {outcome.figures.map((figure) => (
                <div key={figure.label} className="flex flex-wrap justify-between gap-x-4">
                  <dt className="text-ink-2">{figure.label}</dt>
                  <dd className="min-w-0">{figure.value}</dd>
                </div>
              ))}
            </dl>
          </>
        ) : (
          <p className="text-ink-2">{liveExample.putTheMarkedField}</p>
        )}
      </div>
    </div>
  );
}
