import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../../equipment/unit-type';
import { CHECK_KEYS, CHECK_RESULTS, type FigureValue } from './definition';
import { undocumentedPair } from './connectors';
import { figureFaults } from './figures';
import { insulationTable, insulationTest } from './insulation';
import { judgeCheck } from './judge';
import { CHECKS, checksFor } from './list';
import { H4, K6, allPassed, context, standing } from './sample-checks';
import { signOffState, signedRecords } from './sign-off';

const monitored = { ...UNIT_PRESETS.monitored, name: 'Watching unit' };

describe('the list of checks', () => {
  it('has every check once, in its order, with words and a source', () => {
    expect(CHECKS.map((c) => c.key)).toEqual([...CHECK_KEYS]);
    for (const c of CHECKS) {
      for (const words of [c.name, c.asks, c.how, c.source]) expect(words.length).toBeGreaterThan(5);
      expect(new Set(c.figures.map((f) => f.key)).size).toBe(c.figures.length);
    }
  });

  it('speaks of faces, labels and insulation as the types and the rule set say', () => {
    const of = (key: string, more = {}) => checksFor(context(more)).find((c) => c.key === key);
    expect(of('face')?.asks).toContain('Either face');
    expect(of('face', { unitType: { ...monitored, facesAllowed: 'label_out' } })?.asks).toContain(
      'away from the back sheet',
    );
    expect(of('labels')?.asks).toContain('rapid shutdown label');
    expect(of('labels', { ruleSet: 'none' })?.asks).not.toContain('rapid shutdown');
    // no maker's figure: no test
    expect(of('insulation')).toMatchObject({ offersNotApplicable: 'The maker of the units allows none.' });
    expect(of('insulation')?.warning).toContain('can destroy');
    const allowed = of('insulation', { unitType: { ...monitored, insulationTestMax: 500 } });
    expect(allowed?.offersNotApplicable).toBeNull();
    expect(allowed?.how).toContain('At most 500 V');
  });
});

describe('insulation', () => {
  // IEC 62446:2009, 5.4.7 and the table, test voltages as a training poster quotes them; least resistances from memory
  it.each([
    [2, 41.2, 103, 250, 0.5],
    [9, 41.2, 463.5, 500, 1],
    [10, 40, 500, 500, 1],
    [14, 41.2, 721, 1000, 1],
  ])('of %i modules of %f V: system %f V, test %i V, %f MΩ', (n, voc, system, test, least) => {
    const table = insulationTable(n, voc);
    expect(table.systemVoltage).toBeCloseTo(system, 6);
    expect(table).toMatchObject({ testVoltage: test, leastResistanceMohm: least });
  });

  it('contradicts a pass where the maker allows no test, or less, or where the array leaks', () => {
    const figures = { testVoltage: '1000', resistance: 5, unitsState: 'passing' };
    const judged = (more: object, f: object = {}) =>
      judgeCheck(standing('insulation', { figures: { ...figures, ...f } }), context(more));
    expect(insulationTest(context())).toMatchObject({ allowed: false });
    expect(judged({})).toMatchObject({ weight: 'blocks', contradicts: true });
    const to500 = { unitType: { ...monitored, insulationTestMax: 500 } };
    expect(judged(to500).words[0]).toContain('more than the 500 V');
    // lower than the table asks for, as the maker wants it: told, not blocked
    expect(judged(to500, { testVoltage: '500' })).toMatchObject({ weight: 'told', contradicts: false });
    const to1000 = { unitType: { ...monitored, insulationTestMax: 1000 } };
    expect(judged(to1000)).toMatchObject({ weight: 'none', words: [] });
    expect(judged(to1000, { resistance: 0.4 })).toMatchObject({
      weight: 'blocks',
      source: expect.stringContaining('from memory') as string,
    });
    expect(judged(to1000, { unitsState: 'shutdown' }).words[0]).toContain('what lies behind them');
    // units taken out of the circuit: their maker has no say
    expect(judged({}, { unitsState: 'bypassed' }).contradicts).toBe(false);
    expect(
      judgeCheck(standing('insulation', { result: 'not_applicable', reason: 'none allowed' }), context())
        .weight,
    ).toBe('none');
  });
});

