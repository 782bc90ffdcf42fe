import knexFactory from 'knex';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startSimulator, type Simulator } from '../../simulator/engine';
import { fault as faultSchema } from '../../simulator/faults/kinds';
import { seedPlant } from '../../seeds/plant/seed-plant';
import type { SeededPlant } from '../../seeds/plant/seeded';
import type { Actor } from '../../src/domain/access/permissions';
import type { Act } from '../../src/domain/commissioning/shutdown-test-record';
import { paths } from '../../src/schemas/paths';
import type { ShutdownTestPage } from '../../src/schemas/api/shutdown-test';
import { asActor } from '../../src/server/db/transaction';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { shutdownTestPage } from '../../src/server/services/shutdown-test-page';
import { addActs, endShutdownTest, startShutdownTest } from '../../src/server/services/shutdown-test-write';
import { testDatabase, type TestDatabase } from '../support/database';
import { openSockets, type Sockets } from '../support/ingest';
import { planOf, sent, testedFleet } from '../support/shutdown-test';

/**
 * The plant does what it does; a person operates its initiator, reads a meter or does not, and the test says what was
 * shown: passed, failed, consistent or not witnessed.
 */
const SECRET = 'read at the home run';
/** Units on a keep-alive take 15 s, and capacitors hold the home run up for some more. */
const IN_TIME_S = 29;
let db: TestDatabase;
let sockets: Sockets;
let seeded: SeededPlant;
let simulator: Simulator;
let actor: Actor;

beforeAll(async () => {
  db = await testDatabase();
  const plan = testedFleet(Math.floor(Date.now() / 1000) - 6 * 3600);
  const knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 1 } });
  seeded = await knex.transaction((tx) => seedPlant(tx, plan, { secret: SECRET, password: 'x' }));
  await knex.raw(`select ensure_days((now() - interval '1 day')::date, (now() + interval '1 day')::date)`);
  await knex.destroy();
  const { rows } = await db.owner.query<{ id: number; org: number }>(
    `select id, organisation_id as org from person where email = 'technician@quarrybank.example'`,
  );
  actor = { personId: rows[0]!.id, organisationId: rows[0]!.org, role: 'technician', sites: 'all' };
  await startIngest();
  sockets = await openSockets();
  simulator = await startSimulator({
    plan,
    ingestUrl: `${sockets.url}${paths.ingest()}`,
    secret: SECRET,
    now: plan.since,
    speed: 0,
  });
  await pass(40);
});
afterAll(async () => {
  await simulator.stop();
  await stopIngest();
  await sockets.close();
  await db.drop();
});

async function pass(seconds: number, cutOff = false): Promise<void> {
  for (let left = seconds; left > 0; left -= 20) {
    await simulator.advance(Math.min(left, 20));
    if (!cutOff) expect(await simulator.settled()).toBe(true);
  }
}
const now = () => new Date(simulator.clock() * 1000);
const refOf = (site: string, string: string) => seeded.sites.get(site)!.strings.get(string)!.ref;
const stringsOf = (site: string) => [...seeded.sites.get(site)!.strings.keys()];

class Test {
  private constructor(
    readonly site: string,
    readonly ref: string,
  ) {}
  static async start(site: string): Promise<Test> {
    const { rows } = await db.owner.query<{ ref: string }>('select ref from zone where site_id = $1', [
      seeded.sites.get(site)!.id,
    ]);
    const { id } = await asActor(actor, (tx) =>
      startShutdownTest(tx, actor, seeded.sites.get(site)!.ref, { zone: rows[0]!.ref }, null),
    );
    return new Test(site, id);
  }
  act(...acts: Act[]): Promise<void> {
    return asActor(actor, (tx) =>
      addActs(
        tx,
        actor,
        this.ref,
        acts.map((a) => sent(a, now())),
        now(),
      ),
    );
  }
  page(): Promise<ShutdownTestPage> {
    return asActor(actor, (tx) => shutdownTestPage(tx, this.ref, now(), 'somebody else'));
  }
  end(): Promise<void> {
    return asActor(actor, (tx) => endShutdownTest(tx, actor, this.ref, 'looked at', null));
  }
  /** What a meter at the inverter's end shows now. */
  async read(round: number, moment: 'before' | 'after', afterS: number | null, names = stringsOf(this.site)) {
    for (const name of names) {
      const volts = simulator.truth(this.site).strings.find((s) => s.name === name)!.homeRun;
      await this.act({
        kind: 'reading',
        round,
        string: refOf(this.site, name),
        moment,
        afterS,
        secondsFrom: 'clock',
        atInverterEnd: true,
        voltages: { positiveToNegativeV: volts, positiveToEarthV: volts / 2, negativeToEarthV: -volts / 2 },
        note: '',
      });
    }
  }
}

