import { describe, expect, it } from 'vitest';
import type { SlotNow, StringNow } from '../../schemas/api/now';
import type { WalkPage, WalkView } from '../../schemas/api/walk';
import { chosenStops, keysOf, readingsOf, sparesOf, stopsOfPage, stopsParam } from './stops';
import { parseTicks } from './ticks';
import { walkHeading, walkSentence } from '../../words/walk-sentences';

const ID = '00000000-0000-4000-8000-00000000000';
const slot = (position: number, more: Partial<SlotNow> = {}): SlotNow => ({
  position,
  serial: `U-${position}`,
  roofPlace: `upper row, ${position}`,
  state: 'passing',
  verdict: 'ok',
  since: null,
  seen: null,
  voltage: null,
  voltageIn: null,
  current: null,
  power: null,
  temperature: null,
  signal: null,
  gateway: null,
  assumed: false,
  expected: null,
  ...more,
});
const string = (id: string, name: string, slots: SlotNow[]): StringNow => ({
  id,
  name,
  kind: 'monitored',
  at: null,
  slots,
  counts: {
    units: 0,
    passing: 0,
    shutdown: 0,
    unheard: 0,
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
  input: { inverter: 'Inverter 1', number: 1, voltage: null, current: null, strings: 1 },
  finding: null,
});
const reading = { volts: 8.4, low: 8, high: 9 };
const roof = (
  stringId: string,
  y: number,
  halves: (string | null)[] = ['Halyard 4', 'Halyard 4', 'Halyard 4'],
) => ({
  stringId,
  plane: 'South roof',
  x: [1, 2, 3],
  y: [y, y, y],
  unitType: 'Reporting unit',
  moduleType: 'M450',
  connectors: { module: halves[0] ?? null, unitIn: halves[1] ?? null, unitOut: halves[2] ?? null },
  readings: { inShutdown: reading, passing: reading, now: { ...reading, words: '' } },
});
const page = (more: Partial<WalkPage> = {}): WalkPage => ({
  at: '2026-12-01T14:00:00.000Z',
  site: {
    id: `${ID}0`,
    name: 'Old Tannery Market Hall',
    place: '',
    timeZone: 'UTC',
    stage: 'commissioning',
    contactName: '',
    contactPhone: '',
    shutdownSwitchPlace: '',
  },
  outline: [],
  strings: [
    string(`${ID}1`, 'B1', [slot(1), slot(2, { state: 'unheard' }), slot(3)]),
    string(`${ID}2`, 'B3', [
      slot(1, { state: 'shutdown', verdict: 'stuck' }),
      slot(2),
      slot(3, { state: 'shutdown', verdict: 'stuck' }),
    ]),
  ],
  roof: [roof(`${ID}1`, 1), roof(`${ID}2`, 3)],
  answered: [],
  rollCalled: true,
  light: 'in bright light',
  ...more,
});
const view = (more: Partial<WalkView> = {}): WalkView => ({ stops: '', view: 'walk', string: '', ...more });

describe('stops of a site', () => {
  it('are its exceptions, named in heading and sentence, the gravest first', () => {
    const stops = stopsOfPage(page());
    expect(stops.map((s) => s.key).sort()).toEqual(['B1-2', 'B3-1', 'B3-3']);
    expect(walkHeading(page(), stops)).toBe('Three stops on the south roof');
    expect(walkSentence(page(), stops)).toMatch(/^B3-\d and B3-\d stuck in shutdown · B1-2 unheard$/);
  });
  it('who has answered is no stop, and before the roll call nobody is', () => {
    expect(stopsOfPage(page({ answered: ['U-2'] })).map((s) => s.key)).not.toContain('B1-2');
    const before = page({ rollCalled: false });
    const quiet = { ...before, strings: before.strings.slice(0, 1) };
    expect(stopsOfPage(quiet)).toEqual([]);
    expect(walkHeading(quiet, [])).toBe('No stops before the roll call');
    expect(walkHeading(page(), [])).toBe('Nobody has to go on the roof');
  });
  it('chosen ones and those of one string go by the address', () => {
    const all = stopsOfPage(page());
    expect(chosenStops(all, view()).length).toBe(3);
    expect(chosenStops(all, view({ string: 'B1' })).map((s) => s.key)).toEqual(['B1-2']);
    const stops = stopsParam(['B3-1', 'B1-2']);
    expect([...keysOf({ stops })]).toEqual(['B3-1', 'B1-2']);
    expect(
      chosenStops(all, view({ stops }))
        .map((s) => s.key)
        .sort(),
    ).toEqual(['B1-2', 'B3-1']);
  });
});

describe('what to bring', () => {
  it('a spare a stop, and the connector types of each half once', () => {
    const stops = stopsOfPage(page());
    expect(sparesOf(page(), stops)).toEqual({
      units: [{ type: 'Reporting unit', count: 3 }],
      connectors: [
        { where: 'module to unit', halves: ['Halyard 4', 'Halyard 4'] },
        { where: 'unit to unit', halves: ['Halyard 4', 'Halyard 4'] },
      ],
    });
    const other = page({ roof: [roof(`${ID}1`, 1, ['Capstan 6', null, 'Halyard 4']), roof(`${ID}2`, 3)] });
    expect(sparesOf(other, stops).connectors).toContainEqual({
      where: 'module to unit',
      halves: ['Capstan 6', null],
    });
  });
  it('and what the meter should read, a line a string', () => {
    const stops = stopsOfPage(page());
    expect(
      readingsOf(page(), stops)
        .map((r) => r.name)
        .sort(),
    ).toEqual(['B1', 'B3']);
  });
});

describe('ticks of this browser', () => {
  it('are read back, and what is not ours is nothing', () => {
    const tick = { key: 'B3-1', at: '2026-12-01T14:00:00.000Z', kind: 'stuck' };
    expect(parseTicks(JSON.stringify([tick, { nonsense: true }, 3]))).toEqual([tick]);
    expect(parseTicks('{')).toEqual([]);
    expect(parseTicks('{"a":1}')).toEqual([]);
    expect(parseTicks(null)).toEqual([]);
  });
});
