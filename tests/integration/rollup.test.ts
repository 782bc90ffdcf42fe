import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import { keepDays } from '../../src/server/jobs/keep-days';
import { mergeLateFrames } from '../../src/server/jobs/late-frames';
import { rollUpClosed, rollUpDirty } from '../../src/server/jobs/roll-up';
import { forgetSuperseded, readQueue } from '../../src/server/jobs/queue';
import { startWorker, stopWorker } from '../../src/server/jobs/worker';
import { closePools, connect } from '../../src/server/db/pools';
import { ensureDays, parkFrames, writeFrames } from '../../src/server/queries/ingest-frames';
import type { FrameRow } from '../../src/server/queries/ingest-rows';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { until } from '../support/ingest';

let db: TestDatabase;
let site: SeededSite;
const MINUTE = 60_000;
// the day on which clocks go forward in Europe: 23 hours of local time. 92 quarters
const SHORT_DAY = '2026-03-29';
const T0 = Date.parse('2026-03-28T23:00:00Z'); // local midnight in Europe/Berlin
const AFTER = new Date('2026-03-30T04:00:00Z');

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Weirside Clinic']);
  site = fleet.site('Weirside Clinic');
  await db.owner.query(`update site set time_zone = 'Europe/Berlin', report_interval_s = 60`);
  const client = await connect('ingest');
  await ensureDays(client, new Date(T0), AFTER);
  await client.end();
});
afterAll(() => db.drop());

const names = () => [...site.strings.keys()].slice(0, 3);
const idOf = (name: string) => site.strings.get(name)?.id ?? 0;
const slots = (name: string) => site.plan.strings.find((s) => s.name === name)?.slots.length ?? 0;

function row(name: string, at: number, k: number): FrameRow {
  const n = slots(name);
  const of = (f: (u: number) => number) => Array.from({ length: n }, (_, u) => f(u));
  return {
    stringId: idOf(name),
    siteId: site.id,
    at: Math.floor(at / 1000),
    voltage: of((u) => 3500 + u + (k % 7)),
    voltageIn: of((u) => 3600 + u),
    current: of((u) => 4000 + 10 * (k % 11) + u),
    power: null,
    temperature: of((u) => 300 + ((k * 3 + u) % 50)),
    signal: of(() => -70),
    via: of(() => 1),
    state: of(() => 1),
  };
}
async function write(rows: FrameRow[], dirtyBefore: Date): Promise<void> {
  const client = await connect('ingest');
  for (let i = 0; i < rows.length; i += 500) await writeFrames(client, rows.slice(i, i + 500), dirtyBefore);
  await client.end();
}
/** A quarter as recomputed here, frame by frame. */
async function recomputed(name: string, quarter: Date) {
  const { rows } = await db.owner.query<{
    v: number;
    voltage: number[];
    current: number[];
    t: number[];
    p: number;
  }>(
    `select voltage_sum as v, power_sum as p, voltage, current, temperature as t from string_frame
     where string_id = $1 and at >= $2 and at < $2::timestamptz + interval '15 min'`,
    [idOf(name), quarter],
  );
  const mean = (xs: number[]) => xs.reduce((a, b) => a + b, 0) / xs.length;
  const minutes = Math.min(15, rows.length);
  const unit = (u: number) => ({
    v: Math.round(mean(rows.map((r) => r.voltage[u]!))),
    c: Math.round(mean(rows.map((r) => r.current[u]!))),
    e: Math.round(mean(rows.map((r) => (r.voltage[u]! * r.current[u]!) / 10_000)) * minutes),
    t: Math.max(...rows.map((r) => r.t[u]!)),
  });
  const units = Array.from({ length: slots(name) }, (_, u) => unit(u));
  return {
    frames: rows.length,
    voltage_avg: Math.round(mean(rows.map((r) => r.v))),
    voltage_min: Math.min(...rows.map((r) => r.v)),
    voltage_max: Math.max(...rows.map((r) => r.v)),
    energy: Math.round(mean(rows.map((r) => r.p)) * minutes),
    unit_voltage: units.map((u) => u.v),
    unit_current: units.map((u) => u.c),
    unit_energy: units.map((u) => u.e),
    unit_temperature_max: units.map((u) => u.t),
  };
}
const kept = async (name: string, quarter: Date) =>
  (
    await db.owner.query(
      `select frames, voltage_avg, voltage_min, voltage_max, energy, unit_voltage, unit_current, unit_energy, unit_temperature_max
       from string_quarter where string_id = $1 and at = $2`,
      [idOf(name), quarter],
    )
  ).rows[0];
