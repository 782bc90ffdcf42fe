import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { testDatabase, type TestDatabase } from '../support/database';
import { addReadings, makeScene, type Scene } from './scene';

const AT = new Date('2026-11-30T12:00:00Z');
let db: TestDatabase;
let here: Scene;
let there: Scene;
let app: pg.Client;
let ingest: pg.Client;

beforeAll(async () => {
  db = await testDatabase();
  here = await makeScene(db.owner, 'here');
  there = await makeScene(db.owner, 'there');
  await addReadings(db.owner, here, AT);
  await addReadings(db.owner, there, AT);
  app = new pg.Client(db.appUrl);
  ingest = new pg.Client(db.ingestUrl);
  await Promise.all([app.connect(), ingest.connect()]);
});
afterAll(async () => {
  await Promise.all([app.end(), ingest.end()]);
  await db.drop();
});

type Query = (sql: string, values?: unknown[]) => Promise<Record<string, unknown>[]>;

/** Runs as the web does for an actor; undone at the end. */
async function asActor<T>(
  organisation: number | '',
  sites: string,
  work: (query: Query) => Promise<T>,
): Promise<T> {
  await app.query('begin');
  try {
    await app.query(
      `select set_config('wakeline.organisation', $1, true), set_config('wakeline.sites', $2, true)`,
      [String(organisation), sites],
    );
    return await work(async (sql, values) => (await app.query<Record<string, unknown>>(sql, values)).rows);
  } finally {
    await app.query('rollback');
  }
}

const DENIED = { code: '42501' };
const TABLES = [
  ...[
    'organisation',
    'person',
    'site',
    'plane',
    'inverter',
    'input',
    'initiator',
    'zone',
    'logger',
    'transmitter',
  ],
  ...[
    'module_type',
    'unit_type',
    'string',
    'slot',
    'unit',
    'placement',
    'string_frame',
    'input_frame',
    'inverter_frame',
  ],
  ...['string_judgement', 'unit_event', 'event', 'audit_entry'],
];
const count = async (query: Query, table: string) =>
  (await query(`select count(*)::int as n from ${table}`))[0]?.n;

describe('row-level security', () => {
  it('is on for every table that carries an organisation, a site or a string', async () => {
    const { rows } = await db.owner.query<{ name: string }>(`
      select distinct c.relname as name from pg_class c join pg_attribute a on a.attrelid = c.oid
       where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p') and not c.relispartition
         and a.attname in ('organisation_id', 'site_id', 'string_id', 'logger_id', 'person_id', 'input_id', 'inverter_id', 'sensor_id')
         and not c.relrowsecurity`);
    expect(rows).toEqual([]);
  });

  it.each(TABLES)('%s shows nothing to a connection that names no actor', async (table) => {
    expect(await asActor('', '', (query) => count(query, table))).toBe(0);
    expect((await app.query<{ n: number }>(`select count(*)::int as n from ${table}`)).rows[0]?.n).toBe(0);
  });

  it.each(TABLES)('%s shows the own organisation and never the other', async (table) => {
    const all =
      (await db.owner.query<{ n: number }>(`select count(*)::int as n from ${table}`)).rows[0]?.n ?? 0;
    const [mine, theirs] = [
      await asActor(here.organisation, '*', (query) => count(query, table)),
      await asActor(there.organisation, '*', (query) => count(query, table)),
    ];
    expect(mine).toBeGreaterThan(0);
    expect(Number(mine) + Number(theirs)).toBe(all);
  });

  it('shows only the sites that a person was given, whoever owns the others', async () => {
    const sites = (query: Query) => query('select id from site order by id');
    expect(await asActor(here.organisation, String(here.site), sites)).toEqual([{ id: here.site }]);
    expect(await asActor(here.organisation, `${here.site},${there.site}`, sites)).toEqual([
      { id: here.site },
    ]);
    expect(await asActor(here.organisation, '', sites)).toEqual([]);
    expect(await asActor(here.organisation, String(here.otherSite), (query) => count(query, 'string'))).toBe(
      0,
    );
    expect(
      await asActor(here.organisation, String(here.otherSite), (query) => count(query, 'string_frame')),
    ).toBe(0);
  });

  it('refuses rows written into another organisation', async () => {
    await expect(
      asActor(here.organisation, '*', (query) =>
        query(`insert into audit_entry (organisation_id, action, subject) values ($1, 'x', 'y')`, [
          there.organisation,
        ]),
      ),
    ).rejects.toMatchObject(DENIED);
    await expect(
      asActor(here.organisation, '*', (query) =>
        query(`insert into site_access (person_id, site_id) values ($1, $2)`, [there.person, there.site]),
      ),
    ).rejects.toMatchObject(DENIED);
  });

  it('hides people and sessions until somebody signs in, and then from other organisations', async () => {
    expect(await asActor(here.organisation, '*', (query) => query('select email from person'))).toEqual([
      { email: 'manager@here.example' },
    ]);
  });
});

