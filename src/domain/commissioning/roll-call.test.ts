import { describe, expect, it } from 'vitest';
import { heardButUnknown, tallyByString, weakestByString } from './heard';
import { forecastRollCall, HEARD_MIN, type RollCallUnit } from './roll-call';

/** Mulberry32: a small generator with a seed, so that a test says the same each time. */
function generator(seed: number): () => number {
  let a = seed >>> 0;
  return () => {
    a = (a + 0x6d2b79f5) >>> 0;
    let t = a;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  };
}

/**
 * Discovery as radios do it, and not as the forecast assumes: a gateway asks in rounds of its own length; a unit
 * answers a round with a chance that depends on its signal (a logistic curve of a normal spread, with a common part per
 * string); a few never answer. Geometric waiting times with mixed chances are no Weibull.
 */
function discovery(
  random: () => number,
  strings: number,
  perString: number,
): (RollCallUnit & { trueS: number })[] {
  const normal = (): number => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
  const round = 20 + 60 * random();
  const difficulty = 0.5 + 1.8 * random();
  const neverShare = random() < 0.4 ? 0 : 0.04 * random();
  const units: (RollCallUnit & { trueS: number })[] = [];
  for (let s = 0; s < strings; s++) {
    const common = 0.7 * normal();
    for (let u = 0; u < perString; u++) {
      const chance = 1 / (1 + Math.exp(difficulty + common + 0.8 * normal()));
      let rounds = 1;
      while (random() > chance && rounds < 4000) rounds++;
      const never = random() < neverShare;
      units.push({
        group: `S${s}`,
        gateway: null,
        heardAtS: null,
        trueS: never ? Infinity : round * (rounds - random()),
      });
    }
  }
  return units;
}