const quarter = (n: number) => new Date(T0 + n * 15 * MINUTE);
const checkAll = async () => {
  for (const name of names())
    for (const n of [0, 1, 40, 91])
      expect(await kept(name, quarter(n)), `${name} ${n}`).toEqual(await recomputed(name, quarter(n)));
};
const LATE_QUARTER = 40;
const minutesOfDay = 23 * 60;

describe('roll-ups', () => {
  it('equal what the frames come to, over a local day of 92 quarters', async () => {
    const rows: FrameRow[] = [];
    for (let k = 0; k < minutesOfDay; k++)
      for (const name of names()) {
        const late = Math.floor(k / 15) === LATE_QUARTER && k % 15 >= 5;
        if (!late) rows.push(row(name, T0 + k * MINUTE, k));
      }
    await write(rows, new Date(0));
    while ((await rollUpClosed(AFTER)) > 0);
    await checkAll();
    const { rows: days } = await db.owner.query<{
      day: string;
      energy: number;
      frames: number;
      sum: number;
      n: number;
    }>(
      `select d.day::text, d.energy, d.frames, (select round(sum(q.energy) / 600.0)::int4 from string_quarter q where q.string_id = d.string_id) as sum,
         (select count(*)::int4 from string_quarter q where q.string_id = d.string_id) as n
       from string_day d where string_id = $1`,
      [idOf(names()[0]!)],
    );
    expect(days).toHaveLength(1);
    expect(days[0]).toMatchObject({ day: SHORT_DAY, n: 92, frames: minutesOfDay - 10 });
    expect(days[0]?.energy).toBe(days[0]?.sum);
  });

  it('done twice, or by two at once, are the same', async () => {
    const before = await db.owner.query('select * from string_day order by 1, 2');
    await db.owner.query('update rollup_watermark set quarter = $1', [quarter(30)]);
    const run = async () => {
      while ((await rollUpClosed(AFTER)) > 0);
    };
    await Promise.all([run(), run()]);
    await checkAll();
    expect((await db.owner.query('select * from string_day order by 1, 2')).rows).toEqual(before.rows);
  });

  it('are redone where late frames came in, and the day with them', async () => {
    const late: FrameRow[] = [];
    for (const name of names())
      for (let m = 5; m < 15; m++) {
        const k = LATE_QUARTER * 15 + m;
        late.push(row(name, T0 + k * MINUTE, k));
      }
    const before = await kept(names()[0]!, quarter(LATE_QUARTER));
    await write(late, AFTER);
    const { rows: dirty } = await db.owner.query('select quarter, string_id from rollup_dirty');
    expect(dirty).toHaveLength(names().length);
    expect(await rollUpDirty()).toBe(names().length);
    await checkAll();
    expect((await kept(names()[0]!, quarter(LATE_QUARTER))).energy).toBeGreaterThan(before.energy);
    const { rows } = await db.owner.query('select frames from string_day where string_id = $1', [
      idOf(names()[0]!),
    ]);
    expect(rows).toEqual([{ frames: minutesOfDay }]);
    await write(late, AFTER);
    expect((await db.owner.query('select 1 from rollup_dirty')).rows).toHaveLength(0);
  });

  it('of a site follow its inverters and sensors', async () => {
    const inverter = [...site.inverters.values()][0] ?? 0;
    const sensor = (
      await db.owner.query<{ id: number }>(
        `select id from sensor where site_id = $1 and kind = 'poa_global'`,
        [site.id],
      )
    ).rows[0];
    await db.owner.query(
      `insert into inverter_frame (at, inverter_id, ac_power, status)
       select $2::timestamptz + n * interval '1 min', $1, case when n < 30 then 6000 else 0 end, case when n < 30 then 'running' else 'grid_lost' end
       from generate_series(0, 44) n`,
      [inverter, quarter(48)],
    );
    if (sensor)
      await db.owner.query(
        `insert into weather_frame (at, sensor_id, irradiance, temperature_module)
         select $2::timestamptz + n * interval '1 min', $1, 800, 350 from generate_series(0, 44) n`,
        [sensor.id, quarter(48)],
      );
    await db.owner.query('update rollup_watermark set quarter = $1', [quarter(48)]);
    while ((await rollUpClosed(AFTER)) > 0);
    const { rows } = await db.owner.query<{ ac_power: number; poa_insolation: number | null }>(
      'select ac_power, poa_insolation from site_quarter where site_id = $1 and at >= $2 order by at limit 3',
      [site.id, quarter(48)],
    );
    expect(rows.map((r) => r.ac_power)).toEqual([6000, 6000, 0]);
    const day = (await db.owner.query('select * from site_day where site_id = $1', [site.id])).rows[0];
    expect(day.energy_ac).toBe(3000);
    if (sensor) {
      expect(rows.map((r) => r.poa_insolation)).toEqual([200, 200, 200]);
      expect([day.lost_minutes, day.lost_minutes_grid]).toEqual([15, 15]);
      expect(day.energy_expected).toBeGreaterThan(0);
      // sums of the quarters with light and power, as domain/output/day-figures takes them
      expect([day.quarters_due, day.quarters_lit, day.quarters_warm]).toEqual([92, 3, 3]);
      expect([day.insolation, day.insolation_warm, day.insolation_temperature]).toEqual([600, 600, 21_000]);
      expect([Number(day.energy_ac_lit), Number(day.energy_ac_warm), day.minutes_lit]).toEqual([
        3000, 3000, 45,
      ]);
      expect(Number(day.lost_energy)).toBe(Math.round(Number(day.nameplate) * 0.8 * 0.25));
      expect(day.lost_energy_grid).toBe(day.lost_energy);
      expect(day.gamma_pmp).toBeLessThan(0);
    }
  });
});

