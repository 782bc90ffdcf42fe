import { typedNumber } from '../../schemas/typed-number';
import { methodExamplesExample } from '../../words/method-examples';

/** A small live example: fields with a starting value, and the judgement's own function behind them. */

export type Input =
  | {
      kind: 'number';
      key: string;
      label: string;
      unit?: string;
      min: number;
      max: number;
      whole?: boolean;
      start: number;
    }
  | {
      kind: 'choice';
      key: string;
      label: string;
      options: readonly { value: string; label: string }[];
      start: string;
    };

export interface Outcome {
  /** What the judgement says. */
  finding: string;
  figures: readonly { label: string; value: string }[];
}

export interface Example {
  inputs: readonly Input[];
  answer: (values: Values) => Outcome;
}

/** What the fields hold, by key. */
export interface Values {
  number: (key: string) => number;
  choice: (key: string) => string;
}

/** Text of every field at the start. */
export const startOf = (example: Example): Record<string, string> =>
  Object.fromEntries(example.inputs.map((input) => [input.key, String(input.start).replace('-', '−')]));

export interface Tried {
  outcome: Outcome | null;
  faults: Record<string, string>;
}

/** The answer for what is typed, or what is wrong with each field. */
export function tried(example: Example, text: Record<string, string>): Tried {
  const numbers = new Map<string, number>();
  const faults: Record<string, string> = {};
  for (const input of example.inputs) {
    if (input.kind !== 'number') continue;
    const { value, fault } = typedNumber(text[input.key] ?? '', input.label, input);
    if (fault === null) numbers.set(input.key, value);
    else faults[input.key] = fault;
  }
  if (Object.keys(faults).length > 0) return { outcome: null, faults };
  const number = (key: string): number => {
    const value = numbers.get(key);
    if (value === undefined) throw new RangeError(methodExamplesExample.theExampleHasNo(key));
    return value;
  };
  const choice = (key: string): string => {
    const input = example.inputs.find((i) => i.key === key);
    if (input?.kind !== 'choice') throw new RangeError(methodExamplesExample.theExampleHasNoChoice(key));
    return input.options.find((o) => o.value === text[key])?.value ?? input.start;
  };
  return { outcome: example.answer({ number, choice }), faults };
}
