import { describe, expect, it } from 'vitest';
import { judgeMembership, type MemberString } from './membership';
import { generator } from './sample-plane';

/**
 * Strings with trackers of their own: a common sky, local clouds that wander from string to string, each string's own
 * level (tolerance, dirt). Units measure with a gain error, a little non-linearity and rounding to 10 mA.
 */
function day(
  random: () => number,
  options: {
    strings: number;
    units: number;
    clear: boolean;
    wrong?: [string: number, unit: number, truth: number];
    alike?: boolean;
  },
): MemberString[] {
  const triangular = (sd: number): number => (random() + random() - 1) * sd * Math.sqrt(6);
  const steps = 200;
  const level = Array.from(
    { length: options.strings },
    () => 1 + (options.alike === true ? 0 : triangular(0.03)),
  );
  const local = Array.from({ length: options.strings }, () => 0);
  const truth = level.map(() => new Float64Array(steps));
  for (let q = 0; q < steps; q++) {
    const sun = Math.sin((Math.PI * (q + 1)) / (steps + 1));
    const common = options.clear ? 1 : 0.4 + 0.3 * Math.sin(q / 9) ** 2;
    local.forEach((x, i) => {
      local[i] = options.clear || options.alike === true ? 0 : 0.85 * x + triangular(0.04);
      truth[i]![q] = 10 * sun * common * level[i]! * (1 + local[i]);
    });
  }
  return truth.map((_, i) => ({
    name: `S${i}`,
    currents: Array.from({ length: options.units }, (_u, u) => {
      const gain = 1 + triangular(0.01);
      const bend = triangular(0.002);
      const wrong = options.wrong;
      const misplaced = wrong?.[0] === i && wrong[1] === u;
      const from = truth[misplaced ? wrong[2] : i]!;
      return from.map((x) => Math.round(100 * x * (gain + bend * (x / 10)) * (1 + triangular(0.002))) / 100);
    }),
  }));
}
const judge = (strings: MemberString[]) => judgeMembership(strings, { accuracy: 0.01 });

describe('a unit on the wrong string', () => {
  it('is found on an overcast day and its true string is named, among pairs that can be told apart', () => {
    const random = generator(31);
    let right = 0;
    let wrongly = 0;
    let falseAlarms = 0;
    let units = 0;
    const N = 20;
    for (let k = 0; k < N; k++) {
      const found = judge(day(random, { strings: 5, units: 8, clear: false, wrong: [1, 3, 4] }));
      for (const m of found) {
        const isWrong = m.string === 'S1' && m.unit === 3;
        if (!isWrong) units++;
        if (m.outcome === 'elsewhere') {
          if (isWrong && m.otherString === 'S4') right++;
          else if (isWrong) wrongly++;
          else falseAlarms++;
        }
      }
    }
    expect(right / N).toBeGreaterThanOrEqual(0.95);
    expect(wrongly).toBe(0);
    expect(falseAlarms / units).toBeLessThan(0.001);
  });

  it('on a clear day it is found where levels differ by more than the accuracy, and never guessed otherwise', () => {
    const random = generator(12);
    let found = 0;
    let undecided = 0;
    let wrongly = 0;
    for (let k = 0; k < 20; k++) {
      for (const m of judge(day(random, { strings: 4, units: 8, clear: true, wrong: [0, 2, 3] }))) {
        const isWrong = m.string === 'S0' && m.unit === 2;
        if (m.outcome === 'elsewhere' && !(isWrong && m.otherString === 'S3')) wrongly++;
        if (!isWrong) continue;
        if (m.outcome === 'elsewhere') found++;
        else if (m.outcome === 'cant_tell') undecided++;
      }
    }
    expect(wrongly).toBe(0);
    expect(found + undecided).toBeGreaterThanOrEqual(19);
  });

  it("says that the data can't decide between strings that are alike", () => {
    const found = judge(
      day(generator(4), { strings: 3, units: 6, clear: true, alike: true, wrong: [0, 1, 2] }),
    );
    expect(found.every((m) => m.outcome === 'cant_tell')).toBe(true);
    expect(found[0]!.undecidedWith).toEqual(expect.arrayContaining(['S1', 'S2']));
  });

  it('can not be told before the inverter runs', () => {
    const dark = [0, 1].map((i) => ({
      name: `S${i}`,
      currents: [new Float64Array(100), new Float64Array(100)],
    }));
    expect(judge(dark).every((m) => m.outcome === 'cant_tell')).toBe(true);
  });

  it('offers the decisive method and never a position', () => {
    const [m] = judge(day(generator(8), { strings: 5, units: 8, clear: false, wrong: [1, 3, 4] })).filter(
      (x) => x.outcome === 'elsewhere',
    );
    expect(m!.words).toContain('whose current goes to zero');
    expect(m!.words).not.toMatch(/position/);
  });
});
