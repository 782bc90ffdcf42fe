import { describe, expect, it } from 'vitest';
import { generator } from './sample-plane';
import { enoughToTell, weakUnits, type UnitVoltages } from './weak-unit';

/** A day of quarters: units of like modules with gain errors, temperature over the day, a breath of cloud. */
function day(
  random: () => number,
  change: (unit: number, quarter: number, volts: number) => number,
): UnitVoltages {
  const triangular = (sd: number): number => (random() + random() - 1) * sd * Math.sqrt(6);
  const gains = Array.from({ length: 12 }, () => 1 + triangular(0.008));
  const current = new Float64Array(48).map((_, q) => 9 * Math.sin((Math.PI * (q + 0.5)) / 48));
  const voltage = gains.map((gain, unit) =>
    current.map((i, q) => gain * change(unit, q, 36 - 0.3 * i + triangular(0.3)) * (1 + triangular(0.004))),
  );
  return { voltage, current, bypassGroups: 3 };
}

describe('a weak unit', () => {
  it('a bypassed sub-string is told from a unit in shutdown, and a sound string has none', () => {
    const random = generator(40);
    let right = 0;
    let falsely = 0;
    for (let k = 0; k < 60; k++) {
      const bypassed = k % 2 === 0;
      const found = weakUnits(
        day(random, (u, _, v) =>
          u !== 5 ? v : bypassed ? (v * 2) / 3 - 0.4 - 0.2 * random() : -0.3 - 0.4 * random(),
        ),
      );
      const [hit] = found.filter((w) => w.unit === 5);
      if (hit?.kind === (bypassed ? 'bypassed_substring' : 'held')) right++;
      falsely += found.filter((w) => w.unit !== 5).length;
    }
    expect(right / 60).toBeGreaterThanOrEqual(0.95);
    expect(falsely).toBe(0);
    expect(weakUnits(day(random, (_u, _q, v) => v))).toEqual([]);
  });
  it('two bypassed of three, shade for part of the day, and just low', () => {
    const random = generator(3);
    expect(weakUnits(day(random, (u, _, v) => (u === 2 ? v / 3 - 1 : v)))[0]).toMatchObject({
      kind: 'bypassed_substring',
      count: 2,
    });
    expect(weakUnits(day(random, (u, q, v) => (u === 2 && q > 30 && q < 42 ? v / 2 : v)))[0]!.kind).toBe(
      'part_of_day',
    );
    expect(weakUnits(day(random, (u, _, v) => (u === 2 ? 0.85 * v : v)))[0]).toMatchObject({
      kind: 'low',
      unit: 2,
    });
  });
  it('needs load and company', () => {
    const random = generator(3);
    const dull = day(random, (_u, _q, v) => v);
    expect(enoughToTell(dull)).toBe(true);
    expect(enoughToTell({ ...dull, current: dull.current.map((i) => i / 20) })).toBe(false);
    expect(weakUnits({ ...dull, voltage: dull.voltage.slice(0, 3) })).toEqual([]);
  });
});
