import { useId, useState } from 'react';
import { partsPicker } from '../../words/new-case';

export interface PartDraft {
  string: string;
  position: number | null;
}
interface Props {
  strings: readonly { id: string; name: string; units: number }[];
  chosen: readonly string[];
  parts: readonly PartDraft[];
  onChange: (next: { chosen: string[]; parts: PartDraft[] }) => void;
  error?: string | null;
}

/** What a case is about: strings, and positions of them; none named: the whole string. */
export function PartsPicker({ strings, chosen, parts, onChange, error }: Props) {
  const id = useId();
  // those chosen at first come first: a large site has more strings than its box shows
  const [first] = useState(chosen);
  const inOrder = [
    ...strings.filter((s) => first.includes(s.id)),
    ...strings.filter((s) => !first.includes(s.id)),
  ];
  const toggle = (string: string, on: boolean) =>
    onChange({
      chosen: on ? [...chosen, string] : chosen.filter((s) => s !== string),
      parts: on ? [...parts] : parts.filter((p) => p.string !== string),
    });
  const togglePosition = (string: string, position: number) => {
    const has = parts.some((p) => p.string === string && p.position === position);
    onChange({
      chosen: [...chosen],
      parts: has
        ? parts.filter((p) => p.string !== string || p.position !== position)
        : [...parts.filter((p) => p.string !== string || p.position !== null), { string, position }],
    });
  };
  return (
    <fieldset aria-describedby={error ? `${id}-error` : undefined}>
      <legend className="mb-1 font-medium">{partsPicker.whatItIsAbout}</legend>
      {strings.length === 0 ? (
        <p className="text-ink-2">{partsPicker.thisSiteHasNo}</p>
      ) : (
        <div className="flex max-h-[220px] flex-wrap gap-2 overflow-y-auto border border-rule p-2">
          {inOrder.map((s) => (
            <label
              key={s.id}
              className={`target inline-flex cursor-pointer items-center rounded border px-3 focus-within:outline focus-within:outline-2 focus-within:outline-petrol ${chosen.includes(s.id) ? 'border-ink bg-ink text-sheet' : 'border-rule bg-sheet text-ink'}`}
            >
              <input
                type="checkbox"
                className="sr-only"
                checked={chosen.includes(s.id)}
                onChange={(event) => toggle(s.id, event.target.checked)}
              />
              {s.name}
            </label>
          ))}
        </div>
      )}
      {strings
        .filter((s) => chosen.includes(s.id))
        .map((s) => (
          <fieldset key={s.id} className="mt-3">
            <legend className="mb-1 text-sm text-ink-2">
              {partsPicker.positionsOf(
                s.name,
                parts.some((p) => p.string === s.id && p.position !== null),
              )}
            </legend>
            <div className="flex flex-wrap gap-1">
              {Array.from({ length: s.units }, (_, i) => i + 1).map((position) => {
                const on = parts.some((p) => p.string === s.id && p.position === position);
                return (
                  <label
                    key={position}
                    className={`target inline-flex min-w-[44px] cursor-pointer items-center justify-center rounded border text-[15px] focus-within:outline focus-within:outline-2 focus-within:outline-petrol ${on ? 'border-ink bg-ink text-sheet' : 'border-rule bg-sheet text-ink'}`}
                  >
                    <input
                      type="checkbox"
                      className="sr-only"
                      aria-label={partsPicker.positionOf(position, s.name)}
                      checked={on}
                      onChange={() => togglePosition(s.id, position)}
                    />
                    {position}
                  </label>
                );
              })}
            </div>
          </fieldset>
        ))}
      {error && (
        <p id={`${id}-error`} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {error}
        </p>
      )}
    </fieldset>
  );
}
