import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import { UNIT_STATES, VERDICTS } from '../../src/domain/verdicts/codes';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import type { SeededSite } from '../../seeds/plant/seeded';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet, type TestFleet } from '../support/fleet';
import { frameOf, nowS, openSockets, TestLogger, until, type Sockets } from '../support/ingest';
import { noonEverywhere } from '../support/noon';

/** Each story is lived by a site of its own: once without a break, once with the server gone in the middle. */
interface World {
  db: TestDatabase;
  sockets: Sockets;
  site: SeededSite;
  serial: string;
  logger: TestLogger;
}
const SITE = 'Old Tannery Market Hall';
const OTHER_SITE = 'Weirside Clinic';
const THIRD_SITE = 'Netloft Terrace';
const MEASURES = 'both';
let world: World;
let fleet: TestFleet;

async function enter(db: TestDatabase, site: SeededSite): Promise<World> {
  const serial = [...site.loggers.keys()][0] ?? '';
  await startIngest();
  const sockets = await openSockets();
  const logger = await TestLogger.arrive(sockets, loggerToken(SECRET, serial), serial);
  return { db, sockets, site, serial, logger };
}
async function leave(w: World): Promise<void> {
  w.logger.ws.terminate();
  await stopIngest();
  await w.sockets.close();
}

beforeAll(async () => {
  const db = await testDatabase();
  fleet = await testFleet(db, [SITE, OTHER_SITE, THIRD_SITE]);
  await noonEverywhere(db.owner);
  await db.owner.query(`update site set stage = 'operating', report_interval_s = 60`);
  world = await enter(db, fleet.site(SITE));
});
afterAll(async () => {
  await leave(world);
  await world.db.drop();
});

const idOf = (name: string) => world.site.strings.get(name)?.id ?? 0;
async function judged(
  name: string,
): Promise<{ state: string[]; verdict: string[]; frameAt: number; counts: object }> {
  const { rows } = await world.db.owner.query<{
    state: number[];
    verdict: number[];
    at: number;
    passing: number;
    stuck: number;
    nsd: number;
  }>(
    `select state, verdict, extract(epoch from frame_at)::int4 as at, passing, stuck, not_shutting_down as nsd
     from string_judgement where string_id = $1`,
    [idOf(name)],
  );
  const row = rows[0];
  return {
    state: (row?.state ?? []).map((s) => UNIT_STATES[s] ?? 'none'),
    verdict: (row?.verdict ?? []).map((v) => VERDICTS[v] ?? 'none'),
    frameAt: row?.at ?? 0,
    counts: { passing: row?.passing, stuck: row?.stuck, notShuttingDown: row?.nsd },
  };
}
const unitEvents = async (name: string) =>
  (
    await world.db.owner.query<{ line: string }>(
      `select concat_ws(' ', extract(epoch from at)::int4, position, state_before, state, verdict_before, verdict) as line
       from unit_event where string_id = $1 order by at, position`,
      [idOf(name)],
    )
  ).rows.map((r) => r.line);
const events = async (name: string) =>
  (
    await world.db.owner.query<{ kind: string; at: number; positions: number[] }>(
      `select kind, extract(epoch from at)::int4 as at, detail -> 'positions' as positions from event
       where string_id = $1 and kind <> 'units_heard' order by at, id`,
      [idOf(name)],
    )
  ).rows;

const rosterString = (i: number) => {
  const s = world.logger.roster.strings[i];
  if (!s) throw new Error(`no string ${i}`);
  return s;
};
const send = (i: number, at: number, claims: number[] | number) => {
  const s = rosterString(i);
  return world.logger.durable(
    world.logger.frames([{ at, string: s.index, frame: frameOf(s.serials.length, MEASURES, claims) }]),
  );
};
const claimsOf = (i: number, held: readonly number[]) =>
  rosterString(i).serials.map((_, slot) => (held.includes(slot + 1) ? 2 : 1));

/** A released string where positions 2 and 5 stay in shutdown, minute by minute. */
const minutes = 12;
const story = async (i: number, t0: number, from: number, to: number) => {
  for (let k = from; k < to; k++) await send(i, t0 + 60 * k, k < 2 ? 1 : claimsOf(i, [2, 5]));
};
const release = (since: number) =>
  world.logger.durable({
    type: 'command',
    zone: rosterString(0).zone,
    inForce: 'released',
    since,
    by: 'initiator at the gate',
  });

