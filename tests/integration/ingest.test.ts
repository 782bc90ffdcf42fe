import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import type { SeededSite } from '../../seeds/plant/seeded';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet } from '../support/fleet';
import { frameOf, nowS, openSockets, TestLogger, type Sockets } from '../support/ingest';
import { noonEverywhere } from '../support/noon';

let db: TestDatabase;
let sockets: Sockets;
let site: SeededSite;
let serial: string;
let token: string;
let logger: TestLogger;

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Old Tannery Market Hall', 'Weirside Clinic', 'Netloft Terrace']);
  await noonEverywhere(db.owner);
  site = fleet.site('Old Tannery Market Hall');
  serial = [...site.loggers.keys()][0] ?? '';
  token = loggerToken(SECRET, serial);
  await startIngest();
  sockets = await openSockets();
});
afterAll(async () => {
  await stopIngest();
  await sockets.close();
  await db.drop();
});
beforeEach(async () => {
  logger = await TestLogger.arrive(sockets, token, serial);
  return () => logger.end();
});

const one = async <T>(sql: string, values: unknown[] = []): Promise<T> =>
  (await db.owner.query(sql, values)).rows[0] as T;
const idOf = (name: string) => site.strings.get(name)?.id ?? 0;
const string = (index = 0) => {
  const found = logger.roster.strings[index];
  if (!found) throw new Error(`the roster has no string ${index}`);
  return found;
};
const measures = 'both';
const whole = (index: number, claims: Parameters<typeof frameOf>[2] = 1) =>
  frameOf(string(index).serials.length, measures, claims);

describe('a logger arrives', () => {
  it('gets the roster of its own as-built: strings, slots, inputs, zones', () => {
    const { roster } = logger;
    const plan = site.plan.strings;
    expect(roster.strings.map((s) => s.name)).toEqual(
      [...plan].sort((a, b) => a.rosterIndex - b.rosterIndex).map((s) => s.name),
    );
    expect(string().serials).toEqual(plan.find((s) => s.name === string().name)?.slots.map((s) => s.serial));
    expect(roster.reportIntervalS).toBe(site.plan.reportIntervalS);
    expect(roster.zones).toEqual(site.plan.zones.map((z) => z.name).sort());
  });

  it('is refused without a token, with a wrong one, and with one that was ended', async () => {
    await expect(TestLogger.connect(sockets, 'no-such-token-at-all')).rejects.toThrow('HTTP 401');
    await db.owner.query(
      `insert into ingest_token (logger_id, hash, ended_at) values ($1, sha256('ended-long-ago'::bytea), now() - interval '1 day')`,
      [site.loggers.get(serial)],
    );
    await expect(TestLogger.connect(sockets, 'ended-long-ago')).rejects.toThrow('HTTP 401');
  });

  it('takes the place of its own earlier connection', async () => {
    const second = await TestLogger.arrive(sockets, token, serial);
    expect(await logger.closed).toMatchObject({ code: 4409 });
    await second.durable(second.frames([{ at: nowS(), string: string().index, frame: whole(0) }]));
    const row = await one<{ connected: boolean }>(
      'select leased_until > now() and leased_by is not null as connected from logger where serial = $1',
      [serial],
    );
    expect(row.connected).toBe(true);
    await second.end();
  });
});

