import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../equipment/unit-type';
import { vocOf } from '../photovoltaics/module/open-circuit';
import { earthFinding } from './earth';
import { hypothesesFor } from './hypotheses';
import { interpretReading } from './interpret';
import { posteriorOf } from './posterior';
import { expectedState, ORDINARY_METER } from './reading';
import { generator, MODULE, question, simulate } from './sample-readings';

const AT_NOON = { poaGlobal: 800, poaRelativeSd: 0.05, temperatureCell: 45, temperatureSd: 2 };
const voc = vocOf(MODULE, 800, 45);

describe('readings on the first day', () => {
  // check values: 0.6 V a unit, common practice
  it.each([
    [6, 3.6],
    [14, 8.4],
  ])('%i units in shutdown out of the box at %f V are as expected', (units, voltageV) => {
    const answer = interpretReading(question({ units, voltageV }));
    expect(answer).toMatchObject({ outcome: 'as_expected', headline: `All ${units} units are in shutdown` });
    expect(answer.hypotheses[0]!.expectedV).toBeCloseTo(voltageV, 6);
  });
  it('a monitored string at full voltage before the roll call is as expected and does not obey the initiator', () => {
    const monitored = { unitType: UNIT_PRESETS.monitored, conditions: AT_NOON, voltageV: 14 * voc };
    for (const commanded of ['unknown', 'shutdown', 'released'] as const) {
      const answer = interpretReading(question({ ...monitored, commanded }));
      expect(answer).toMatchObject({ outcome: 'as_expected', obeysInitiator: false });
      expect(answer.cautions[0]).toContain('treat the string as live');
    }
  });
  it('the same voltage on a shutdown-only string without keep-alive is a finding', () => {
    const answer = interpretReading(question({ conditions: AT_NOON, voltageV: 14 * voc }));
    expect(answer).toMatchObject({
      outcome: 'finding',
      headline: "All 14 units pass their module's voltage",
    });
  });
  it('one unit less than fourteen can not be told from tolerance, unless siblings pin the value', () => {
    const alone = interpretReading(question({ voltageV: 13 * 0.6 }));
    expect(alone.likely.map((h) => h.kind)).toEqual(expect.arrayContaining(['all_in_shutdown', 'unmated']));
    const siblings = [8.41, 8.39, 8.4, 8.42].map((voltageV) => ({ units: 14, voltageV }));
    const pinned = interpretReading(question({ voltageV: 13 * 0.6, siblings }));
    expect(pinned).toMatchObject({ outcome: 'finding' });
    expect(pinned.hypotheses[0]!.kind).toBe('unmated');
    expect(pinned.helped.find((h) => h.what === 'siblings')!.bits).toBeGreaterThan(1);
  });
  it('does not count units with a low-impedance meter', () => {
    const low = interpretReading(
      question({ voltageV: 6.1, meter: { ...ORDINARY_METER, mode: 'low_impedance' } }),
    );
    expect(low.hypotheses[0]!.kind).toBe('all_in_shutdown');
    expect(low.hypotheses[0]!.sdV!).toBeGreaterThan(1);
  });
  it('a negative reading is a finding, not a mistake', () => {
    const answer = interpretReading(question({ voltageV: -8.4 }));
    expect(answer.outcome).toBe('finding');
    expect(answer.headline).toContain('do not connect');
  });
  it('nothing at night proves nothing', () => {
    expect(interpretReading(question({ light: 'night', voltageV: 0.02 })).outcome).toBe('proves_nothing');
    expect(interpretReading(question({ light: 'bright', voltageV: 0.02 })).hypotheses[0]!.kind).toBe('open');
  });
  it('at night no voltage is expected, and a voltage asks whether the light is right', () => {
    const monitored = { unitType: UNIT_PRESETS.monitored, heard: 14, commanded: 'released' as const };
    const dark = interpretReading(question({ ...monitored, light: 'night', voltageV: 0.02 }));
    expect(dark.expected).toContain('no voltage');
    expect(dark.hypotheses.filter((h) => h.asExpected).map((h) => h.kind)).toEqual(['unpowered']);
    expect(dark.cautions.join()).not.toContain('is that right?');
    const lit = interpretReading(question({ ...monitored, light: 'night', voltageV: 560 }));
    expect(lit.outcome).not.toBe('as_expected');
    expect(lit.cautions[0]).toContain('entered as night: is that right?');
    const day = interpretReading(question({ ...monitored, voltageV: 560 }));
    expect(day.expected).toContain('passes');
    expect(day.cautions.join()).not.toContain('night');
  });
  it('one module past its unit and one unit passing read alike: both are named', () => {
    const answer = interpretReading(question({ conditions: AT_NOON, voltageV: voc + 13 * 0.6 }));
    expect(answer.outcome).toBe('cant_tell');
    expect(answer.likely.map((h) => h.kind)).toEqual(
      expect.arrayContaining(['some_passing', 'wired_past_its_unit']),
    );
  });
  it('a third of a module missing is bypassed cells when siblings say what a module gives', () => {
    const answer = interpretReading(
      question({
        unitType: UNIT_PRESETS.monitored,
        units: 12,
        conditions: AT_NOON,
        voltageV: 12 * voc - voc / 3,
        siblings: [1, 0.999, 1.001].map((f) => ({ units: 12, voltageV: 12 * voc * f })),
      }),
    );
    expect(answer.hypotheses[0]!.kind).toBe('substring_bypassed');
  });
});

