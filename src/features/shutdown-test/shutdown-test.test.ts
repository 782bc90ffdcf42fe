import { describe, expect, it } from 'vitest';
import type { RoundEvidence, TestFacts, TestRound } from '../../domain/commissioning/shutdown-test-record';
import type { ShutdownTestList, TestListView, TestRow, ZoneStanding } from '../../schemas/api/shutdown-test';
import { idOf } from '../../../tests/support/now';
import { LIST_DEFAULTS, listFinding, listedTests } from './list';
import { formOf } from './plan-form';
import { readPlan } from './read-plan';
import { linesOf, returnOf, roundsNeeded, stringsConcerned, stringsOfRound, tapsOpen } from './round';
import { roundStep } from '../../words/shutdown-test';

const zone = (name: string, more: Partial<ZoneStanding> = {}): ZoneStanding => ({
  zone: { id: idOf(name), name },
  initiator: 'Initiator',
  initiatorPlace: '',
  strings: 3,
  untested: [],
  test: {
    ref: idOf(`${name} test`),
    at: '2026-06-01T10:00:00.000Z',
    result: 'passed',
    signedBy: 'Una Lathe',
  },
  result: 'passed',
  draft: null,
  ...more,
});
const list = (zones: ZoneStanding[], tests: TestRow[] = []): ShutdownTestList => ({
  at: '2026-06-02T10:00:00.000Z',
  site: { id: idOf('site'), name: 'Site', place: '', timeZone: 'UTC' },
  zones,
  tests,
});
const never = { test: null, result: null, untested: ['A1', 'A2', 'A3'] };

describe('the finding of a site’s tests', () => {
  it.each<[string, ZoneStanding[], string]>([
    ['nothing to test', [], 'There is no zone to test yet'],
    ['one not tested', [zone('Zone 1'), zone('Zone 2', never)], 'Zone 2 has not been tested'],
    [
      'two not tested',
      [zone('Zone 1', never), zone('Zone 2', never)],
      'Zone 1 and Zone 2 have not been tested',
    ],
    [
      'a failure before what was not tested',
      [zone('Zone 1', { result: 'failed' }), zone('Zone 2', never)],
      'Zone 1 failed the shutdown test',
    ],
    [
      'reports alone',
      [zone('Zone 1', { result: 'consistent' })],
      'Zone 1: no rated instrument has shown the shutdown',
    ],
    ['a string that came later', [zone('Zone 1', { untested: ['A9'] })], 'One string has not been tested'],
    ['all well', [zone('Zone 1'), zone('Zone 2')], 'All 2 zones passed their shutdown tests'],
    ['one zone, well', [zone('Zone 1')], 'Zone 1 passed its shutdown test'],
  ])('%s', (_, zones, heading) => {
    expect(listFinding(list(zones)).heading).toBe(heading);
  });
});

describe('the list of tests', () => {
  const row = (id: string, more: Partial<TestRow> = {}): TestRow => ({
    id: idOf(id),
    zone: 'Zone 1',
    state: 'signed',
    at: '2026-06-01T10:00:00.000Z',
    by: 'Una Lathe',
    result: 'passed',
    strings: 3,
    failed: 0,
    superseded: false,
    carried: 0,
    reason: '',
    fingerprint: 'ab12',
    ...more,
  });
  const tests = [
    row('new', { at: '2026-06-03T10:00:00.000Z' }),
    row('failed', { result: 'failed', zone: 'Zone 2' }),
    row('old', { at: '2025-06-01T10:00:00.000Z', superseded: true }),
    row('draft', { state: 'draft', result: null, by: 'Ivo Brandt' }),
    row('ended', { state: 'ended', result: null, reason: 'rain' }),
  ];
  const shown = (view: Partial<TestListView>) =>
    listedTests(tests, { ...LIST_DEFAULTS, ...view }).map((t) => t.id);
  const ids = (...names: string[]) => names.map(idOf);
  it('shows what holds and what is under way at first, newest first', () => {
    expect(shown({})).toEqual(ids('new', 'failed', 'draft'));
  });
  it('filters, searches and sorts', () => {
    expect(shown({ show: 'superseded' })).toEqual(ids('old'));
    expect(shown({ show: 'unsigned' })).toEqual(ids('draft', 'ended'));
    expect(shown({ show: 'all', zone: 'Zone 2' })).toEqual(ids('failed'));
    expect(shown({ show: 'all', q: 'RAIN' })).toEqual(ids('ended'));
    expect(shown({ sort: 'result', order: 'up' })).toEqual(ids('draft', 'failed', 'new'));
  });
});

