import { describe, expect, it } from 'vitest';
import { aboutTheLine, loopSamples, type LoopReading } from './loop-samples';
import { fitLoop } from './resistance';

const OHM = 0.35;
/** A string of three units in series with a resistance, its current rising and falling over hours. */
const reading = (i: number, more: Partial<LoopReading> = {}): LoopReading => {
  const amps = 2 + 6 * Math.sin((Math.PI * i) / 120) ** 2;
  const volts = 40 - 0.3 * amps;
  return {
    atS: 1_780_000_000 + i * 300,
    voltage: [volts, volts, volts],
    current: [amps, amps, amps],
    inputV: 3 * volts - OHM * amps,
    inputA: amps,
    ...more,
  };
};
const own = Array.from({ length: 120 }, (_, i) => reading(i));

describe('samples of a loop', () => {
  it('give back the resistance that made them, and lie about its line', () => {
    const samples = loopSamples(own, [], 3);
    expect(samples).toHaveLength(120);
    const fit = fitLoop(samples);
    if (typeof fit === 'string') throw new Error(fit);
    expect(fit.low).toBeLessThan(OHM);
    expect(fit.high).toBeGreaterThan(OHM);
    const { points, interceptV } = aboutTheLine(samples, fit);
    for (const p of points) expect(Math.abs(p.gapV - interceptV - fit.ohm * p.ownA)).toBeLessThan(0.15);
  });

  it('leave out what lacks a unit, the input, or a string beside', () => {
    const broken = [
      reading(0, { voltage: [40, null, 40] }),
      reading(1, { inputV: null }),
      reading(2, { current: [null, null, 5] }),
      reading(3, { voltage: [40, 40] }),
    ];
    expect(loopSamples(broken, [], 3)).toEqual([]);
    const beside = [reading(0), reading(2)];
    const both = loopSamples([reading(0), reading(1), reading(2)], [beside], 3);
    expect(both.map((s) => s.atS)).toEqual([reading(0).atS, reading(2).atS]);
    expect(both[0]?.othersA).toBeCloseTo(both[0]?.ownA ?? 0, 9);
  });
});
