import knexFactory from 'knex';
import pg from 'pg';
import { closePools, connectionOf } from '../../src/server/db/pools';
import { asActor, type Tx } from '../../src/server/db/transaction';
import { stringMinutes, type Window } from '../../src/server/queries/string-history';
import { plantFleet } from './ingest/plant';

/**
 * What row-level security costs: a string's day, minute by minute, read by the same query with the policies (the web's
 * account, as an actor) and without them (the owner of the tables), in turn, in one run. And the same as a customer,
 * whose sites are a list.
 */
const SITES = 40;
const STRINGS = 10;
const UNITS = 20;
const ROUNDS = 400;
const WARM_UP = 40;
const DAY_S = 86_400;

const say = (text: string) => process.stderr.write(`${text}\n`);
const figure = (name: string, value: number, unit: string, digits = 3) =>
  process.stdout.write(`tenancy.${name} ${value.toFixed(digits)} ${unit}\n`);
const median = (values: number[]): number =>
  values.sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN;

if (process.env.DATABASE_ONE_ROLE === '1')
  throw new Error('With DATABASE_ONE_ROLE there are no policies to measure.');
const db = new pg.Client(process.env.DATABASE_URL);
await db.connect();
const owner = knexFactory({
  client: 'pg',
  connection: { ...connectionOf('web'), connectionString: process.env.DATABASE_URL } as never,
  pool: { min: 0, max: 1 },
});
try {
  const plant = await plantFleet(db, SITES, STRINGS, UNITS);
  const first = Math.floor(Date.now() / 1000 / DAY_S) * DAY_S - DAY_S;
  const window: Window = { from: new Date(first * 1000), to: new Date((first + DAY_S) * 1000) };
  say(`writing a day of ${SITES * STRINGS} strings`);
  await db.query('select ensure_days($1::date, $1::date)', [window.from]);
  await db.query(
    `insert into string_frame (at, string_id, mask, voltage_sum, power_sum, voltage, current, temperature, signal, via, state)
     select to_timestamp($1::int8 + 60 * m), s.id, (1::int8 << $2::int4) - 1, 3500 * $2::int4, 2000,
            array_fill(3500::int2, array[$2::int4]), array_fill(9000::int2, array[$2::int4]),
            array_fill(300::int2, array[$2::int4]), array_fill((-60)::int2, array[$2::int4]),
            array_fill(1::int2, array[$2::int4]), array_fill(1::int2, array[$2::int4])
     from string s, generate_series(0, 1439) m order by m, s.id`,
    [first, UNITS],
  );
  await db.query('vacuum analyze');

  const strings = plant.sites.flatMap((s) => s.strings.map(({ id }) => ({ id, site: s.id })));
  type Read = (tx: Tx, string: number) => Promise<readonly unknown[]>;
  const asOwner = (work: (tx: Tx) => Promise<readonly unknown[]>) =>
    owner.transaction(async (tx) => {
      // the same words to the server, which mean nothing to the tables' owner
      await tx.raw(
        `select set_config('wakeline.organisation', ?, true), set_config('wakeline.sites', ?, true)`,
        ['1', '*'],
      );
      return work(tx);
    });
  const customerSites = plant.sites.map((s) => s.id);
  const ways: Record<string, (read: Read, string: number) => Promise<readonly unknown[]>> = {
    without: (read, string) => asOwner((tx) => read(tx, string)),
    staff: (read, string) => asActor({ organisationId: 1, sites: 'all' }, (tx) => read(tx, string)),
    customer: (read, string) =>
      asActor({ organisationId: 1, sites: customerSites }, (tx) => read(tx, string)),
  };
  const measure = async (read: Read): Promise<Record<string, number>> => {
    const took: Record<string, number[]> = { without: [], staff: [], customer: [] };
    for (let i = 0; i < WARM_UP + ROUNDS; i++)
      for (const [name, way] of Object.entries(ways)) {
        const string = strings[(i * 7) % strings.length];
        if (!string) throw new Error('The fleet has no strings.');
        const start = performance.now();
        const rows = await way(read, string.id);
        if (i >= WARM_UP) took[name]?.push(performance.now() - start);
        if (rows.length === 0) throw new Error('The day has no readings.');
      }
    return Object.fromEntries(Object.entries(took).map(([name, values]) => [name, median(values)]));
  };
  say('reading days');
  const day = await measure((tx, string) => stringMinutes(tx, string, window, 60, 'voltage'));
  figure('string_day_without_policies', day.without ?? NaN, 'ms');
  figure('string_day_as_staff', day.staff ?? NaN, 'ms');
  figure('string_day_as_customer', day.customer ?? NaN, 'ms');
  figure('rls_ratio', (day.staff ?? NaN) / (day.without ?? NaN), 'ratio');
  figure('rls_ratio_customer', (day.customer ?? NaN) / (day.without ?? NaN), 'ratio');
} finally {
  await Promise.all([owner.destroy(), closePools()]);
  await db.end();
}
