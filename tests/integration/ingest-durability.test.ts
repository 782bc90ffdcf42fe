import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import { startIngest, stopIngest, ingest } from '../../src/server/ingest/service';
import type { SeededSite } from '../../seeds/plant/seeded';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet } from '../support/fleet';
import { frameOf, nowS, openSockets, TestLogger, until, type Sockets } from '../support/ingest';

let db: TestDatabase;
let sockets: Sockets;
let site: SeededSite;
let serial: string;
let logger: TestLogger;

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Old Tannery Market Hall']);
  site = fleet.site('Old Tannery Market Hall');
  serial = [...site.loggers.keys()][0] ?? '';
  await startIngest();
  sockets = await openSockets();
  logger = await TestLogger.arrive(sockets, loggerToken(SECRET, serial), serial);
});
afterAll(async () => {
  await stopIngest();
  await sockets.close();
  await db.drop();
});

const minute = (at: number) =>
  logger.frames(
    logger.roster.strings.map((s) => ({ at, string: s.index, frame: frameOf(s.serials.length, 'both') })),
  );
const framesOf = async (from: number, to: number): Promise<number> => {
  const { rows } = await db.owner.query<{ n: number }>(
    'select count(*)::int as n from string_frame where at >= to_timestamp($1::int4) and at <= to_timestamp($2::int4)',
    [from, to],
  );
  return rows[0]!.n;
};
/** Ends what is at work for ingest in the database, as a crash of a backend would. */
const killBackends = () =>
  db.owner.query(
    `select pg_terminate_backend(pid) from pg_stat_activity
     where datname = current_database() and pid <> pg_backend_pid() and application_name is distinct from 'kept'`,
  );

describe('while connections to the database break', () => {
  it('every acknowledged frame is there, and every frame is acknowledged in the end', async () => {
    const t0 = nowS() - 7200;
    const seqs: number[] = [];
    let breaking = true;
    const breaker = (async () => {
      while (breaking) {
        await killBackends().catch(() => undefined); // our own connection may be among them
        await new Promise((resolve) => setTimeout(resolve, 150));
      }
    })();
    let checks = 0;
    for (let k = 0; k < 40; k++) {
      seqs.push(logger.report(minute(t0 + 60 * k)));
      await new Promise((resolve) => setTimeout(resolve, 25));
    }
    // whatever is acknowledged at any moment is durable at that moment
    for (let look = 0; look < 6; look++) {
      const acked = logger.inbox.all.flatMap((m) => (m.type === 'ack' ? [m.seq] : []));
      const newest = await db.owner
        .query<{ at: number; n: number }>(
          'select extract(epoch from at)::int4 as at, count(*)::int as n from string_frame group by at',
        )
        .catch(() => null);
      if (newest) {
        const there = new Map(newest.rows.map((r) => [r.at, r.n]));
        for (const seq of acked) expect(there.get(t0 + 60 * (seq - 1))).toBe(logger.roster.strings.length);
        checks++;
      }
      await new Promise((resolve) => setTimeout(resolve, 100));
    }
    expect(checks).toBeGreaterThan(0);
    breaking = false;
    await breaker;
    for (const seq of seqs) await logger.inbox.next('ack', (m) => m.seq === seq, 20_000);
    expect(await framesOf(t0, t0 + 2400)).toBe(40 * logger.roster.strings.length);
    expect(logger.inbox.all.some((m) => m.type === 'wait')).toBe(true);
    expect(logger.ws.readyState).toBe(logger.ws.OPEN);
  });
});

describe('while the database lets nobody in', () => {
  it('readings wait, nothing is acknowledged, loggers are told to wait, and it heals by itself', async () => {
    const t0 = nowS() - 3600;
    await letIn(false);
    await killBackends().catch(() => undefined);
    const seq = logger.report(minute(t0));
    await logger.inbox.next('wait', () => true, 10_000);
    await new Promise((resolve) => setTimeout(resolve, 700));
    expect(logger.inbox.all.some((m) => m.type === 'ack' && m.seq === seq)).toBe(false);
    expect(ingest()?.figures().waitingReadings).toBeGreaterThan(0);
    await letIn(true);
    await logger.inbox.next('ack', (m) => m.seq === seq, 20_000);
    expect(await framesOf(t0, t0)).toBe(logger.roster.strings.length);
    expect(ingest()?.figures().waitingReadings).toBe(0);
  });

  async function letIn(allowed: boolean): Promise<void> {
    const address = new URL(db.url);
    address.pathname = '/postgres';
    const client = new pg.Client(address.href);
    await client.connect();
    await client.query(`alter database ${db.name} with allow_connections ${allowed}`);
    await client.end();
  }
});

describe('more than the database can take at once', () => {
  it('pauses the sockets instead of growing, and loses nothing', async () => {
    const t0 = nowS() - 9 * 3600;
    const before = ingest()?.figures().pauses ?? 0;
    const lock = await db.owner.connect();
    await lock.query('begin; lock table string_frame in access exclusive mode');
    const minutes = 1000;
    for (let k = 0; k < minutes; k++) logger.report(minute(t0 + 30 * k));
    await until(async () => (ingest()?.figures().pauses ?? 0) > before, 'sockets are paused', 15_000);
    const waiting = ingest()?.figures().waitingReadings ?? 0;
    expect(ingest()?.figures().pauses).toBe(before + 1);
    // what one more message may add on top of the bound
    expect(waiting).toBeLessThan(120_000 + 64 * 1024);
    await lock.query('commit');
    lock.release();
    const last = logger.seq;
    await logger.inbox.next('ack', (m) => m.seq === last, 30_000);
    expect(await framesOf(t0, t0 + 30 * minutes)).toBeGreaterThanOrEqual(
      minutes * logger.roster.strings.length,
    );
    expect(ingest()?.figures().waitingReadings).toBe(0);
  });
});
