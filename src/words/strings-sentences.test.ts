import { describe, expect, it } from 'vitest';
import type { SlotNow, StringNow } from '../schemas/api/now';
import { cautionOf, nextSteps, readingsOf } from '../features/strings/advice';
import type { StringPage } from '../schemas/api/string';
import { findingOf, modulesMissing, type Finding, type Sentence } from './strings-sentences';

const NOW = '2026-06-03T12:02:31.000Z';
const WHEN = { now: NOW, timeZone: 'UTC' };

const slot = (position: number, more: Partial<SlotNow> = {}): SlotNow => ({
  position,
  serial: `4E02-6B90-${10 + position}`,
  roofPlace: `Upper row, place ${position}`,
  state: 'passing',
  verdict: 'ok',
  since: '2026-06-03T08:43:00.000Z',
  seen: '2026-06-03T12:02:00.000Z',
  voltage: 39,
  voltageIn: 39.4,
  current: 8,
  power: 312,
  temperature: 41,
  signal: -64,
  gateway: 'Gateway 1',
  assumed: false,
  expected: 39,
  ...more,
});

function string(change: Record<number, Partial<SlotNow>> = {}, more: Partial<StringNow> = {}): StringNow {
  const slots = Array.from({ length: 14 }, (_, i) => slot(i + 1, change[i + 1]));
  const count = (test: (s: SlotNow) => boolean) => slots.filter(test).length;
  const voltage = slots.reduce((sum, s) => sum + (s.voltage ?? 0), 0);
  return {
    id: '00000000-0000-4000-8000-000000000001',
    name: 'B3',
    kind: 'monitored',
    at: '2026-06-03T12:02:00.000Z',
    slots,
    counts: {
      units: 14,
      passing: count((s) => s.state === 'passing'),
      shutdown: count((s) => s.state === 'shutdown'),
      unheard: count((s) => s.state === 'unheard'),
      silent: count((s) => s.state === 'silent'),
      dark: count((s) => s.state === 'dark'),
      stuck: count((s) => s.verdict === 'stuck'),
      notShuttingDown: count((s) => s.verdict === 'not_shutting_down'),
      unconfirmed: count((s) => s.verdict === 'unconfirmed'),
    },
    voltage,
    current: 8,
    power: voltage * 8,
    expectedVoltage: 546,
    expectedBand: [535, 557],
    expectedInShutdown: null,
    expectedFrom: 'the other strings on the south roof',
    expectedStrings: 0,
    command: null,
    dark: false,
    input: { inverter: 'Inverter 2', number: 3, voltage, current: 8, strings: 1 },
    finding: null,
    ...more,
  };
}
const every = (more: Partial<SlotNow>): Record<number, Partial<SlotNow>> =>
  Object.fromEntries(Array.from({ length: 14 }, (_, i) => [i + 1, more]));
const held: Partial<SlotNow> = { state: 'shutdown', verdict: 'stuck', voltage: -0.5, voltageIn: 48 };
const commanded = (inForce: 'initiator' | 'keep_alive_lost' | 'released') => ({
  command: {
    where: 'Whole roof',
    whereKind: 'zone' as const,
    inForce,
    since: '2026-06-03T10:24:00.000Z',
    by: 'Main initiator',
  },
});
const text = (sentence: Sentence): string =>
  sentence
    .map((part) => (typeof part === 'string' ? part : part.strong))
    .join('')
    .replaceAll('\u00a0', ' ')
    .trim();
const heading = (f: Finding): string => f.heading.replaceAll('\u00a0', ' ');
const found = (s: StringNow) => {
  const f = findingOf(s, WHEN);
  return { kind: f.kind, heading: heading(f), sentence: text(f.sentence) };
};

