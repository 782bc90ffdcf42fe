import knexFactory from 'knex';
import pg from 'pg';
import { seedHistory } from '../../seeds/history/fleet-history';
import { seedPlant } from '../../seeds/plant/seed-plant';
import { DEMO_SEED, demoFleet } from '../../simulator/scenarios/demo';
import { config } from '../../src/server/config';
import { closePools } from '../../src/server/db/pools';
import { packDays } from '../../src/server/jobs/pack-days';
import { framesOf, VALUE_COLUMNS, type FrameColumn } from '../../src/server/queries/frames';

/**
 * What a unit's reading takes on disk, indexes and all: in the frames of a day as they came, and once the day is
 * packed. The readings are the demo plant's over two days: weather, shade, meters' noise, faults, reports that were
 * lost, nights without any. And what a string's day takes to read, packed ÷ single.
 */
const DAY_MS = 86_400_000;
const RUNS = 9;
const STRINGS = 12;
/** Units of a string as the large fleet has them; the demo's roofs have shorter ones, too. */
const LONG = 20;

const figure = (name: string, value: number, unit: string, digits = 2) =>
  process.stdout.write(`${name} ${value.toFixed(digits)} ${unit}\n`);

const db = new pg.Client(process.env.DATABASE_URL);
await db.connect();
const knex = knexFactory({
  client: 'pg',
  connection: process.env.DATABASE_URL ?? '',
  pool: { min: 0, max: 1 },
});
const since = Math.floor(Date.now() / 60_000) * 60;
const fleet = demoFleet(DEMO_SEED, since);
await knex.transaction(async (tx) => {
  const plant = await seedPlant(tx, fleet, { secret: 'measured' });
  await seedHistory(tx, fleet, plant, (line) => process.stderr.write(`${line}\n`));
});
await knex.destroy();

const one = async <T extends pg.QueryResultRow>(sql: string, values: unknown[] = []): Promise<T> => {
  const { rows } = await db.query<T>(sql, values);
  if (!rows[0]) throw new Error(`no row: ${sql}`);
  return rows[0];
};
const bytesOf = async (parent: string): Promise<number> =>
  Number(
    (
      await one<{ n: string }>(
        `select coalesce(sum(pg_total_relation_size(inhrelid)), 0) as n from pg_inherits i join pg_class c on c.oid = i.inhrelid
         where inhparent = $1::regclass and pg_relation_size(inhrelid) > 0`,
        [parent],
      )
    ).n,
  );
const everything = framesOf({
  columns: ['mask', 'voltage_sum', 'power_sum', ...VALUE_COLUMNS],
  strings: (id) => `${id} > 0`,
  from: `'-infinity'::timestamptz`,
  to: `'infinity'::timestamptz`,
});
/** Every value of every frame. */
const fingerprint = async (): Promise<string> =>
  JSON.stringify(
    await one(
      `select count(*) as frames, sum(hashtextextended(f::text, 0)) as values, sum(cardinality(state) - (select count(*) from unnest(state) s where s is null)) as readings
       from ${everything} f`,
    ),
  );

await db.query('vacuum string_frame');
const before = await fingerprint();
const readings = Number((JSON.parse(before) as { readings: string }).readings);
const strings = (
  await db.query<{ id: number; day: Date }>(
    `select string_id as id, date_trunc('day', at, 'UTC') as day from string_frame
     group by 1, 2 order by count(*) desc, 1 limit $1`,
    [STRINGS],
  )
).rows;
const QUESTIONS: Record<string, { columns: FrameColumn[]; of: string }> = {
  chart: { columns: ['voltage_sum'], of: 'sum(voltage_sum)' },
  heat: { columns: ['voltage'], of: 'json_agg(voltage order by at)' },
  everything: {
    columns: ['mask', 'voltage_sum', 'power_sum', ...VALUE_COLUMNS],
    of: 'json_agg(f order by at)',
  },
};
/** Median time of a string's day, ms. */
async function times(): Promise<Record<string, number>> {
  const medians: Record<string, number> = {};
  for (const [name, { columns, of }] of Object.entries(QUESTIONS)) {
    const taken: number[] = [];
    for (let run = 0; run < RUNS; run++)
      for (const s of strings) {
        const from = performance.now();
        await db.query(
          `select ${of} from ${framesOf({
            columns,
            strings: (id) => `${id} = $1::int4`,
            from: '$2::timestamptz',
            to: '$3::timestamptz',
          })} f`,
          [s.id, s.day, new Date(s.day.getTime() + DAY_MS)],
        );
        if (run > 0) taken.push(performance.now() - from);
      }
    medians[name] = taken.sort((a, b) => a - b)[Math.floor(taken.length / 2)] ?? NaN;
  }
  return medians;
}
const single = await times();
figure('bytes.readings', readings, 'readings', 0);
const hot = (await bytesOf('string_frame')) / readings;
figure('bytes.hot_per_reading', hot, 'B');

/** The same of the strings that the large fleet is made of, in a table of their own. */
async function bytesOfLong(parent: string, where: string): Promise<number> {
  await db.query(`create table of_long (like ${parent} including all)`);
  await db.query(`insert into of_long select * from ${parent} where ${where}`);
  const { n } = await one<{ n: string }>(`select pg_total_relation_size('of_long') as n`);
  await db.query('drop table of_long');
  return Number(n);
}
const { n: longReadings } = await one<{ n: string }>(
  `select sum(cardinality(array_remove(state, null))) as n from string_frame where cardinality(state) >= ${LONG}`,
);
const longHot = await bytesOfLong('string_frame', `cardinality(state) >= ${LONG} order by at, string_id`);
figure(`bytes.hot_per_reading_of_${LONG}_units`, longHot / Number(longReadings), 'B');

const start = performance.now();
const packed = await packDays(new Date(Date.now() + (config().PACKED_AFTER_DAYS + 2) * DAY_MS));
const seconds = (performance.now() - start) / 1000;
await db.query('vacuum packed_frame');
figure('bytes.packed_per_reading', (await bytesOf('packed_frame')) / readings, 'B');
const longPacked = await bytesOfLong('packed_frame', `slots >= ${LONG} order by day, string_id`);
figure(`bytes.packed_per_reading_of_${LONG}_units`, longPacked / Number(longReadings), 'B');
figure('bytes.pack_rate', readings / seconds, 'readings/s', 0);
process.stderr.write(`${packed.frames} frames of ${packed.days} days packed in ${seconds.toFixed(1)} s\n`);
for (const c of ['steps', 'mask', 'voltage_sum', 'power_sum', ...VALUE_COLUMNS]) {
  const { n } = await one<{ n: string }>(
    `select coalesce(sum(pg_column_size(${c})), 0) as n from packed_frame`,
  );
  process.stderr.write(`  ${c} ${(Number(n) / readings).toFixed(3)} B\n`);
}
if ((await fingerprint()) !== before) throw new Error('the packed days do not give back what was packed');
figure('bytes.same_after_packing', 1, 'yes', 0);
const after = await times();
for (const name of Object.keys(QUESTIONS)) {
  figure(`bytes.day_${name}_packed`, after[name]!, 'ms');
  figure(`bytes.day_${name}_ratio`, after[name]! / single[name]!, 'ratio');
}
await db.end();
await closePools();
