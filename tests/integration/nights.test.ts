import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import type { Actor } from '../../src/domain/access/permissions';
import { asActor, asIngest } from '../../src/server/db/transaction';
import { dueDay } from '../../src/server/jobs/nights-due';
import { judgeNight } from '../../src/server/jobs/output-night';
import { readNightSeries } from '../../src/server/jobs/plane-series';
import { staysOf } from '../../src/server/queries/as-built-history';
import { outputDaysOf } from '../../src/server/queries/output-days';
import { seriesSite } from '../../src/server/queries/output-site';
import { readLowOutput } from '../../src/server/services/low-output';
import { readExplanations } from '../../src/server/services/string-explanations';
import { readHistory } from '../../src/server/services/string-history';
import { readString } from '../../src/server/services/string-page';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';

/** Nights at their edges: one string on its plane, the day of 25 hours, a unit replaced yesterday, a month without data. */
const SITE = 'Weirside Clinic';
const LAST = '2026-10-25'; // clocks go back in Europe: 25 hours
let db: TestDatabase;
let fleet: TestFleet;
let site: SeededSite;
let lonely: { id: number; ref: string; slots: number; name: string };

const dayOf = (back: number): string =>
  new Date(Date.parse(`${LAST}T00:00Z`) - back * 86_400_000).toISOString().slice(0, 10);

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [SITE], Date.parse('2026-06-01T00:00Z') / 1000);
  site = fleet.site(SITE);
  await db.owner.query(
    `update site set stage = 'operating', time_zone = 'Europe/Berlin', latitude = 48, longitude = 11, report_interval_s = 60`,
  );
  const { rows } = await db.owner.query<typeof lonely>(
    `select id, ref, slots, name from string where site_id = $1 and kind = 'monitored' order by id limit 1`,
    [site.id],
  );
  lonely = rows[0]!;
  // it alone stays on its plane, which has a sensor
  await db.owner.query(
    `with other as (insert into plane (site_id, name, surface_tilt, surface_azimuth) values ($1, 'Other', 10, 180) returning id)
     update string set plane_id = other.id from other where site_id = $1 and string.id <> $2`,
    [site.id, lonely.id],
  );
  await db.owner.query(
    `update sensor set kind = 'poa_global', plane_id = (select plane_id from string where id = $2) where site_id = $1`,
    [site.id, lonely.id],
  );
  await db.owner.query(`select ensure_days('2026-10-15', '2026-10-26')`);
  // eight bright days; its modules give six tenths of what they should on the last four
  await db.owner.query(
    `with sun as (
       select t, greatest(0, 900 * sin(pi() * (extract(hour from t at time zone 'UTC') - 6.5) / 10)) as poa,
         case when t >= timestamptz '2026-10-21 22:00Z' then 0.6 else 0.95 end as share
       from generate_series(timestamptz '2026-10-17 07:00Z', timestamptz '2026-10-25 22:45Z', interval '15 min') t
       where extract(hour from t at time zone 'UTC') between 7 and 16),
     light as (
       insert into weather_frame (at, sensor_id, irradiance, temperature_module)
       select t, n.id, poa, 250 from sun, (select min(id) as id from sensor where site_id = $2) n),
     kind as (select sum(m.vmp_ref * m.imp_ref) as p, count(*) as n from slot sl join module_type m on m.id = sl.module_type_id where sl.string_id = $1)
     insert into string_quarter (at, string_id, frames, voltage_avg, voltage_min, voltage_max, energy, unit_voltage, unit_current)
     select t, $1, 15, 3400 * n, 3400 * n, 3400 * n, round(p * poa / 1000 * share * 0.98 * 150),
       array_fill(3400::int2, array[n::int]),
       array_fill(round(p * poa / 1000 * share * 0.98 / (34.0 * n) * 1000)::int2, array[n::int])
     from sun, kind`,
    [lonely.id, site.id],
  );
});
afterAll(() => db.drop());