describe('what is expected', () => {
  it('follows the type, the roll call and the command', () => {
    const monitored = (heard: number, commanded: 'released' | 'shutdown') =>
      expectedState(question({ unitType: UNIT_PRESETS.monitored, heard, commanded }));
    expect(monitored(14, 'shutdown')).toMatchObject({ passing: 0, unheardPassing: 0 });
    expect(monitored(10, 'shutdown')).toMatchObject({ passing: 4, unheardPassing: 4 });
    expect(monitored(10, 'released')).toMatchObject({ passing: 14, unheardPassing: 4 });
    expect(expectedState(question({ commanded: 'released' })).passing).toBe(14);
  });
  it('names the units that were heard and those that were not, for both make the voltage', () => {
    const words = (heard: number, commanded: 'released' | 'shutdown') =>
      expectedState(question({ unitType: UNIT_PRESETS.monitored, units: 12, heard, commanded })).words;
    expect(words(8, 'released')).toBe('8 units heard and 4 not heard yet: all 12 pass full voltage');
    expect(words(1, 'released')).toBe('1 unit heard and 11 not heard yet: all 12 pass full voltage');
    expect(words(11, 'shutdown')).toBe(
      '11 units were heard and are in shutdown; 1 was not heard and passes full voltage',
    );
    for (const commanded of ['released', 'shutdown'] as const)
      expect(words(0, commanded)).toBe('the units were not heard yet: every one passes full voltage');
  });
});

describe('calibration over 5,000 simulated readings', () => {
  it('means what it says: in each decile of what it gives, as many are right; the truth is in its 95 % set', () => {
    const random = generator(2_026);
    const bins = Array.from({ length: 10 }, () => ({ n: 0, given: 0, right: 0 }));
    let inSet = 0;
    let told = 0;
    let toldRight = 0;
    const N = 5000;
    for (let k = 0; k < N; k++) {
      const { question: q, truth } = simulate(random);
      const { hypotheses, probability } = posteriorOf(q);
      const isTruth = hypotheses.map(
        (h) =>
          h.kind === truth.kind &&
          h.count === truth.count &&
          h.passing === truth.passing &&
          h.inShutdown === truth.inShutdown,
      );
      const order = probability.map((_, i) => i).sort((a, b) => probability[b]! - probability[a]!);
      let sum = 0;
      for (const i of order) {
        if (isTruth[i]) inSet++;
        sum += probability[i]!;
        if (sum >= 0.95) break;
      }
      probability.forEach((p, i) => {
        if (p < 0.005) return;
        const bin = bins[Math.min(9, Math.floor(p * 10))]!;
        bin.n++;
        bin.given += p;
        if (isTruth[i]) bin.right++;
      });
      const best = order[0]!;
      if (probability[best]! >= 0.8) {
        told++;
        if (isTruth[best]) toldRight++;
      }
    }
    for (const bin of bins) {
      const given = bin.given / bin.n;
      const right = bin.right / bin.n;
      // five points, and twice the chance error of so few in the thinnest deciles; `npm run bench -- readings` has more
      const chance = 2 * Math.sqrt((given * (1 - given)) / bin.n);
      expect(Math.abs(given - right), `${given} given, ${right} right of ${bin.n}`).toBeLessThan(
        0.05 + (bin.n < 400 ? chance : 0),
      );
    }
    expect(inSet / N).toBeGreaterThanOrEqual(0.95);
    expect(toldRight / told).toBeGreaterThan(0.95);
    expect(told / N).toBeGreaterThan(0.85); // it does not hide behind "can't tell"
  }, 60_000);
});

