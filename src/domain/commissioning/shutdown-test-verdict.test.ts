import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { TestResult } from './test-results';
import {
  faultOfAct,
  nextRound,
  openRound,
  recordOf,
  withActs,
  type Act,
  type KeptAct,
  type RoundEvidence,
  type StringConduct,
  type TestedPart,
  type TestFacts,
  type TestPlan,
  type UnitConduct,
} from './shutdown-test-record';
import { instrumentFaults } from './shutdown-test-remarks';
import { judgeTest } from './shutdown-test-verdict';

const T0 = Date.parse('2026-06-01T10:00:00Z');
const at = (s: number) => new Date(T0 + s * 1000).toISOString();
let made = 0;
const kept = (act: Act, s = 0): KeptAct => ({
  id: `a${made++}`,
  at: at(s),
  recordedAt: at(s),
  person: 'Una Lathe',
  act,
});

const part = (id: string, more: Partial<TestedPart> = {}): TestedPart => ({
  id,
  name: id,
  kind: 'monitored',
  serials: ['S1', 'S2', 'S3'],
  homeRunLeavesArray: true,
  input: { name: 'Inverter 1 input 1', strings: 1 },
  transmitters: [],
  shutdownV: { nominal: 1.8, max: 2 },
  passingFromV: 3,
  ...more,
});
const facts = (strings: TestedPart[], transmitters: string[] = []): TestFacts => ({
  site: { id: 's', name: 'Site', timeZone: 'UTC' },
  zone: { id: 'z', name: 'Zone 1' },
  initiator: { name: 'Initiator', place: 'Gate' },
  ruleSet: 'rapid_shutdown_30s',
  reportIntervalS: 60,
  transmitters: transmitters.map((t) => ({ id: t, name: t })),
  strings,
});
const INSTRUMENT = {
  name: 'Meter',
  serial: '1',
  category: 'CAT III',
  ratedV: 1000,
  calibratedOn: '2026-01-10',
  provedBefore: true,
} as const;
const plan = (strings: string[], rounds: (string | null)[] = [null]): TestPlan => ({
  onSite: 'Una Lathe',
  operator: 'Ivo Brandt',
  others: '',
  strings,
  rounds,
  light: 'bright',
  weather: '',
  instrument: { ...INSTRUMENT },
});
const unit = (position: number, more: Partial<UnitConduct> = {}): UnitConduct => ({
  position,
  serial: `S${position}`,
  followed: [0, 12],
  passedAtS: null,
  downBefore: false,
  basis: 'measured',
  returned: [0, 20],
  heldAtS: null,
  ...more,
});
const conduct = (string: string, more: Partial<StringConduct> = {}): StringConduct => ({
  string,
  traces: [],
  units: [unit(1), unit(2), unit(3)],
  reports: 9,
  input: null,
  inputBeforeV: null,
  sums: [],
  inputs: [],
  inputAgain: null,
  ...more,
});
const seen = (...strings: StringConduct[]): RoundEvidence => ({
  command: { inForce: 'initiator', where: 'Zone 1', since: at(30), by: 'Initiator' },
  release: { since: at(120) },
  origin: 'reported',
  from: at(0),
  to: at(300),
  strings,
});
const reading = (string: string, volts: number, afterS: number | null, round = 0): Act => ({
  kind: 'reading',
  round,
  string,
  moment: afterS === null ? 'before' : 'after',
  afterS,
  secondsFrom: 'clock',
  atInverterEnd: true,
  voltages: { positiveToNegativeV: volts, positiveToEarthV: volts / 2, negativeToEarthV: -volts / 2 },
  note: '',
});
const record = (p: TestPlan, ...acts: Act[]) =>
  recordOf(
    [
      { kind: 'planned', plan: p } as const,
      { kind: 'caution_accepted', name: 'Una Lathe' } as const,
      ...p.rounds.map((_, round) => ({ kind: 'watch_started', round }) as const),
      { kind: 'operated', round: 0 } as const,
      ...acts,
      { kind: 'proved_after', proved: true } as const,
    ].map((a) => kept(a, a.kind === 'operated' ? 30 : 0)),
  );
