import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { testDatabase, type TestDatabase } from '../support/database';
import {
  copyOrganisation,
  holdingsOf,
  OF_THE_INSTALLATION,
  ownedTables,
  takeNumbersOf,
  type OwnedTable,
} from '../support/groups';
import { addReadings, makeScene, type Scene } from './scene';

/**
 * The schema stays ready for groups of organisations in databases of their own (DEVELOPERS.md, "Past one machine"): each
 * row belongs to one organisation or to the installation, nothing leads from one organisation to another, and an
 * organisation moves whole.
 */
const AT = new Date('2026-11-30T12:00:00Z');
/** What one database keeps for all its organisations, and why it need not move. */
const SHARED = new Set([
  ...OF_THE_INSTALLATION,
  'rate_limit', // counts of tries: they end by themselves
  'rollup_watermark', // how far this database has rolled up
  'nights_due', // when this database's jobs look again
  'job_run', // what this database's jobs did
  'process_sample', // how this database's processes did
  'event_reader', // how far this database's jobs have read its events
  'wrong_token', // tries with tokens that nobody knows
]);

let first: TestDatabase;
let second: TestDatabase;
let owned: OwnedTable[];
let rest: string[];
let moving: Scene;
let staying: Scene;
const clients: pg.Client[] = [];

async function clientOf(db: TestDatabase): Promise<pg.Client> {
  const client = new pg.Client(db.url);
  await client.connect();
  clients.push(client);
  return client;
}

beforeAll(async () => {
  first = await testDatabase();
  second = await testDatabase();
  await takeNumbersOf(first.owner, 0);
  await takeNumbersOf(second.owner, 1);
  moving = await makeScene(second.owner, 'moving');
  staying = await makeScene(first.owner, 'staying');
  await addReadings(second.owner, moving, AT);
  await addReadings(first.owner, staying, AT);
  ({ owned, rest } = await ownedTables(first.owner));
});
afterAll(async () => {
  await Promise.all(clients.map((c) => c.end()));
  await Promise.all([first.drop(), second.drop()]);
});

describe('groups of organisations', () => {
  it('every table belongs to an organisation by a column that is always filled in, or to the installation', () => {
    expect(rest.filter((t) => !SHARED.has(t))).toEqual([]);
    expect(owned.length).toBeGreaterThan(60);
  });

  it('foreign keys stay within an organisation', async () => {
    const { rows } = await first.owner.query<{ from: string; to: string }>(
      `select t.relname as "from", f.relname as "to" from pg_constraint k join pg_class t on t.oid = k.conrelid
         join pg_class f on f.oid = k.confrelid where k.contype = 'f' and k.connamespace = 'public'::regnamespace`,
    );
    const names = new Set(owned.map((t) => t.name));
    // what moves leads to nothing that stays; of what stays, only the log of the jobs names what may go
    expect(rows.filter((r) => names.has(r.from) && !names.has(r.to))).toEqual([]);
    expect(rows.filter((r) => !names.has(r.from) && names.has(r.to)).map((r) => r.from)).toEqual(['job_run']);
  });

  it('numbers of two groups never meet', () => {
    for (const key of ['organisation', 'site', 'person'] as const) expect(moving[key]).not.toBe(staying[key]);
    expect(moving.site).toBeGreaterThan(2 ** 25);
    expect(staying.site).toBeLessThan(2 ** 25);
  });

  it('an organisation moves into a database where another lives, whole, and is seen there by its own people only', async () => {
    const before = await holdingsOf(second.owner, owned, moving.organisation);
    const neighbour = await holdingsOf(first.owner, owned, staying.organisation);
    const days = await second.owner.query<{ from: string; to: string }>(
      `select min(right(c.relname, 8)) as "from", max(right(c.relname, 8)) as "to" from pg_inherits i
       join pg_class c on c.oid = i.inhrelid where i.inhparent = 'string_frame'::regclass`,
    );
    await first.owner.query('select ensure_days($1::date, $2::date)', [days.rows[0]?.from, days.rows[0]?.to]);
    const rows = await copyOrganisation(
      await clientOf(second),
      await clientOf(first),
      owned,
      moving.organisation,
    );
    expect(rows).toBeGreaterThan(20);
    expect(await holdingsOf(first.owner, owned, moving.organisation)).toEqual(before);
    expect(await holdingsOf(first.owner, owned, staying.organisation)).toEqual(neighbour);
    const app = new pg.Client(first.appUrl);
    await app.connect();
    clients.push(app);
    for (const scene of [moving, staying]) {
      await app.query(
        `select set_config('wakeline.organisation', $1, false), set_config('wakeline.sites', '*', false)`,
        [String(scene.organisation)],
      );
      const seen = await app.query<{ id: number }>('select id from site order by id');
      expect(seen.rows.map((r) => r.id)).toContain(scene.site);
      expect(seen.rows.map((r) => r.id)).not.toContain(scene === moving ? staying.site : moving.site);
      expect((await app.query('select 1 from string_frame')).rowCount).toBeGreaterThan(0);
    }
    // what it makes there has the numbers of the database that it came to
    const made = await first.owner.query<{ id: number }>(
      `insert into site (organisation_id, name, latitude, longitude, time_zone)
       values ($1, 'New roof', 50, 8, 'UTC') returning id`,
      [moving.organisation],
    );
    expect(made.rows[0]?.id).toBeLessThan(2 ** 25);
  });
});
