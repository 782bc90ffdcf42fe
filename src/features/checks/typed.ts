import { figureFaults } from '../../domain/commissioning/checks/figures';
import { judgeCheck } from '../../domain/commissioning/checks/judge';
import type {
  CheckContext,
  CheckJudgement,
  CheckResult,
  Figures,
  FigureValue,
  StringCheck,
} from '../../domain/commissioning/checks/definition';
import { typedNumber } from '../../schemas/typed-number';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import type { Typed } from './FigureFields';

/** A check as it is filled in: text becomes figures, or a fault that names the field and the remedy. */

export interface Filled {
  figures: Figures;
  faults: Record<string, string>;
  /** What these figures would say of the result, said before it is saved. */
  judged: CheckJudgement | null;
}

export function filled(
  check: StringCheck,
  result: CheckResult,
  typed: Typed,
  context: CheckContext,
  atS: number,
): Filled {
  const figures: Record<string, FigureValue> = {};
  const faults: Record<string, string> = {};
  for (const f of check.figures) {
    const text = (typed[f.key] ?? '').trim();
    if (text === '') continue;
    if (f.kind !== 'number') {
      figures[f.key] = text;
      continue;
    }
    const read = typedNumber(text, f.name, { min: f.min, max: f.max, unit: f.unit });
    if (read.fault !== null) faults[f.key] = read.fault;
    else figures[f.key] = read.value;
  }
  for (const fault of figureFaults(check.key, result, figures, (id) =>
    context.connectors.some((c) => c.id === id),
  ))
    faults[fault.figure] ??= fault.message;
  return {
    figures,
    faults,
    judged:
      Object.keys(faults).length === 0
        ? judgeCheck({ check: check.key, result, reason: '', figures, atS }, context)
        : null,
  };
}

/** What a form begins with: the record that stands, else what catalogue and readings already say. */
export function begun(
  check: StringCheck,
  record: { figures: Figures } | null,
  string: CaptureString,
  sheet: Pick<CaptureSnapshot, 'unitTypes' | 'moduleTypes'>,
): Typed {
  if (record) return Object.fromEntries(Object.entries(record.figures).map(([k, v]) => [k, String(v)]));
  const newest = (kind: string): string => {
    const found = [...string.readings].reverse().find((r) => r.kind === kind);
    return found ? String(found.voltage) : '';
  };
  if (check.key === 'connectors') {
    const unit = sheet.unitTypes.find((t) => t.id === string.unitTypeId);
    const module = sheet.moduleTypes.find((t) => t.id === string.moduleTypeId);
    return { moduleLead: module?.connector ?? '', unitInput: unit?.connectorIn ?? '' };
  }
  if (check.key === 'polarity') return { voltage: newest('positive_to_negative') };
  if (check.key === 'voltage_to_earth')
    return {
      between: newest('positive_to_negative'),
      positive: newest('positive_to_earth'),
      negative: newest('negative_to_earth'),
    };
  return {};
}