describe('the forecast', () => {
  it('keeps its word: the truth lies in its 90 % band about nine times in ten', () => {
    const random = generator(20_261_201);
    let inEnd = 0;
    let inBetween = 0;
    let trials = 0;
    let midTrials = 0;
    let width = 0;
    for (let k = 0; k < 250; k++) {
      const units = discovery(random, 4 + Math.floor(8 * random()), 8 + Math.floor(10 * random()));
      const finite = units.map((u) => u.trueS).sort((a, b) => a - b);
      const nowS = finite[Math.floor((0.3 + 0.6 * random()) * units.length)]!;
      if (!Number.isFinite(nowS)) continue;
      const seen = units.map((u) => ({ ...u, heardAtS: u.trueS <= nowS ? u.trueS : null }));
      const forecast = forecastRollCall({ startedAtS: 0, nowS, units: seen });
      if (forecast.excluded > 0) continue;
      trials++;
      const end = units.filter((u) => Number.isFinite(u.trueS)).length;
      if (end >= forecast.low && end <= forecast.high) inEnd++;
      width += (forecast.high - forecast.low) / units.length;
      const middle = forecast.curve[8]!;
      const then = units.filter((u) => u.trueS <= middle.atS).length;
      midTrials++;
      if (then >= middle.low && then <= middle.high) inBetween++;
    }
    expect(trials).toBeGreaterThan(200);
    // most sites end at the roster's full count, which is the band's upper end: so many are in that 90 % is a floor
    expect(inEnd / trials).toBeGreaterThan(0.88);
    expect(inBetween / midTrials).toBeGreaterThan(0.84);
    expect(inBetween / midTrials).toBeLessThan(0.96);
    // an honest band that says everything says nothing
    expect(width / trials).toBeLessThan(0.18);
  }, 30_000);

  it('says nothing before enough were heard', () => {
    const units = Array.from({ length: 40 }, (_, i) => ({
      group: 'A',
      gateway: null,
      heardAtS: i < HEARD_MIN - 1 ? 10 : null,
    }));
    expect(forecastRollCall({ startedAtS: 0, nowS: 60, units })).toMatchObject({
      heard: 4,
      low: 4,
      high: 40,
      curve: [],
      expectedByS: null,
    });
  });

  it('names what has not stirred and leaves it out', () => {
    const units: RollCallUnit[] = [];
    for (let i = 0; i < 60; i++)
      units.push({
        group: `A${i % 5}`,
        gateway: 1,
        serial: `WK10${String(i).padStart(4, '0')}`,
        heardAtS: i < 57 ? 20 + 5 * i : null,
      });
    for (let i = 0; i < 14; i++)
      units.push({ group: 'B1', gateway: null, serial: `WK77${String(i).padStart(4, '0')}`, heardAtS: null });
    const forecast = forecastRollCall({ startedAtS: 0, nowS: 900, units });
    expect(forecast.notStirred).toMatchObject([{ kind: 'string', group: 'B1', units: 14 }]);
    expect(forecast).toMatchObject({ heard: 57, total: 74, excluded: 14 });
    expect(forecast.high).toBeLessThanOrEqual(60);
    expect(forecast.low).toBeGreaterThanOrEqual(57);
  });

  it('names a block of serials spread over strings', () => {
    const units: RollCallUnit[] = [];
    for (let i = 0; i < 80; i++) {
      const odd = i % 10 === 0;
      units.push({
        group: `A${i % 5}`,
        gateway: 1,
        serial: odd ? `ZX90000${i % 100 < 10 ? '0' : ''}${i % 100}` : `WK10${String(i).padStart(5, '0')}`,
        heardAtS: odd ? null : 20 + 4 * i,
      });
    }
    const forecast = forecastRollCall({
      startedAtS: 0,
      nowS: 1200,
      units: units.map((u) => ({ ...u, gateway: null })),
    });
    expect(forecast.notStirred).toMatchObject([{ kind: 'serials', units: 8 }]);
  });

  it('has a curve that rises, stays in its band and ends near the total', () => {
    const units = Array.from({ length: 100 }, (_, i) => ({
      group: `A${i % 8}`,
      gateway: null,
      heardAtS: i < 70 ? 30 + 6 * i : null,
    }));
    const { curve, expectedTotal } = forecastRollCall({ startedAtS: 0, nowS: 460, units });
    for (let k = 1; k < curve.length; k++)
      expect(curve[k]!.expected).toBeGreaterThanOrEqual(curve[k - 1]!.expected - 1e-9);
    for (const p of curve) {
      expect(p.low).toBeLessThanOrEqual(p.expected + 0.51);
      expect(p.high).toBeGreaterThanOrEqual(p.expected - 0.51);
    }
    expect(expectedTotal).toBeGreaterThan(90);
    expect(expectedTotal).toBeLessThanOrEqual(100);
  });

  it('has nothing to wait for when all were heard', () => {
    const units = Array.from({ length: 12 }, (_, i) => ({ group: 'A', gateway: null, heardAtS: 10 + i }));
    expect(forecastRollCall({ startedAtS: 0, nowS: 60, units })).toMatchObject({
      expectedTotal: 12,
      low: 12,
      high: 12,
      expectedByS: null,
    });
  });
});

describe('who was heard', () => {
  it('finds serials on no as-built, tallies by string, and the weakest signal of each', () => {
    expect(heardButUnknown([{ serial: 'A-1' }, { serial: 'B-9' }], new Set(['A-1']))).toEqual([
      { serial: 'B-9' },
    ]);
    expect(
      tallyByString([
        { group: 'A', heardAtS: 1 },
        { group: 'B', heardAtS: null },
        { group: 'A', heardAtS: null },
      ]),
    ).toEqual([
      { name: 'A', heard: 1, total: 2 },
      { name: 'B', heard: 0, total: 1 },
    ]);
    expect(
      weakestByString([
        { group: 'A', signal: -60 },
        { group: 'A', signal: -91 },
        { group: 'B', signal: null },
        { group: 'C', signal: -70 },
      ]).map((u) => u.signal),
    ).toEqual([-91, -70]);
  });
});
