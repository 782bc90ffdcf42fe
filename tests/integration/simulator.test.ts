import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startSimulator, type Simulator } from '../../simulator/engine';
import { paths } from '../../src/schemas/paths';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet, type TestFleet } from '../support/fleet';
import { openSockets, type Sockets } from '../support/ingest';

/** The simulator's loggers against the real ingest: what they say is taken, kept and acknowledged. */

const TANNERY = 'Old Tannery Market Hall';
const NETLOFT = 'Netloft Terrace';
let db: TestDatabase;
let sockets: Sockets;
let fleet: TestFleet;
let simulator: Simulator;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [TANNERY, NETLOFT], Math.floor(Date.now() / 1000) - 3000);
  await startIngest();
  sockets = await openSockets();
  simulator = await startSimulator({
    plan: fleet.plan,
    ingestUrl: `${sockets.url}${paths.ingest()}`,
    secret: SECRET,
    now: fleet.plan.since,
    speed: 0,
    pace: 60,
  });
  expect(await simulator.settled()).toBe(true);
});
afterAll(async () => {
  await simulator.stop();
  await stopIngest();
  await sockets.close();
  await db.drop();
});

const rows = async <T>(sql: string, values: unknown[] = []): Promise<T[]> =>
  (await db.owner.query(sql, values)).rows as T[];
const dropped = () =>
  simulator.runs.flatMap((r) =>
    r.loggers.map((l) => ({ n: l.connection.outbox.dropped, why: l.connection.outbox.lastRefusal })),
  );