describe('what figures say of a pass', () => {
  const judge = (...[check, figures, more]: [Parameters<typeof standing>[0], object, object?]) =>
    judgeCheck(standing(check, { figures: figures as never }), context(more));

  it('blocks a reversed string and says not to connect it', () => {
    const judged = judge('polarity', { voltage: -520 });
    expect(judged).toMatchObject({ weight: 'blocks', contradicts: true });
    expect(judged.words[0]).toContain('Do not connect');
    expect(judge('polarity', { voltage: 520 }).weight).toBe('none');
  });

  it('blocks a conductor that touches earth and tells what can’t be told', () => {
    expect(judge('voltage_to_earth', { between: 560, positive: 200, negative: -360 })).toMatchObject({
      weight: 'blocks',
    });
    expect(judge('voltage_to_earth', { between: 560, positive: 8, negative: -5 }).weight).toBe('none');
    expect(judge('voltage_to_earth', { between: 0.2, positive: 0, negative: 0 }).weight).toBe('told');
  });

  it('tells earth resistance above common practice', () => {
    expect(judge('earth_continuity', { resistance: 1.4 })).toMatchObject({
      weight: 'told',
      contradicts: false,
      source: 'common practice; local rules decide',
    });
    expect(judge('earth_continuity', { resistance: 0.9 }).weight).toBe('none');
  });

  it('blocks slots without serials, leads upwards and the wrong face', () => {
    expect(judge('serials', {}, { emptySlots: 3 }).words[0]).toContain('3 of 14 slots have no serial');
    expect(judge('orientation', { leads: 'up' }).weight).toBe('blocks');
    const labelOut = { unitType: { ...monitored, facesAllowed: 'label_out' } };
    expect(judge('face', { face: 'label_in' }, labelOut).weight).toBe('blocks');
    expect(judge('face', { face: 'label_in' }).weight).toBe('none');
  });

  it('holds a current against strings measured with it (5 % of the average) and against the sheet', () => {
    const sibling = (currentA: number, more = {}) => ({
      string: 'B2',
      currentA,
      method: 'operating',
      poaGlobal: null,
      atS: 1_790_000_000,
      ...more,
    });
    const current = (a: number, siblings: object[], figures = {}, more = {}) =>
      judge(
        'string_current',
        { current: a, method: 'operating', ...figures },
        { siblingCurrents: siblings, ...more },
      );
    expect(current(9.6, [sibling(10), sibling(10)]).weight).toBe('none');
    expect(current(9.2, [sibling(10), sibling(10)])).toMatchObject({ weight: 'told', contradicts: false });
    // not the same light, not the same way: no comparison
    expect(current(5, [sibling(10, { atS: 1_790_003_000 })]).weight).toBe('none');
    expect(current(5, [sibling(10, { method: 'short_circuit' })]).weight).toBe('none');
    expect(current(5, [sibling(10, { poaGlobal: 900 })], { poaGlobal: 450 }).weight).toBe('none');
    // 10.8 A at 1000 W/m² by the sheet
    expect(current(5.4, [], { poaGlobal: 500 }).weight).toBe('none');
    expect(current(3, [], { poaGlobal: 500 }).words[0]).toContain('5.4 A that the datasheet gives');
    expect(current(-3, []).weight).toBe('blocks');
    const optimizing = { unitType: { ...UNIT_PRESETS.optimizing, name: 'Shaper' } };
    expect(current(5, [sibling(10)], { poaGlobal: 900 }, optimizing).weight).toBe('none');
  });

  it('blocks a connector pair without a document, and lifts it with one', () => {
    const figures = { moduleLead: H4.id, unitInput: K6.id };
    const judged = judge('connectors', figures);
    expect(judged).toMatchObject({ weight: 'blocks', contradicts: true, fireRisk: true });
    expect(undocumentedPair(figures, context())).toMatchObject({ first: H4.id, second: K6.id });
    const pairs = [{ first: K6.id, second: H4.id, evidence: 'Declaration 12, 2026, page 3' }];
    const lifted = judge('connectors', figures, { pairs });
    expect(lifted).toMatchObject({ weight: 'told', fireRisk: false });
    expect(lifted.words[0]).toContain('Declaration 12');
    // the home run is judged where both its halves were chosen
    expect(
      judge('connectors', { moduleLead: H4.id, unitInput: H4.id, unitOutput: H4.id, homeRun: K6.id })
        .fireRisk,
    ).toBe(true);
    expect(judge('connectors', { moduleLead: H4.id, unitInput: H4.id, unitOutput: H4.id }).weight).toBe(
      'blocks',
    );
    expect(judge('connectors', { moduleLead: H4.id, unitInput: H4.id }).weight).toBe('none');
  });
});

