import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import type { SeededSite } from '../../seeds/plant/seeded';
import { openSession } from '../../src/server/auth/sessions';
import { closePools } from '../../src/server/db/pools';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet, type TestFleet } from '../support/fleet';
import { frameOf, nowS, TestLogger } from '../support/ingest';
import { noonEverywhere } from '../support/noon';
import { programOf } from '../support/program';
import { roundRobin, type RoundRobin } from '../support/round-robin';
import { Watcher } from '../torture/watcher';

/**
 * Two processes for browsers and loggers and a worker on one database, behind a proxy that deals connections out in turn.
 */
const SITES = ['Weirside Clinic', 'Slate Lane Library'];
let db: TestDatabase;
let fleet: TestFleet;
let proxy: RoundRobin;
let a: ChildProcess;
let b: ChildProcess;
let portOfB: number;
const children: ChildProcess[] = [];
const loggers: KeepingLogger[] = [];
const watchers: Watcher[] = [];

async function processOf(roles: string): Promise<{ child: ChildProcess; port: number }> {
  const child = spawn(process.execPath, [await programOf('role-process')], {
    env: { ...process.env, ...db.env, WAKELINE_ROLES: roles, LOG_LEVEL: 'silent' },
    stdio: ['pipe', 'pipe', 'inherit'],
  });
  children.push(child);
  const [said] = (await once(child.stdout, 'data')) as [Buffer];
  return { child, port: Number(said.toString()) };
}

/** A logger that keeps what is not acknowledged, and comes back by itself. */
class KeepingLogger {
  readonly acknowledged: number[] = [];
  private readonly kept = new Map<number, object>();
  private logger: TestLogger | undefined;
  private over = false;
  connections = 0;

  constructor(
    readonly site: SeededSite,
    private readonly serial: string,
  ) {}

  /** Stays connected until the end of the test. */
  async live(): Promise<void> {
    while (!this.over) {
      try {
        const logger = await TestLogger.arrive(
          { url: `ws://127.0.0.1:${proxy.port}`, close: () => Promise.resolve() },
          loggerToken(SECRET, this.serial),
          this.serial,
        );
        this.connections++;
        this.logger = logger;
        logger.ws.on('message', (data) => this.hear(String(data)));
        for (const at of this.kept.keys()) this.send(at);
        await logger.closed;
      } catch {
        // nobody answered: tried again
      }
      this.logger = undefined;
      await new Promise((resolve) => setTimeout(resolve, 100));
    }
  }

  private hear(text: string): void {
    const message = JSON.parse(text) as { type: string; seq?: number };
    if (message.type !== 'ack' || message.seq === undefined) return;
    this.acknowledged.push(message.seq);
    this.kept.delete(message.seq);
  }

  /** Reports on every string at this instant, with the units' claim. */
  report(at: number, claim: number): void {
    this.kept.set(at, { claim });
    this.send(at);
  }

  private send(at: number): void {
    const { logger } = this;
    if (!logger || logger.ws.readyState !== logger.ws.OPEN) return;
    const { claim } = this.kept.get(at) as { claim: number };
    const strings = logger.roster.strings.filter((s) => s.kind !== 'shutdown_only');
    // the instant is its number: whoever checks finds the frames by what was acknowledged
    logger.send({
      ...logger.frames(
        strings.map((s) => ({ at, string: s.index, frame: frameOf(s.serials.length, 'both', claim) })),
      ),
      seq: at,
    });
  }

  get waiting(): number {
    return this.kept.size;
  }

  end(): void {
    this.over = true;
    this.logger?.ws.terminate();
  }
}

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, SITES);
  await noonEverywhere(db.owner);
  const [first, second] = await Promise.all([
    processOf('web,ingest'),
    processOf('web,ingest,worker'),
    processOf('worker'),
  ]);
  [a, b, portOfB] = [first.child, second.child, second.port];
  proxy = await roundRobin([first.port, second.port]);
  const person = fleet.seeded.people.get('analyst@lowfield.example')?.id ?? 0;
  const cookie = (await openSession(person, false)).split(';')[0] ?? '';
  await closePools();
  const refs = SITES.map((name) => fleet.site(name).ref);
  for (const port of [first.port, second.port]) {
    const at = (): string => `ws://127.0.0.1:${a.signalCode === null ? port : portOfB}`;
    const watcher = new Watcher(at, cookie, refs);
    watchers.push(watcher);
    watcher.start();
  }
  for (const name of SITES) {
    const site = fleet.site(name);
    const logger = new KeepingLogger(site, [...site.loggers.keys()][0] ?? '');
    loggers.push(logger);
    void logger.live();
  }
}, 240_000); // three programs start
afterAll(async () => {
  for (const logger of loggers) logger.end();
  for (const watcher of watchers) watcher.stop();
  for (const child of children) child.kill('SIGKILL');
  await proxy.close();
  await db.drop();
});

const count = async (sql: string, values: unknown[] = []): Promise<number> =>
  (await db.owner.query<{ n: number }>(`select count(*)::int as n from ${sql}`, values)).rows[0]?.n ?? 0;
/** Strings that reported and are not known to be in shutdown, as their units say. */
const NOT_JUDGED = `string_state st left join string_judgement j using (string_id)
  where st.at > now() - interval '10 minutes' and coalesce(j.shutdown, 0) = 0`;
