import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { asActor } from '../../src/server/db/transaction';
import { AppError } from '../../src/server/errors';
import { fleetFiguresView } from '../../src/schemas/api/figures';
import { fleetFiguresCsv, siteFiguresCsv } from '../../src/server/reports/figures/csv';
import { monthReportPdf } from '../../src/server/reports/figures/month-report';
import { fleetFinding, siteWords } from '../../src/server/reports/figures/words';
import { dropTariff, fleetFigures, setTariff, siteFigures } from '../../src/server/services/figures';
import { testDatabase, type TestDatabase } from '../support/database';
import { writeDays } from '../support/days';
import { testFleet, type TestFleet } from '../support/fleet';
import { pdfPages } from '../support/pdf';

const CLINIC = 'Weirside Clinic';
const LIBRARY = 'Slate Lane Library';
const P0 = 40_000;
let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, LIBRARY]);
  manager = await fleet.actor('manager@lowfield.example');
  await db.owner.query(
    `update site set time_zone = 'Europe/London'; update organisation set currency = 'GBP'`,
  );
  const clinic = fleet.site(CLINIC).id;
  await writeDays(db.owner, clinic, { from: '2024-11-01', count: 365, nameplate: P0, sun: 4 });
  await writeDays(db.owner, clinic, { from: '2025-11-01', count: 364, nameplate: P0, sun: 4.4 });
  await writeDays(db.owner, clinic, {
    from: '2026-10-31',
    count: 1,
    nameplate: P0,
    sun: 4.4,
    lost: 60,
    complete: 0.5,
  });
  await writeDays(db.owner, clinic, { from: '2026-11-01', count: 12, nameplate: P0, sun: 3 });
});
afterAll(() => db.drop());

/** Words as they are read: blanks of any kind are one. */
const plain = (text: string): string => text.replace(/\s+/g, ' ');

/** The afternoon of 12 November 2026. */
const AT = new Date('2026-11-12T15:00:00Z');
const read = (period?: string, site = CLINIC, at = AT) =>
  asActor(manager, (tx) => siteFigures(tx, fleet.site(site).ref, period, at));

describe('the figures of a site', () => {
  it('are those of a whole month, with a year before, losses and completeness', async () => {
    const f = await read('2026-10');
    expect(f.now?.performanceRatio).toBeCloseTo(0.85, 4);
    // by hand: 0.85 / (1 − 0.004 × (40 − 25))
    expect(f.now?.performanceRatioStc).toBeCloseTo(0.85 / 0.94, 4);
    // the year was as warm: nothing to correct
    expect(f.now?.performanceRatioAnnual).toBeCloseTo(0.85, 4);
    expect(f.now?.specificYieldKWhKWp).toBeCloseTo(31 * 4.4 * 0.85, 3);
    expect(f.now?.availability).toBeCloseTo(1 - 60 / (31 * 600), 6);
    expect(f.now?.completeness).toBeCloseTo(30.5 / 31, 6);
    expect(f.compared?.nowKWh).toBeCloseTo((f.compared?.beforeKWh ?? 0) * 1.1, 3);
    expect(f.steps?.map((s) => s.key)).toEqual(['light', 'temperature', 'grid', 'stopped', 'rest', 'made']);
    expect(f.steps?.find((s) => s.key === 'stopped')?.kWh).toBeCloseTo(20, 3);
    const words = siteWords(f);
    expect(plain(words.finding)).toBe('Weirside Clinic made 4.6 MWh in October 2026');
    expect(plain(words.sentence)).toContain('10 % more than October 2025');
    expect(words.ofDays).toContain('Marked: 31.');
  });

  it('compare only whole days while the month runs', async () => {
    const f = await read();
    expect(f.period.key).toBe('2026-11');
    expect(f.elapsed).toMatchObject({ days: 12, running: true });
    expect(f.now?.days).toBe(12);
    expect(f.compared?.beforeKWh).toBeCloseTo((11 * 4.4 * P0 * 0.85) / 1000, 3);
    expect(f.compared?.nowKWh).toBeCloseTo((11 * 3 * P0 * 0.85) / 1000, 3);
    expect(plain(siteWords(f).sentence)).toContain('Up to yesterday 32 % less');
  });

  it('say what is not there: ahead, before the plant, without data, without a sensor', async () => {
    expect(siteWords(await read('2027-03')).sentence).toBe('It lies ahead.');
    expect(siteWords(await read('2024-02')).sentence).toContain('begins on 1 November 2024');
    const none = siteWords(await read('2026-10', LIBRARY));
    expect(none.finding).toContain('Nothing is on record');
    await db.owner.query(
      `insert into site_day (day, site_id, energy_ac, energy_dc) values ('2026-10-05', $1, 90000, 93000)`,
      [fleet.site(LIBRARY).id],
    );
    const bare = await read('2026-10', LIBRARY);
    expect(bare.now).toMatchObject({ energyKWh: 90, performanceRatio: null, availability: null });
    expect(bare.steps).toBeNull();
    expect(siteWords(bare).sentence).toContain('no performance ratio');
    await db.owner.query(`delete from site_day where site_id = $1`, [fleet.site(LIBRARY).id]);
  });

  it('are nobody’s of another organisation', async () => {
    const other = await fleet.actor('manager@longacre.example').catch(() => null);
    const stranger: Actor = other ?? { ...manager, organisationId: manager.organisationId + 1000 };
    await expect(
      asActor(stranger, (tx) => siteFigures(tx, fleet.site(CLINIC).ref, undefined, AT)),
    ).rejects.toThrow(AppError);
  });
});