describe('verdicts come with the data', () => {
  it('two units stay in shutdown while released: stuck, as events of one instant in one row', async () => {
    const t0 = nowS() - 60 * (minutes + 2);
    await release(t0 - 3600);
    await story(0, t0, 0, minutes);
    const { name } = rosterString(0);
    const now = await until(async () => {
      const j = await judged(name);
      return j.verdict[1] === 'stuck' && j.verdict[4] === 'stuck' && j;
    }, 'two units are stuck');
    expect(now.verdict.filter((v) => v === 'stuck')).toHaveLength(2);
    expect(now.state[0]).toBe('passing');
    expect(now.state[1]).toBe('shutdown');
    expect(now.counts).toMatchObject({ stuck: 2, passing: now.state.length - 2 });
    const told = (await events(name)).filter((e) => e.kind === 'units_stuck');
    expect(told).toHaveLength(1);
    expect(told[0]?.positions).toEqual([2, 5]);
  });

  it('units that report without having been heard are written down as heard', async () => {
    const { serials } = rosterString(0);
    const { rows } = await world.db.owner.query('select serial from heard where serial = any ($1)', [
      serials,
    ]);
    expect(rows).toHaveLength(serials.filter(Boolean).length);
  });

  it('frames that were kept through an outage are history: they change no verdict of now', async () => {
    const { name } = rosterString(0);
    const before = await judged(name);
    const count = (await events(name)).length;
    await send(0, before.frameAt - 3600, 2);
    await send(0, before.frameAt - 3540, 2);
    await send(0, before.frameAt + 60, claimsOf(0, [2, 5]));
    const after = await judged(name);
    expect(after.verdict).toEqual(before.verdict);
    expect(await events(name)).toHaveLength(count);
  });
});

describe('a process that dies', () => {
  it('between COMMIT and judgement loses nothing: the watermark gives the verdicts of an uninterrupted run', async () => {
    const t0 = nowS() - 60 * (minutes + 1);
    const other = fleet.site(OTHER_SITE);
    // one site without a break …
    await leave(world);
    world = await enter(world.db, other);
    const whole = rosterString(0);
    await release(t0 - 3600);
    await story(0, t0, 0, minutes);
    await leave(world);
    const a = {
      judged: await judged(whole.name),
      changes: await unitEvents(whole.name),
      told: await events(whole.name),
    };
    expect(a.judged.verdict.filter((v) => v === 'stuck')).toHaveLength(2);
    // … another with frames that were made durable while nobody judged
    world = await enter(world.db, fleet.site(THIRD_SITE));
    const broken = rosterString(0);
    await release(t0 - 3600);
    await story(0, t0, 0, 4);
    await leave(world);
    for (let k = 4; k < minutes - 1; k++)
      await world.db.owner.query(
        `insert into string_frame (at, mask, string_id, voltage_sum, power_sum, voltage, voltage_in, current, power, temperature, signal, via, state)
         select to_timestamp($2::int4), mask, string_id, voltage_sum, power_sum, voltage, voltage_in, current, power, temperature, signal, via, state
         from string_frame where string_id = $1 and at = to_timestamp($3::int4)`,
        [idOf(broken.name), t0 + 60 * k, t0 + 180],
      );
    expect((await judged(broken.name)).verdict).not.toContain('stuck');
    world = await enter(world.db, fleet.site(THIRD_SITE));
    await until(async () => (await judged(broken.name)).verdict.includes('stuck'), 'the gap is judged');
    await send(0, t0 + 60 * (minutes - 1), claimsOf(0, [2, 5]));
    await leave(world); // keeps the newest memories
    const b = await judged(broken.name);
    const shared = Math.min(broken.serials.length, whole.serials.length);
    expect(b.verdict.slice(0, shared)).toEqual(a.judged.verdict.slice(0, shared));
    expect(b.state.slice(0, shared)).toEqual(a.judged.state.slice(0, shared));
    expect(b.frameAt).toBe(a.judged.frameAt);
    const upTo = (lines: string[]) => lines.filter((l) => Number(l.split(' ')[1]) <= shared);
    expect(upTo(await unitEvents(broken.name))).toEqual(upTo(a.changes));
    expect(await events(broken.name)).toEqual(a.told);
    world = await enter(world.db, fleet.site(SITE));
  });
});