describe('days', () => {
  it('are there ahead of time, and parked frames are brought in with their quarters redone', async () => {
    const now = new Date();
    await keepDays(now);
    const name = names()[0]!;
    const old = new Date(Math.floor((now.getTime() - 40 * 86_400_000) / MINUTE) * MINUTE);
    const client = await connect('ingest');
    await parkFrames(client, [
      row(name, old.getTime(), 1),
      row(name, old.getTime(), 1),
      row(name, old.getTime() + MINUTE, 2),
    ]);
    await client.end();
    expect(await mergeLateFrames(now)).toBe(3);
    expect((await db.owner.query('select 1 from late_frame')).rows).toHaveLength(0);
    expect(
      (
        await db.owner.query('select 1 from string_frame where string_id = $1 and at >= $2 and at < $3', [
          idOf(name),
          old,
          new Date(old.getTime() + 2 * MINUTE),
        ])
      ).rows,
    ).toHaveLength(2);
    expect(await rollUpDirty()).toBeGreaterThan(0);
  });

  it('past the retention are given up as a whole; roll-ups stay', async () => {
    const before = await db.owner.query('select count(*)::int4 as n from string_quarter');
    const client = await connect('ingest');
    await ensureDays(client, new Date(T0), AFTER);
    await client.end();
    const dropped = await keepDays(new Date());
    expect(dropped).toBeGreaterThan(0);
    const { rows } = await db.owner.query<{ n: number }>(
      `select count(*)::int4 as n from string_frame where at < now() - interval '92 days'`,
    );
    expect(rows).toEqual([{ n: 0 }]);
    expect((await db.owner.query('select count(*)::int4 as n from string_quarter')).rows).toEqual(
      before.rows,
    );
  });
});

describe('the worker', () => {
  it('installs its queue, runs by the minute and stops clean', async () => {
    await startWorker();
    const { rows } = await db.owner.query<{ n: number }>(
      `select count(*)::int4 as n from pg_tables where schemaname = 'graphile_worker'`,
    );
    expect(rows[0]?.n).toBeGreaterThan(0);
    await db.owner.query(`select graphile_worker.add_job('roll_up', queue_name => 'roll_up')`);
    await until(
      async () =>
        (await db.owner.query<{ n: number }>('select count(*)::int4 as n from graphile_worker._private_jobs'))
          .rows[0]?.n === 0,
      'the job is done',
      15_000,
    );
    await stopWorker();
    // it failed while the next of its key was asked for: the library leaves it without key and tries
    await db.owner.query(`select graphile_worker.add_job('roll_up', job_key => 'roll_up')`);
    await db.owner.query(
      `update graphile_worker._private_jobs set key = null, attempts = max_attempts, last_error = 'x'`,
    );
    await db.owner.query(`select graphile_worker.add_job('roll_up', job_key => 'roll_up')`);
    expect(await readQueue(10)).toMatchObject([{ key: 'roll_up', error: null }]);
    expect([await forgetSuperseded(), await forgetSuperseded()]).toEqual([1, 0]);
    await closePools();
  });
});
