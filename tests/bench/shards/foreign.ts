import type pg from 'pg';
import { median, milliseconds, PASSWORD, refusal, type Three } from './three';

/** One way: frames of all organisations as hash partitions of one table in front, which lie on two other servers. */
const ORGANISATIONS = 20;
const STRINGS_EACH = 20;
const MINUTES = 1440;
const UNITS = 20;
const ROUNDS = 100;

const COLUMNS = `organisation_id int4 not null, string_id int4 not null, at timestamptz not null, mask int8 not null,
  voltage_sum int4 not null, power_sum int4 not null, voltage int2[] not null, current int2[] not null`;
const DAY = `at >= '2026-06-01 00:00Z' and at < '2026-06-02 00:00Z'`;
const rows = (from: number, minutes: number, where = 'true') =>
  `select o.id, s.id, timestamptz '2026-06-01 00:00Z' + make_interval(mins => m), (1::int8 << ${UNITS}) - 1, 64000, 5000,
     array_fill(3200::int2, array[${UNITS}]), array_fill(8000::int2, array[${UNITS}])
   from generate_series(1, ${ORGANISATIONS}) o(id) join string s on s.organisation_id = o.id,
     generate_series(${from}, ${from + minutes - 1}) m where ${where}`;

export interface Foreign {
  figure: (name: string, value: number, unit: string, digits?: number) => void;
  say: (text: string) => void;
}

async function build({ db, port }: Three): Promise<void> {
  const strings = `create table string (id int4 primary key, organisation_id int4 not null, name text not null);
    insert into string select o * 1000 + n, o, 'S' || n from generate_series(1, ${ORGANISATIONS}) o, generate_series(1, ${STRINGS_EACH}) n;`;
  for (const at of ['left', 'right'] as const)
    await db[at].query(
      `create schema trial; set search_path = trial; ${strings}
       create table frame (${COLUMNS}, primary key (string_id, at));`,
    );
  await db.front
    .query(`create schema trial; set search_path = trial; create extension postgres_fdw; ${strings}
    create table frame (${COLUMNS}) partition by hash (organisation_id);`);
  for (const [i, at] of (['left', 'right'] as const).entries())
    await db.front.query(
      `create server ${at}_server foreign data wrapper postgres_fdw
         options (host '127.0.0.1', port '${port[at]}', dbname 'wakeline', batch_size '500', fetch_size '2000', async_capable 'true');
       create user mapping for public server ${at}_server options (user 'postgres', password '${PASSWORD}');
       create foreign table frame_${at} partition of frame for values with (modulus 2, remainder ${i})
         server ${at}_server options (schema_name 'trial', table_name 'frame');`,
    );
  await db.front.query(
    `create role reader; grant usage on schema trial to reader; grant select on string, frame to reader;
     alter table string enable row level security; alter table frame enable row level security;
     create policy own on string to reader using (organisation_id = nullif(current_setting('wakeline.organisation', true), '')::int4);
     create policy own on frame to reader using (exists (select from string where string.id = frame.string_id))`,
  );
}

/** What the servers behind are asked, of a plan. */
async function asked(db: pg.Client, sql: string): Promise<{ remote: string[]; rows: number }> {
  const { rows: lines } = await db.query<{ 'QUERY PLAN': string }>(
    `explain (analyze, verbose, timing off, costs off) ${sql}`,
  );
  const text = lines.map((l) => l['QUERY PLAN']);
  const remote = text.flatMap((l) => /Remote SQL: (.*)/.exec(l)?.[1] ?? []);
  const fetched = text.flatMap((l) => {
    const n = /Foreign Scan.*rows=(\d+) loops=(\d+)/.exec(l);
    return n ? [Number(n[1]) * Number(n[2])] : [];
  });
  return { remote, rows: fetched.reduce((a, b) => a + b, 0) };
}

