import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { QUARTER_MS } from '../../src/domain/output/clear-day';
import {
  customerSite as customerSiteSchema,
  customerSites as customerSitesSchema,
} from '../../src/schemas/api/customer';
import { asActor } from '../../src/server/db/transaction';
import { AppError } from '../../src/server/errors';
import { customerSite, customerSites } from '../../src/server/services/customer-page';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';

const CLINIC = 'Weirside Clinic';
const LIBRARY = 'Slate Lane Library';
const HOUR = 3_600_000;
let db: TestDatabase;
let fleet: TestFleet;
let owner: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, LIBRARY, 'Kestrel Row School', 'Netloft Terrace']);
  // a zone whose clocks change, so that days of 23 and 25 hours are met
  await db.owner.query(
    `update site set time_zone = 'Europe/London', latitude = 51.5, longitude = 0, switched_on_on = '2026-03-12'`,
  );
  owner = await fleet.actor('customer@lowfield.example');
});
afterAll(() => db.drop());
beforeEach(async () => {
  await db.owner.query(
    `truncate shutdown_test cascade; delete from site_quarter; delete from site_day; delete from inverter_state`,
  );
});

const read = (actor: Actor, site: string, at: Date) =>
  asActor(actor, (tx) => customerSite(tx, fleet.site(site).ref, at));

async function quarters(from: string, count: number, watts: number): Promise<void> {
  await db.owner.query(
    `insert into site_quarter (at, site_id, ac_power)
     select $1::timestamptz + i * interval '15 min', $2, $3 from generate_series(0, $4 - 1) i`,
    [from, fleet.site(CLINIC).id, watts, count],
  );
}
async function days(from: string, count: number, energy: number, more = {}): Promise<void> {
  const d = { expected: energy, lost: 0, grid: 0, complete: 1, ...more };
  await db.owner.query(
    `insert into site_day (day, site_id, energy_ac, energy_dc, energy_expected, lost_minutes, lost_minutes_grid, complete)
     select $1::date + i, $2, $3, $3, $5, $6, $7, $8 from generate_series(0, $4 - 1) i`,
    [from, fleet.site(CLINIC).id, energy, count, d.expected, d.lost, d.grid, d.complete],
  );
}

describe('today', () => {
  it('is the day at the roof, counted from its midnight', async () => {
    // 23:00Z is midnight in London in summer: four quarters of yesterday, eight of today
    await quarters('2026-07-01T22:00:00Z', 12, 4000);
    const roof = await read(owner, CLINIC, new Date('2026-07-02T10:00:00Z'));
    expect(() => customerSiteSchema.parse(roof)).not.toThrow();
    expect(roof.today.day).toBe('2026-07-02');
    expect(roof.today.from).toBe('2026-07-01T23:00:00.000Z');
    expect(roof.today.energy).toBeCloseTo(8 * 1000, 6);
    expect(roof.today.clear).toHaveLength(96);
  });
  it.each([
    ['2026-03-29T12:00:00Z', 92],
    ['2026-10-25T12:00:00Z', 100],
  ])('has the quarters of its own length on %s', async (at, count) => {
    expect((await read(owner, CLINIC, new Date(at))).today.clear).toHaveLength(count);
  });
  it('compares only over the quarters that are known', async () => {
    await quarters('2026-07-02T09:00:00Z', 4, 4000);
    const roof = await read(owner, CLINIC, new Date('2026-07-02T12:00:00Z'));
    const inside = roof.today.clear.filter((p) => p.at >= '2026-07-02T09:00' && p.at < '2026-07-02T10:00');
    expect(inside).toHaveLength(4);
    expect(roof.today.clearEnergyUntilNow).toBeCloseTo(
      inside.reduce((sum, p) => sum + (p.power * QUARTER_MS) / HOUR, 0),
      6,
    );
  });
  it('scales the clear day to the roof’s own best, and says when it cannot', async () => {
    const at = new Date('2026-07-02T12:00:00Z');
    const sheet = await read(owner, CLINIC, at);
    expect(sheet.today.clearFrom).toBe('datasheet');
    expect(sheet.today.energy).toBeNull();
    // a week that did 60 % of what the data sheet promises
    for (const p of sheet.today.clear)
      await db.owner.query(
        `insert into site_quarter (at, site_id, ac_power)
         select $1::timestamptz - d * interval '1 day', $2, $3 from generate_series(1, 7) d`,
        [p.at, fleet.site(CLINIC).id, Math.round(p.power * 0.6)],
      );
    const own = await read(owner, CLINIC, at);
    expect(own.today.clearFrom).toBe('own_best');
    const peak = (roof: typeof own) => Math.max(...roof.today.clear.map((p) => p.power));
    expect(peak(own) / peak(sheet)).toBeGreaterThan(0.58);
    expect(peak(own) / peak(sheet)).toBeLessThan(0.62);
  });
});

