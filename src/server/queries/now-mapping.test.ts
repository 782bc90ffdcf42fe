import { describe, expect, it } from 'vitest';
import { stringNow } from '../../schemas/api/now';
import { planeWords } from '../../domain/output/plane-words';
import { findingWords } from '../../domain/causes/string-finding';
import { commandOf, mapStrings } from './now-mapping';
import type { SaidRow, SiteRow, StringRow } from './now-rows';

const NOON = new Date('2026-06-21T12:00:00Z');
const MIDNIGHT = new Date('2026-06-21T00:00:00Z');

const site: SiteRow = {
  id: 1,
  latitude: 51,
  longitude: 0,
  altitude: 50,
  reportIntervalS: 60,
  planes: [{ id: 1, name: 'South roof', surfaceTilt: 20, surfaceAzimuth: 180, albedo: 0.2 }],
  modules: [
    {
      id: 1,
      name: 'Mono 450',
      vocRef: 49.3,
      iscRef: 11.6,
      vmpRef: 41.5,
      impRef: 10.85,
      betaVoc: -0.0027,
      alphaIsc: 0.0005,
      gammaPmp: -0.0034,
      cellsInSeries: 72,
      bypassGroups: 3,
      noct: 45,
    },
  ],
  gateways: [{ loggerId: 1, number: 2, name: 'North gable' }],
  weather: [],
  said: [],
};
const PASSING = 1;
const SHUTDOWN = 2;
const DARK = 4;
const fill = <T>(value: T): T[] => Array.from({ length: 10 }, () => value);
let made = 0;
const row = (more: Partial<StringRow> = {}): StringRow => ({
  id: ++made,
  ref: '00000000-0000-4000-8000-000000000001',
  siteId: 1,
  name: `A${made}`,
  kind: 'monitored',
  loggerId: 1,
  planeId: 1,
  inputId: made,
  zoneId: 1,
  positions: Array.from({ length: 10 }, (_, i) => i + 1),
  serials: fill('4E02-77A1-09'),
  roofPlaces: fill('upper row'),
  placedAt: fill(1),
  moduleTypeId: 1,
  measures: 'output',
  shutdownVoltage: 0.6,
  bypassVoltage: -0.5,
  inverter: 'Inverter 1',
  inputNumber: 1,
  inputStrings: 1,
  inputVoltage: 3900,
  inputCurrent: 800,
  inputAt: NOON,
  at: NOON,
  powerSum: 31_200,
  voltage: fill(3900),
  voltageIn: null,
  current: fill(8000),
  power: null,
  temperature: fill(400),
  signal: fill(-60),
  via: fill(2),
  seen: fill(NOON.getTime() / 1000),
  state: fill(PASSING),
  verdict: fill(0),
  since: fill(NOON.getTime() / 1000 - 3600),
  finding: null,
  findingSince: null,
  evidence: null,
  ...more,
});
const only = (given: StringRow, at = NOON) => {
  const [mapped] = mapStrings(site, [given], at);
  if (!mapped) throw new Error('no string came back');
  return stringNow.parse(mapped);
};

