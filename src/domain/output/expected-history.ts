import { median } from './robust';

/** What a string should have given over time. Volts; instants in epoch seconds. */

/** What a passing unit of the sibling strings gave in one step: median and quartiles. */
export interface SiblingStep {
  at: number;
  typical: number;
  low: number;
  high: number;
  strings: number;
}
export interface ExpectedHistory {
  at: number[];
  /** Nine times in ten the string lies between these; null: nothing is expected. */
  low: (number | null)[];
  high: (number | null)[];
  from: 'siblings' | 'siblings_and_model' | 'model' | 'nothing';
}

/** Relative standard deviations; from experience, wide on purpose. */
const SD = { floor: 0.012, fewSiblings: 0.03, scaledModel: 0.045, model: 0.07 } as const;
const NINE_IN_TEN = 1.645;
/** Interquartile range of a normal distribution in standard deviations. */
const IQR_TO_SIGMA = 1 / 1.349;
const SIBLINGS_FOR_SPREAD = 5;

/**
 * The band on a grid: from the siblings where they tell, else from the model, scaled so that it agrees with the
 * siblings where both are known. `model` gives V a unit under load, or null where it can't say.
 */
export function expectedHistory(input: {
  grid: readonly number[];
  siblings: readonly SiblingStep[];
  model: (at: number) => number | null;
  units: number;
  /** Without siblings to scale it, show the model's band at all. */
  bareModel: boolean;
}): ExpectedHistory {
  const { grid, siblings, model, units } = input;
  const byStep = new Map(siblings.map((s) => [s.at, s]));
  const ratios = siblings.flatMap((s) => {
    const m = model(s.at);
    return m !== null && m > 0 ? [s.typical / m] : [];
  });
  const scale = ratios.length >= 3 ? median(ratios) : null;
  const out: ExpectedHistory = { at: [], low: [], high: [], from: 'nothing' };
  let fromSiblings = 0;
  let fromModel = 0;
  for (const at of grid) {
    const sibling = byStep.get(at);
    let centre: number | null = null;
    let sd: number = SD.floor;
    if (sibling) {
      centre = sibling.typical;
      sd =
        sibling.strings >= SIBLINGS_FOR_SPREAD
          ? Math.max(SD.floor, ((sibling.high - sibling.low) * IQR_TO_SIGMA) / sibling.typical)
          : SD.fewSiblings;
      fromSiblings++;
    } else if (scale !== null || input.bareModel) {
      const m = model(at);
      if (m !== null) {
        centre = m * (scale ?? 1);
        sd = scale === null ? SD.model : SD.scaledModel;
        fromModel++;
      }
    }
    const half = centre === null ? 0 : NINE_IN_TEN * sd * centre * units;
    out.at.push(at);
    out.low.push(centre === null ? null : centre * units - half);
    out.high.push(centre === null ? null : centre * units + half);
  }
  out.from =
    fromSiblings === 0
      ? fromModel === 0
        ? 'nothing'
        : 'model'
      : fromModel === 0
        ? 'siblings'
        : 'siblings_and_model';
  return out;
}