interface Course {
  site: string;
  rounds?: string[];
  faults?: object[];
  /** Whether somebody reads the meter: never, or so many seconds after each command. */
  readAfterS?: number;
  shutForS?: number;
  cutOff?: boolean;
}
/** A whole test from the first watch to the return. */
async function run({ site, rounds = ['initiator'], faults = [], readAfterS, shutForS = 60, cutOff }: Course) {
  const ids = faults.map((f) => simulator.inject(site, faultSchema.parse(f)));
  await pass(30);
  const test = await Test.start(site);
  const { facts } = await test.page();
  const transmitter = (name: string) => facts.transmitters.find((t) => t.name === name)?.id ?? null;
  await test.act(
    {
      kind: 'planned',
      plan: planOf(
        facts.strings.map((s) => s.id),
        { rounds: rounds.map(transmitter) },
      ),
    },
    { kind: 'caution_accepted', name: 'Una Lathe' },
  );
  const during: ShutdownTestPage[] = [];
  for (const [i, round] of rounds.entries()) {
    await test.act({ kind: 'watch_started', round: i });
    const own = facts.strings
      .filter((s) => round === 'initiator' || s.transmitters.includes(transmitter(round) ?? ''))
      .map((s) => s.name);
    if (readAfterS !== undefined) await test.read(i, 'before', null, own);
    await pass(12);
    const cut = cutOff
      ? simulator.inject(site, faultSchema.parse({ kind: 'uplink_out', logger: loggerOf(site) }))
      : null;
    let off: string | null = null;
    if (round === 'initiator') simulator.setInitiator(site, 'Initiator', true);
    else off = simulator.inject(site, faultSchema.parse({ kind: 'transmitter_off', transmitter: round }));
    await test.act({ kind: 'operated', round: i });
    await pass(readAfterS ?? 20, cutOff);
    if (readAfterS !== undefined) await test.read(i, 'after', readAfterS, own);
    await pass(shutForS - (readAfterS ?? 20), cutOff);
    // the plant's clock is hours behind the server's, which says when a logger spoke
    if (cutOff)
      await db.owner.query('update logger set last_spoke_at = $1', [new Date(now().getTime() - 70_000)]);
    during.push(await test.page());
    if (off === null) simulator.setInitiator(site, 'Initiator', false);
    else simulator.clear(site, off);
    await test.act({ kind: 'released', round: i });
    await pass(90, cutOff);
    await test.act({ kind: 'round_ended', round: i });
    if (cut) {
      simulator.clear(site, cut);
      await pass(20); // what the logger kept comes
    }
  }
  if (readAfterS !== undefined) await test.act({ kind: 'proved_after', proved: true });
  const page = await test.page();
  await test.end();
  for (const id of ids) simulator.clear(site, id);
  await pass(120);
  return { page, during };
}
const loggerOf = (site: string) => [...seeded.sites.get(site)!.loggers.keys()][0] ?? '';
const resultOf = (page: ShutdownTestPage, name: string) =>
  page.verdict.strings.find((s) => s.name === name)?.result;