describe('the simulated loggers', { timeout: 90_000 }, () => {
  it('report everything by the protocol, and nothing of it is refused', async () => {
    await simulator.advance(130);
    expect(await simulator.settled()).toBe(true);
    expect(dropped().map((d) => d.why)).toEqual([null, null]);
    const [counts] = await rows<Record<string, number>>(
      `select (select count(distinct string_id)::int from string_frame) strings, (select count(*)::int from input_frame) inputs,
        (select count(*)::int from inverter_frame) inverters, (select count(*)::int from weather_frame) weather,
        (select count(*)::int from command) commands`,
    );
    // the roll call at the hall has not begun: only the terrace's units speak
    expect(counts?.strings).toBe(fleet.site(NETLOFT).strings.size);
    expect(counts?.inputs).toBeGreaterThan(10);
    expect(counts?.inverters).toBeGreaterThan(10);
    expect(counts?.weather).toBeGreaterThan(2);
    expect(counts?.commands).toBe(2);
  });

  it('says what the units say: kept voltages are the true ones within the units’ accuracy', async () => {
    const truth = simulator.truth(NETLOFT);
    const state = await rows<{ name: string; voltage: number[]; at: Date }>(
      `select s.name, st.voltage, st.at from string_state st join string s on s.id = st.string_id where s.site_id = $1`,
      [fleet.site(NETLOFT).id],
    );
    expect(state.length).toBe(5);
    let compared = 0;
    for (const { name, voltage } of state)
      voltage.forEach((cv, i) => {
        const unit = truth.units.find((u) => u.string === name && u.position === i + 1);
        expect(Math.abs(cv / 100 - (unit?.voltageOut ?? 0))).toBeLessThan(1);
        compared += 1;
      });
    expect(compared).toBe(60);
  });

  it('answer a roll call: units are heard one after another, strangers too, the mute never', async () => {
    const site = fleet.site(TANNERY);
    const [person] = await rows<{ id: number }>(
      `select id from person where email = 'technician@lowfield.example'`,
    );
    await db.owner.query(
      `insert into roll_call (site_id, started_by, person_on_site) values ($1, $2, 'Bram Ottersley')`,
      [site.id, person?.id],
    );
    for (const run of simulator.runs)
      if (run.plan.name === TANNERY) for (const l of run.loggers) l.rollCall.listen(true, simulator.clock());
    await simulator.advance(60);
    expect(await simulator.settled()).toBe(true);
    const [heard] = await rows<{ n: number; strangers: number }>(
      `select count(*)::int n, count(*) filter (where unit_id is null)::int strangers from heard where site_id = $1`,
      [site.id],
    );
    const truth = simulator.truth(TANNERY);
    const told = truth.units.filter((u) => u.heard).length;
    // one is mute; two sit where the drawing has other serials, which nobody ever hears
    expect(told).toBe(184 - 1);
    expect(heard).toEqual({ n: told, strangers: 2 });
  });

  it('fall when the initiator opens, second by second, and two stay down when it closes', async () => {
    const site = fleet.site(TANNERY);
    expect(simulator.setInitiator(TANNERY, 'Main initiator', true)).toBe(true);
    await simulator.advance(125);
    expect(await simulator.settled()).toBe(true);
    const down = simulator.truth(TANNERY);
    expect(down.units.filter((u) => u.heard && u.mode === 'passing')).toEqual([]);
    // who was never heard doesn't obey
    expect(down.units.filter((u) => !u.heard).every((u) => u.mode === 'passing')).toBe(true);
    const traces = await rows<{ name: string; measuring_point: string; voltage: (number | null)[] }>(
      `select s.name, t.measuring_point, t.voltage from trace t join string s on s.id = t.string_id where t.site_id = $1`,
      [site.id],
    );
    expect(new Set(traces.map((t) => t.name)).size).toBe(13);
    const a1 = traces.find((t) => t.name === 'A1' && t.measuring_point === 'unit_sum');
    expect(a1?.voltage.length).toBeGreaterThan(115);
    expect(a1?.voltage[0]).toBeGreaterThan(4000);
    expect(a1?.voltage[60]).toBeLessThan(100);
    const [command] = await rows<{ in_force: string }>(
      'select in_force from command where site_id = $1 order by since desc limit 1',
      [site.id],
    );
    expect(command?.in_force).toBe('initiator');

    simulator.setInitiator(TANNERY, 'Main initiator', false);
    await simulator.advance(180);
    expect(await simulator.settled()).toBe(true);
    const up = simulator.truth(TANNERY);
    expect(up.units.filter((u) => u.mode === 'shutdown').map((u) => `${u.string}-${u.position}`)).toEqual([
      'B3-5',
      'B3-9',
    ]);
    const [claims] = await rows<{ state: number[] }>('select state from string_state where string_id = $1', [
      site.strings.get('B3')?.id,
    ]);
    expect(claims?.state.map((s, i) => (s === 2 ? i + 1 : 0)).filter(Boolean)).toEqual([5, 9]);
  });

  it('keep what they could not say, and replay it in order of time', async () => {
    const id = simulator.inject(NETLOFT, {
      kind: 'uplink_out',
      logger: fleet.site(NETLOFT).plan.loggers[0]?.serial ?? '',
    });
    await simulator.advance(600);
    const truth = simulator.truth(NETLOFT);
    expect(truth.loggers[0]?.connected).toBe(false);
    expect(truth.loggers[0]?.waiting).toBeGreaterThan(30);
    const count = async () =>
      (
        await rows<{ n: number }>(
          'select count(*)::int n from string_frame f join string s on s.id = f.string_id where s.site_id = $1',
          [fleet.site(NETLOFT).id],
        )
      )[0]?.n ?? 0;
    const before = await count();
    simulator.clear(NETLOFT, id);
    await simulator.advance(1);
    expect(await simulator.settled()).toBe(true);
    expect((await count()) - before).toBeGreaterThanOrEqual(5 * 10);
  });

  it('hand over late what a cut-off gateway kept', async () => {
    const fault = {
      kind: 'gateway_out',
      logger: fleet.site(NETLOFT).plan.loggers[0]?.serial ?? '',
      gateway: 1,
      keeps: true,
    } as const;
    const startS = simulator.clock();
    const between = (untilS: number) =>
      rows<{ n: number }>(
        `select count(*)::int n from string_frame f join string s on s.id = f.string_id
         where s.site_id = $1 and f.at > to_timestamp($2) and f.at < to_timestamp($3)`,
        [fleet.site(NETLOFT).id, startS, untilS],
      ).then((r) => r[0]?.n);
    const id = simulator.inject(NETLOFT, fault);
    await simulator.advance(300);
    const endS = simulator.clock();
    expect(await simulator.settled()).toBe(true);
    expect(await between(endS)).toBe(0);
    simulator.clear(NETLOFT, id);
    await simulator.advance(70);
    expect(await simulator.settled()).toBe(true);
    expect(await between(endS)).toBeGreaterThanOrEqual(5 * 4);
  });
});
