import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { writeOneOfEach, writeSealed } from '../attacks/rows';
import { testDatabase, type TestDatabase } from '../support/database';
import { addReadings, makeScene, type Scene } from './scene';

/** Every table at once, and what somebody would try who can run SQL of their own in the web's account. */
let db: TestDatabase;
let here: Scene;
let there: Scene;
let app: pg.Client;
let tables: string[];

beforeAll(async () => {
  db = await testDatabase();
  here = await makeScene(db.owner, 'here');
  there = await makeScene(db.owner, 'there');
  for (const { site } of [here, there]) {
    await writeOneOfEach(db.owner, site);
    await writeSealed(db.owner, site);
  }
  for (const scene of [here, there]) await addReadings(db.owner, scene, new Date('2026-11-30T12:00:00Z'));
  app = new pg.Client(db.appUrl);
  await app.connect();
  const { rows } = await db.owner.query<{ name: string }>(
    `select relname as name from pg_class where relnamespace = 'public'::regnamespace and relrowsecurity
       and not relispartition and has_table_privilege('wakeline_app', oid, 'select') order by 1`,
  );
  tables = rows.map((r) => r.name);
});
afterAll(async () => {
  await app.end();
  await db.drop();
});

type Rows = Record<string, unknown>[];
async function as<T>(
  organisation: string,
  sites: string,
  work: (query: (sql: string, values?: unknown[]) => Promise<Rows>) => Promise<T>,
): Promise<T> {
  await app.query('begin');
  try {
    await app.query(
      `select set_config('wakeline.organisation', $1, true), set_config('wakeline.sites', $2, true)`,
      [organisation, sites],
    );
    return await work(async (sql, values) => (await app.query<Record<string, unknown>>(sql, values)).rows);
  } finally {
    await app.query('rollback');
  }
}
const counts = (organisation: string, sites: string) =>
  as(organisation, sites, async (query) => {
    // one by one: a union of all is planned for minutes
    const found = new Map<string, number>();
    for (const table of tables)
      found.set(table, Number((await query(`select count(*)::int4 as n from ${table}`))[0]?.n));
    return found;
  });
const nothing = () => new Map(tables.map((table) => [table, 0]));