describe('a command', () => {
  it('is judged at once: units that keep passing past the time limit are not shutting down', async () => {
    const i = 3;
    const { name, zone } = rosterString(i);
    const since = nowS() - 300;
    await send(i, since - 60, 1);
    await world.logger.durable({ type: 'command', zone, inForce: 'initiator', since, by: 'gate' });
    const n = rosterString(i).serials.length;
    const claims = Array.from({ length: n }, (_, slot) => (slot === 0 ? 1 : 2));
    await send(i, since + 20, claims);
    await send(i, since + 60, claims);
    await send(i, since + 120, claims);
    const now = await until(async () => {
      const j = await judged(name);
      return j.verdict[0] === 'not_shutting_down' && j;
    }, 'the first unit is found out');
    expect(now.verdict.slice(1)).toEqual(new Array(n - 1).fill('ok'));
    const told = (await events(name)).find((e) => e.kind === 'units_not_shutting_down');
    expect(told?.positions).toEqual([1]);
    const { rows } = await world.db.owner.query<{ evidence: { units: Record<string, { claim: string }> } }>(
      'select evidence from string_judgement where string_id = $1',
      [idOf(name)],
    );
    expect(rows[0]?.evidence.units['1']).toMatchObject({ claim: 'passing' });
    await world.logger.durable({
      type: 'command',
      zone,
      inForce: 'released',
      since: since + 200,
      by: 'gate',
    });
  });
});

describe('at night', () => {
  it('units whose frames stop while the inverters report on are dark: not silent, and no longer passing', async () => {
    const i = 4;
    const { name } = rosterString(i);
    await leave(world);
    await world.db.owner.query(
      'update site set longitude = case when longitude > 0 then longitude - 180 else longitude + 180 end',
    );
    world = await enter(world.db, world.site);
    await send(i, nowS() - 3 * 3600, 1);
    const [inverter] = world.logger.roster.inverters;
    await world.logger.durable({
      type: 'inputs',
      rows: [{ at: nowS(), inverter: inverter?.name, input: inverter?.inputs[0], voltage: 0, current: 0 }],
    });
    const now = await until(
      async () => {
        const j = await judged(name);
        return j.state[0] === 'dark' && j;
      },
      'the string is dark',
      25_000,
    );
    expect(new Set(now.state)).toEqual(new Set(['dark']));
    expect((await events(name)).filter((e) => e.kind === 'units_silent')).toEqual([]);
  });

  it('also where another process serves the logger, by what its inverters report there', async () => {
    const { name } = rosterString(4);
    const { site, serial, db } = world;
    const stringId = idOf(name);
    await leave(world);
    // as after a start: the last that this process reads of the logger's units is three hours old
    const strings = [...site.strings.values()].map((s) => s.id);
    await db.owner.query('delete from string_judgement where string_id = any ($1)', [strings]);
    await db.owner.query(
      `delete from string_frame where string_id = any ($1) and at > now() - interval '2 hours'`,
      [strings],
    );
    const { rowCount } = await db.owner.query(
      `update logger set leased_by = 'elsewhere:1', leased_until = now() + interval '5 minutes', last_spoke_at = now()
       where serial = $1`,
      [serial],
    );
    expect(rowCount).toBe(1);
    world = await enter(db, fleet.site(OTHER_SITE));
    const stateOf = async () =>
      (
        await db.owner.query<{ state: string }>(
          'select state[1] as state from string_judgement where string_id = $1',
          [stringId],
        )
      ).rows.map((r) => UNIT_STATES[Number(r.state)])[0];
    await until(async () => (await stateOf()) === 'passing', 'its last frame is judged');
    await db.owner.query(
      `insert into input_state (input_id, site_id, at, voltage, current)
       select input_id, $2, now(), 0, 0 from string where id = $1
       on conflict (input_id) do update set at = excluded.at, voltage = 0, current = 0`,
      [stringId, site.id],
    );
    await until(async () => (await stateOf()) === 'dark', 'the string is dark', 45_000);
  });
});
