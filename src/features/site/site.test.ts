import { describe, expect, it } from 'vitest';
import { cause, counts, idOf, site, unitOf } from '../../../tests/support/now';
import type { EventItem, SlotNow, StringNow } from '../../schemas/api/now';
import { siteFinding } from './finding';
import { asksForReading, withEvents, type EventsRead } from './query';
import { hearingOf, sortedStrings, urgencyOf } from './tally';

const NOW = new Date('2026-06-01T14:00:00Z');

describe("a site's finding", () => {
  const school = site('Kestrel Row School', {
    counts: counts({ units: 312, passing: 312, notShuttingDown: 2 }),
  });

  it('counts the units concerned out of all, and says what to do', () => {
    const hazard = cause('not_shutting_down', 'Kestrel Row School', [unitOf('C2', 3), unitOf('C2', 11)]);
    expect(siteFinding(school, [hazard], NOW)).toEqual({
      heading: 'Two of 312 units did not shut down',
      sentence:
        'Treat every string here as live and call the site. The inverters make 30.0\u00a0kW of 40.0\u00a0kW.',
    });
    const all = cause(
      'stuck',
      'Kestrel Row School',
      Array.from({ length: 312 }, (_, i) => unitOf('A1', i + 1)),
    );
    expect(siteFinding(school, [all], NOW).heading).toBe('All 312 units are stuck in shutdown');
  });

  it('keeps saying what is live while units have not answered, whatever else is wrong', () => {
    const half = site('Hall', { counts: counts({ units: 184, passing: 155, stuck: 1, unheard: 28 }) });
    expect(siteFinding(half, [cause('stuck', 'Hall', [unitOf('B3', 4)])], NOW).sentence).toMatch(
      /^Power is held back here.+Until the roll call is complete, treat every string as live\..+kW/,
    );
  });

  it('speaks of strings where positions are unknown, and of the part where nothing else is', () => {
    const whole = cause('not_shutting_down', 'Kestrel Row School', [unitOf('C2', null)]);
    expect(siteFinding(school, [whole], NOW).heading).toBe('One string did not shut down');
    const part = cause('silent', 'Kestrel Row School', [], { headline: 'Gateway 3 has fallen silent' });
    expect(siteFinding(school, [part], NOW).heading).toBe('Gateway 3 has fallen silent');
  });

  it('tells what the inverters made as something past once they are no longer heard', () => {
    const away = site('Depot', {
      counts: counts({ units: 312, silent: 312 }),
      power: null,
      madeLast: { power: 71_600, at: '2026-06-01T13:50:05.000Z' },
    });
    const silent = cause('silent', 'Depot', [unitOf('C2', 3)]);
    expect(siteFinding(away, [silent], NOW).sentence).toContain(
      'The inverters made 71.6\u00a0kW of 40.0\u00a0kW at 13:50; no report since.',
    );
    expect(siteFinding({ ...away, madeLast: null }, [silent], NOW).sentence).toContain(
      'is not known just now',
    );
  });

  it('says since when nothing is known, in the zone of the site', () => {
    const away = site('Depot', { loggerConnected: false, timeZone: 'Asia/Dubai' });
    expect(siteFinding(away, [], NOW).heading).toBe('Nothing has been reported since 17:59');
    expect(siteFinding({ ...away, reportedAt: null }, [], NOW).heading).toBe('Nothing has been reported yet');
  });

  it('tells shutdown on command, roll call, night and a good day apart', () => {
    const held = site('Works', {
      counts: counts({ units: 420, shutdown: 419 }),
      inShutdownSince: '2026-06-01T13:21:00.000Z',
    });
    expect(siteFinding(held, [], NOW).heading).toBe('In shutdown since 13:21, on command');
    expect(siteFinding(held, [], NOW).sentence).toContain('only when a rated meter shows it');
    const hall = site('Hall', {
      stage: 'commissioning',
      counts: counts({ units: 184, passing: 161, unheard: 23 }),
    });
    expect(siteFinding(hall, [], NOW)).toEqual({
      heading: '161 of 184 units have answered the roll call',
      sentence: 'Until the roll call is complete, treat every string as live.',
    });
    const night = site('Far', { counts: counts({ units: 60, dark: 60 }) });
    expect(siteFinding(night, [], NOW).sentence).toContain('live again at sunrise');
    expect(siteFinding(site('Clinic'), [], NOW).heading).toBe('All 100 units pass');
  });

  it('never says that anything is safe', () => {
    for (const s of [school, site('Clinic'), site('Night', { counts: counts({ units: 9, dark: 9 }) })])
      expect(Object.values(siteFinding(s, [], NOW)).join(' ')).not.toMatch(/\bsafe\b/i);
  });
});