describe('a night at its edges', () => {
  it('a local day of 25 hours has a hundred quarters, the day before ninety-six', async () => {
    const facts = (await asIngest((tx) => seriesSite(tx, site.id, LAST)))!;
    const series = await asIngest((tx) => readNightSeries(tx, facts, LAST, 3));
    expect(series.days).toEqual([dayOf(2), dayOf(1), LAST]);
    const quarters = series.boundsS.slice(1).map((s, i) => (s - series.boundsS[i]!) / 900);
    expect(quarters).toEqual([96, 96, 100]);
    expect(series.steps).toBe(292);
  });

  it('a site’s day is due after its own sunset and when it is summed up, each once', () => {
    const place = { id: 1, timeZone: 'Europe/Berlin', latitude: 48, longitude: 11, altitude: 0 };
    const s = (iso: string): number => Date.parse(iso) / 1000;
    const days = [
      { day: dayOf(1), fromS: s('2026-10-23T22:00Z'), toS: s('2026-10-24T22:00Z') },
      { day: LAST, fromS: s('2026-10-24T22:00Z'), toS: s('2026-10-25T23:00Z') },
    ];
    const due = (judged: string | null, now: string, rolled = now): string | null =>
      dueDay({ ...place, judged, days }, s(now), s(rolled));
    expect(due(null, '2026-10-25T12:00Z')).toBe(dayOf(1));
    expect(due(dayOf(1), '2026-10-25T12:00Z')).toBeNull();
    expect(due(dayOf(1), '2026-10-25T17:00Z')).toBe(LAST);
    expect(due(dayOf(1), '2026-10-25T17:00Z', '2026-10-25T14:00Z')).toBeNull();
    expect(due(LAST, '2026-10-25T20:00Z')).toBeNull();
  });

  it('a string alone on its plane is held against the model, and that is said; a replaced unit is no weak one', async () => {
    await db.owner.query(
      `update placement set placed_to = $2 from slot where slot.id = placement.slot_id and slot.string_id = $1 and slot.position = 1`,
      [lonely.id, new Date('2026-10-24T12:00Z')],
    );
    await db.owner.query(
      `with unit as (insert into unit (organisation_id, unit_type_id, serial)
         select organisation_id, unit_type_id, 'NEWUNIT1' from unit limit 1 returning id)
       insert into placement (site_id, unit_id, slot_id, placed_from)
       select $2, unit.id, slot.id, $3 from unit, slot where slot.string_id = $1 and slot.position = 1`,
      [lonely.id, site.id, new Date('2026-10-24T12:00Z')],
    );
    const done = await judgeNight(site.id, LAST, new Date('2026-10-25T18:00Z'));
    expect(done).toMatchObject({ low: 1 });
    const [day] = await asIngest((tx) => outputDaysOf(tx, lonely.id, { from: LAST, to: LAST }));
    expect(day).toMatchObject({ outcome: 'low', method: 'model' });
    expect(day?.ratio).toBeCloseTo(0.59, 1);
    const { rows } = await db.owner.query<{ kind: string; evidence: string; since: Date }>(
      `select kind, evidence, since from cause where site_id = $1`,
      [site.id],
    );
    expect(rows).toMatchObject([{ kind: 'low_output' }]);
    expect(rows[0]?.evidence).toContain('its own model');
    expect(rows[0]?.since).toEqual(new Date('2026-10-21T22:00Z'));
  });

  it('the pages say the same: held against the model, the day of 25 hours whole, the unit of yesterday', async () => {
    const at = new Date('2026-10-25T18:00Z');
    const actor: Actor = { ...(await fleet.actor('analyst@lowfield.example')), sites: 'all' };
    const [listed] = (await asActor(actor, (tx) => readLowOutput(tx, at))).rows;
    expect(listed).toMatchObject({ string: { name: lonely.name }, method: 'model', since: '2026-10-22' });
    const explained = await asActor(actor, (tx) => readExplanations(tx, lonely.ref, { on: LAST }, at));
    expect(explained).toMatchObject({ day: LAST, outcome: 'low', method: 'model', weak: [] });
    const day = await asActor(actor, (tx) =>
      readHistory(tx, lonely.ref, { range: 'day', quantity: 'voltage', on: LAST }, at),
    );
    expect([day.to - day.from, day.resolution]).toEqual([25 * 3600, 'quarter']);
    expect(day.values.filter((v) => v !== null)).toHaveLength(40);
    const page = await asActor(actor, (tx) => readString(tx, lonely.ref, at));
    expect(page.string.slots[0]).toMatchObject({ position: 1, serial: 'NEWUNIT1' });
    // what the unit before it did is its own
    const stays = await asActor(actor, (tx) => staysOf(tx, actor.organisationId, 'NEWUNIT1'));
    expect(stays).toMatchObject([{ position: 1, from: '2026-10-24T12:00:00.000Z', to: null }]);
  });

  it('strings without a month of data are not told, and say why', async () => {
    const { rows } = await db.owner.query<{ outcome: string; words: string }>(
      `select distinct outcome, regexp_replace(finding ->> 'words', '^[^:]*: ', '') as words from output_day where string_id <> $1`,
      [lonely.id],
    );
    expect(rows).toEqual([
      { outcome: 'cant_tell', words: '0 days with enough sun left to compare, 3 are needed' },
    ]);
  });
});
