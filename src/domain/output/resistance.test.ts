import { describe, expect, it } from 'vitest';
import { fitLoop, judgeLoop, type LoopFit, type LoopSample } from './resistance';
import { generator } from './sample-plane';

/**
 * Days of five-minute reports: voltage falls with temperature and rises with the logarithm of light, both sides have a
 * gain error, the input is read some seconds after the units while clouds pass, and values are rounded.
 */
function days(
  random: () => number,
  count: number,
  ohm: number,
  more: { others?: number; shared?: number } = {},
): LoopSample[] {
  const triangular = (sd: number): number => (random() + random() - 1) * sd * Math.sqrt(6);
  const gainUnits = 1 + triangular(0.003);
  const gainInput = 1 + triangular(0.006);
  const samples: LoopSample[] = [];
  for (let d = 0; d < count; d++) {
    let sky = 0.9;
    for (let q = 0; q < 140; q++) {
      const sun = Math.sin((Math.PI * (q + 1)) / 141);
      sky = Math.min(1, Math.max(0.3, sky + triangular(random() < 0.3 ? 0.1 : 0.01)));
      const a = 10.5 * sun * sky;
      const later = a * (1 + triangular(0.01)); // the input is read at another moment
      const v = 14 * 34 * (1 - 0.0008 * 28 * sun * sky) * (1 + 0.02 * Math.log(Math.max(0.05, sun * sky)));
      const othersA = (more.others ?? 0) * a * (1 + triangular(0.08));
      const drop = ohm * later + (more.shared ?? 0) * (later + othersA);
      samples.push({
        atS: d * 86_400 + q * 300,
        sumV: Math.round(100 * (v * gainUnits + triangular(0.15))) / 100,
        inputV: Math.round(10 * (v - drop) * gainInput) / 10,
        ownA: a,
        othersA,
      });
    }
  }
  return samples;
}
const fitted = (samples: LoopSample[]): LoopFit => {
  const fit = fitLoop(samples);
  if (typeof fit === 'string') throw new Error(fit);
  return fit;
};
const alone = { past: null, siblings: [], cableOhm: 0.4 };

describe('the loop of a string', () => {
  it('does not take a longer home run for a fault', () => {
    const fit = fitLoop(days(generator(6), 3, 0.9));
    const siblings = [0.41, 0.38, 0.43, 0.4].map((ohm) => ({ ohm, cableOhm: 0.4 }));
    expect(judgeLoop(fit, { past: null, siblings, cableOhm: 0.9 }).outcome).toBe('usual');
    expect(judgeLoop(fit, { past: null, siblings, cableOhm: 0.4 }).outcome).toBe('excess');
  });

  it('finds 0.2 Ω added within three days, and leaves sound strings alone', () => {
    const random = generator(6);
    let found = 0;
    let falsely = 0;
    const N = 16;
    for (let k = 0; k < N; k++) {
      const siblings = [0.41, 0.38, 0.43, 0.4, 0.37, 0.42].map((ohm) => ({ ohm, cableOhm: 0.4 }));
      const bad = judgeLoop(fitLoop(days(random, 3, 0.6)), { ...alone, siblings });
      const good = judgeLoop(fitLoop(days(random, 3, 0.4)), { ...alone, siblings });
      if (bad.outcome === 'excess') found++;
      if (good.outcome === 'excess') falsely++;
    }
    expect(found / N).toBeGreaterThanOrEqual(0.9);
    expect(falsely / N).toBeLessThanOrEqual(0.07);
  }, 30_000);

  it('tells growth from a long cable', () => {
    const random = generator(21);
    const long = fitted(days(random, 3, 1.1));
    expect(judgeLoop(fitLoop(days(random, 3, 1.1)), { ...alone, past: long }).outcome).toBe('usual');
    const grown = judgeLoop(fitLoop(days(random, 3, 1.4)), { ...alone, past: long });
    expect(grown.outcome).toBe('growing');
    expect(grown.heatW).toBeGreaterThan(15); // I²R: 0.3 Ω at some ten amperes
    expect(grown.words).toContain('module side');
  });

  it('holds with a fifth of the samples wild', () => {
    const random = generator(2);
    const samples = days(random, 3, 0.5).map((s, i) =>
      i % 5 === 0 ? { ...s, inputV: s.inputV - 40 * random() } : s,
    );
    expect(fitted(samples).ohm).toBeGreaterThan(0.3);
    expect(fitted(samples).ohm).toBeLessThan(0.75);
  });

  it("leaves out what was read at different moments, as the input's own current shows", () => {
    const random = generator(9);
    // a cloud's edge passes between both readings of every third sample: the tracker's voltage is another one by then
    const torn = days(random, 3, 0.5).map((s, i) => {
      const edge = i % 3 === 0 ? 0.5 + random() : 1;
      return { ...s, inputV: s.inputV - 30 * (edge - 1), inputA: s.ownA * edge * 1.006 };
    });
    expect(fitted(torn).samples).toBeLessThanOrEqual((2 / 3) * torn.length);
    expect(Math.abs(fitted(torn).ohm - 0.5)).toBeLessThan(0.08);
    // one report in three is enough then, for no neighbour need be steady
    expect(Math.abs(fitted(torn.filter((_, i) => i % 4 === 1)).ohm - 0.5)).toBeLessThan(0.15);
  });

  it('takes what all strings show alike for the weather', () => {
    const fit = { ohm: 0.6, low: 0.55, high: 0.65, sharedOhm: null, gain: 0, samples: 90, highestA: 9 };
    const past = { ...fit, ohm: 0.4, low: 0.35, high: 0.45 };
    const against = { past, siblings: [], cableOhm: 0.4 };
    expect(judgeLoop(fit, against).outcome).toBe('growing');
    const all = [0.18, 0.2, 0.21, 0.19, 0.22];
    expect(judgeLoop(fit, { ...against, siblingsGrowthOhm: all }).outcome).toBe('usual');
  });

  it("says that it can't tell rather than that nothing is wrong", () => {
    const fit = { ohm: 0.55, low: 0.4, high: 0.7, sharedOhm: null, gain: 0, samples: 40, highestA: 9 };
    const past = { ...fit, ohm: 0.45, low: 0.35, high: 0.55 };
    expect(judgeLoop(fit, { past, siblings: [], cableOhm: 0.4 })).toMatchObject({ outcome: 'cant_tell' });
  });

  it('keeps what strings share apart from its own where their currents differ', () => {
    const fit = fitted(days(generator(15), 3, 0.3, { others: 2, shared: 0.15 }));
    expect(fit.sharedOhm).not.toBeNull();
    expect(fit.ohm + fit.sharedOhm!).toBeGreaterThan(0.2);
  });

  it("can't tell without current", () => {
    const dull = days(generator(1), 3, 0.4).map((s) => ({ ...s, ownA: s.ownA / 10 }));
    expect(judgeLoop(fitLoop(dull), alone)).toMatchObject({ outcome: 'cant_tell', fit: null });
  });
});
