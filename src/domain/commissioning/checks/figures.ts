import { checkDefinition } from './list';
import type { CheckKey, CheckResult, Figure, Figures, FigureValue } from './definition';

/** What was typed or chosen for a check, held against what the check takes. */

export interface FigureFault {
  /** Key of the figure. */
  figure: string;
  /** What was wrong and what would do. */
  message: string;
}

const span = (f: Extract<Figure, { kind: 'number' }>): string =>
  `${f.min} to ${f.max} ${f.unit}`.replace('-', '−');

/**
 * Faults of `figures` as the figures of `check`: unknown keys, values outside their range, and what a pass needs and
 * lacks. `knows` says whether a connector is in the catalogue.
 */
export function figureFaults(
  check: CheckKey,
  result: CheckResult,
  figures: Figures,
  knows: (connector: string) => boolean,
): FigureFault[] {
  const definition = checkDefinition(check);
  const faults: FigureFault[] = [];
  const fault = (figure: string, message: string) => faults.push({ figure, message });
  for (const key of Object.keys(figures))
    if (!definition.figures.some((f) => f.key === key))
      fault(key, `${definition.name} takes no figure of this name. Leave it out.`);
  for (const f of definition.figures) {
    const value: FigureValue | undefined = Object.hasOwn(figures, f.key) ? figures[f.key] : undefined;
    if (value === undefined) {
      if (result === 'pass' && f.needed)
        fault(f.key, `${f.name} is missing. ${definition.name} can only pass with it.`);
      continue;
    }
    if (f.kind === 'number' && !(typeof value === 'number' && value >= f.min && value <= f.max))
      fault(f.key, `${f.name}: ${String(value)} is not possible. Give a number from ${span(f)}.`);
    if (f.kind === 'choice' && !f.options.some((o) => o.value === value))
      fault(
        f.key,
        `${f.name}: ${String(value)} is none of the choices. Give one of ${f.options.map((o) => o.value).join(', ')}.`,
      );
    if (f.kind === 'connector' && !(typeof value === 'string' && knows(value)))
      fault(
        f.key,
        `${f.name}: this connector type is not in the catalogue. Choose one that is, or enter it first.`,
      );
  }
  return faults;
}
