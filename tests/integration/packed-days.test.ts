import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import { closePools, connect } from '../../src/server/db/pools';
import { asActor, asIngest, type Tx } from '../../src/server/db/transaction';
import { takeBatch, type Item } from '../../src/server/ingest/batch';
import { Days, GatewaysHeard, writeBatch } from '../../src/server/ingest/write-batch';
import { keepDays } from '../../src/server/jobs/keep-days';
import { mergeLateFrames } from '../../src/server/jobs/late-frames';
import { packDays } from '../../src/server/jobs/pack-days';
import { rollUpDirty } from '../../src/server/jobs/roll-up';
import { hangingOn } from '../../src/server/queries/as-built-records';
import { framesOf, VALUE_COLUMNS } from '../../src/server/queries/frames';
import { ensureDays, parkFrames, writeFrames } from '../../src/server/queries/ingest-frames';
import type { FrameRow } from '../../src/server/queries/ingest-rows';
import { watchedCurrents } from '../../src/server/queries/isolation';
import { framesAfter } from '../../src/server/queries/judgement';
import { heardMoments, unitCurrents } from '../../src/server/queries/membership';
import { loopRows, quartersIn } from '../../src/server/queries/output-series';
import { beginPacking, finishPacking } from '../../src/server/queries/packing';
import { rollStringQuarter } from '../../src/server/queries/rollup';
import { framesIn } from '../../src/server/queries/shutdown-test-evidence';
import { energyAgainst, siblingHistory, stringMinutes } from '../../src/server/queries/string-history';
import { frameAt, unitMinutes, unitSteps } from '../../src/server/queries/string-units';
import { framesInPieces, keptSpan } from '../../src/server/queries/v1-telemetry';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';

/** A packed day gives the same answers as its frames did, and takes late ones. */

const DAY_MS = 86_400_000;
const MINUTE_S = 60;
const now = new Date();
const midnight = Date.parse(new Date(now.getTime() - 5 * DAY_MS).toISOString().slice(0, 10));
const DAY = new Date(midnight).toISOString().slice(0, 10);
const startS = midnight / 1000 + 9 * 3600;
const window = { from: new Date((startS - 3600) * 1000), to: new Date((startS + 4 * 3600) * 1000) };

let db: TestDatabase;
let site: SeededSite;
let strings: { name: string; id: number; slots: number }[];
const actor = { organisationId: 1, sites: 'all' as const };

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Weirside Clinic']);
  site = fleet.site('Weirside Clinic');
  strings = [...site.strings].slice(0, 4).map(([name, s]) => ({
    name,
    id: s.id,
    slots: site.plan.strings.find((p) => p.name === name)?.slots.length ?? 0,
  }));
  const client = await connect('ingest');
  await ensureDays(client, new Date(midnight - DAY_MS), now);
  const rows = frames();
  for (let i = 0; i < rows.length; i += 500) await writeFrames(client, rows.slice(i, i + 500), new Date(0));
  await client.end();
  // what no logger sends: a frame between two seconds, and one of a time when the string had fewer slots
  await db.owner.query(
    `insert into string_frame (at, mask, string_id, voltage_sum, power_sum, voltage, current, temperature, signal, via, state)
     values ($1, 3, $2, 7000, -5, '{3500,NULL,3500}', '{-32768,NULL,32767}', '{1,NULL,-1}', '{-60,NULL,-61}', '{1,NULL,2}', '{1,2,NULL}')`,
    [new Date(startS * 1000 + 1234.567), strings[0]!.id],
  );
});
afterAll(() => db.drop());

/** Four hours of four strings: noise, gaps, units that fall silent, one that drops to zero, one with module voltages. */
function frames(): FrameRow[] {
  const [gaps] = fc.sample(fc.array(fc.integer({ min: 0, max: 99 }), { minLength: 3000, maxLength: 3000 }), {
    numRuns: 1,
    seed: 11,
  });
  return strings.flatMap(({ id, slots }, k) =>
    Array.from({ length: 240 }, (_, m): FrameRow => {
      const heard = (u: number) => gaps![(m * 7 + u * 13 + k) % 3000]! >= 4;
      const of = (f: (u: number) => number | null) =>
        Array.from({ length: slots }, (_, u) => (heard(u) ? f(u) : null));
      const noise = (u: number) => gaps![(m * slots + u) % 3000]! % 8;
      return {
        stringId: id,
        siteId: site.id,
        at: startS + MINUTE_S * m + (m % 50 === 7 ? 13 : 0),
        voltage: of((u) => (m > 100 && u === 3 ? 60 : 3100 + 20 * u + noise(u))),
        voltageIn: k % 2 ? of((u) => 3500 + noise(u)) : null,
        current: of((u) => 5000 + m * 4 + noise(u)),
        power: k === 3 ? of((u) => 1500 + noise(u)) : null,
        temperature: of((u) => (u === 2 ? null : 300 + noise(u))),
        signal: of((u) => -60 - noise(u)),
        via: of((u) => 1 + (u % 2)),
        state: of((u) => (m > 100 && u === 3 ? 2 : 1)),
      };
    }),
  );
}

