import { createServer, type IncomingMessage, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import knexFactory from 'knex';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import type { SeededSite } from '../../seeds/plant/seeded';
import { asActor } from '../../src/server/db/transaction';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { startLive, stopLive } from '../../src/server/live/service';
import { startWorker, stopWorker } from '../../src/server/jobs/worker';
import { countRequest, refusalClass } from '../../src/server/observe/meters';
import { answerProbe, databaseReason, notReady, refusesMetrics } from '../../src/server/observe/probes';
import { sampleNow, startSampler, stopSampler } from '../../src/server/observe/sampler';
import { migrationsDone } from '../../src/server/queries/process-samples';
import { readProcesses } from '../../src/server/services/status';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet, type TestFleet } from '../support/fleet';
import { frameOf, nowS, openSockets, TestLogger, type Sockets } from '../support/ingest';

const SITE = 'Old Tannery Market Hall';
let db: TestDatabase;
let fleet: TestFleet;
let site: SeededSite;
let sockets: Sockets;
let logger: TestLogger;
let server: Server;
let url: string;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [SITE]);
  site = fleet.site(SITE);
  await startIngest();
  await startLive();
  await startWorker();
  await startSampler();
  sockets = await openSockets();
  const serial = [...site.loggers.keys()][0] ?? '';
  logger = await TestLogger.arrive(sockets, loggerToken(SECRET, serial), serial);
  server = createServer((req, res) => {
    if (!answerProbe(req, res)) res.writeHead(404).end();
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterAll(async () => {
  logger.ws.terminate();
  await stopSampler();
  await stopWorker();
  await stopLive();
  await stopIngest();
  await sockets.close();
  await new Promise((resolve) => server.close(resolve));
  await db.drop();
});

/** The value of a series as a collector reads it; null: there is no such line. */
async function scraped(series: string): Promise<number | null> {
  const text = await (await fetch(`${url}/metrics`)).text();
  const line = text.split('\n').find((l) => l.startsWith(`${series} `));
  return line === undefined ? null : Number(line.slice(series.length + 1));
}

describe('what a supervisor asks', () => {
  it('hears that the process lives, and that it is ready for work', async () => {
    const alive = await fetch(`${url}/healthz`);
    expect(alive.status).toBe(200);
    expect(await alive.json()).toMatchObject({ alive: true, pid: process.pid });
    const ready = await fetch(`${url}/readyz`);
    expect([ready.status, await ready.json()]).toEqual([200, { ready: true, reasons: [] }]);
    expect((await fetch(`${url}/readyz`, { method: 'POST' })).status).toBe(405);
    expect((await fetch(`${url}/readyz/more`)).status).toBe(404);
  });

  it('hears why it is not: a missing migration, a database that is gone, a part that does not run', async () => {
    const { rows } = await db.owner.query<{ name: string }>(
      'delete from knex_migrations where id = (select max(id) from knex_migrations) returning name',
    );
    expect(await notReady()).toEqual([
      `database: 1 migrations are missing, the first is ${rows[0]?.name ?? ''}`,
    ]);
    await db.owner.query('insert into knex_migrations (name, batch, migration_time) values ($1, 1, now())', [
      rows[0]?.name,
    ]);
    const lock = await db.owner.connect();
    try {
      await lock.query('begin; lock table knex_migrations in access exclusive mode');
      expect(await notReady()).toEqual(['database: no answer within 2 s']);
    } finally {
      await lock.query('rollback');
      lock.release();
    }
    await stopLive();
    expect(await notReady()).toEqual(['web: live updates do not run']);
    await startLive();
    await expect.poll(notReady).toEqual([]);
  });
});

describe('an error of the database', () => {
  const errorOf = (work: Promise<unknown>): Promise<unknown> =>
    work.then(
      () => expect.fail('there was none'),
      (error: unknown) => error,
    );
  const elsewhere = (change: (address: URL) => void): Promise<unknown> => {
    const address = new URL(db.ingestUrl);
    change(address);
    const client = new pg.Client(address.href);
    client.on('error', () => undefined);
    return client.connect().finally(() => client.end().catch(() => undefined));
  };

  it('that gave up waiting is no answer, whoever was told of it first', async () => {
    const lock = await db.owner.connect();
    const other = await db.owner.connect();
    try {
      await lock.query('begin; lock table knex_migrations in access exclusive mode');
      for (const limit of ['lock_timeout', 'statement_timeout']) {
        await other.query(`set ${limit} = '50ms'`);
        const error = await errorOf(other.query('select name from knex_migrations'));
        expect(databaseReason(error)).toBe('database: no answer within 2 s');
        await other.query(`reset ${limit}`);
      }
    } finally {
      await lock.query('rollback');
      lock.release();
      other.release();
    }
    const small = knexFactory({
      client: 'pg',
      connection: db.ingestUrl,
      pool: { min: 0, max: 1 },
      acquireConnectionTimeout: 3000, // the first has to come within it, on a busy machine too
      log: { warn: () => undefined }, // it would say so itself
    });
    try {
      const error = await small.transaction(() => errorOf(migrationsDone(small)));
      expect(databaseReason(error)).toBe('database: no answer within 2 s');
    } finally {
      await small.destroy();
    }
  });

  it('tells one that is not there from one that refuses', async () => {
    const gone = await errorOf(elsewhere((address) => (address.port = '1')));
    expect(databaseReason(gone)).toBe('database: not reachable');
    const missing = await errorOf(elsewhere((address) => (address.pathname = '/not_there')));
    expect(databaseReason(missing)).toBe('database: answers with error 3D000');
    const ended = await db.owner.connect();
    try {
      const error = await errorOf(ended.query('select pg_terminate_backend(pg_backend_pid())'));
      expect(databaseReason(error)).toBe('database: not reachable');
    } finally {
      ended.release(true);
    }
  });
});

describe('what a collector of figures reads', () => {
  it('counts readings, commits, acknowledgements, refusals, and what stands open', async () => {
    const [string] = logger.roster.strings;
    const units = string!.serials.length;
    const before = (await scraped('wakeline_ingest_readings_total')) ?? 0;
    await logger.durable(
      logger.frames([{ at: nowS(), string: string!.index, frame: frameOf(units, 'both') }]),
    );
    await logger.refused(logger.frames([{ at: nowS(), string: 999, frame: frameOf(units, 'both') }]));
    await expect.poll(() => scraped('wakeline_ingest_readings_total')).toBe(before + units);
    expect(await scraped('wakeline_ingest_refused_total{reason="unknown_part"}')).toBe(1);
    expect(await scraped('wakeline_ingest_connections')).toBe(1);
    expect(await scraped('wakeline_ingest_ack_seconds_count')).toBeGreaterThanOrEqual(1);
    expect(await scraped('wakeline_queue_waiting_readings')).toBe(0);
    // somebody may be waiting for a connection at the moment that is looked at
    await expect.poll(() => scraped('wakeline_pool_connections{pool="ingest",state="waiting"}')).toBe(0);
    expect(await scraped('wakeline_open_handles')).toBeGreaterThan(0);
    expect(await scraped('process_resident_memory_bytes')).toBeGreaterThan(1e6);
  });

  it('finds routes and classes, never what somebody typed', async () => {
    countRequest('/sites/[site]', 'GET', 200, 0.02);
    countRequest('/sites/[site]', 'BREW', 503, 0.02);
    const named = 'wakeline_http_request_seconds_count{route="/sites/[site]",';
    expect(await scraped(`${named}method="GET",status="200"}`)).toBe(1);
    expect(await scraped(`${named}method="other",status="503"}`)).toBe(1);
    expect(
      [
        ['message', 'is not JSON: x'],
        ['message', 'there was no room for it within 10 s'],
        ['frames[3].voltageOut[2]', 'is 9, too high'],
        ['rows[0].at', 'is 900 s ahead'],
        ['string[7]', '7 is no string'],
        ['roster', 'version 9 was never given'],
        ['an"odd\nname', 'is not known in this message'],
      ].map(([field, reason]) => refusalClass(field!, reason!)),
    ).toEqual(['unreadable', 'no_room', 'value', 'time', 'unknown_part', 'roster', 'value']);
  });

  it('is this machine alone, not through a proxy, or whoever has the token', () => {
    const from = (remoteAddress: string, headers: Record<string, string> = {}) =>
      ({ headers, socket: { remoteAddress } }) as unknown as IncomingMessage;
    const open = { METRICS_TOKEN: undefined };
    expect(refusesMetrics(from('127.0.0.1'), open)).toBeNull();
    expect(refusesMetrics(from('::ffff:127.0.0.1'), open)).toBeNull();
    expect(refusesMetrics(from('10.0.0.4'), open)).toBe(403);
    expect(refusesMetrics(from('127.0.0.1', { 'x-forwarded-for': '10.0.0.4' }), open)).toBe(403);
    const token = { METRICS_TOKEN: 'sixteen-letters-long' };
    const bearer = (given: string) => ({ authorization: `Bearer ${given}` });
    expect(refusesMetrics(from('10.0.0.4', bearer('sixteen-letters-long')), token)).toBeNull();
    expect(refusesMetrics(from('10.0.0.4', bearer('sixteen-letters-lonh')), token)).toBe(401);
    expect(refusesMetrics(from('127.0.0.1'), token)).toBe(401);
  });
});

describe('the minutes that are kept', () => {
  it('shows each process with what it measured since its last sample', async () => {
    const manager = await fleet.actor('manager@lowfield.example');
    const [string] = logger.roster.strings;
    await sampleNow(new Date(Date.now() - 60_000));
    await logger.durable(
      logger.frames([{ at: nowS(), string: string!.index, frame: frameOf(string!.serials.length, 'both') }]),
    );
    await sampleNow(new Date());
    const [history, ...others] = await asActor(manager, (tx) => readProcesses(tx, new Date(), 6));
    expect(others).toEqual([]);
    expect(history).toMatchObject({ pid: process.pid, roles: ['web', 'ingest', 'worker'] });
    const newest = history?.samples.at(-1);
    const perS = string!.serials.length / (newest?.spanS ?? 1);
    expect(newest?.figures.readingsPerS).toBeCloseTo(perS, 3);
    expect(newest?.figures.ackP95Ms).toBeGreaterThan(0);
    expect(newest?.figures).toMatchObject({ connections: 1, liveClients: 0, pauses: 0 });
  });
});