describe('sign-off', () => {
  it('may be given when everything is recorded and nothing contradicts', () => {
    expect(signOffState(allPassed(), context())).toMatchObject({ maySign: true, blocks: [], recorded: 13 });
  });

  it('waits for each missing check but the current, which may follow', () => {
    for (const key of CHECK_KEYS) {
      const state = signOffState(
        allPassed().filter((c) => c.check !== key),
        context(),
      );
      expect(state.maySign, key).toBe(key === 'string_current');
      if (key === 'string_current') expect(state.remarks[0]).toContain('may follow');
      else expect(state.blocks).toMatchObject([{ check: key, kind: 'missing' }]);
    }
  });

  it('is blocked by a fail, a contradiction and a fire risk, each named', () => {
    const but = (check: (typeof CHECK_KEYS)[number], more: object) =>
      signOffState(
        allPassed().map((c) => (c.check === check ? { ...c, ...more } : c)),
        context(),
      ).blocks;
    expect(but('strain_relief', { result: 'fail', reason: 'lead on the roof' })).toMatchObject([
      { kind: 'failed', words: 'Strain relief failed: lead on the roof' },
    ]);
    expect(but('polarity', { figures: { voltage: -5 } })).toMatchObject([{ kind: 'contradicted' }]);
    expect(but('connectors', { figures: { moduleLead: H4.id, unitInput: K6.id } })).toMatchObject([
      { kind: 'fire_risk', remedy: expect.stringContaining('manager') as string },
    ]);
  });

  it('signs records in one order, whatever order they came in', () => {
    const records = CHECK_KEYS.map((check, i) => ({ ref: `r${i}`, check }));
    fc.assert(
      fc.property(fc.shuffledSubarray(records, { minLength: records.length }), (shuffled) => {
        expect(signedRecords(shuffled)).toEqual(records);
      }),
    );
  });
});

describe('figures', () => {
  const value: fc.Arbitrary<FigureValue> = fc.oneof(fc.double(), fc.string({ maxLength: 12 }), fc.integer());
  it('never throw, and what has no fault is within what the check takes', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...CHECKS),
        fc.constantFrom(...CHECK_RESULTS),
        fc.dictionary(
          fc.oneof(
            fc.string({ maxLength: 12 }),
            fc.constantFrom('resistance', 'current', '__proto__', 'constructor'),
          ),
          value,
        ),
        (check, result, figures) => {
          const faults = figureFaults(check.key, result, figures, () => false);
          for (const f of faults) expect(f.message.length).toBeGreaterThan(10);
          if (faults.length > 0) return;
          for (const [key, v] of Object.entries(figures)) {
            const f = check.figures.find((x) => x.key === key);
            expect(f).toBeDefined();
            if (f?.kind === 'number') expect(v).toSatisfy((n: number) => n >= f.min && n <= f.max);
          }
          judgeCheck(standing(check.key, { result, figures }), context());
        },
      ),
    );
  });
});