describe('the finding of a string', () => {
  it('says how many units are stuck, what is missing and that their modules are alive', () => {
    expect(found(string({ 5: held, 9: { ...held, voltageIn: 47 } }))).toEqual({
      kind: 'stuck',
      heading: 'Two of 14 units in B3 are stuck in shutdown',
      sentence:
        'The string gives 467 V where 546 V is expected, the gap of two modules. Their own modules are alive: 48 V and 47 V at the inputs.',
    });
  });

  it('names one unit in the singular, and all as all', () => {
    expect(found(string({ 5: held })).heading).toBe('One of 14 units in B3 is stuck in shutdown');
    expect(found(string({ 5: held })).sentence).toContain('Its own module is alive: 48 V at the input.');
    expect(found(string(every(held))).heading).toBe('All 14 units in B3 are stuck in shutdown');
  });

  it('does not claim live modules where the module side is not measured', () => {
    expect(found(string({ 5: { ...held, voltageIn: null } })).sentence).not.toContain('alive');
  });

  it('puts a unit that does not shut down before everything else', () => {
    const f = found(
      string(
        {
          ...every({ state: 'shutdown', verdict: 'ok', voltage: 0.6 }),
          3: { verdict: 'not_shutting_down' },
          5: held,
          11: { verdict: 'not_shutting_down' },
        },
        commanded('initiator'),
      ),
    );
    expect(f.kind).toBe('not_shutting_down');
    expect(f.heading).toBe('Two of 14 units in B3 did not shut down');
    expect(f.sentence).toContain('Shutdown by the initiator (Whole roof) since 10:24.');
    expect(f.sentence).toContain('At positions 3 and 11 voltage still stands');
    expect(f.sentence).toContain('Treat the string as live. Besides, 1 is stuck.');
  });

  it('says so where conductors contradict the claims', () => {
    const f = found(
      string(every({ state: 'shutdown', verdict: 'ok', voltage: 0.6 }), {
        ...commanded('initiator'),
        finding: {
          kind: 'not_shutting_down',
          since: NOW,
          words: '87 V on its conductors while shutdown is commanded; which unit passes is not known',
        },
      }),
    );
    expect(f.heading).toBe('B3 has not shut down');
    expect(f.sentence).toContain('Treat the string as live.');
  });

  it('keeps a shutdown on purpose apart and never calls it isolated', () => {
    const f = found(
      string(every({ state: 'shutdown', verdict: 'ok', voltage: 0.6 }), {
        ...commanded('initiator'),
        expectedInShutdown: 8.4,
      }),
    );
    expect(f).toEqual({
      kind: 'in_shutdown',
      heading: 'B3 is in shutdown on purpose',
      sentence:
        'Shutdown by the initiator (Whole roof) since 10:24. All 14 units report it; the string gives 8.4 V, where 8.4 V is expected in shutdown. Each module and its leads to its unit stay at module voltage.',
    });
  });

  it('never takes silence for a shutdown', () => {
    const f = found(
      string(
        {
          ...every({ state: 'shutdown', verdict: 'ok', voltage: 0.6 }),
          2: { state: 'silent', verdict: 'unconfirmed' },
          3: { state: 'silent', verdict: 'unconfirmed' },
        },
        commanded('keep_alive_lost'),
      ),
    );
    expect(f.kind).toBe('unconfirmed');
    expect(f.heading).toBe('Shutdown of 2 of 14 units in B3 is not confirmed');
    expect(f.sentence).toContain('Treat the string as live.');
  });

  it('can not tell what a shutdown-only string does while shutdown is commanded', () => {
    const f = found(
      string(every({ state: null, verdict: 'unconfirmed', voltage: null, voltageIn: null }), {
        kind: 'shutdown_only',
        ...commanded('initiator'),
      }),
    );
    expect(f.heading).toBe('Nothing shows that B3 followed the shutdown');
    expect(f.sentence).toContain('only a rated meter at the home run shows it');
  });

  it('reads a shutdown-only string by its total', () => {
    const told = every({ state: null, verdict: null, voltage: null, voltageIn: null });
    expect(found(string(told, { kind: 'shutdown_only', voltage: 545 })).heading).toBe(
      'B3 gives what 14 passing units would',
    );
    expect(found(string(told, { kind: 'shutdown_only', voltage: 468 })).heading).toBe(
      'B3 gives less than 14 passing units would',
    );
    expect(found(string(told, { kind: 'shutdown_only', voltage: null })).heading).toBe(
      'Nothing is measured at B3’s input',
    );
    expect(
      found(
        string(told, {
          kind: 'shutdown_only',
          voltage: 468,
          finding: {
            kind: 'stuck_positions_unknown',
            since: NOW,
            words: '2 of 14 units do not pass, by the voltage on its conductors; positions unknown',
          },
        }),
      ).heading,
    ).toBe('Some units in B3 do not pass; positions unknown');
  });

  it('says what an unheard unit does by its type', () => {
    const f = found(
      string({ 2: { state: 'unheard', voltage: null }, 3: { state: 'unheard', voltage: null } }),
    );
    expect(f.heading).toBe('Two of 14 units in B3 are unheard');
    expect(f.sentence).toContain('does not obey the initiator. Treat the string as live.');
    expect(found(string(every({ state: 'unheard', voltage: null }))).heading).toBe(
      'None of B3’s 14 units has answered the roll call',
    );
  });

  it('calls the night no fault and no proof', () => {
    const f = found(string(every({ state: 'dark', verdict: 'ok', voltage: 0 }), { dark: true, voltage: 0 }));
    expect(f.heading).toBe('B3 is dark: too little light to power its units');
    expect(f.sentence).toContain('live again at first light');
  });

  it('says when silent units were last heard', () => {
    const f = found(string({ 4: { state: 'silent', seen: '2026-06-03T11:20:00.000Z' } }));
    expect(f.heading).toBe('One of 14 units in B3 is silent');
    expect(f.sentence).toContain('Last heard 11:20. The string carries 8.0 A');
  });

  it('has words for no data, flapping, late, low and all is well', () => {
    expect(found(string({}, { at: null })).heading).toBe('B3 has not reported yet');
    expect(found(string({ 4: { verdict: 'flapping' } })).heading).toBe(
      'One of 14 units in B3 goes in and out of shutdown',
    );
    expect(found(string({ 4: { verdict: 'late' } })).heading).toBe(
      'One of 14 units in B3 shut down late last time',
    );
    expect(found(string({}, { voltage: 490 })).heading).toBe(
      'All 14 units in B3 pass, yet its voltage is low',
    );
    expect(found(string())).toEqual({
      kind: 'passing',
      heading: 'All 14 units in B3 are passing',
      sentence:
        'The string gives 546 V at 8.0 A, as expected from the other strings on the south roof. Nothing needs attention.',
    });
  });

  it('counts missing modules only where the gap is a whole number of them', () => {
    expect(modulesMissing(string({ 5: { voltage: 0 } }))).toBe(1);
    expect(modulesMissing(string({ 5: { voltage: 20 } }))).toBeNull();
    expect(modulesMissing(string())).toBeNull();
  });
});

