import { vocOf } from '../../domain/photovoltaics/module/open-circuit';
import type { Interpretation } from '../../domain/readings/interpret';
import type { ReadingQuestion } from '../../domain/readings/reading';
import { number } from '../../drawings/numbers';
import { expectedWords, hueOf, type Hue } from './words';
import { sharedReadingsScale } from '../../words/shared-readings';

/** A ruler of voltage: where the reading lies and where each likely explanation would. Places are shares 0 … 1. */
export interface Scale {
  ticks: { at: number; label: string | null }[];
  reading: { at: number; label: string; hue: Hue | 'ink' };
  bands: { from: number; to: number; hue: Hue; expected: boolean }[];
  /** What one step of the ruler stands for. */
  step: string;
}

const LABELS_MAX = 7;
const TICKS_MAX = 24;
const NICE = [0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 50, 100, 200, 500, 1000];
/** Bands no thinner than this can be seen. */
const THINNEST = 0.006;

/** The ruler from 0 (or the lowest value) to a little past the highest. One unit a step where that can be read. */
export function scaleOf(answer: Interpretation, question: ReadingQuestion): Scale {
  const { voltageV, unitType } = question;
  const likely = answer.likely.filter((h) => h.expectedV !== null && h.sdV !== null).slice(0, 4);
  const expected = expectedWords(answer);
  const ends = [0, voltageV, ...(expected ? [expected.from, expected.to] : [])];
  for (const h of likely) ends.push(h.expectedV! - 2 * h.sdV!, h.expectedV! + 2 * h.sdV!);
  const lowest = Math.min(...ends);
  const highest = Math.max(...ends, lowest + 1);
  const span = highest - lowest;
  const unit = unitType.shutdownVoltage.nominal;
  const module = vocOf(question.module, 700, 40);
  const fits = (s: number): boolean => s > 0 && span / s <= TICKS_MAX && span / s >= 3;
  const [step, meaning] = fits(unit)
    ? [unit, sharedReadingsScale.oneUnitInShutdown]
    : fits(module)
      ? [module, sharedReadingsScale.aboutOneModuleIn]
      : [NICE.find((n) => span / n <= 12) ?? 500, ''];
  const first = Math.min(0, Math.floor(lowest / step + 1e-9));
  const last = Math.max(1, Math.ceil(highest / step + 0.05));
  const from = first * step;
  const width = (last - first) * step;
  const at = (v: number): number => Math.min(1, Math.max(0, (v - from) / width));
  const every = Math.ceil((last - first) / LABELS_MAX);
  const digits = step < 1 || width < 20 ? 1 : 0;
  const ticks = Array.from({ length: last - first + 1 }, (_, k) => {
    const n = first + k;
    return { at: at(n * step), label: n % every === 0 ? number(n * step, digits) : null };
  });
  const band = (low: number, high: number, hue: Hue, isExpected: boolean) => {
    const middle = (at(low) + at(high)) / 2;
    const half = Math.max(THINNEST / 2, (at(high) - at(low)) / 2);
    return { from: Math.max(0, middle - half), to: Math.min(1, middle + half), hue, expected: isExpected };
  };
  const bands = likely
    .filter((h) => !h.asExpected)
    .map((h) => band(h.expectedV! - 2 * h.sdV!, h.expectedV! + 2 * h.sdV!, hueOf(h, question), false));
  const asExpected = answer.hypotheses.find((h) => h.asExpected);
  if (expected && asExpected)
    bands.unshift(band(expected.from, expected.to, hueOf(asExpected, question), true));
  const best = answer.hypotheses[0]!;
  return {
    ticks,
    bands,
    reading: {
      at: at(voltageV),
      label: number(voltageV, Math.abs(voltageV) < 20 ? 1 : 0),
      hue: answer.outcome === 'as_expected' ? 'ink' : best.asExpected ? 'rust' : hueOf(best, question),
    },
    step: meaning ? sharedReadingsScale.stepIs(meaning, step) : '',
  };
}
