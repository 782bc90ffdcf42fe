import { checkFigureFaults } from '../../../words/domain-check-figures';
import { checkDefinition } from './list';
import type { CheckKey, CheckResult, Figures, FigureValue } from './definition';

/** What was typed or chosen for a check, held against what the check takes. */

export interface FigureFault {
  /** Key of the figure. */
  figure: string;
  /** What was wrong and what would do. */
  message: string;
}

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
      fault(key, checkFigureFaults.unknown(definition.name));
  for (const f of definition.figures) {
    const value: FigureValue | undefined = Object.hasOwn(figures, f.key) ? figures[f.key] : undefined;
    if (value === undefined) {
      if (result === 'pass' && f.needed) fault(f.key, checkFigureFaults.missing(f.name, definition.name));
      continue;
    }
    if (f.kind === 'number' && !(typeof value === 'number' && value >= f.min && value <= f.max))
      fault(
        f.key,
        checkFigureFaults.impossible(f.name, String(value), checkFigureFaults.span(f.min, f.max, f.unit)),
      );
    if (f.kind === 'choice' && !f.options.some((o) => o.value === value))
      fault(
        f.key,
        checkFigureFaults.noChoice(
          f.name,
          String(value),
          f.options.map((o) => o.value),
        ),
      );
    if (f.kind === 'connector' && !(typeof value === 'string' && knows(value)))
      fault(f.key, checkFigureFaults.noConnector(f.name));
  }
  return faults;
}
