import { describe, expect, it } from 'vitest';
import type { HeardItem } from '../../schemas/live';
import type { CommandNow, SlotNow, StringNow } from '../../schemas/api/now';
import type { RollCallPage, RollCallRun } from '../../schemas/api/roll-call';
import { deafOf } from './listening';
import { outlookOf } from './outlook';
import { curveOf, tallyOf } from './tally';
import { commandInForceWords, nearWords, rollCallHeading, rollCallWords } from './words';

const ID = '00000000-0000-4000-8000-00000000000';
const slot = (position: number, serial: string | null, signal: number | null = null): SlotNow => ({
  position,
  serial,
  roofPlace: `row 1, ${position}`,
  state: 'unheard',
  verdict: 'ok',
  since: null,
  seen: null,
  voltage: null,
  voltageIn: null,
  current: null,
  power: null,
  temperature: null,
  signal,
  gateway: null,
  assumed: false,
  expected: null,
});
const stringOf = (name: string, slots: SlotNow[], kind: StringNow['kind'] = 'monitored'): StringNow => ({
  id: `${ID}${name.charCodeAt(1) % 10}`,
  name,
  kind,
  at: null,
  slots,
  counts: {
    units: slots.length,
    passing: 0,
    shutdown: 0,
    unheard: slots.length,
    silent: 0,
    dark: 0,
    stuck: 0,
    notShuttingDown: 0,
    unconfirmed: 0,
  },
  voltage: null,
  current: null,
  power: null,
  expectedVoltage: null,
  expectedBand: null,
  expectedInShutdown: null,
  expectedFrom: '',
  expectedStrings: 0,
  command: null,
  dark: false,
  input: { inverter: 'inverter 1', number: 1, voltage: null, current: null, strings: 1 },
  finding: null,
});
const answer = (serial: string, minute: number, gateway = 'gateway 1', signal = -60): HeardItem => ({
  serial,
  at: `2026-12-01T10:${String(minute).padStart(2, '0')}:00.000Z`,
  stringId: null,
  position: null,
  gateway,
  signal,
});
const pageOf = (strings: StringNow[], answers: HeardItem[]): RollCallPage => ({
  at: '2026-12-01T10:30:00.000Z',
  site: { id: `${ID}9`, name: 'Old Tannery Market Hall', place: '', timeZone: 'UTC', stage: 'commissioning' },
  run: null,
  strings,
  answers,
  gateways: [],
  reportIntervalS: 60,
  loggers: [],
  commands: [],
  steps: [],
  passesUntilHeard: [],
});
const run = (more: Partial<RollCallRun> = {}): RollCallRun => ({
  id: `${ID}1`,
  startedAt: '2026-12-01T10:00:00.000Z',
  startedBy: 'Odile Nkemelu',
  personOnSite: 'Per Aalto',
  stoppedAt: null,
  stoppedBy: null,
  ...more,
});
const strings = [
  stringOf('A1', [slot(1, 'AA-01', -62), slot(2, 'AA-02'), slot(3, null)]),
  stringOf('A2', [slot(1, 'AA-03'), slot(2, 'AA-04')]),
  stringOf('S1', [slot(1, 'SS-01'), slot(2, 'SS-02')], 'shutdown_only'),
];

describe('the tally', () => {
  const tally = tallyOf(
    pageOf(strings, [answer('AA-01', 1), answer('AA-03', 4, 'gateway 2', -80), answer('ZZ-99', 5)]),
  );
  it('counts the roll without empty slots and without units that cannot answer', () => {
    expect(tally).toMatchObject({ roster: 4, heard: 2, mute: 2, emptySlots: 1 });
    expect(tally.missing.map((u) => u.serial)).toEqual(['AA-02', 'AA-04']);
    expect(tally.strings.map((s) => [s.string.name, s.heard, s.units.length])).toEqual([
      ['A1', 1, 2],
      ['A2', 1, 2],
    ]);
  });
  it('takes the newest signal before that of the first answer, and finds the weakest', () => {
    expect(tally.units[0]?.signal).toBe(-62);
    expect(tally.weakest?.serial).toBe('AA-03');
    expect(tally.gateways.map((g) => [g.name, g.heard, g.weakest?.signal])).toEqual([
      ['gateway 1', 1, -62],
      ['gateway 2', 1, -80],
    ]);
  });
  it('keeps serials that are on no as-built apart and names strings that could lack them', () => {
    expect(tally.unknown).toHaveLength(1);
    const [unknown] = tally.unknown;
    expect(unknown && nearWords(unknown)).toBe('heard by gateway 1, as is A1, which lacks 1');
    expect(unknown && nearWords({ ...unknown, near: [] })).toBe('heard by gateway 1');
  });
  it('draws the curve from the start on, with what had answered before as its foot', () => {
    const from = new Date('2026-12-01T10:02:00Z').getTime() / 1000;
    expect(curveOf(tally, from)).toEqual({ before: 1, points: [{ atS: from + 120, heard: 2 }] });
    // a start within the second of an answer that is told in whole seconds
    expect(curveOf(tally, from - 60 + 0.7).before).toBe(0);
  });
});