const addEvent = (client: pg.ClientBase, note: string): Promise<unknown> =>
  client.query(
    `insert into event (at, organisation_id, site_id, kind, detail)
     select now(), organisation_id, id, 'command', jsonb_build_object('note', $2::text) from site where id = $1`,
    [fleet.site(SITES[0]!).id, note],
  );
const wake = `select pg_notify('changed', json_build_object('sites', json_build_array($1::int4))::text)`;

/** Events that a watcher should have been told of, and was not told once. */
async function missed(watcher: Watcher): Promise<string[]> {
  const due: string[] = [];
  for (const ref of watcher.siteRefs) {
    const { rows } = await db.owner.query<{ id: string }>(
      `select e.id::text as id from event e join site on site.id = e.site_id where site.ref = $1 and e.xid >= $2::xid8`,
      [ref, watcher.began.get(`site:${ref}`)],
    );
    due.push(...rows.map((r) => r.id));
  }
  return due.filter((id) => watcher.told.get(id) !== 1);
}

describe('two processes for browsers and loggers, and two workers', () => {
  it('deal loggers out, and judge the sites of both', async () => {
    await expect.poll(() => loggers.every((l) => l.connections > 0)).toBe(true);
    await expect.poll(() => watchers.every((w) => w.standsAt() !== null)).toBe(true);
    expect([...proxy.made.values()].every((n) => n > 0)).toBe(true);
    const t = nowS();
    // what changes nothing is written down later; a change at once
    for (const [ago, claim] of [
      [3, 1],
      [2, 2],
      [1, 2],
    ] as const)
      for (const logger of loggers) logger.report(t - ago, claim);
    await expect.poll(() => loggers.every((l) => l.waiting === 0)).toBe(true);
    await expect.poll(() => count(NOT_JUDGED)).toBe(0);
    expect(await count('string_judgement where shutdown > 0')).toBeGreaterThan(2);
  });

  it('show every event to the browsers of both, also when commits come out of order', async () => {
    const [one, two] = [new pg.Client(db.url), new pg.Client(db.url)];
    await Promise.all([one.connect(), two.connect()]);
    try {
      const site = fleet.site(SITES[0]!).id;
      await one.query('begin');
      await addEvent(one, 'begun first');
      await two.query('begin');
      await addEvent(two, 'begun second');
      await two.query(wake, [site]);
      await two.query('commit');
      await one.query(wake, [site]);
      await one.query('commit');
    } finally {
      await Promise.all([one.end(), two.end()]);
    }
    for (const watcher of watchers) await expect.poll(() => missed(watcher)).toEqual([]);
    expect([...(watchers[0]?.told.values() ?? [])].length).toBeGreaterThanOrEqual(2);
  });

  it('lose nothing when one of them is killed in the middle', async () => {
    const t0 = nowS(); // after the reports before

    for (let k = 0; k < 60; k++) {
      for (const logger of loggers) logger.report(t0 + k, k % 20 < 10 ? 1 : 2);
      if (k === 30) a.kill('SIGKILL');
      await new Promise((resolve) => setTimeout(resolve, 20));
    }
    await expect.poll(() => loggers.every((l) => l.waiting === 0), { timeout: 40_000 }).toBe(true);
    expect(b.exitCode).toBeNull();
    for (const logger of loggers) {
      const strings = [...logger.site.strings.values()].map((s) => s.id);
      const { rows } = await db.owner.query<{ at: number; n: number; strings: number }>(
        `select extract(epoch from at)::int4 as at, count(*)::int as n, count(distinct string_id)::int as strings
         from string_frame where string_id = any ($1::int4[]) group by at`,
        [strings],
      );
      const there = new Map(rows.map((r) => [r.at, r]));
      const whole = Math.max(...rows.map((r) => r.strings));
      for (const at of new Set(logger.acknowledged))
        expect(there.get(at)).toEqual({ at, n: whole, strings: whole });
      expect(there.size).toBe(new Set(logger.acknowledged).size);
    }
    // whoever judges now goes on from what is durable: the last reports said shutdown
    await expect.poll(() => count(NOT_JUDGED), { timeout: 40_000 }).toBe(0);
    for (const watcher of watchers) await expect.poll(() => missed(watcher), { timeout: 40_000 }).toEqual([]);
  });

  it('do each job once', async () => {
    const url = db.url;
    const { addJobAdhoc, Logger } = await import('graphile-worker');
    const before = await count(`job_run where task = 'check_cases' and failed is null`);
    for (let n = 0; n < 8; n++)
      await addJobAdhoc(
        { connectionString: url, logger: new Logger(() => () => undefined) },
        'check_cases',
        {},
        { jobKey: `once:${n}` },
      );
    await expect
      .poll(() => count(`job_run where task = 'check_cases' and ended_at is not null and failed is null`))
      .toBeGreaterThanOrEqual(before + 8);
    await expect.poll(() => count(`graphile_worker.jobs where key like 'once:%'`)).toBe(0);
    // cron may have added its own
    expect(await count(`job_run where task = 'check_cases'`)).toBeLessThanOrEqual(before + 9);
  });
});