describe('the web account', () => {
  const attempt = (sql: string, values?: unknown[]) =>
    asActor(here.organisation, '*', (query) => query(sql, values));

  it.each([
    ...['string_frame', 'packed_frame', 'input_frame', 'inverter_frame', 'weather_frame', 'string_quarter'],
    'string_state',
    ...[
      'input_state',
      'inverter_state',
      'string_judgement',
      'unit_event',
      'trace',
      'command',
      'heard',
      'string_day',
    ],
  ])('cannot write %s', async (table) => {
    await expect(attempt(`delete from ${table}`)).rejects.toMatchObject(DENIED);
    await expect(attempt(`insert into ${table} default values`)).rejects.toMatchObject(DENIED);
  });

  it.each(['event', 'audit_entry'])('cannot change or remove what stands in %s', async (table) => {
    await expect(attempt(`delete from ${table}`)).rejects.toMatchObject(DENIED);
    await expect(attempt(`update ${table} set at = now()`)).rejects.toMatchObject(DENIED);
    await expect(attempt(`truncate ${table}`)).rejects.toMatchObject(DENIED);
  });

  it('cannot read tokens of loggers', async () => {
    await expect(attempt('select * from ingest_token')).rejects.toMatchObject(DENIED);
  });

  it('cannot reach frames through a partition', async () => {
    await expect(attempt('select * from string_frame_20261130')).rejects.toMatchObject(DENIED);
  });

  it.each(['wakeline_ingest', 'postgres'])('cannot become %s', async (role) => {
    await expect(attempt(`set role ${role}`)).rejects.toMatchObject(DENIED);
    await expect(attempt(`set session authorization ${role}`)).rejects.toMatchObject(DENIED);
  });

  it('cannot become the owner', async () => {
    const owner = decodeURIComponent(new URL(db.url).username);
    await expect(attempt(`set role "${owner}"`)).rejects.toMatchObject(DENIED);
  });

  it('cannot switch row-level security off', async () => {
    await expect(attempt('alter table site disable row level security')).rejects.toMatchObject(DENIED);
    await expect(attempt('set local row_security = off; select * from site')).rejects.toMatchObject(DENIED);
  });

  it('cannot make tables, functions or roles', async () => {
    await expect(attempt('create table mine (x int)')).rejects.toMatchObject(DENIED);
    await expect(
      attempt(`create function mine() returns int language sql as 'select 1'`),
    ).rejects.toMatchObject(DENIED);
    await expect(attempt('create role mine')).rejects.toMatchObject(DENIED);
    await expect(attempt(`select ensure_days(current_date, current_date)`)).rejects.toMatchObject(DENIED);
    await expect(attempt('select drop_days_before(current_date)')).rejects.toMatchObject(DENIED);
  });

  it('cannot log in with more rights than it has: no superuser, no bypass', async () => {
    const { rows } = await app.query(
      'select rolsuper, rolbypassrls, rolcreaterole from pg_roles where rolname = current_user',
    );
    expect(rows).toEqual([{ rolsuper: false, rolbypassrls: false, rolcreaterole: false }]);
  });
});

describe('the ingest account', () => {
  const attempt = async (sql: string) => {
    await ingest.query('begin');
    try {
      return (await ingest.query<Record<string, unknown>>(sql)).rows;
    } finally {
      await ingest.query('rollback');
    }
  };

  it('serves every organisation', async () => {
    expect(await attempt('select count(*)::int as n from string_frame')).toEqual([{ n: 2 }]);
  });

  it('makes partitions through the one function for it', async () => {
    await attempt(`select ensure_days('2026-12-01', '2026-12-02')`);
  });

  it('cannot change the plant, people or what stands in the log', async () => {
    await expect(attempt(`update site set name = 'x'`)).rejects.toMatchObject(DENIED);
    await expect(attempt('delete from string')).rejects.toMatchObject(DENIED);
    await expect(attempt(`update person set role = 'manager'`)).rejects.toMatchObject(DENIED);
    await expect(attempt('delete from event')).rejects.toMatchObject(DENIED);
    await expect(attempt(`update event set kind = 'x'`)).rejects.toMatchObject(DENIED);
    await expect(attempt('delete from unit_event')).rejects.toMatchObject(DENIED);
    await expect(attempt('delete from audit_entry')).rejects.toMatchObject(DENIED);
  });

  it('cannot become the web, the owner or a superuser', async () => {
    await expect(attempt('set role wakeline_app')).rejects.toMatchObject(DENIED);
    await expect(attempt('set role postgres')).rejects.toMatchObject(DENIED);
  });
});