describe('the power', () => {
  const at = new Date('2026-07-02T12:00:00Z');
  /** What the first inverters of the clinic said, and how long ago. */
  async function said(...reports: [watts: number, secondsAgo: number][]): Promise<void> {
    for (const [i, [watts, ago]] of reports.entries())
      await db.owner.query(
        `insert into inverter_state (inverter_id, site_id, at, ac_power, status, arc_flag, earth_fault_flag)
         select id, site_id, $2::timestamptz - $3 * interval '1 s', $4, 'producing', false, false
         from inverter where site_id = $1 order by id offset $5 limit 1`,
        [fleet.site(CLINIC).id, at, ago, watts, i],
      );
  }
  beforeEach(() => db.owner.query('update site set report_interval_s = 60'));

  it('is of now while it was reported within three intervals, and afterwards what it was and when', async () => {
    await said([26_300, 170]);
    expect((await read(owner, CLINIC, at)).now).toMatchObject({ power: 26_300, madeLast: null });
    const later = await read(owner, CLINIC, new Date(at.getTime() + 11_000));
    expect(later.now).toMatchObject({
      power: null,
      madeLast: { power: 26_300, at: new Date(at.getTime() - 170_000).toISOString() },
    });
    await db.owner.query('update site set report_interval_s = 300');
    expect((await read(owner, CLINIC, new Date(at.getTime() + 10_000))).now.power).toBe(26_300);
  });
  it('leaves out an inverter that fell silent long before the others', async () => {
    await said([20_000, 30], [6000, 3600]);
    expect((await read(owner, CLINIC, at)).now.power).toBe(20_000);
  });
  it('is unknown where nothing was ever reported', async () => {
    expect((await read(owner, CLINIC, at)).now).toMatchObject({ power: null, madeLast: null });
  });
});

describe('month and life', () => {
  const at = new Date('2026-07-11T10:00:00Z');
  it('sum whole days and today, each day once', async () => {
    await days('2026-06-21', 20, 100_000, { expected: 125_000 }); // to 10 July
    await days('2026-07-11', 1, 77_777); // today, half written: its quarters count
    await quarters('2026-07-11T08:00:00Z', 4, 8000);
    const roof = await read(owner, CLINIC, at);
    expect(roof.month).toMatchObject({
      first: '2026-07-01',
      energy: 1_008_000,
      measured: 1_000_000,
      expected: 1_250_000,
      days: 10,
    });
    expect(roof.life).toMatchObject({ from: '2026-03-12', energy: 2_008_000 });
  });
  it('leave out what was before switch-on', async () => {
    await days('2026-03-10', 4, 1000);
    expect((await read(owner, CLINIC, at)).life?.energy).toBe(2000);
  });
  it('compare a month only over days that have an expectation', async () => {
    await days('2026-07-01', 5, 1000, { expected: null });
    await days('2026-07-06', 5, 1000, { expected: 1200 });
    expect((await read(owner, CLINIC, at)).month).toMatchObject({
      energy: 10_000,
      measured: 5000,
      expected: 6000,
    });
  });
  it('reckon working time over daylight: an hour lost a day in July is 6 % of it', async () => {
    await days('2026-07-01', 10, 1000, { lost: 60, grid: 30, complete: 0.9 });
    const { life } = await read(owner, CLINIC, at);
    // London has 16 h 10 to 16 h 37 min of daylight in the first ten days of July (almanac)
    expect(life?.workingTime).toBeGreaterThan(1 - 1 / 16.1);
    expect(life?.workingTime).toBeLessThan(1 - 1 / 16.7);
    expect(life).toMatchObject({ lostMinutes: 600, lostMinutesGrid: 300 });
    expect(life?.completeness).toBeCloseTo(0.9, 6);
  });
  it('have nothing to say of a roof that is not switched on', async () => {
    await db.owner.query(`update site set switched_on_on = null where id = $1`, [fleet.site(LIBRARY).id]);
    expect((await read(owner, LIBRARY, at)).life).toBeNull();
  });
});