const slot = (position: number, some: Partial<SlotNow> = {}): SlotNow => ({
  position,
  serial: `AA${position}`,
  roofPlace: '',
  state: 'passing',
  verdict: 'ok',
  since: null,
  seen: null,
  voltage: 36,
  voltageIn: null,
  current: 7,
  power: null,
  temperature: null,
  signal: -60 - position,
  gateway: null,
  assumed: false,
  expected: 36,
  ...some,
});
const string = (name: string, slots: SlotNow[], some: Partial<StringNow> = {}): StringNow => ({
  id: idOf(name),
  name,
  kind: 'monitored',
  at: null,
  slots,
  counts: counts({ units: slots.length, passing: slots.length }),
  voltage: 400,
  current: 7,
  power: 2800,
  expectedVoltage: null,
  expectedBand: null,
  expectedInShutdown: null,
  expectedFrom: '',
  expectedStrings: 0,
  command: null,
  dark: false,
  input: { inverter: 'Inverter 1', number: 1, voltage: null, current: null, strings: 1 },
  finding: null,
  ...some,
});

describe('strings in the table', () => {
  it('count who is heard and name the faintest by its position', () => {
    const heard = hearingOf(
      string('A1', [
        slot(1),
        slot(2, { state: 'silent', signal: null }),
        slot(3),
        slot(4, { serial: null, state: null }),
      ]),
    );
    expect(heard).toEqual({ heard: 2, units: 3, weakest: { signal: -63, position: 3 } });
    expect(hearingOf(string('A2', [slot(1, { signal: null })])).weakest).toBeNull();
  });

  it('go by need, by name as people count, and by figures with the unknown last', () => {
    const list = [
      string('A10', [slot(1)], { voltage: 410 }),
      string('A2', [slot(1)], { voltage: null }),
      string('B1', [slot(1)], { voltage: 8, counts: counts({ units: 1, shutdown: 1, stuck: 1 }) }),
      string('B2', [slot(1)], {
        voltage: 390,
        finding: { kind: 'not_shutting_down', since: '2026-06-01T13:00:00.000Z', words: '' },
      }),
    ];
    const names = (...how: [Parameters<typeof sortedStrings>[1], boolean]) =>
      sortedStrings(list, ...how).map((s) => s.name);
    expect(names('need', false)).toEqual(['B2', 'B1', 'A2', 'A10']);
    expect(names('name', false)).toEqual(['A2', 'A10', 'B1', 'B2']);
    expect(names('voltage', true)).toEqual(['A10', 'B2', 'B1', 'A2']);
    expect(names('voltage', false)).toEqual(['B1', 'B2', 'A10', 'A2']);
    expect(list.map(urgencyOf)).toEqual([6, 6, 1, 0]);
  });
});

describe('events that /live brings', () => {
  const event = (id: string, at: string, kind: EventItem['kind'] = 'units_stuck'): EventItem => ({
    id,
    at,
    recordedAt: at,
    siteId: idOf('x'),
    siteName: 'x',
    stringId: null,
    stringName: null,
    kind,
    detail: {},
  });
  const read: EventsRead = {
    pages: [
      {
        events: [event('9', '2026-06-01T10:00:00.000Z'), event('8', '2026-06-01T09:00:00.000Z')],
        before: '1.8',
      },
      { events: [event('7', '2026-06-01T08:00:00.000Z')], before: null },
    ],
    pageParams: [null, '1.8'],
  };
  const ids = (r: EventsRead) => r.pages.map((p) => p.events.map((e) => e.id));

  it('stand in the order of their time, each once, of the kind that is shown', () => {
    const news = [
      event('10', '2026-06-01T11:00:00.000Z'),
      event('9', '2026-06-01T10:00:00.000Z'),
      event('11', '2026-06-01T09:30:00.000Z'),
      event('12', '2026-06-01T12:00:00.000Z', 'command'),
    ];
    expect(ids(withEvents(read, news, 'units_stuck'))).toEqual([['10', '9', '11', '8'], ['7']]);
    expect(ids(withEvents(read, news, 'all'))[0]?.[0]).toBe('12');
  });

  it('leave older ones to their own page', () => {
    expect(withEvents(read, [event('3', '2026-06-01T07:00:00.000Z')], 'all')).toBe(read);
  });

  it('say when the whole page must be read again', () => {
    expect(asksForReading({ events: [event('1', '2026-06-01T07:00:00.000Z', 'command')] })).toBe(true);
    expect(asksForReading({ events: [event('1', '2026-06-01T07:00:00.000Z')] })).toBe(false);
    expect(asksForReading({ causes: [] })).toBe(true);
  });
});