describe('the heading of a roll call', () => {
  it.each([
    [0, 0, 'No unit here can answer a roll call'],
    [184, 0, 'None of 184 units has answered the roll call'],
    [184, 1, '1 of 184 units has answered the roll call'],
    [184, 161, '161 of 184 units have answered the roll call'],
    [184, 184, 'All 184 units have answered the roll call'],
    [1, 0, 'None of 1 unit has answered the roll call'],
    [1, 1, 'The only unit has answered the roll call'],
    [2000, 1240, '1,240 of 2,000 units have answered the roll call'],
  ])('%i on the roll, %i heard', (roster, heard, words) => {
    expect(rollCallHeading(roster, heard).replace(/\u00a0/g, ' ')).toBe(words);
  });
});

describe('the sentence of a roll call', () => {
  const some = tallyOf(pageOf(strings, [answer('AA-01', 1)]));
  const all = tallyOf(
    pageOf(
      strings,
      ['AA-01', 'AA-02', 'AA-03', 'AA-04'].map((s) => answer(s, 1)),
    ),
  );
  const said = (
    ...[tally, r, outlook]: [typeof some, RollCallRun | null, Parameters<typeof rollCallWords>[2]?]
  ) => {
    const words = rollCallWords(tally, r, outlook ?? null, 'UTC');
    return `${words.strong} ${words.rest}`.replace(/\u00a0/g, ' ').trim();
  };
  const by = '2026-12-01T14:11:00.000Z';

  it('not started', () => {
    expect(said(some, null)).toBe('The roll call has not been started. Somebody on site starts it.');
  });
  it('running, with a forecast for some and groups that have not stirred', () => {
    expect(
      said(some, run(), { expected: 1, by, notStirred: [{ kind: 'string', group: 'A2', units: 2 }] }),
    ).toBe(
      '1 of the 3 missing is expected by 14:11. A2’s 2 have not stirred: look at its gateway, its serials, or snow.',
    );
  });
  it('running, all missing expected', () => {
    expect(said(some, run(), { expected: 3, by, notStirred: [] })).toBe(
      'All 3 missing are expected by 14:11.',
    );
  });
  it('running, several and many groups that have not stirred', () => {
    const groups = ['B1', 'B2', 'B3', 'B4'].map((group) => ({
      kind: 'string' as const,
      group,
      units: 14,
    }));
    expect(said(some, run(), { expected: 0, by: null, notStirred: groups.slice(0, 2) })).toBe(
      'No further answers are expected soon. B1’s 14 and B2’s 14 have not stirred: look at their gateway, their serials, or snow.',
    );
    expect(said(some, run(), { expected: 0, by: null, notStirred: groups })).toContain(
      '56 units of 4 strings have not stirred',
    );
  });
  it('running, a block of serials that has not stirred', () => {
    expect(
      said(some, run(), {
        expected: 0,
        by: null,
        notStirred: [{ kind: 'serials', group: 'AA-0..', units: 3 }],
      }),
    ).toContain('None of the 3 units with serials AA-0… has stirred: compare their labels.');
  });
  it('running, and whoever was to come has come', () => {
    expect(said(some, run(), { expected: 0, by: null, notStirred: [] })).toBe(
      'No further answers are expected soon. 3 units have not answered: walk to them, and compare the label.',
    );
  });
  it('running, nothing can be said yet', () => {
    expect(said(some, run())).toBe(
      'The loggers are listening. Too few answers so far to say how long it takes.',
    );
  });
  it('stopped with some missing', () => {
    expect(said(some, run({ stoppedAt: '2026-12-01T14:20:00.000Z', stoppedBy: 'Odile Nkemelu' }))).toBe(
      'It was stopped at 14:20 by Odile Nkemelu. 3 units have not answered; start it again when somebody is on site.',
    );
  });
  it('complete, running and stopped', () => {
    expect(said(all, run())).toBe(
      'Nobody is missing. Stop the roll call: the loggers are still listening for serials.',
    );
    expect(said(all, run({ stoppedAt: by }))).toBe('Nobody is missing.');
  });
  it('nothing on the roll: all units mute, or no units', () => {
    expect(said(tallyOf(pageOf(strings.slice(2), [])), null)).toBe(
      'According to the type entered, its 2 units report nothing: only a meter or the inverter’s input shows what they do.',
    );
    expect(said(tallyOf(pageOf([], [])), null)).toBe('The as-built holds no units yet.');
  });
});