export async function tryForeign(three: Three, { figure, say }: Foreign): Promise<void> {
  const { db } = three;
  await build(three);
  say('foreign: writing through the front, and straight to a server');
  // which organisations the hash gives to the left server
  const through = await milliseconds(() => db.front.query(`insert into frame ${rows(0, 60)}`));
  const merge = `on conflict (string_id, at) do update set mask = frame.mask | excluded.mask`;
  const { rows: leftOnes } = await db.left.query<{ id: number }>(
    'select distinct organisation_id as id from frame',
  );
  const left = leftOnes.map((r) => r.id);
  const mine = (n: number, minutes: number) => rows(n, minutes, `o.id = any ('{${left.join(',')}}')`);
  const direct = await milliseconds(() => db.left.query(`insert into frame ${mine(60, 60)} ${merge}`));
  const rowsThrough = ORGANISATIONS * STRINGS_EACH * 60;
  const rowsDirect = left.length * STRINGS_EACH * 60;
  figure('foreign.insert_through_front', rowsThrough / (through / 1000), 'rows/s', 0);
  figure('foreign.merge_straight', rowsDirect / (direct / 1000), 'rows/s', 0);
  figure('foreign.straight_to_through', rowsDirect / direct / (rowsThrough / through), 'times', 2);
  say(
    `foreign: merging through the front: ${await refusal(db.front, `insert into frame ${rows(0, 1)} ${merge}`)}`,
  );
  say(
    `foreign: a key over all: ${await refusal(db.front, 'create unique index on frame (organisation_id, string_id, at)')}`,
  );
  figure(
    'foreign.merge_refused',
    (await refusal(db.front, `insert into frame ${rows(0, 1)} ${merge}`)) === '' ? 0 : 1,
    'yes',
    0,
  );
  for (const at of ['left', 'right'] as const) {
    const own = await db[at].query<{ id: number }>('select distinct organisation_id as id from frame');
    await db[at].query('truncate frame');
    await db[at].query(
      `insert into frame ${rows(0, MINUTES, `o.id = any ('{${own.rows.map((r) => r.id).join(',')}}')`)}`,
    );
    await db[at].query('analyze frame');
  }
  await db.front.query('analyze');

  say('foreign: reading a string’s day');
  const string = (left[0] ?? 1) * 1000 + 1;
  const day = `select at, voltage_sum, power_sum from frame where string_id = ${string} and ${DAY} order by at`;
  const dayPruned = day.replace('where', `where organisation_id = ${left[0] ?? 1} and`);
  const timed = async (of: pg.Client, sql: string) => {
    const took: number[] = [];
    for (let i = 0; i < ROUNDS; i++) took.push(await milliseconds(() => of.query(sql)));
    return median(took);
  };
  const straight = await timed(db.left, day);
  const front = await timed(db.front, day);
  const pruned = await timed(db.front, dayPruned);
  figure('foreign.day_straight', straight, 'ms');
  figure('foreign.day_through_front', front, 'ms');
  figure('foreign.day_through_front_pruned', pruned, 'ms');
  figure('foreign.servers_asked', (await asked(db.front, day)).remote.length, 'servers', 0);
  figure('foreign.servers_asked_pruned', (await asked(db.front, dayPruned)).remote.length, 'servers', 0);
  await db.front.query(`set role reader; set wakeline.organisation = '${left[0] ?? 1}'`);
  const walled = await asked(db.front, day);
  say(`foreign: with row-level security the servers are asked ${walled.remote.join(' | ')}`);
  figure('foreign.day_with_policy', await timed(db.front, day), 'ms');
  // the policy is checked in front: a condition without a string brings everybody's rows there first
  const sum = `select sum(power_sum) from frame where ${DAY}`;
  const policySum = await asked(db.front, sum);
  const policyMs = await milliseconds(() => db.front.query(sum));
  const { rows: seen } = await db.front.query<{ n: string }>(`select count(*) as n from frame where ${DAY}`);
  await db.front.query('reset role; reset wakeline.organisation');
  if (Number(seen[0]?.n) !== STRINGS_EACH * MINUTES)
    throw new Error(`the policy shows ${seen[0]?.n ?? 0} rows instead of ${STRINGS_EACH * MINUTES}`);
  figure('foreign.sum_with_policy', policyMs, 'ms', 0);
  figure('foreign.sum_with_policy_rows_fetched', policySum.rows, 'rows', 0);
  figure('foreign.sum_with_policy_rows_wanted', STRINGS_EACH * MINUTES, 'rows', 0);
  const join = `select s.name, sum(f.power_sum) from frame f join string s on s.id = f.string_id
    where s.organisation_id = ${left[0] ?? 1} and f.${DAY.replace(' and ', ' and f.')} group by s.name`;
  const joined = await asked(db.front, join);
  figure('foreign.join_with_string_rows_fetched', joined.rows, 'rows', 0);
  figure('foreign.join_with_string', await milliseconds(() => db.front.query(join)), 'ms', 0);
  figure('foreign.join_with_string_straight', await milliseconds(() => db.left.query(join)), 'ms', 0);
}