const string = (name: string, transmitters: string[] = []): TestFacts['strings'][number] => ({
  id: idOf(name),
  name,
  kind: 'monitored',
  serials: ['S1'],
  homeRunLeavesArray: true,
  input: { name: 'x', strings: 1 },
  transmitters,
  shutdownV: { nominal: 0.6, max: 0.7 },
  passingFromV: 3,
});
const T1 = idOf('T1');
const T2 = idOf('T2');
const facts = (strings: TestFacts['strings'], transmitters: string[] = []): TestFacts => ({
  site: { id: idOf('site'), name: 'Site', timeZone: 'UTC' },
  zone: { id: idOf('zone'), name: 'Zone 1' },
  initiator: { name: 'Initiator', place: 'Gate' },
  ruleSet: 'rapid_shutdown_30s',
  reportIntervalS: 60,
  transmitters: transmitters.map((id) => ({ id, name: id })),
  strings,
});

describe('the rounds of a plan', () => {
  const two = facts([string('A1', [T1]), string('B1', [T2]), string('C1', [T1, T2])], [T1, T2]);
  const all = two.strings.map((s) => s.id);
  it('take each of several transmitters off alone after the initiator', () => {
    expect(roundsNeeded(two, all)).toEqual([null, T1, T2]);
    expect(roundsNeeded(two, [idOf('A1')])).toEqual([null, T1]);
    expect(roundsNeeded(facts([string('A1', [T1])], [T1]), [idOf('A1')])).toEqual([null]);
    expect(roundsNeeded(facts([string('A1')]), [idOf('A1')])).toEqual([null]);
  });
  it('shut down by one transmitter only what hears no other', () => {
    expect(stringsConcerned(two, all, T1)).toEqual([idOf('A1')]);
    expect(stringsConcerned(two, all, null)).toEqual(all);
  });
});

describe('the plan as typed', () => {
  const here = facts([string('A1')]);
  const good = {
    ...formOf(here, null, 'Una Lathe'),
    operator: 'Ivo Brandt',
    name: 'Hawkbill 15',
    serial: 'HB-1',
    ratedV: '1500,0 V',
    calibratedOn: '2026-05-04',
    provedBefore: true,
  };
  it('is read whole, comma decimals too', () => {
    const { plan, faults } = readPlan(here, good, '2026-06-01');
    expect(faults).toEqual({});
    expect(plan).toMatchObject({
      operator: 'Ivo Brandt',
      instrument: { ratedV: 1500, category: 'CAT III' },
      rounds: [null],
    });
    expect(formOf(here, plan, 'x')).toMatchObject({ ratedV: '1500', serial: 'HB-1', without: [] });
  });
  it.each([
    ['operator', { operator: ' ' }],
    ['strings', { strings: [] }],
    ['ratedV', { ratedV: 'a lot' }],
    ['name', { name: '' }],
    ['calibratedOn', { calibratedOn: '' }],
    ['calibratedOn', { calibratedOn: '2026-07-01' }],
  ])('names what is wrong with %s', (field, some) => {
    const { plan, faults } = readPlan(here, { ...good, ...some }, '2026-06-01');
    expect(plan).toBeNull();
    expect(faults[field]).toBeTruthy();
  });
  it('needs no instrument', () => {
    expect(
      readPlan(here, { ...good, withInstrument: false, ratedV: '', name: '' }, '2026-06-01').plan?.instrument,
    ).toBeNull();
  });
});

