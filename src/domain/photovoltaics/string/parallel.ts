import { fallingRoot, peakOf } from '../root';
import type { PowerPoint } from './curve';
import type { SeriesString } from './series';

/** Strings in parallel on one input: they share a voltage, their currents add. */
export interface ParallelStrings {
  /** V at which no current leaves; strings may feed each other there. */
  readonly voc: number;
  /** A at the inverter, at a common voltage in V. */
  currentAt: (voltage: number) => number;
  /** A of each string at a common voltage: below 0 where the others push current back through it. */
  currentsAt: (voltage: number) => number[];
  /** V at a sum of currents in A, 0 up to what flows at 0 V. */
  voltageAt: (current: number) => number;
  /** The maximum power point; null where the strings give no power. Searched anew at each call. */
  maximumPowerPoint: () => PowerPoint | null;
}

/**
 * Series strings in parallel. Backfeed is as the strings allow it: none through a unit in shutdown, forward through the
 * cells of plain modules. Blocking diodes and fuses are not modelled.
 *
 * @param strings those that conduct (an open one adds nothing and is left out by the caller)
 * @throws RangeError for no string at all, or a voltage or current outside what they can give
 */
export function parallelStrings(strings: readonly SeriesString[]): ParallelStrings {
  if (strings.length === 0) throw new RangeError('strings must hold at least one string');
  const currentsAt = (voltage: number): number[] => strings.map((string) => string.currentAt(voltage));
  const currentAt = (voltage: number): number =>
    currentsAt(voltage).reduce((sum, current) => sum + current, 0);
  const highest = Math.max(...strings.map((string) => string.voc));
  const lowest = Math.min(0, ...strings.map((string) => string.voc));
  let balance: number | null = strings.length === 1 ? highest : null;
  const openCircuit = (): number => (balance ??= fallingRoot(currentAt, lowest, highest));

  const voltageAt = (current: number): number => {
    const atZero = currentAt(0);
    if (!(current >= 0 && current <= atZero)) {
      throw new RangeError(`current must be between 0 and ${atZero} A, but is ${current}`);
    }
    return current === 0
      ? openCircuit()
      : fallingRoot((voltage) => currentAt(voltage) - current, 0, openCircuit());
  };

  const maximumPowerPoint = (): PowerPoint | null => {
    const voc = openCircuit();
    const bends = strings.flatMap((string) => [
      string.voc,
      ...string.corners.map((corner) => string.voltageAt(corner)),
      // just above 0 A, where units in shutdown let the voltage step down
      string.voltageAt(Number.MIN_VALUE),
    ]);
    const edges = [...new Set([0, ...bends.filter((voltage) => voltage > 0 && voltage < voc), voc])]
      .sort((a, b) => a - b)
      .map((voltage) => ({ voltage, current: currentAt(voltage) }));
    // between two edges power is at most the upper voltage times the lower one's current: the most promising first
    const spans = edges
      .slice(1)
      .map((upper, i) => ({ lower: edges[i]!, upper, most: upper.voltage * edges[i]!.current }))
      .sort((a, b) => b.most - a.most);
    let best = { at: 0, value: 0 };
    for (const { lower, upper, most } of spans) {
      if (most <= best.value) break;
      const peak = peakOf((voltage) => voltage * currentAt(voltage), lower.voltage, upper.voltage);
      if (peak.value > best.value) best = peak;
    }
    return best.value > 0 ? { v: best.at, i: best.value / best.at, p: best.value } : null;
  };
  return {
    get voc() {
      return openCircuit();
    },
    currentAt,
    currentsAt,
    voltageAt,
    maximumPowerPoint,
  };
}