describe('frames', () => {
  it('are durable before they are acknowledged, with sums, state and the newest values', async () => {
    const at = nowS() - 60;
    const { name, index } = string(1);
    await logger.durable(logger.frames([{ at, string: index, frame: whole(1) }]));
    const n = string(1).serials.length;
    const row = await one<Record<string, unknown>>(
      'select voltage_sum, power_sum, mask, state, voltage, signal from string_frame where string_id = $1 and at = to_timestamp($2::int4)',
      [idOf(name), at],
    );
    expect(row.voltage_sum).toBe(3800 * n);
    expect(row.power_sum).toBe(Math.round((3800 * 5000 * n) / 10_000));
    expect(row.mask).toBe(2 ** n - 1);
    expect(row.state).toEqual(new Array(n).fill(1));
    const state = await one<{ seen: number[] }>('select seen from string_state where string_id = $1', [
      idOf(name),
    ]);
    expect(state.seen).toEqual(new Array(n).fill(at));
  });

  it('twice, out of order and in halves come to the same rows', async () => {
    const t0 = nowS() - 900;
    const { name, index, serials } = string(2);
    const n = serials.length;
    const half = (from: number, to: number) =>
      whole(
        2,
        Array.from({ length: n }, (_, i) => (i >= from && i < to ? 1 : null)),
      );
    const at = (k: number) => t0 + 60 * k;
    await logger.durable(
      logger.frames([
        { at: at(3), string: index, frame: whole(2) },
        { at: at(1), string: index, frame: half(0, 5) },
        { at: at(2), string: index, frame: half(0, n) },
        { at: at(1), string: index, frame: half(5, n) },
      ]),
    );
    await logger.durable(logger.frames([{ at: at(4), string: index, frame: half(0, 3) }]));
    await logger.durable(logger.frames([{ at: at(3), string: index, frame: whole(2) }]));
    await logger.durable(logger.frames([{ at: at(4), string: index, frame: half(3, n) }]));
    const { rows } = await db.owner.query(
      `select extract(epoch from at)::int4 as at, mask, voltage_sum, power_sum from string_frame
       where string_id = $1 and at >= to_timestamp($2::int4) order by at`,
      [idOf(name), t0],
    );
    expect(rows).toEqual(
      [1, 2, 3, 4].map((k) => ({
        at: at(k),
        mask: 2 ** n - 1,
        voltage_sum: 3800 * n,
        power_sum: Math.round((3800 * 5000 * n) / 10_000),
      })),
    );
    const state = await one<{ at: Date; mask: number; voltage_sum: number }>(
      'select at, mask, voltage_sum from string_state where string_id = $1',
      [idOf(name)],
    );
    expect(state).toEqual({ at: new Date(at(4) * 1000), mask: 2 ** n - 1, voltage_sum: 3800 * n });
  });

  it('a unit that is missing from the newest frame keeps its own last value', async () => {
    const t = nowS() - 120;
    const { name, index, serials } = string(3);
    await logger.durable(logger.frames([{ at: t, string: index, frame: whole(3) }]));
    const claims = serials.map((_, i) => (i === 2 ? null : 1));
    await logger.durable(logger.frames([{ at: t + 60, string: index, frame: whole(3, claims) }]));
    const state = await one<{ seen: number[]; state: number[]; voltage_sum: number }>(
      'select seen, state, voltage_sum from string_state where string_id = $1',
      [idOf(name)],
    );
    expect(state.seen[2]).toBe(t);
    expect(state.seen[3]).toBe(t + 60);
    expect(state.state[2]).toBe(1);
    expect(state.voltage_sum).toBe(3800 * serials.length);
  });

  it('of a day without a partition are parked, not lost', async () => {
    const at = nowS() - 20 * 86_400;
    const { name, index } = string(0);
    await logger.durable(logger.frames([{ at, string: index, frame: whole(0) }]));
    const parked = await one<{ frame: { state: number[] } }>(
      'select frame from late_frame where string_id = $1 and at = to_timestamp($2::int4)',
      [idOf(name), at],
    );
    expect(parked.frame.state).toHaveLength(string(0).serials.length);
  });

  it('teach which gateways there are', async () => {
    const { index } = string(0);
    const n = string(0).serials.length;
    const via = new Array<number>(n).fill(77);
    await logger.durable(logger.frames([{ at: nowS(), string: index, frame: { ...whole(0), via } }]));
    const row = await one<{ name: string }>('select name from gateway where site_id = $1 and number = 77', [
      site.id,
    ]);
    expect(row.name).toBe('Gateway 77');
  });

  it('written under an earlier roster are read by it', async () => {
    const { index, name, serials } = string(0);
    const before = logger.roster.version;
    // a string is renumbered: what was index 0 becomes another one
    const free = 90;
    await db.owner.query('update string set roster_index = $2 where id = $1', [idOf(name), free]);
    await logger.end();
    logger = await TestLogger.arrive(sockets, token, serial);
    expect(logger.roster.version).toBe(before + 1);
    const at = nowS() - 30;
    const frame = frameOf(serials.length, measures, 2);
    await logger.durable(logger.frames([{ at, string: index, frame }], before));
    const row = await one<{ state: number[] }>(
      'select state from string_frame where string_id = $1 and at = to_timestamp($2::int4)',
      [idOf(name), at],
    );
    expect(row.state).toEqual(new Array(serials.length).fill(2));
    const never = await logger.refused(logger.frames([{ at, string: index, frame }], before + 40));
    expect(never).toMatchObject({ field: 'roster', again: false });
    await db.owner.query('update string set roster_index = $2 where id = $1', [idOf(name), index]);
  });
});

