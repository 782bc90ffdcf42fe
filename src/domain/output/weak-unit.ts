import { weakUnitCouldBe, weakUnitSaid } from '../../words/domain-weak-unit';
import { median, sigmaMad } from './robust';

/**
 * Which unit of a string gives less voltage than its neighbours, and does it look like bypassed cells, a unit in
 * shutdown, or shade? For units whose output is their module's voltage: an optimizing unit moves its output, so there
 * the input side is what to hand in. Volts, amperes.
 */

export interface UnitVoltages {
  /** Per unit in position order, per quarter of an hour; NaN: not reported. */
  voltage: readonly Float64Array[];
  /** String current per quarter: without load all modules stand at voc and bypassed cells still show. */
  current: Float64Array;
  /** Sub-strings of cells with a bypass diode, per module. */
  bypassGroups: number;
}

export interface WeakUnit {
  /** 0-based; position = unit + 1. */
  unit: number;
  kind: 'held' | 'bypassed_substring' | 'part_of_day' | 'low';
  /** Bypassed sub-strings, where the kind counts. */
  count: number | null;
  /** Its voltage over the median of its neighbours'. */
  ratio: number;
  /** Share of the quarters in which it is so. */
  share: number;
  words: string;
  threshold: { ratio: number; source: string };
  confidence: number;
  couldBe: string[];
}

const CURRENT_MIN = 1;
export const QUARTERS_MIN = 8;
export const UNITS_MIN = 4;
/** Modified z of Iglewicz & Hoaglin 1993, as a factor on the robust standard deviation. */
export const DEVIATIONS = 3.5;
export const LOSS_MIN = 0.06;
/** Less than this share of its neighbours' voltage: the unit passes none of its module's. */
export const HELD_BELOW = 0.08;
/** Persistent: so, in this share of the quarters. */
export const MOSTLY = 0.7;
const SOMETIMES = 0.15;

/** Units that are weak, by position. Empty: none, or too few quarters under load to say (see `enoughToTell`). */
export function weakUnits(input: UnitVoltages, lossMin = LOSS_MIN): WeakUnit[] {
  const { voltage, current, bypassGroups } = input;
  const quarters: number[] = [];
  for (let q = 0; q < current.length; q++) if (current[q]! >= CURRENT_MIN) quarters.push(q);
  if (voltage.length < UNITS_MIN || quarters.length < QUARTERS_MIN) return [];
  const typical = quarters.map((q) => median(voltage.flatMap((v) => (Number.isNaN(v[q]!) ? [] : [v[q]!]))));
  const ratios = voltage.map((v) =>
    quarters.flatMap((q, k) => (Number.isNaN(v[q]!) || typical[k]! <= 0 ? [] : [v[q]! / typical[k]!])),
  );
  const middle = ratios.map((r) => (r.length === 0 ? 1 : median(r)));
  const spread = Math.max(0.004, sigmaMad(middle));
  const limit = 1 - Math.max(lossMin, DEVIATIONS * spread);
  const group = 1 / bypassGroups;
  const typicalV = median(typical);
  const diode = 0.5 / Math.max(1, typicalV);
  return ratios.flatMap((r, unit): WeakUnit[] => {
    if (r.length < QUARTERS_MIN) return [];
    const low = r.filter((x) => x < limit).length / r.length;
    const ratio = middle[unit]!;
    const made = (
      kind: WeakUnit['kind'],
      words: string,
      confidence: number,
      count: number | null = null,
    ): WeakUnit[] => [
      {
        unit,
        kind,
        count,
        ratio,
        share: low,
        words,
        threshold: {
          ratio: limit,
          source: weakUnitSaid.source,
        },
        confidence,
        couldBe: [...weakUnitCouldBe[kind]],
      },
    ];
    if (low < SOMETIMES) return [];
    if (low < MOSTLY) return made('part_of_day', weakUnitSaid.partOfDay(unit + 1), 0.7);
    if (ratio < HELD_BELOW) return made('held', weakUnitSaid.held(unit + 1), 0.95);
    const missing = 1 - ratio;
    const count = Math.round((missing - diode) / group);
    const off = Math.abs(missing - diode - count * group);
    const steady = sigmaMad(r) < group / 4;
    if (count >= 1 && count < bypassGroups && off < group / 4 && steady)
      return made('bypassed_substring', weakUnitSaid.bypassed(unit + 1, count, bypassGroups), 0.9, count);
    return made('low', weakUnitSaid.low(unit + 1, missing), 0.7);
  });
}

/** Whether there is load and company enough for `weakUnits` to say anything at all. */
export function enoughToTell(input: UnitVoltages): boolean {
  let loaded = 0;
  for (const i of input.current) if (i >= CURRENT_MIN) loaded++;
  return input.voltage.length >= UNITS_MIN && loaded >= QUARTERS_MIN;
}