describe('a string now', () => {
  it('has SI units, its gateway by name and the power of its units', () => {
    const s = only(row());
    expect(s.voltage).toBeCloseTo(390, 6);
    expect(s.current).toBe(8);
    expect(s.power).toBeCloseTo(3120, 6);
    expect(s.slots[0]).toMatchObject({
      voltage: 39,
      current: 8,
      power: 312,
      temperature: 40,
      gateway: 'North gable',
    });
  });

  it('assumes an output where only the module side is measured, and says so', () => {
    const s = only(
      row({
        measures: 'input',
        voltage: fill(null),
        voltageIn: fill(4000),
        state: [SHUTDOWN, ...fill(PASSING).slice(1)],
      }),
    );
    expect(s.slots.every((slot) => slot.assumed && slot.voltage === null)).toBe(true);
    // nine modules, and one bypass path under load
    expect(s.voltage).toBeCloseTo(9 * 40 - 0.5, 6);
  });

  it('reads a string whose units tell nothing at its input', () => {
    const told = {
      voltage: null,
      current: null,
      state: null,
      verdict: fill(3),
      at: null,
      seen: null,
      via: null,
    } as const;
    const alone = only(row({ kind: 'shutdown_only', measures: 'none', ...told, verdict: fill(3) }));
    expect(alone).toMatchObject({ voltage: 390, current: 8, power: 3120 });
    expect(alone.slots[0]).toMatchObject({ state: null, verdict: 'unconfirmed', assumed: false });
    const shared = only(
      row({ kind: 'shutdown_only', measures: 'none', ...told, verdict: fill(3), inputStrings: 2 }),
    );
    // the current of an input is a sum: it is nobody's own
    expect(shared).toMatchObject({ voltage: 390, current: null, power: null });
  });

  it('expects what the other strings of the plane give', () => {
    const others = Array.from({ length: 6 }, () => row());
    const low = row({ voltage: fill(3000) });
    const found = mapStrings(site, [low, ...others], NOON, new Set([low.id]));
    expect(found).toHaveLength(1);
    expect(found[0]?.expectedVoltage).toBeCloseTo(390, 6);
    expect(found[0]?.expectedFrom).toBe('the other strings on the south roof');
  });

  it('expects nothing in the dark and calls it dark', () => {
    const s = only(row({ state: fill(DARK) }), MIDNIGHT);
    expect(s).toMatchObject({ dark: true, expectedVoltage: null, expectedBand: null, voltage: null });
  });

  it('does not call an empty slot a unit', () => {
    const s = only(row({ serials: [null, ...fill('4E02-77A1-09').slice(1)] }));
    expect(s.counts.units).toBe(9);
    expect(s.slots[0]).toMatchObject({ serial: null, state: null, verdict: null, expected: null });
  });

  it('before any judgement counts its units as unheard', () => {
    expect(only(row({ state: null, verdict: null, voltage: null })).counts.unheard).toBe(10);
  });
});

describe('what is in force for a string', () => {
  const said = (more: Partial<SaidRow>): SaidRow => ({
    zoneId: null,
    transmitterId: null,
    name: 'x',
    inForce: 'released',
    since: NOON.toISOString(),
    by: '',
    stringIds: null,
    ...more,
  });
  const zone = said({ zoneId: 1, name: 'Whole roof' });
  const off = (id: number) =>
    said({ transmitterId: id, name: `T${id}`, inForce: 'keep_alive_lost', stringIds: [7] });
  const string = { id: 7, zoneId: 1, kind: 'shutdown_only' as const };

  it('is its zone’s command, or its transmitters’ once all that it hears are off', () => {
    expect(commandOf([zone], string)).toMatchObject({ where: 'Whole roof', inForce: 'released' });
    expect(commandOf([zone, off(1)], string)).toMatchObject({ where: 'T1', inForce: 'keep_alive_lost' });
    const on = said({ transmitterId: 2, name: 'T2', stringIds: [7] });
    expect(commandOf([zone, off(1), on], string)).toMatchObject({ inForce: 'released' });
    expect(commandOf([zone, off(1)], { ...string, id: 8 })).toMatchObject({ inForce: 'released' });
  });

  it('is nothing where nobody has said anything', () => expect(commandOf([], string)).toBeNull());
});

describe('words', () => {
  it('of a finding name the range where the count is not sure', () => {
    const evidence = {
      scope: 'input' as const,
      measuredV: 468,
      expectedV: 546,
      thresholdV: 520,
      thresholdSource: 'x',
      units: 2,
      unitsRange: [1, 3] as [number, number],
      ofN: 14,
      atS: 0,
      confidence: 0.7,
      couldBe: [],
    };
    expect(findingWords('stuck_positions_unknown', evidence)).toBe(
      '1 to 3 of 14 units do not pass, by the voltage at the input that it shares; positions unknown',
    );
    expect(findingWords('not_shutting_down', null)).toContain('while shutdown is commanded');
  });

  it('of a plane fit into a sentence', () => {
    expect([planeWords('South roof'), planeWords('PV2')]).toEqual(['south roof', 'PV2']);
  });
});