describe('every table', () => {
  it('has a policy that rests on the actor, and none that lets everything through', async () => {
    const { rows } = await db.owner.query<{ table: string; using: string | null; check: string | null }>(
      `select p.polrelid::regclass::text as table, pg_get_expr(p.polqual, p.polrelid) as using,
              pg_get_expr(p.polwithcheck, p.polrelid) as check
       from pg_policy p join pg_roles r on r.oid = any (p.polroles) where r.rolname = 'wakeline_app'`,
    );
    const covered = new Set(rows.map((r) => r.table));
    expect(tables.filter((table) => !covered.has(table))).toEqual([]);
    // an actor's organisation, sites or sign-in; or a row of a table that has such a policy itself
    const rests = /actor_organisation\(\)|actor_sites\(\)|signing_in\(\)|EXISTS \( SELECT\s+FROM (\w+)/;
    for (const { table, using, check } of rows)
      for (const expression of [using, check].filter((e) => e !== null)) {
        const [, through] = rests.exec(expression) ?? [expression];
        expect(expression, table).toMatch(rests);
        if (through) expect(covered, `${table} rests on ${through}`).toContain(through);
      }
    const { rows: everybody } = await db.owner.query(
      `select polrelid::regclass::text as table from pg_policy where polroles = '{0}'`,
    );
    expect(everybody).toEqual([]);
  });

  it('without row-level security holds nothing of an organisation', async () => {
    const { rows } = await db.owner.query<{ name: string }>(
      `select relname as name from pg_class where relnamespace = 'public'::regnamespace and relkind in ('r', 'p', 'v', 'm')
         and not relispartition and not relrowsecurity order by 1`,
    );
    expect(rows.map((r) => r.name)).toEqual([
      'event_reader',
      'installation',
      'knex_migrations',
      'knex_migrations_lock',
      'process_sample',
      'rate_limit',
      'rollup_watermark',
    ]);
  });

  it('shows nothing to nobody, and to an actor who names no organisation that exists', async () => {
    for (const [organisation, sites] of [
      ['', ''],
      ['', '*'],
      ['-1', '*'],
      ['', String(here.site)],
    ] as const) {
      // what belongs to the installation as a whole, and to no organisation, carries no site
      const found = await counts(organisation, sites);
      found.set('job_run', 0);
      expect(found, `${organisation} ${sites}`).toEqual(nothing());
    }
  });

  it('shows each organisation its own and never the other’s', async () => {
    const [mine, theirs] = [
      await counts(String(here.organisation), '*'),
      await counts(String(there.organisation), '*'),
    ];
    let filled = 0;
    for (const table of tables) {
      const { rows } = await db.owner.query<{ n: number }>(`select count(*)::int4 as n from ${table}`);
      const all = rows[0]?.n ?? 0;
      if (all === 0) continue;
      filled++;
      expect([mine.get(table), theirs.get(table)], table).toEqual([all / 2, all / 2]);
    }
    expect(filled).toBeGreaterThan(40);
  });
});

describe('SQL of one’s own, in the web’s account', () => {
  const own = <T>(work: (query: (sql: string, values?: unknown[]) => Promise<Rows>) => Promise<T>) =>
    as(String(here.organisation), '*', work);

  it.each([
    ['1 or true', '*'],
    ['{1,2}', '*'],
    ['1', '1) or (true'],
    ['1', '{1,2,3}'],
    ['1', '*,*'],
  ])('a setting that is no number is an error, not everything: %j %j', async (organisation, sites) => {
    await expect(as(organisation, sites, (query) => query('select id from site'))).rejects.toMatchObject({
      code: '22P02',
    });
  });

  it('the actor of one transaction is gone in the next on the same connection', async () => {
    await own((query) => query('select 1'));
    const { rows } = await app.query(
      `select current_setting('wakeline.organisation', true) as organisation, (select count(*)::int4 from site) as sites`,
    );
    expect(rows).toEqual([{ organisation: '', sites: 0 }]);
  });

  it('no error tells of a row that the policy hides: conditions run behind it', async () => {
    const asked = own((query) =>
      query(`select id from person where organisation_id = $1 and 1 / (id - $2) > 5`, [
        there.organisation,
        there.person,
      ]),
    );
    await expect(asked).resolves.toEqual([]);
    await expect(
      own((query) => query(`select id from person where name::int4 = 1 and id = $1`, [there.person])),
    ).resolves.toEqual([]);
  });

  it('statistics of tables tell nothing of their rows', async () => {
    await db.owner.query('analyze person, site');
    expect(
      await own((query) => query(`select * from pg_stats where tablename in ('person', 'site')`)),
    ).toEqual([]);
  });

  it('a temporary table in the place of ours deceives no function that runs as the owner', async () => {
    const { rows } = await db.owner.query<{ name: string; path: string[]; everybody: boolean }>(
      `select p.oid::regprocedure::text as name, p.proconfig as path, has_function_privilege('public', p.oid, 'execute') as everybody
       from pg_proc p where p.prosecdef and p.pronamespace = 'public'::regnamespace`,
    );
    expect(rows.length).toBeGreaterThan(2);
    for (const { name, path, everybody } of rows) {
      expect(path, name).toContain('search_path=public, pg_temp');
      expect(everybody, name).toBe(false);
    }
    const number = await own(async (query) => {
      await query(`create temporary table case_file (organisation_id int4, number int4) on commit drop`);
      await query(`insert into pg_temp.case_file values ($1, 4000000)`, [here.organisation]);
      return (await query('select next_case_number($1) as n', [here.organisation]))[0]?.n;
    });
    expect(Number(number)).toBeLessThan(4_000_000);
  });

  it('strings are found by their names within one’s own sites only', async () => {
    const found = await own((query) => query(`select strings_named('', '\u{10ffff}', 100000) as id`));
    const { rows } = await db.owner.query<{ id: number }>(
      `select s.id from string s join site on site.id = s.site_id where site.organisation_id = $1 order by s.id`,
      [here.organisation],
    );
    expect(rows.length).toBeGreaterThan(0);
    expect(found.map((f) => Number(f.id)).sort((a, b) => a - b)).toEqual(rows.map((r) => r.id));
    const { rows: all } = await db.owner.query<{ n: number }>('select count(*)::int as n from string');
    expect(all[0]?.n).toBeGreaterThan(rows.length);
  });

  it('a case of another organisation can’t be numbered, nor a test of another site superseded', async () => {
    await expect(own((query) => query('select next_case_number($1)', [there.organisation]))).rejects.toThrow(
      'numbered by their own organisation',
    );
    const { rows } = await db.owner.query<{ id: number }>('select id from shutdown_test where site_id = $1', [
      there.site,
    ]);
    await expect(
      own((query) =>
        query(
          `insert into shutdown_test (site_id, at, made_by, result, strings, supersedes)
           values ($1, now(), 'x', 'passed', 0, array[$2::int4])`,
          [here.site, rows[0]?.id],
        ),
      ),
    ).rejects.toMatchObject({ code: '23000' });
  });

  it.each([
    [`copy (select 1) to program 'true'`],
    [`copy person to '/tmp/people'`],
    [`select pg_read_file('/etc/passwd')`],
    [`select lo_import('/etc/passwd')`],
    [`select pg_ls_dir('/')`],
    [`create extension dblink`],
    [`alter role wakeline_app bypassrls`],
    [`grant wakeline_ingest to wakeline_app`],
    [`drop policy site_app on site`],
    [`update pg_class set relrowsecurity = false where relname = 'site'`],
    [`create trigger mine before insert on site for each row execute function shutdown_test_stands()`],
    [`create rule mine as on select to site do instead select 1`],
    [`comment on table site is 'x'`],
    [`select * from pg_authid`],
  ])('is denied: %s', async (sql) => {
    await expect(own((query) => query(sql))).rejects.toMatchObject({
      code: expect.stringMatching(/^(42501|42809|0A000)$/) as string,
    });
  });
});