const ids = () => strings.map((s) => s.id);

/** Every stored column of every frame of the day. */
async function everything(tx: Tx): Promise<unknown[]> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `select string_id, at::text, mask, voltage_sum, power_sum, ${VALUE_COLUMNS.map((c) => `${c}::text`).join(', ')}
     from ${framesOf({
       columns: ['mask', 'voltage_sum', 'power_sum', ...VALUE_COLUMNS],
       strings: (id) => `${id} = any (:ids::int4[])`,
       from: ':from::timestamptz',
       to: ':to::timestamptz',
     })} f order by string_id, at`,
    { ids: ids(), from: new Date(midnight), to: new Date(midnight + DAY_MS) },
  );
  return rows;
}

/** Whatever reads frames, as pages, programs and judgements ask. */
async function answers(tx: Tx) {
  const [one, two] = strings as [(typeof strings)[0], (typeof strings)[0]];
  const siblings = strings.slice(1).map((s) => ({ id: s.id, units: s.slots }));
  const inTens = { ...window, lengthS: 600 };
  const heard = await heardMoments(tx, site.id, inTens);
  const moments = heard.map((m) => m.atS);
  const pieces: unknown[] = [];
  for await (const piece of framesInPieces(tx, { stringIds: ids(), ...window })) pieces.push(...piece);
  const options = {
    resolution: 'minute',
    stepS: 300,
    timeZone: 'UTC',
    passingFrom: 5,
    quantity: 'current',
  } as const;
  return {
    voltage: await stringMinutes(tx, one.id, window, 60, 'voltage'),
    power: await stringMinutes(tx, one.id, window, 300, 'power'),
    current: await stringMinutes(tx, two.id, window, 300, 'current'),
    siblings: await siblingHistory(tx, siblings, window, options),
    energy: (await energyAgainst(tx, one.id, ids().slice(1), window)).sort((a, b) => a.stringId - b.stringId),
    units: await unitMinutes(tx, one.id, window, 'voltage'),
    steps: await unitSteps(tx, two.id, window, 'power', 300),
    then: await frameAt(tx, two.id, new Date((startS + 3601) * 1000), 300),
    inside: await quartersIn(tx, ids(), window),
    loop: await loopRows(tx, ids(), window, 60),
    heard,
    heat: (await unitCurrents(tx, site.id, inTens, moments)).frames,
    watched: await watchedCurrents(tx, site.id, { ...window, began: window.to }),
    evidence: (await framesIn(tx, ids(), window)).map((f) => JSON.stringify(f)).sort(),
    kept: (await keptSpan(tx, 'string_frame'))?.from,
    pieces,
    hanging: await hangingOn(tx, 'string', one.id),
  };
}

const quarter = async () =>
  (
    await db.owner.query(
      'select * from string_quarter where at = $1 and string_id = any ($2) order by string_id',
      [new Date(startS * 1000), ids()],
    )
  ).rows;
const late = (k: number, m: number, heard: (u: number) => boolean): FrameRow => {
  const { id, slots } = strings[k]!;
  const of = (f: (u: number) => number) => Array.from({ length: slots }, (_, u) => (heard(u) ? f(u) : null));
  return {
    stringId: id,
    siteId: site.id,
    at: startS + MINUTE_S * m,
    voltage: of((u) => 2000 + u),
    voltageIn: k % 2 ? of(() => 2500) : null,
    current: of(() => 1000),
    power: k === 3 ? of(() => 500) : null,
    temperature: of(() => 111),
    signal: of(() => -99),
    via: of(() => 5),
    state: of(() => 1),
  };
};
const itemOf = (rows: FrameRow[]): Item => ({
  work: { kind: 'frames', rows },
  readings: 1,
  siteId: site.id,
  loggerId: 0,
  gateways: new Map(),
  taken: 0,
  fault: null,
  written: () => undefined,
  refused: () => undefined,
});
const parked = async () => (await db.owner.query('select 1 from late_frame')).rowCount;