describe('the roster', () => {
  it('is sent again when the as-built changes', async () => {
    const { name } = string(0);
    const gone = string(0).serials.at(-1);
    await db.owner.query(
      `update placement set placed_to = now() where unit_id = (select id from unit where serial = $1) and placed_to is null`,
      [gone],
    );
    await db.owner.query(`select pg_notify('as_built', $1::text)`, [String(site.id)]);
    const next = await logger.inbox.next('roster');
    expect(next.strings.find((s) => s.name === name)?.serials.at(-1)).toBeNull();
    await db.owner.query(
      `update placement set placed_to = null where unit_id = (select id from unit where serial = $1)`,
      [gone],
    );
  });
});

describe('everything else that a logger reports', () => {
  it('inputs, inverters and weather: kept once, the newest is the present', async () => {
    const at = nowS() - 20;
    const [inverter] = logger.roster.inverters;
    if (!inverter) throw new Error('the roster has no inverter');
    const rows = [
      { at, inverter: inverter.name, input: inverter.inputs[0] ?? 0, voltage: 6120, current: 840 },
    ];
    await logger.durable({ type: 'inputs', rows });
    await logger.durable({ type: 'inputs', rows });
    await logger.durable({ type: 'inputs', rows: [{ ...rows[0], at: at - 60, voltage: 1 }] });
    const input = site.inputs.get(`${inverter.name}/${inverter.inputs[0]}`);
    expect(await one('select voltage, current from input_state where input_id = $1', [input])).toEqual({
      voltage: 6120,
      current: 840,
    });
    expect(await one('select count(*)::int as n from input_frame where input_id = $1', [input])).toEqual({
      n: 2,
    });

    const inv = {
      inverter: inverter.name,
      acPower: 41_000,
      energy: 5_000_000_000,
      status: 'running',
      powerLimit: null,
      insulation: 900,
      arcFlag: false,
      earthFaultFlag: false,
    };
    await logger.durable({ type: 'inverters', rows: [{ ...inv, at: at - 10 }] });
    await logger.durable({ type: 'inverters', rows: [{ ...inv, at, status: 'grid_lost', acPower: 0 }] });
    expect(
      await one('select ac_power, energy, status from inverter_state where inverter_id = $1', [
        site.inverters.get(inverter.name),
      ]),
    ).toEqual({ ac_power: 0, energy: 5_000_000_000, status: 'grid_lost' });
    expect(
      await one(`select detail from event where site_id = $1 and kind = 'inverter_status'`, [site.id]),
    ).toEqual({ detail: { inverter: inverter.name, status: 'grid_lost', before: 'running' } });

    const [sensor] = logger.roster.sensors;
    if (!sensor) throw new Error('the roster has no sensor');
    await logger.durable({
      type: 'weather',
      rows: [
        {
          at,
          sensor: sensor.number,
          irradiance: 812,
          temperatureAir: 214,
          temperatureModule: 431,
          windSpeed: 32,
        },
      ],
    });
    expect(
      await one('select irradiance, temperature_module from weather_state where site_id = $1', [site.id]),
    ).toEqual({
      irradiance: 812,
      temperature_module: 431,
    });
  });

  it('commands: once, with an event; traces: the longest of a start', async () => {
    const since = nowS() - 500;
    const zone = logger.roster.zones[0];
    const said = { type: 'command', zone, inForce: 'initiator', since, by: 'initiator at the gate' };
    await logger.durable(said);
    await logger.durable(said);
    expect(
      await one(
        `select count(*)::int as n from command where site_id = $1 and since = to_timestamp($2::int4)`,
        [site.id, since],
      ),
    ).toEqual({ n: 1 });
    const event = await one<{ detail: object }>(
      `select detail from event where site_id = $1 and kind = 'command' order by id desc limit 1`,
      [site.id],
    );
    expect(event.detail).toMatchObject({ inForce: 'initiator', zone, saidBy: 'initiator at the gate' });
    await logger.durable({ ...said, inForce: 'released', since: since + 60 });

    const trace = {
      type: 'trace',
      string: string().index,
      startedAt: since,
      measuringPoint: 'unit_sum',
      accuracy: 0.5,
    };
    await logger.durable({ ...trace, voltage: [6000, 4000, 2000] });
    await logger.durable({ ...trace, voltage: [6000, 4000, 2000, 90, null] });
    await logger.durable({ ...trace, voltage: [6000] });
    expect(await one('select voltage from trace where string_id = $1', [idOf(string().name)])).toEqual({
      voltage: [6000, 4000, 2000, 90, null],
    });
  });

  it('units heard: on the as-built and not, each with one event', async () => {
    const known = string(4).serials[1];
    const rows = [
      { at: nowS() - 40, serial: known, gateway: 1, signal: -82, voltage: 3801, current: 0 },
      { at: nowS() - 39, serial: 'STRANGER-0001', gateway: 1, signal: -97, voltage: null, current: null },
    ];
    await logger.durable({ type: 'heard', rows });
    await logger.durable({ type: 'heard', rows: rows.map((r) => ({ ...r, at: r.at + 20, signal: -90 })) });
    const { rows: heard } = await db.owner.query(
      'select serial, unit_id is not null as known, signal from heard where serial = any ($1) order by serial',
      [[known, 'STRANGER-0001']],
    );
    expect(heard).toEqual(
      [
        { serial: known, known: true, signal: -82 },
        { serial: 'STRANGER-0001', known: false, signal: -90 },
      ].sort((a, b) => String(a.serial).localeCompare(String(b.serial))),
    );
    const { rows: told } = await db.owner.query(
      `select string_id, detail from event where kind = 'units_heard' and site_id = $1
         and (detail -> 'serials' ? $2 or detail -> 'serials' ? 'STRANGER-0001') order by string_id nulls last`,
      [site.id, known],
    );
    expect(told).toEqual([
      { string_id: idOf(string(4).name), detail: { positions: [2], serials: [known] } },
      { string_id: null, detail: { positions: [], serials: ['STRANGER-0001'] } },
    ]);
  });
});

describe('a roll call', () => {
  it('asks the logger to listen, and to stop', async () => {
    const person = await one<{ id: number }>(
      `select id from person where email = 'technician@lowfield.example'`,
    );
    await db.owner.query(
      `insert into roll_call (site_id, started_by, person_on_site) values ($1, $2, 'Ada Mensah')`,
      [site.id, person.id],
    );
    await db.owner.query(`select pg_notify('roll_call', $1::text)`, [String(site.id)]);
    expect(await logger.inbox.next('listen')).toMatchObject({ on: true });
    await logger.end();
    logger = await TestLogger.arrive(sockets, token, serial);
    expect(await logger.inbox.next('listen')).toMatchObject({ on: true });
    await db.owner.query('update roll_call set stopped_at = now() where site_id = $1', [site.id]);
    await db.owner.query(`select pg_notify('roll_call', $1::text)`, [String(site.id)]);
    expect(await logger.inbox.next('listen')).toMatchObject({ on: false });
  });
});