describe('readings to earth', () => {
  const passing = question({ unitType: UNIT_PRESETS.monitored, units: 10, voltageV: 400 });
  it('a floating string shows little and no fault is seen', () => {
    expect(earthFinding({ ...passing, earth: { positiveV: 6, negativeV: -9 } }, true)!.outcome).toBe(
      'no_fault_seen',
    );
  });
  it('readings that add up place the fault by their ratio', () => {
    const found = earthFinding({ ...passing, earth: { positiveV: 280, negativeV: -120 } }, true)!;
    expect(found).toMatchObject({ outcome: 'fault', between: [3, 4] });
    expect(found.words).toContain('between positions 3 and 4');
  });
  it('a contact at the negative end, and a place that can not be told with mixed units', () => {
    expect(earthFinding({ ...passing, earth: { positiveV: 400, negativeV: 0 } }, true)).toMatchObject({
      outcome: 'fault',
      between: [0, 1],
    });
    expect(
      earthFinding({ ...passing, earth: { positiveV: 280, negativeV: -120 } }, false)!.between,
    ).toBeNull();
  });
  it('one reading alone that fits neither is no answer', () => {
    expect(earthFinding({ ...passing, earth: { positiveV: null, negativeV: -95 } }, true)!.outcome).toBe(
      'cant_tell',
    );
    expect(
      earthFinding({ ...passing, voltageV: 0.2, earth: { positiveV: 0, negativeV: 0 } }, true)!.outcome,
    ).toBe('cant_tell');
  });
});

describe('whatever is asked', () => {
  it('has probabilities that add up, priors that add up, and no NaN', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 30 }),
        fc.double({ min: -2000, max: 2000, noNaN: true }),
        fc.constantFrom('bright' as const, 'dull' as const, 'snow' as const, 'night' as const),
        fc.constantFrom('shutdown_only' as const, 'monitored' as const),
        fc.integer({ min: 0, max: 40 }),
        fc.array(
          fc.record({
            units: fc.integer({ min: 1, max: 30 }),
            voltageV: fc.double({ min: -100, max: 1500, noNaN: true }),
          }),
          {
            maxLength: 2,
          },
        ),
        (units, voltageV, light, kind, heard, siblings) => {
          const q = question({ units, voltageV, light, heard, siblings, unitType: UNIT_PRESETS[kind] });
          expect(hypothesesFor(q).reduce((s, h) => s + h.prior, 0)).toBeCloseTo(1, 9);
          const answer = interpretReading(q);
          const all = posteriorOf(q).probability;
          expect(all.reduce((s, p) => s + p, 0)).toBeCloseTo(1, 9);
          for (const h of answer.hypotheses) {
            expect(h.probability).toBeGreaterThanOrEqual(0);
            expect(h.expectedV === null || Number.isFinite(h.expectedV)).toBe(true);
          }
          expect(answer.likely.reduce((s, h) => s + h.probability, 0)).toBeGreaterThanOrEqual(0.95 - 1e-9);
        },
      ),
      { numRuns: 60 },
    );
  });
  it('names the value that no string can have', () => {
    expect(() => interpretReading(question({ units: 0 }))).toThrow('units: 0');
    expect(() => interpretReading(question({ voltageV: Number.NaN }))).toThrow('voltageV');
    expect(() => interpretReading(question({ siblings: [{ units: 2.5, voltageV: 3 }] }))).toThrow(
      'siblings[0].units',
    );
  });
});