describe('a packed day', () => {
  it('gives back every frame to the bit, and every reader the same answers', async () => {
    await asIngest((tx) => rollStringQuarter(tx, new Date(startS * 1000), { stringIds: ids() }));
    const before = {
      everything: await asIngest(everything),
      answers: await asActor(actor, answers),
      quarter: await quarter(),
      judged: await asIngest((tx) =>
        framesAfter(
          tx,
          ids().map((stringId) => ({ stringId, atS: startS + 600 })),
          30,
        ),
      ),
    };
    expect(before.everything).toHaveLength(4 * 240 + 1);
    const done = await packDays(now);
    expect(done).toEqual({ days: 3, frames: 4 * 240 + 1 });
    const { rows } = await db.owner.query<{ hot: string | null; packed: number }>(
      `select to_regclass($1)::text as hot, (select count(*)::int from packed_frame) as packed`,
      [`string_frame_${DAY.replaceAll('-', '')}`],
    );
    expect(rows).toEqual([{ hot: null, packed: 5 }]);
    expect(await asIngest(everything)).toEqual(before.everything);
    expect(await asActor(actor, answers)).toEqual(before.answers);
    await db.owner.query('delete from string_quarter');
    await asIngest((tx) => rollStringQuarter(tx, new Date(startS * 1000), { stringIds: ids() }));
    expect(await quarter()).toEqual(before.quarter);
    const byString = (fs: Awaited<ReturnType<typeof framesAfter>>) =>
      fs.sort((a, b) => a.stringId - b.stringId || a.at - b.at);
    const judged = await asIngest((tx) =>
      framesAfter(
        tx,
        ids().map((stringId) => ({ stringId, atS: startS + 600 })),
        30,
      ),
    );
    expect(byString(judged)).toEqual(byString(before.judged));
    expect(await packDays(now)).toEqual({ days: 0, frames: 0 });
  });

  it('is not to be seen by others, and hidden as early as an organisation says, to the minute', async () => {
    expect(await asActor({ organisationId: 2, sites: 'all' }, everything)).toEqual([]);
    expect(await asActor({ organisationId: 1, sites: [] }, everything)).toEqual([]);
    await expect(
      asActor(actor, (tx) => tx.raw(`select * from packed_frame_${DAY.replaceAll('-', '')}`)),
    ).rejects.toMatchObject({ code: '42501' });
    await expect(asActor(actor, (tx) => tx.raw('delete from packed_frame'))).rejects.toMatchObject({
      code: '42501',
    });
    await db.owner.query('update organisation set hide_raw_after_days = 2 where id = 1');
    expect(await asActor(actor, everything)).toEqual([]);
    // the instant from which readings are shown lies in the middle of the packed day
    await db.owner.query(
      `create or replace function actor_raw_from() returns timestamptz language sql stable parallel safe as
         $$ select to_timestamp(${startS + 7200}) $$`,
    );
    const shown = (await asActor(actor, everything)) as { at: string }[];
    expect(shown).toHaveLength(4 * 120);
    await db.owner.query(
      `create or replace function actor_raw_from() returns timestamptz language sql stable parallel safe as
         $$ select coalesce((select now() - make_interval(days => hide_raw_after_days) from organisation
              where id = actor_organisation()), '-infinity'::timestamptz) $$`,
    );
    await db.owner.query('update organisation set hide_raw_after_days = null where id = 1');
  });

  it('parks what comes late and merges it as a day of single frames would', async () => {
    const client = await connect('ingest');
    const days = new Days();
    await days.refresh(client, now.getTime() / 1000);
    const came = [
      late(0, 1, () => true), // fills what was not heard, changes nothing that was
      late(1, -30, () => true), // a frame that was not there
      late(1, -30, (u) => u < 2), // twice
      late(3, 5, (u) => u === 0),
      late(2, 300, (u) => u % 2 === 0),
      late(2, 300, (u) => u % 2 === 1),
    ];
    for (const row of came) {
      const queue = [itemOf([row])];
      await writeBatch(client, takeBatch(queue), days, new GatewaysHeard(), now.getTime() / 1000);
    }
    expect(await parked()).toBe(came.length);

    // the same by the statement that single frames are merged with, in a database of single frames only
    const before = (await asIngest(everything)) as Record<string, unknown>[];
    await client.query('create temp table shadow (like string_frame including all) partition by range (at)');
    await client.query(
      `create temp table string_frame_${new Date(midnight).toISOString().slice(0, 10).replaceAll('-', '')}
       partition of shadow default`,
    );
    await client.query(
      `insert into shadow (at, mask, string_id, voltage_sum, power_sum, ${VALUE_COLUMNS.join(', ')})
       select at, mask, string_id, voltage_sum, power_sum, ${VALUE_COLUMNS.join(', ')} from ${framesOf({
         columns: ['mask', 'voltage_sum', 'power_sum', ...VALUE_COLUMNS],
         strings: (id) => `${id} = any ($1::int4[])`,
         from: '$2::timestamptz',
         to: '$3::timestamptz',
       })} f`,
      [ids(), new Date(midnight), new Date(midnight + DAY_MS)],
    );
    await client.query('set search_path = pg_temp, public');
    await client.query('alter table shadow rename to string_frame');
    for (const row of came) await writeFrames(client, [row], new Date(0));
    const { rows: expected } = await client.query(
      `select string_id, at::text, mask, voltage_sum, power_sum, ${VALUE_COLUMNS.map((c) => `${c}::text`).join(', ')}
       from pg_temp.string_frame order by string_id, at`,
    );
    await client.end();

    expect(await mergeLateFrames(now)).toBe(came.length);
    expect(await parked()).toBe(0);
    const after = await asIngest(everything);
    expect(after).toHaveLength(before.length + 2);
    expect(after).toEqual(expected);
    const { rows: dirty } = await db.owner.query<{ n: number }>(
      'select count(*)::int as n from rollup_dirty',
    );
    expect(dirty[0]?.n).toBeGreaterThan(0);
    await rollUpDirty();
    const { rows } = await db.owner.query(
      'select frames from string_quarter where string_id = $1 and at = $2',
      [strings[1]!.id, new Date((startS - 1800) * 1000)],
    );
    expect(rows).toEqual([{ frames: 1 }]);
  });

  it('is closed while it is packed: a writer that did not know parks, and a killed job goes on', async () => {
    const other = new Date(midnight + DAY_MS).toISOString().slice(0, 10);
    const client = await connect('ingest');
    // it was packed, empty, by the first run: as if it had not been
    await db.owner.query(`drop table packed_frame_${other.replaceAll('-', '')}`);
    await ensureDays(client, new Date(other), new Date(other));
    const at = (m: number) => ({ ...late(0, m, () => true), at: Date.parse(other) / 1000 + 60 * m });
    await writeFrames(client, [at(0), at(1)], new Date(0));
    await beginPacking(client, other);
    await expect(writeFrames(client, [at(2)], new Date(0))).rejects.toMatchObject({ code: '23514' });
    const days = new Days();
    await days.refresh(client, now.getTime() / 1000);
    expect(days.takesFrames(at(2).at)).toBe(false);
    expect(days.takesReports(at(2).at)).toBe(true);
    // neither side takes it now: it waits, and nobody spins
    await parkFrames(client, [at(2)]);
    expect(await mergeLateFrames(now)).toBe(0);
    // nothing is given up that is not packed
    await expect(finishPacking(client, other)).rejects.toThrow(/0 frames are packed/);
    expect((await packDays(now)).frames).toBe(2);
    expect(await mergeLateFrames(now)).toBe(1);
    const { rows } = await client.query('select sum(frames)::int as n from packed_frame where day = $1', [
      other,
    ]);
    expect(rows).toEqual([{ n: 3 }]);
    await client.end();
  });
});

it('packed days and quarters go when their time is over; days stay', async () => {
  await db.owner.query(
    `select ensure_days((now() - interval '3 years')::date, (now() - interval '3 years')::date)`,
  );
  const days = await db.owner.query<{ n: number }>('select count(*)::int as n from string_day');
  const inNinety = new Date(now.getTime() + 88 * DAY_MS);
  const counts = async () =>
    (
      await db.owner.query<{ packed: number; quarters: number }>(
        `select (select count(*)::int from pg_inherits where inhparent = 'packed_frame'::regclass) as packed,
           (select count(*)::int from pg_inherits i join pg_class c on c.oid = i.inhrelid
            where i.inhparent = 'string_quarter'::regclass
              and right(c.relname, 8) < to_char(now() - interval '2 years', 'YYYYMMDD')) as quarters`,
      )
    ).rows[0]!;
  expect(await counts()).toMatchObject({ quarters: 1 });
  await keepDays(now);
  expect(await counts()).toMatchObject({ packed: 3, quarters: 0 });
  await keepDays(inNinety);
  expect((await counts()).packed).toBe(0);
  expect((await db.owner.query('select count(*)::int as n from string_day')).rows).toEqual(days.rows);
  await closePools();
});
