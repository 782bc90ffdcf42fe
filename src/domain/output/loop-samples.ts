import type { LoopSample } from './resistance';
import { median } from './robust';

/** Connectors and leads from module to module, ohm each: common practice. */
const LEAD_OHM = 0.002;

/** What the conductors of a string's loop have by themselves, ohm: home run, leads and connectors. */
export const conductorsOhm = (cableOhm: number, slots: number): number => cableOhm + LEAD_OHM * (slots + 1);

/** A report of a string with what its input measured at that moment: V and A by position, null: not reported. */
export interface LoopReading {
  atS: number;
  voltage: readonly (number | null)[];
  current: readonly (number | null)[];
  inputV: number | null;
  inputA: number | null;
}

const BIN_S = 300;

/** The string's current by the middle of its units; NaN where less than half of them told. */
function currentOf(reading: LoopReading): number {
  const known = reading.current.filter((a) => a !== null);
  return known.length > 0 && known.length >= reading.current.length / 2 ? median(known) : NaN;
}

/**
 * What the resistance is fitted to: reports in which every unit told its output and the input its voltage, with the
 * current of the other strings on the input in the same five minutes. A report that lacks any of it is left out.
 */
export function loopSamples(
  own: readonly LoopReading[],
  others: readonly (readonly LoopReading[])[],
  slots: number,
): LoopSample[] {
  const binOf = (atS: number): number => Math.floor(atS / BIN_S);
  const beside = others.map((list) => new Map(list.map((r) => [binOf(r.atS), currentOf(r)])));
  return own.flatMap((r): LoopSample[] => {
    if (r.voltage.length !== slots || r.inputV === null) return [];
    const sumV = r.voltage.reduce<number>((sum, v) => sum + (v ?? NaN), 0);
    const ownA = currentOf(r);
    const othersA = beside.reduce((sum, of) => sum + (of.get(binOf(r.atS)) ?? NaN), 0);
    if (Number.isNaN(sumV + ownA + othersA)) return [];
    return [
      {
        atS: r.atS,
        sumV,
        inputV: r.inputV,
        ownA,
        othersA,
        ...(r.inputA === null ? {} : { inputA: r.inputA }),
      },
    ];
  });
}

/** Below this a sample says nothing of a resistance and is not drawn. */
const DRAWN_FROM_A = 1;

/**
 * The samples as they lie about the fitted line: the gap without what gain errors and the shared conductors make of it.
 * V over A; the intercept in V.
 */
export function aboutTheLine(
  samples: readonly LoopSample[],
  fit: { ohm: number; gain: number; sharedOhm: number | null } | null,
): { points: { at: number; ownA: number; gapV: number }[]; interceptV: number } {
  const points = samples
    .filter((s) => s.ownA >= DRAWN_FROM_A && s.inputV > 0)
    .map((s) => ({
      at: s.atS,
      ownA: s.ownA,
      gapV:
        s.sumV - s.inputV - (fit?.gain ?? 0) * ((s.sumV + s.inputV) / 2) - (fit?.sharedOhm ?? 0) * s.othersA,
    }));
  return {
    points,
    interceptV:
      fit === null || points.length === 0 ? 0 : median(points.map((p) => p.gapV - fit.ohm * p.ownA)),
  };
}