const page = (s: StringNow, evidence: StringPage['evidence']['units'] = []): StringPage => ({
  at: NOW,
  site: { id: s.id, name: 'Old Tannery Market Hall', timeZone: 'UTC', stage: 'commissioning' },
  string: s,
  plane: { name: 'South roof', surfaceTilt: 18, surfaceAzimuth: 180 },
  unitType: { name: 'Reporting unit', measures: 'both', insulationTestMax: null },
  moduleType: 'Mono 450',
  light: { poaGlobal: null, temperatureModule: null },
  evidence: { units: evidence, finding: null },
  lostToday: null,
  neighbours: { previous: null, next: null },
  events: [],
  siblings: [],
  openCase: null,
});

describe('what the readings say and what to do', () => {
  const stuck = string({ 5: held, 9: held });
  const finding = findingOf(stuck, WHEN);

  it('shows a probability only where a judgement gave one', () => {
    expect(readingsOf(page(stuck), finding).main?.confidence).toBeNull();
    const evidence = [5, 9].map((position) => ({
      position,
      basis: 'measured' as const,
      thresholdSource: 'grace, a setting',
      confidence: position === 5 ? 0.99 : 0.95,
      couldBe: ['the unit is defective'],
    }));
    const readings = readingsOf(page(stuck, evidence), finding);
    expect(readings.main?.confidence).toBe(0.95);
    expect(readings.couldBe).toEqual(['the unit is defective']);
    expect(readings.main?.text).toBe(
      'Both report shutdown while the string is released, the voltage on their output shows it, their inputs are alive and the string lacks just their share.',
    );
  });

  it('sends a person to the place on the roof and has the string proved dead first', () => {
    const steps = nextSteps(page(stuck), finding);
    expect(steps[0]).toBe('Walk to 5 (upper row, place 5) and 9 (upper row, place 9).');
    expect(steps[1]).toContain('proved zero with a rated meter');
  });

  it('always has a caution, and none that says something is safe', () => {
    const cases = [
      string(),
      stuck,
      string(every({ state: 'dark' }), { dark: true }),
      string(every({ state: 'unheard' })),
      string(every({ state: 'shutdown', verdict: 'ok' }), commanded('initiator')),
    ];
    for (const s of cases) {
      const { strong, rest } = cautionOf(findingOf(s, WHEN));
      expect(`${strong} ${rest}`).toMatch(/rated meter/);
      expect(`${strong} ${rest}`).not.toMatch(/\bsafe\b/i);
    }
  });
});