describe('a shutdown test against the plant', { timeout: 120_000 }, () => {
  it('passes by instrument in time; the reports give each unit an interval', async () => {
    const { page, during } = await run({ site: 'Monitored', readAfterS: 24 });
    expect(page.watch.canWatch).toBe(true);
    expect(page.verdict.missing).toEqual([]);
    expect(page.verdict).toMatchObject({ result: 'passed', treatAsLive: [], stuck: [] });
    const units = page.verdict.strings.flatMap((s) => s.units);
    expect(units).toHaveLength(16);
    expect(
      units.every((u) => u.verdict === 'followed' && u.followed![1] <= 30 && u.basis === 'measured'),
    ).toBe(true);
    expect(page.evidence[0]!.command).toMatchObject({ inForce: 'initiator', where: 'Roof' });
    expect(page.evidence[0]!.strings[0]!.units.every((u) => u.returned !== null)).toBe(true);
    const traces = during[0]!.evidence[0]!.strings[0]!.traces;
    expect(traces.find((t) => t.measuringPoint === 'unit_sum')!.voltage.length).toBeGreaterThan(30);
  });

  it('is consistent by reports alone', async () => {
    const { page } = await run({ site: 'Monitored' });
    expect(page.verdict.result).toBe('consistent');
    expect(page.verdict.missing.join(' ')).toContain('rated instrument');
  });

  it('fails with a unit that keeps passing, names it, and says what to treat as live', async () => {
    const { page } = await run({
      site: 'Monitored',
      faults: [{ kind: 'not_shutting_down', string: 'A1', position: 3 }],
    });
    expect(page.verdict.result).toBe('failed');
    expect(resultOf(page, 'A2')).toBe('consistent');
    expect(page.verdict.treatAsLive).toEqual([
      expect.objectContaining({ name: 'A1', why: '1 unit kept passing: position 3' }),
    ]);
  });

  it('believes the conductors of a unit that claims shutdown and passes', async () => {
    const { page } = await run({
      site: 'Monitored',
      faults: [{ kind: 'not_shutting_down', string: 'A2', position: 7, claims: 'shutdown' }],
    });
    const unit = page.verdict.strings.find((s) => s.name === 'A2')!.units[6]!;
    expect(unit).toMatchObject({ verdict: 'not_shutting_down', basis: 'measured' });
  });

  it('fails by instrument where a mute string keeps its voltage', async () => {
    const { page } = await run({
      site: 'Mute',
      faults: [{ kind: 'not_shutting_down', string: 'A1', position: 2 }],
      readAfterS: 45,
    });
    expect(resultOf(page, 'A1')).toBe('failed');
    expect(page.verdict.treatAsLive.map((s) => s.name)).toEqual(['A1']);
  });

  it('fails by the current of its input where a whole mute string passes, capacitors or not', async () => {
    const { page } = await run({
      site: 'Mute',
      faults: Array.from({ length: 8 }, (_, i) => ({
        kind: 'not_shutting_down' as const,
        string: 'A1',
        position: i + 1,
      })),
    });
    expect(page.evidence[0]!.strings[0]!.current!.currentA).toBeGreaterThan(1);
    expect(page.evidence[0]!.strings[0]!.current!.currentA).toBeLessThan(20);
    expect(page.verdict.treatAsLive.map((s) => s.name)).toContain('A1');
  });

  it('does not witness a mute string that nobody measures in a short test', async () => {
    const { page } = await run({ site: 'Mute', shutForS: 40 });
    expect(page.verdict.strings.every((s) => s.result !== 'passed' && s.result !== 'failed')).toBe(true);
  });

  it('does not witness what a logger that drops with the initiator can not tell; what it kept tells afterwards', async () => {
    const { page, during } = await run({ site: 'Monitored', cutOff: true });
    expect(during[0]!.verdict.result).toBe('not_witnessed');
    expect(during[0]!.watch).toMatchObject({ canWatch: false });
    expect(during[0]!.watch.words).toContain('is not speaking');
    expect(page.verdict.result).toBe('consistent');
  });

  it('lets an instrument decide where the logger dropped with the initiator', async () => {
    const { page } = await run({ site: 'Monitored', cutOff: true, readAfterS: 22 });
    expect(page.verdict.result).toBe('passed');
  });

  it('finds a unit that does not come back', async () => {
    const { page } = await run({
      site: 'Monitored',
      faults: [{ kind: 'stuck', string: 'A1', position: 5, at: 'next_release' }],
    });
    expect(page.verdict.stuck).toEqual([expect.objectContaining({ name: 'A1', positions: [5] })]);
  });

  it('hides cross-talk while all transmitters are off together, and shows it one at a time', async () => {
    const faults = [{ kind: 'cross_talk', transmitter: 'T2', strings: ['A1'] }];
    const together = await run({ site: 'Two transmitters', faults, readAfterS: IN_TIME_S });
    expect(together.page.verdict.strings.map((s) => s.result)).toEqual(new Array(4).fill('consistent'));
    expect(together.page.verdict.missing[0]).toContain('T1 and T2');
    const apart = await run({
      site: 'Two transmitters',
      faults,
      readAfterS: IN_TIME_S,
      rounds: ['initiator', 'T1', 'T2'],
    });
    expect(apart.page.verdict.result).toBe('failed');
    expect(resultOf(apart.page, 'A1')).toBe('failed');
    expect(resultOf(apart.page, 'B1')).toBe('passed');
    expect(apart.page.verdict.treatAsLive.map((s) => s.name)).toEqual(['A1']);
  });

  it('passes with each transmitter off alone where nothing is wrong', async () => {
    const { page } = await run({
      site: 'Two transmitters',
      readAfterS: IN_TIME_S,
      rounds: ['initiator', 'T1', 'T2'],
    });
    expect(page.verdict).toMatchObject({ result: 'passed', missing: [], treatAsLive: [] });
  });
});