describe('a roll call where something does not listen', () => {
  const heardAt = '2026-12-01T10:20:00.000Z';
  const at = (minute: number) => new Date(`2026-12-01T10:${minute}:00.000Z`);
  const gateway = (name: string, lastHeardAt: string | null) => ({
    name,
    number: 1,
    lastHeardAt,
    units: 1,
    silent: false,
  });
  const page = (gateways: RollCallPage['gateways'], lastSpokeAt: string | null): RollCallPage => ({
    ...pageOf(strings, [answer('AA-01', 1), answer('AA-03', 4, 'gateway 2')]),
    gateways,
    loggers: [{ serial: 'LG-7', connected: true, lastSpokeAt }],
  });
  const both = (one: string | null, two: string | null, spoke: string | null) =>
    page([gateway('gateway 1', one), gateway('gateway 2', two)], spoke);
  const nothingMore = { expected: 0, by: null, notStirred: [] };
  const said = (p: RollCallPage, now: Date) => {
    const tally = tallyOf(p);
    const words = rollCallWords(tally, run(), nothingMore, 'UTC', deafOf(p, tally, now));
    return `${words.strong} ${words.rest}`.replace(/\u00a0/g, ' ').trim();
  };
  it('is told as ever while reports come', () => {
    expect(
      deafOf(both(heardAt, heardAt, heardAt), tallyOf(both(heardAt, heardAt, heardAt)), at(22)),
    ).toBeNull();
    expect(said(both(heardAt, heardAt, heardAt), at(22))).toContain('No further answers are expected soon.');
  });
  it('says that nothing listens, forecasts nothing and sends nobody when the logger is silent', () => {
    expect(said(both(heardAt, heardAt, heardAt), at(23))).toBe(
      'Nothing listens since 10:20: logger LG-7 does not report. Nobody can tell who would answer. Treat every string as live.',
    );
  });
  it('says so of gateways too, and of a site where nothing was ever heard', () => {
    expect(said(both(heardAt, heardAt, at(30).toISOString()), at(30))).toBe(
      'Nothing has been heard since 10:20, by gateway 1, gateway 2. Nobody can tell who would answer. Treat every string as live.',
    );
    const never = { ...page([], null), answers: [] };
    expect(said(never, at(30))).toContain('Nothing has listened here yet. Nobody can tell');
  });
  it('names the gateway that is silent and counts of whom nobody can tell', () => {
    const now = at(30);
    const some = both(now.toISOString(), heardAt, now.toISOString());
    expect(said(some, now)).toBe(
      'By gateway 2 nothing has been heard since 10:20. Of 1 missing unit nobody can tell. No further answers are expected soon. 1 unit has not answered: walk to it, and compare the label. Treat every string as live.',
    );
  });
  it('says nothing of the roof from a page that is not live', () => {
    const words = rollCallWords(tallyOf(both(heardAt, heardAt, heardAt)), run(), nothingMore, 'UTC', 'page');
    expect(`${words.strong} ${words.rest}`).toBe(
      'This page is not live now. Nobody can tell who would answer. Treat every string as live.',
    );
  });
  it('leaves strings of which nobody can tell out of the forecast', () => {
    const many = Array.from({ length: 12 }, (_, i) => slot(i + 1, `BB-${i}0-${i}`));
    const p = pageOf(
      [stringOf('B1', many), stringOf('B2', [slot(1, 'CC-1'), slot(2, 'CC-2')])],
      many.slice(0, 10).map((s, i) => answer(s.serial ?? '', i)),
    );
    const left = outlookOf(tallyOf(p), run(), at(12), new Set([p.strings[1]?.id ?? '']));
    const all = outlookOf(tallyOf(p), run(), at(12));
    expect(left?.expected).toBeLessThanOrEqual(2);
    expect(left?.curve.at(-1)?.high).toBeLessThan(13);
    expect(all?.curve.at(-1)?.high).toBeGreaterThan(12);
  });
  it('forecasts the same on every screen at the same time', () => {
    const tally = tallyOf(
      pageOf(
        strings.slice(0, 1).concat(
          stringOf(
            'D1',
            Array.from({ length: 9 }, (_, i) => slot(i + 1, `DD-${i}0-${i}`)),
          ),
        ),
        Array.from({ length: 7 }, (_, i) => answer(`DD-${i}0-${i}`, i)),
      ),
    );
    const a = outlookOf(tally, run(), new Date('2026-12-01T10:08:20.100Z'));
    const b = outlookOf(tally, run(), new Date('2026-12-01T10:08:28.900Z'));
    expect(a).not.toBeNull();
    expect(a).toEqual(b);
  });
});

describe('what a unit begins to follow', () => {
  const command = (inForce: CommandNow['inForce'], where = 'north roof'): CommandNow => ({
    where,
    whereKind: 'zone',
    inForce,
    since: '2026-12-01T10:00:00.000Z',
    by: 'initiator',
  });
  it('says released when nothing else is in force', () => {
    expect(commandInForceWords([])).toContain('In force now: released.');
    expect(commandInForceWords([command('released')])).toContain('In force now: released.');
  });
  it.each(['initiator', 'keep_alive_lost', 'power_lost'] as const)('names the zone and %s', (inForce) => {
    const words = commandInForceWords([command(inForce), command('released', 'south roof')]);
    expect(words).toContain('north roof: shutdown');
    expect(words).toContain('goes into shutdown');
    expect(words).not.toContain('south roof');
  });
});
