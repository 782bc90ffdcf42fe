import { format } from 'node:util';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { startWorker, stopWorker, worksJobs } from '../../src/server/jobs/worker';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';

const SITE = 'Weirside Clinic';
let db: TestDatabase;
let fleet: TestFleet;
/** Connections of the test's own, which stay when all others are cut. */
let hand: pg.Client;
let holder: pg.Client;
/** One to the server, for what can't be said within the database itself. */
let server: pg.Client;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [SITE]);
  [hand, holder] = [new pg.Client(db.url), new pg.Client(db.url)];
  const beside = new URL(db.url);
  beside.pathname = '/postgres';
  server = new pg.Client(beside.href);
  for (const client of [hand, holder, server]) await client.connect();
});
afterAll(async () => {
  await stopWorker();
  for (const client of [hand, holder, server]) await client.end();
  await db.drop();
});

const causesJobs = async (which: string): Promise<number> => {
  const { rows } = await hand.query<{ n: number }>(
    `select count(*)::int as n from graphile_worker.jobs where task_identifier = 'causes' and ${which}`,
  );
  return rows[0]?.n ?? 0;
};
const takesConnections = (yes: boolean): Promise<unknown> =>
  server.query(`alter database "${db.name}" allow_connections ${yes}`);

describe('a worker whose database goes away in the middle of a job', () => {
  it('lives on, begins again when it is back, and does the job', async () => {
    // the job library says so by itself where it asks for a job just then
    const said: string[] = [];
    vi.spyOn(console, 'error').mockImplementation((...args: unknown[]) => void said.push(format(...args)));
    await startWorker();
    await holder.query('begin');
    await holder.query('lock table site in access exclusive mode');
    await hand.query(`select graphile_worker.add_job('causes', json_build_object('siteId', $1::int))`, [
      fleet.site(SITE).id,
    ]);
    await expect.poll(() => causesJobs('locked_at is not null')).toBe(1);

    const { rows } = await holder.query<{ pid: number }>('select pg_backend_pid() as pid');
    await takesConnections(false);
    await hand.query(
      `select pg_terminate_backend(pid) from pg_stat_activity
       where datname = $1 and usename is not null and pid not in (pg_backend_pid(), $2)`,
      [db.name, rows[0]?.pid],
    );
    // what became of the job can't be written down now
    await expect.poll(() => worksJobs()).toBe(false);
    await holder.query('rollback');
    await takesConnections(true);

    await expect.poll(() => worksJobs()).toBe(true);
    await expect.poll(() => causesJobs('true')).toBe(0);
    const away =
      /not currently accepting connections|terminating connection|[Cc]onnection (terminated|ended)/;
    expect(said.filter((words) => !away.test(words))).toEqual([]);
  });
});