describe('the state of a roof', () => {
  const at = new Date('2026-07-02T12:00:00Z');
  const spoke = (seconds: number | null) =>
    db.owner.query(`update logger set last_spoke_at = $1 where site_id = $2`, [
      seconds === null ? null : new Date(at.getTime() - seconds * 1000),
      fleet.site(CLINIC).id,
    ]);
  it('knows when a logger has gone quiet', async () => {
    await spoke(null);
    expect((await read(owner, CLINIC, at)).now).toMatchObject({
      loggers: 1,
      quietLoggers: 1,
      lastSpokeAt: null,
    });
    await spoke(60);
    expect((await read(owner, CLINIC, at)).now.quietLoggers).toBe(0);
    await spoke(301);
    expect((await read(owner, CLINIC, at)).now.quietLoggers).toBe(1);
  });
  it('counts inverters without grid, with a fault and held back', async () => {
    const inverters = [...fleet.site(CLINIC).inverters.values()];
    for (const [i, id] of inverters.entries())
      await db.owner.query(
        `insert into inverter_state (inverter_id, site_id, at, ac_power, status, arc_flag, earth_fault_flag)
         values ($1, $2, $3, 0, $4, false, false)`,
        [id, fleet.site(CLINIC).id, at, ['grid_lost', 'fault', 'curtailed'][i % 3]],
      );
    const { inverters: told } = (await read(owner, CLINIC, at)).now;
    expect(told.total).toBe(inverters.length);
    expect(told.gridLost + told.fault + told.limited).toBe(inverters.length);
    expect(told.gridLost).toBe(Math.ceil(inverters.length / 3));
  });
  it('counts modules, and those that report one by one', async () => {
    const roof = await read(owner, CLINIC, at);
    const slots = fleet
      .site(CLINIC)
      .plan.strings.flatMap((s) => s.slots.map((slot) => ({ ...slot, kind: s.kind })));
    expect(roof.now.modules).toBe(slots.length);
    expect(roof.now.reporting).toBe(slots.filter((s) => s.serial && s.kind !== 'shutdown_only').length);
  });
  it('shows the newest shutdown test that nothing corrects', async () => {
    const add = async (day: string, result: string, supersedes: number[] = []): Promise<number> => {
      const { rows } = await db.owner.query<{ id: number }>(
        `insert into shutdown_test (site_id, at, made_by, result, strings, supersedes)
         values ($1, $2, 'Per Aalto', $3, 8, $4) returning id`,
        [fleet.site(CLINIC).id, `${day}T10:00:00Z`, result, supersedes],
      );
      return rows[0]?.id ?? 0;
    };
    const wrong = await add('2026-06-02', 'failed');
    expect((await read(owner, CLINIC, at)).lastTest?.result).toBe('failed');
    await add('2026-06-01', 'passed', [wrong]);
    expect((await read(owner, CLINIC, at)).lastTest).toEqual({
      at: '2026-06-01T10:00:00.000Z',
      result: 'passed',
      strings: 8,
      madeBy: 'Per Aalto',
    });
  });
});

describe('whose roof it is', () => {
  const at = new Date('2026-07-02T12:00:00Z');
  const missing = async (actor: Actor, site: string) => {
    const error = await read(actor, site, at).then(
      () => undefined,
      (e: unknown) => e,
    );
    if (!(error instanceof AppError)) throw new Error('it should not have been found', { cause: error });
    return error.kind;
  };
  it('lists the roofs that were given, and no other', async () => {
    const names = async (actor: Actor) => {
      const sites = await asActor(actor, (tx) => customerSites(tx, at));
      expect(() => customerSitesSchema.parse(sites)).not.toThrow();
      return sites.map((s) => s.name);
    };
    expect(await names(owner)).toEqual([LIBRARY, CLINIC]);
    expect(await names(await fleet.actor('customer@harbourline.example'))).toEqual(['Netloft Terrace']);
    expect(await names(await fleet.actor('analyst@lowfield.example'))).toEqual([
      'Kestrel Row School',
      LIBRARY,
      CLINIC,
    ]);
  });
  it('is not found for anybody else', async () => {
    expect(await missing(owner, 'Kestrel Row School')).toBe('not_found');
    expect(await missing(owner, 'Netloft Terrace')).toBe('not_found');
    expect(await missing(await fleet.actor('manager@harbourline.example'), CLINIC)).toBe('not_found');
  });
});