const read = (string: string, volts = 8, round = 0): Act[] => [
  reading(string, 480, null, round),
  reading(string, volts, 22, round),
];
const resultsOf = (v: { strings: { name: string; result: TestResult }[] }) =>
  Object.fromEntries(v.strings.map((s) => [s.name, s.result]));

describe('the verdict of a test', () => {
  it('passes by instrument, string by string', () => {
    const verdict = judgeTest(
      facts([part('A1'), part('A2')]),
      record(plan(['A1', 'A2']), ...read('A1'), ...read('A2')),
      [seen(conduct('A1'), conduct('A2'))],
    );
    expect(verdict).toMatchObject({ result: 'passed', missing: [], treatAsLive: [], stuck: [], notes: [] });
  });
  it('never passes by reports alone', () => {
    const verdict = judgeTest(facts([part('A1')]), record(plan(['A1'])), [seen(conduct('A1'))]);
    expect(verdict.result).toBe('consistent');
  });
  it('says what to treat as live, with positions', () => {
    const units = [unit(1), unit(2, { followed: null, passedAtS: 80 }), unit(3)];
    const verdict = judgeTest(facts([part('A1')]), record(plan(['A1']), ...read('A1')), [
      seen(conduct('A1', { units })),
    ]);
    expect(verdict).toMatchObject({
      result: 'failed',
      treatAsLive: [{ name: 'A1', why: '1 unit kept passing: position 2' }],
    });
    expect(verdict.strings[0]!.units[1]!.verdict).toBe('not_shutting_down');
  });
  it('counts a unit that was down before the command as shown nothing', () => {
    const units = [unit(1), unit(2, { followed: null, downBefore: true }), unit(3)];
    const verdict = judgeTest(facts([part('A1')]), record(plan(['A1'])), [seen(conduct('A1', { units }))]);
    expect(verdict.result).toBe('not_witnessed');
    expect(verdict.strings[0]!.units[1]!.verdict).toBe('was_down');
  });
  it('holds a string inside the array against 80 V', () => {
    const inside = part('A1', { homeRunLeavesArray: false });
    const run = (volts: number) =>
      judgeTest(
        facts([inside]),
        record(plan(['A1']), reading('A1', 480, null), reading('A1', volts, 29), reading('A1', volts, 40)),
        [seen(conduct('A1'))],
      ).result;
    expect(run(60)).toBe('passed');
    expect(run(85)).toBe('failed');
  });
  it('tells what stays in shutdown after the release, past the grace', () => {
    const units = [
      unit(1, { returned: null, heldAtS: 40 }),
      unit(2, { returned: null, heldAtS: 200 }),
      unit(3),
    ];
    const verdict = judgeTest(facts([part('A1')]), record(plan(['A1'])), [seen(conduct('A1', { units }))]);
    expect(verdict.stuck).toEqual([expect.objectContaining({ name: 'A1', positions: [2] })]);
  });
  it('fails a mute string whose input stands longer than capacitors hold it', () => {
    const mute = part('A1', { kind: 'shutdown_only' });
    const units = [1, 2, 3].map((p) => unit(p, { followed: null, basis: 'nothing' }));
    const run = (afterS: number, more: Partial<TestedPart> = {}) =>
      judgeTest(facts([{ ...mute, ...more }]), record(plan(['A1'])), [
        seen(conduct('A1', { units, inputBeforeV: 480, input: { afterS, voltageV: 210 } })),
      ]);
    expect(run(90).result).toBe('not_witnessed');
    expect(run(200)).toMatchObject({ result: 'failed', treatAsLive: [{ name: 'A1' }] });
    // a current is no capacitor's
    const flowing = (currentA: number, afterS: number) =>
      judgeTest(facts([mute]), record(plan(['A1'])), [
        seen(
          conduct('A1', {
            units,
            inputBeforeV: 480,
            input: { afterS: 40, voltageV: 210 },
            current: { afterS, currentA },
          }),
        ),
      ]).result;
    expect(flowing(10.8, 40)).toBe('failed');
    expect(flowing(10.8, 20)).toBe('not_witnessed');
    expect(flowing(0.1, 40)).toBe('not_witnessed');
    // shared inputs: it can't be told which string it is, and each must be treated as live
    expect(run(200, { input: { name: 'x', strings: 2 } })).toMatchObject({
      result: 'not_witnessed',
      treatAsLive: [{ name: 'A1' }],
    });
  });
  it('is consistent where a mute string’s own input fell', () => {
    const units = [1, 2, 3].map((p) => unit(p, { followed: null, basis: 'nothing' }));
    const verdict = judgeTest(facts([part('A1', { kind: 'shutdown_only' })]), record(plan(['A1'])), [
      seen(conduct('A1', { units, inputBeforeV: 480, input: { afterS: 100, voltageV: 0 } })),
    ]);
    expect(verdict.result).toBe('consistent');
  });

  describe('with several transmitters', () => {
    const two = facts(
      [part('A1', { transmitters: ['T1'] }), part('B1', { transmitters: ['T2'] })],
      ['T1', 'T2'],
    );
    const both = () => seen(conduct('A1'), conduct('B1'));
    it('lowers a pass while one was not taken off alone', () => {
      const verdict = judgeTest(two, record(plan(['A1', 'B1'], [null, 'T1']), ...read('A1'), ...read('B1')), [
        both(),
        both(),
      ]);
      expect(resultsOf(verdict)).toEqual({ A1: 'passed', B1: 'consistent' });
      expect(verdict.missing[0]).toContain('T2');
    });
    it('fails the string that keeps passing while only its own is off', () => {
      const passing = [1, 2, 3].map((p) => unit(p, { followed: null, passedAtS: 90 }));
      const verdict = judgeTest(
        two,
        record(plan(['A1', 'B1'], [null, 'T1', 'T2']), ...read('A1'), ...read('B1')),
        [both(), seen(conduct('A1', { units: passing }), conduct('B1', { units: passing })), both()],
      );
      expect(resultsOf(verdict)).toEqual({ A1: 'failed', B1: 'passed' });
      expect(verdict.strings[0]!.words).toContain('another one');
    });
    it('notes a string that shuts down with a transmitter that it is not drawn to hear', () => {
      const verdict = judgeTest(two, record(plan(['A1', 'B1'], [null, 'T1']), ...read('A1')), [
        both(),
        both(),
      ]);
      expect(verdict.notes.join(' ')).toContain('B1 shut down too');
    });
  });

  it('carries what was not tested again, and is as bad as the worst of it', () => {
    const carried = {
      string: 'A2',
      name: 'A2',
      result: 'failed' as const,
      words: 'as before',
      test: 't',
      at: at(-90_000),
    };
    const verdict = judgeTest(
      facts([part('A1'), part('A2')]),
      record(plan(['A1']), ...read('A1')),
      [seen(conduct('A1'))],
      [carried, { ...carried, string: 'A1', name: 'A1' }],
    );
    expect(resultsOf(verdict)).toEqual({ A1: 'passed', A2: 'failed' });
    expect(verdict.result).toBe('failed');
    expect(verdict.strings[1]!.carriedFrom).toEqual({ test: 't', at: at(-90_000) });
  });

  it('passes only where three voltages within the limit were read in time, whatever reports say', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 600, noNaN: true }),
        fc.double({ min: 0, max: 120, noNaN: true }),
        fc.constantFrom('bright', 'dull', 'snow', 'night'),
        fc.boolean(),
        fc.boolean(),
        (volts, afterS, light, proved, end) => {
          const acts: Act[] = [
            reading('A1', 480, null),
            { ...reading('A1', volts, afterS), atInverterEnd: end } as Act,
          ];
          const r = record({ ...plan(['A1']), light }, ...acts);
          r.provedAfter = proved;
          const { result } = judgeTest(facts([part('A1')]), r, [seen(conduct('A1'))]);
          const may =
            volts <= 30 && afterS <= 30 && (light === 'bright' || light === 'dull') && proved && end;
          expect(result === 'passed').toBe(may);
        },
      ),
    );
  });
});