describe('prices', () => {
  const where = () => fleet.site(CLINIC).ref;
  const from = { at: AT, address: '127.0.0.1' };

  it('price each day at its own, are on record, and can be taken away', async () => {
    await asActor(manager, (tx) =>
      setTariff(tx, manager, where(), { from: '2026-10-16', priceKWh: 0.3 }, from),
    );
    await asActor(manager, (tx) =>
      setTariff(tx, manager, where(), { from: '2026-10-30', priceKWh: 0.5 }, from),
    );
    const f = await read('2026-10');
    const day = (P0 * 4.4 * 0.85) / 1000;
    expect(f.worth?.money).toBeCloseTo(day * (14 * 0.3 + 2 * 0.5), 3);
    expect(f.worth?.unpricedKWh).toBeCloseTo(day * 15, 3);
    await expect(
      asActor(manager, (tx) => setTariff(tx, manager, where(), { from: '2026-10-30', priceKWh: 1 }, from)),
    ).rejects.toMatchObject({ kind: 'conflict' });
    const [newest] = f.tariffs;
    await asActor(manager, (tx) =>
      dropTariff(tx, manager, { site: where(), tariff: newest?.id ?? '' }, from),
    );
    expect((await read('2026-10')).tariffs.map((t) => t.from)).toEqual(['2026-10-16']);
    const { rows } = await db.owner.query(
      `select action from audit_entry where action like 'tariff%' order by id`,
    );
    expect(rows.map((r: { action: string }) => r.action)).toEqual([
      'tariff.set',
      'tariff.set',
      'tariff.removed',
    ]);
  });
});

describe('the fleet', () => {
  it('adds plants side by side, whatever their size', async () => {
    await writeDays(db.owner, fleet.site(LIBRARY).id, {
      from: '2026-10-01',
      count: 31,
      nameplate: 2 * P0,
      sun: 2,
    });
    const f = await asActor(manager, (tx) => fleetFigures(tx, '2026-10', AT));
    expect(f.rows.map((r) => r.site.name)).toEqual([LIBRARY, CLINIC]);
    expect(f.total?.specificYieldKWhKWp).toBeCloseTo((31 * 0.85 * (4.4 + 2 * 2)) / 3, 3);
    expect(f.total?.performanceRatio).toBeCloseTo(0.85, 4);
    expect(f.compared).toBeNull();
    expect(plain(fleetFinding(f).finding)).toContain('2 sites');
    const csv = await fleetFiguresCsv(f, fleetFiguresView.parse({ sort: 'energy', order: 'down' })).text();
    expect(csv.split('\r\n')[1]).toMatch(/^Slate Lane Library,|^Weirside Clinic,/);
    expect(csv.split('\r\n').filter(Boolean)).toHaveLength(3);
  });
});

describe('a month on paper', () => {
  it('says the same as the page, day by day', async () => {
    const f = await read('2026-10');
    const pages = await pdfPages(await monthReportPdf(f));
    const text = plain(pages.join(' '));
    expect(text).toContain('Weirside Clinic made 4.6 MWh in October 2026');
    for (const card of siteWords(f).cards) expect(text).toContain(card.label);
    expect(text).toContain('2026-10-31 150 kWh');
    expect(text).toContain('No cause was found in this month.');
    expect(text).toMatch(/Page 1 of \d/);
    const csv = await siteFiguresCsv(f).text();
    expect(csv.split('\r\n').filter(Boolean)).toHaveLength(32);
  });
});
