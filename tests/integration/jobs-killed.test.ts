import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { Logger, addJobAdhoc } from 'graphile-worker';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import { ensureDays, writeFrames } from '../../src/server/queries/ingest-frames';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { until } from '../support/ingest';
import { ingestClient } from '../support/pipeline';
import { stand } from '../support/standing';

/**
 * A worker process is killed in the middle of jobs: stopped by a lock at a table that each writes, it has done half of
 * their work by then. Another worker does them again, and their effects are there once.
 */
const SITE = 'Weirside Clinic';
const OTHER = 'Slate Lane Library';
let db: TestDatabase;
let site: SeededSite;
let other: SeededSite;
let current: ChildProcess;
let ingest: pg.Client;
const children: ChildProcess[] = [];
const quiet = new Logger(() => () => undefined);

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, [SITE, OTHER]);
  site = fleet.site(SITE);
  other = fleet.site(OTHER);
  await db.owner.query(
    `update site set stage = 'operating', time_zone = 'UTC', longitude = 0, report_interval_s = 60`,
  );
  ingest = await ingestClient(db);
  current = await worker();
});
afterAll(async () => {
  children.forEach((c) => c.kill('SIGKILL'));
  await ingest.end();
  await db.drop();
});

async function worker(): Promise<ChildProcess> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'tests/support/job-process.ts'], {
    env: { ...process.env, ...db.env, LOG_LEVEL: 'silent' },
    stdio: ['pipe', 'pipe', 'inherit'],
  });
  children.push(child);
  await once(child.stdout, 'data');
  return child;
}
const kill = async (child: ChildProcess): Promise<void> => {
  const gone = once(child, 'exit');
  child.kill('SIGKILL');
  await gone;
};
const count = async (sql: string, values: unknown[] = []): Promise<number> =>
  (await db.owner.query<{ n: number }>(`select count(*)::int as n from ${sql}`, values)).rows[0]?.n ?? 0;
const add = (task: string, payload: unknown, key: string): Promise<unknown> =>
  addJobAdhoc({ connectionString: db.url, logger: quiet }, task, payload, { jobKey: key, queueName: key });
const runs = (task: string, ended: boolean): Promise<number> =>
  count(`job_run where task = $1 and (ended_at is not null) = $2 and failed is null`, [task, ended]);

interface Job {
  task: string;
  payload: unknown;
  key: string;
  /** Where it is stopped: a table that it writes when half of its work is done. */
  at: string;
}

/** Kills the worker while it stands in the middle of these jobs, then lets another one do them. */
async function killedIn(jobs: readonly Job[], half: () => Promise<void>): Promise<void> {
  const lock = new pg.Client(db.url);
  await lock.connect();
  await lock.query('begin');
  for (const { at } of jobs) await lock.query(`lock table ${at} in access exclusive mode`);
  for (const job of jobs) await add(job.task, job.payload, job.key);
  const waiting = (): Promise<number> =>
    count(`pg_stat_activity where datname = current_database() and wait_event_type = 'Lock'`);
  await until(() => waiting().then((n) => n >= jobs.length), 'the jobs stand in their middle', 20_000);
  for (const { task } of jobs) expect([task, await runs(task, false)]).toEqual([task, 1]);
  await kill(current);
  await lock.query('rollback');
  await lock.end();
  await until(() => waiting().then((n) => n === 0), 'the dead worker is gone from the database');
  await half();
  current = await worker();
  for (const { task } of jobs)
    await until(() => runs(task, true).then((n) => n > 0), `${task} is done by another worker`, 30_000);
}

describe('a worker that is killed in the middle of its jobs', () => {
  it('sums up, and gives up old readings, as if nothing had happened', async () => {
    const from = new Date(Math.floor((Date.now() - 4 * 3_600_000) / 900_000) * 900_000);
    await ensureDays(ingest, from, new Date());
    const [plan] = site.plan.strings;
    const string = site.strings.get(plan!.name)!;
    const of = (x: number): number[] => plan!.slots.map(() => x);
    const frames = Array.from({ length: 60 }, (_, k) => ({
      stringId: string.id,
      siteId: site.id,
      at: from.getTime() / 1000 + 60 * k,
      voltage: of(3500),
      voltageIn: null,
      current: of(5000),
      power: null,
      temperature: of(300),
      signal: of(-70),
      via: of(1),
      state: of(1),
    }));
    await writeFrames(ingest, frames, new Date(0));
    await db.owner.query('delete from rollup_watermark');
    await db.owner.query('insert into rollup_watermark (quarter) values ($1)', [from]);
    const old = new Date(Date.now() - 120 * 86_400_000);
    await db.owner.query('select ensure_days($1::date, $1::date)', [old]);
    const partition = `string_frame_${old.toISOString().slice(0, 10).replaceAll('-', '')}`;
    const kept = (): Promise<number> =>
      count(`pg_class where relname like '%' || right($1, 8) and relname !~ 'quarter' and relkind = 'r'`, [
        partition,
      ]);
    const all = await kept();

    await killedIn(
      [
        { task: 'roll_up', payload: {}, key: 'roll_up', at: 'string_day' },
        { task: 'keep_days', payload: {}, key: 'keep_days', at: partition },
      ],
      async () => {
        // quarters may be there; until their days are, they count as not done
        const { rows } = await db.owner.query<{ quarter: Date }>('select quarter from rollup_watermark');
        expect(rows[0]?.quarter).toEqual(from);
        // all of a day or none of it: what the dead worker had asked for may yet be done by the database
        expect([0, all]).toContain(await kept());
      },
    );
    const { rows } = await db.owner.query<{ wh: number }>(
      'select sum(energy)::int as wh from string_day where string_id = $1',
      [string.id],
    );
    expect(rows[0]?.wh).toBe(plan!.slots.length * 35 * 5); // one hour
    expect(await kept()).toBe(0);
  });

  it('finds causes and judges a day: nothing half told, then each told once', async () => {
    await stand(db.owner, site, new Date(), (_, position) =>
      position === 2
        ? { state: 'shutdown', verdict: 'stuck', since: new Date(Date.now() - 3_600_000) }
        : null,
    );
    const day = new Date(Date.now() - 86_400_000).toISOString().slice(0, 10);
    const sweptBefore = await count('cause');
    expect(sweptBefore).toBe(0);
    await killedIn(
      [
        { task: 'causes', payload: { siteId: site.id }, key: `causes:${site.id}`, at: 'event' },
        {
          task: 'output_night',
          payload: { siteId: other.id, day },
          key: `night:${other.id}:${day}`,
          at: 'output_day',
        },
      ],
      async () => {
        expect(await count('cause')).toBe(0);
        expect(await count('output_day')).toBe(0);
        expect(await count('output_night where site_id = $1', [other.id])).toBe(0);
      },
    );
    const causes = await count('cause');
    expect(causes).toBeGreaterThan(0);
    expect(await count(`event where kind = 'cause_opened'`)).toBe(causes);
    const strings = await count('string where site_id = $1', [other.id]);
    expect(await count('output_night where site_id = $1 and day = $2', [other.id, day])).toBe(1);
    // nothing was reported that day: it can't be told, and that is said
    expect(
      await count(
        `output_day where site_id = $1 and outcome = 'cant_tell' and finding ->> 'words' like '%0 days with enough sun%'`,
        [other.id],
      ),
    ).toBe(strings);
  });
});