describe('a round in figures', () => {
  const here = facts([string('A1')]);
  const at = (s: number) => new Date(Date.parse('2026-06-01T10:00:00Z') + s * 1000).toISOString();
  const stamp = (s: number) => ({ at: at(s), recordedAt: at(s), by: 'Una Lathe' });
  const round: TestRound = {
    transmitter: null,
    watchStarted: stamp(-60),
    operated: stamp(2),
    released: null,
    ended: null,
    readings: [],
  };
  const seen = (
    voltage: (number | null)[],
    more: Partial<RoundEvidence['strings'][number]> = {},
  ): RoundEvidence => ({
    command: { inForce: 'initiator', where: 'Zone 1', since: at(0), by: '' },
    release: null,
    origin: 'reported',
    from: at(-120),
    to: at(200),
    strings: [
      {
        string: idOf('A1'),
        traces:
          voltage.length === 0
            ? []
            : [{ measuringPoint: 'unit_sum', accuracyV: 1, startedAt: at(0), voltage }],
        units: [],
        reports: 1,
        input: null,
        inputBeforeV: null,
        sums: [],
        inputs: [],
        inputAgain: null,
        ...more,
      },
    ],
  });
  const rows = (s: RoundEvidence, r = round) => stringsOfRound(here, [idOf('A1')], r, s);
  it('finds from when a string stayed under its limit', () => {
    expect(rows(seen([400, 200, 20, 8]))[0]).toMatchObject({
      underFromS: 2,
      newest: { afterS: 3, volts: 8 },
      limitV: 30,
    });
    expect(rows(seen([400, 20, 200, 20]))[0]!.underFromS).toBe(3);
    expect(rows(seen([400, 20, 200]))[0]!.underFromS).toBeNull();
  });
  it('goes on with reports where the seconds end, and takes them where there are none', () => {
    expect(
      rows(
        seen([400, 8], {
          sums: [
            [-30, 410],
            [60, 7.8],
          ],
        }),
      )[0]!.points,
    ).toEqual([
      [-30, 410],
      [0, 400],
      [1, 8],
      [60, 7.8],
    ]);
    expect(rows(seen([], { sums: [[18, 8]] }))[0]).toMatchObject({ source: 'sum of what its units report' });
    expect(rows(seen([]))[0]).toMatchObject({ source: 'nothing reported', newest: null });
  });
  it('draws as live only what units hold up past the time limit', () => {
    const long = Array.from({ length: 40 }, () => 210);
    expect(linesOf(rows(seen(long)), 30, null)[0]!.tone).toBe('live');
    expect(linesOf(rows(seen(long.slice(0, 20))), 30, null)[0]!.tone).toBe('open');
    expect(linesOf(rows(seen([400, 8])), 30, null)[0]!.tone).toBe('fallen');
    // an input that capacitors hold up is no unit that passes
    expect(linesOf(rows(seen([], { inputs: [[45, 210]] })), 30, null)[0]!.tone).toBe('open');
    // what comes back after the release is no failure
    expect(linesOf(rows(seen([400, 8, 8, 410]), { ...round, released: stamp(3) }), 1, 3)[0]!.tone).toBe(
      'fallen',
    );
  });
  it('blames the capacitors of an input only without current and while they may hold it up', () => {
    const flows = (currentA: number, afterS = 40) => ({ current: { afterS, currentA } });
    const said = (inputs: [number, number][], more: object = {}, r = round) => {
      const [row] = rows(seen([], { inputs, ...more }), r);
      const tone = linesOf([row!], 30, r.released ? 50 : null)[0]!.tone;
      return [row!.source.replaceAll('\u00a0', ' '), tone];
    };
    const held = 'inverter’s input; its capacitors may hold it up';
    expect(said([[45, 210]])).toEqual([held, 'open']);
    expect(said([[45, 210]], flows(0.1))).toEqual([held, 'open']);
    expect(said([[45, 210]], flows(10.9))).toEqual(['inverter’s input; 10.9 A flows: units pass', 'live']);
    expect(said([[149, 210]], flows(10.9))).toEqual([held, 'open']); // of two minutes ago
    expect(said([[150, 210]])).toEqual([
      'inverter’s input, up for longer than its capacitors hold it',
      'live',
    ]);
    expect(said([[45, 8]])).toEqual(['inverter’s input', 'fallen']);
    const back: [number, number][] = [
      [45, 8],
      [70, 410],
    ];
    expect(said(back, flows(9), { ...round, released: stamp(50) })).toEqual(['inverter’s input', 'fallen']);
  });
  it('lets a person note a time only until the logger has reported it', () => {
    const began = Date.parse('2026-06-01T10:00:00Z') / 1000;
    const untapped = { ...round, operated: null };
    const silent: RoundEvidence = { ...seen([]), command: null };
    const released: RoundEvidence = { ...seen([]), release: { since: at(120) } };
    expect(tapsOpen(untapped, silent, began + 500)).toEqual({ operated: true, released: false });
    expect(tapsOpen(untapped, seen([]), began + 5)).toEqual({ operated: true, released: true });
    expect(tapsOpen(untapped, seen([]), began + 60)).toEqual({ operated: false, released: true });
    expect(tapsOpen(untapped, released, began + 125)).toEqual({ operated: false, released: true });
    expect(tapsOpen(round, released, began + 180)).toEqual({ operated: false, released: false });
    expect(tapsOpen({ ...untapped, released: stamp(60) }, silent, began + 61).operated).toBe(false);
  });
  it('says of one unit that it is, of two that they are in shutdown', () => {
    expect(roundStep.backOfGoneUnits(3, 4, 1)).toMatch(/; 1 is still in shutdown\.$/);
    expect(roundStep.backOfGoneUnits(2, 4, 2)).toMatch(/; 2 are still in shutdown\.$/);
  });
  it('counts who came back', () => {
    const unit = (position: number, returned: [number, number] | null, heldAtS: number | null) => ({
      position,
      serial: 'S',
      followed: [0, 9] as [number, number],
      passedAtS: null,
      downBefore: false,
      basis: 'measured' as const,
      returned,
      heldAtS,
    });
    expect(returnOf(seen([], { units: [unit(1, [0, 20], null), unit(2, null, 40)] }))).toEqual({
      back: 1,
      held: 1,
      gone: 2,
    });
    expect(returnOf(undefined)).toEqual({ back: 0, held: 0, gone: 0 });
  });
});