describe('an instrument', () => {
  it.each([
    [{ ...INSTRUMENT, category: 'CAT II' as const }, true, 480, 'CAT II'],
    [{ ...INSTRUMENT, category: 'none' as const }, true, 480, 'without a category'],
    [{ ...INSTRUMENT, ratedV: 300 }, true, 480, '300 V'],
    [{ ...INSTRUMENT, provedBefore: false }, true, 480, 'before the test'],
    [INSTRUMENT, null, 480, 'after the test'],
    [INSTRUMENT, false, 480, 'decide nothing'],
    [null, true, 480, 'No instrument'],
  ])('decides nothing: %j, proved after: %s', (instrument, proved, volts, words) => {
    expect(instrumentFaults(instrument, proved, volts).join(' ')).toContain(words);
  });
  it('decides when rated, proved before and after', () => {
    expect(instrumentFaults(INSTRUMENT, true, 480)).toEqual([]);
  });
});

describe('acts', () => {
  const begun = (...acts: Act[]) =>
    recordOf(
      [
        { kind: 'planned', plan: plan(['A1']) } as Act,
        { kind: 'caution_accepted', name: 'x' } as Act,
        ...acts,
      ].map((a) => kept(a)),
    );
  it('are refused out of order, with the remedy', () => {
    const none = recordOf([]);
    expect(faultOfAct(none, { kind: 'watch_started', round: 0 })).toContain('who is there');
    expect(
      faultOfAct(recordOf([kept({ kind: 'planned', plan: plan(['A1']) })]), {
        kind: 'watch_started',
        round: 0,
      }),
    ).toContain('caution');
    expect(faultOfAct(begun(), { kind: 'operated', round: 0 })).toContain('watching');
    expect(faultOfAct(begun(), { kind: 'operated', round: 7 })).toContain('no such round');
    const watched = begun({ kind: 'watch_started', round: 0 });
    expect(faultOfAct(watched, { kind: 'operated', round: 0 })).toBeNull();
    expect(faultOfAct(watched, reading('B9', 1, 3))).toContain('not part');
    expect(faultOfAct(watched, { ...reading('A1', 1, 3), afterS: null } as Act)).toContain('how long');
    expect(
      faultOfAct(begun({ kind: 'watch_started', round: 0 }, { kind: 'round_added', transmitter: null }), {
        kind: 'watch_started',
        round: 1,
      }),
    ).toContain('before first');
  });
  it('of a new plan keep the rounds that have begun', () => {
    const two = plan(['A1'], [null, 'T1']);
    const r = recordOf([
      kept({ kind: 'planned', plan: two }),
      kept({ kind: 'watch_started', round: 0 }),
      kept({ kind: 'planned', plan: plan(['A1'], [null]) }),
    ]);
    expect(r.rounds.map((x) => [x.transmitter, x.watchStarted !== null])).toEqual([[null, true]]);
  });
  it('strike a reading without removing it, take a tap back, and go on from round to round', () => {
    const first = kept(reading('A1', 12, 20));
    const r = recordOf([
      kept({ kind: 'planned', plan: plan(['A1']) }),
      kept({ kind: 'watch_started', round: 0 }),
      kept({ kind: 'operated', round: 0 }),
      kept({ kind: 'operated_withdrawn', round: 0 }),
      first,
      kept({ kind: 'reading_struck', reading: first.id, reason: 'wrong string' }),
    ]);
    expect(r.rounds[0]!.operated).toBeNull();
    expect(r.rounds[0]!.readings[0]!.struck?.reason).toBe('wrong string');
    expect(openRound(r)).toBe(0);
    expect(nextRound(r)).toBeUndefined();
    const over = withActs(r, [
      kept({ kind: 'round_ended', round: 0 }),
      kept({ kind: 'round_added', transmitter: null }),
    ]);
    expect(openRound(over)).toBeUndefined();
    expect(nextRound(over)).toBe(1);
    expect(openRound(r)).toBe(0); // untouched
  });
  it('that wait on a phone and are stored already count once', () => {
    const act = kept(reading('A1', 12, 20));
    const r = recordOf([
      kept({ kind: 'planned', plan: plan(['A1']) }),
      kept({ kind: 'watch_started', round: 0 }),
      act,
    ]);
    expect(withActs(r, [act]).rounds[0]!.readings).toHaveLength(1);
  });
});
