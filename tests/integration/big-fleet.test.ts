import knexFactory from 'knex';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { seedFleet } from '../../seeds/fleet/seed-fleet';
import { UNITS_A_SITE } from '../../seeds/fleet/plant';
import { fleetLines } from '../../src/features/fleet/list';
import { firstPage, LINES_AT_ONCE } from '../../src/features/fleet/first-page';
import { FLEET_DEFAULTS } from '../../src/features/fleet/view';
import { asActor, asIngest } from '../../src/server/db/transaction';
import { FleetCauses } from '../../src/server/live/fleet-causes';
import { causesNow } from '../../src/server/services/causes';
import { readFleet, readShutdown } from '../../src/server/services/fleet';
import { readLowOutput } from '../../src/server/services/low-output';
import { testDatabase, type TestDatabase } from '../support/database';

/** The fleet that benches and torture work on, at its smallest; and that pages of a large one leave nothing out. */
const NOW_S = Math.floor(Date.now() / 60_000) * 60;
const NOW = new Date(NOW_S * 1000);
const SITES = 3;
let db: TestDatabase;
let actor: { organisationId: number; sites: 'all' };

beforeAll(async () => {
  db = await testDatabase();
  const knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 2 } });
  try {
    const made = await seedFleet(knex, {
      sites: SITES,
      secret: 'secret',
      nowS: NOW_S,
      days: 20,
      quarterDays: 1,
      frameHours: 1,
    });
    expect(made.units).toBe((SITES + 2) * UNITS_A_SITE);
  } finally {
    await knex.destroy();
  }
  const { rows } = await db.owner.query<{ id: number }>('select min(id) as id from organisation');
  actor = { organisationId: rows[0]?.id ?? 0, sites: 'all' };
});
afterAll(() => db.drop());

describe('a seeded fleet', () => {
  it('has sites, units and states of one organisation, and every string judged', async () => {
    const fleet = await asActor(actor, (tx) => readFleet(tx, NOW));
    expect(fleet.sites).toHaveLength(SITES);
    for (const site of fleet.sites) {
      expect(site.counts.units).toBe(UNITS_A_SITE);
      expect(site.counts.passing + site.counts.shutdown + site.counts.silent).toBe(UNITS_A_SITE);
      expect(site.daylight).toBe(true);
      expect(site.performanceRatio30d).toBeGreaterThan(0.5);
    }
    const low = await asActor(actor, (tx) => readLowOutput(tx, NOW));
    expect(low).toMatchObject({ judged: 5 * SITES, cantTell: 0, unjudgedSites: [] });
  });

  it('shows on the page of shutdown the sites with a cause, as the fleet does', async () => {
    const { rows } = await db.owner.query<{ id: number }>('select min(id) as id from string');
    await db.owner.query(
      `update string_judgement set verdict[4] = 1, state[4] = 2, stuck = 1 where string_id = $1`,
      [rows[0]?.id],
    );
    const [fleet, shutdown] = await asActor(actor, async (tx) => [
      await readFleet(tx, NOW),
      await readShutdown(tx, NOW),
    ]);
    expect(shutdown.causes).toEqual(fleet.causes);
    const stuck = fleet.causes.find((c) => c.verdict === 'stuck' && c.units.some((u) => u.position === 4));
    expect(stuck?.units.find((u) => u.position === 4)?.serial).toMatch(/^FU-\d{8}$/);
    expect(new Set(shutdown.sites.map((s) => s.id))).toEqual(new Set(fleet.causes.map((c) => c.siteId)));
  });

  it('keeps causes for the rounds of /live, and searches anew where something changed', async () => {
    const { rows } = await db.owner.query<{ id: number }>(
      'select id from site where organisation_id = $1 order by id',
      [actor.organisationId],
    );
    const ids = rows.map((r) => r.id);
    const kept = new FleetCauses();
    const read = (changed: readonly number[]) => asIngest((tx) => kept.read(tx, NOW, ids, new Set(changed)));
    const sorted = (causes: readonly { key: string }[]) => causes.map((c) => c.key).sort();
    expect(sorted(await read([]))).toEqual(sorted(await asIngest((tx) => causesNow(tx, NOW, ids))));
    await db.owner.query('update string_judgement set stuck = 0, silent = 0, verdict = $1, state = $2', [
      new Array<number>(20).fill(0),
      new Array<number>(20).fill(1),
    ]);
    const before = await read([]);
    expect(before.length).toBeGreaterThan(0);
    expect(await read(ids)).toEqual([]);
  });
});

describe('the first page of a large fleet', () => {
  it('has the lines that the view begins with, and tells of the whole', async () => {
    const fleet = await asActor(actor, (tx) => readFleet(tx, NOW));
    const [site] = fleet.sites;
    if (!site) throw new Error('the fleet is empty');
    const sites = Array.from({ length: 120 }, (_, i) => ({ ...site, id: `site-${i}`, name: `Roof ${i}` }));
    const { fleet: first, whole } = firstPage({ ...fleet, sites }, FLEET_DEFAULTS);
    expect(first.sites.map((s) => s.id)).toEqual(
      fleetLines(sites, fleet.causes, FLEET_DEFAULTS)
        .slice(0, LINES_AT_ONCE)
        .map((l) => l.site.id),
    );
    expect(whole).toMatchObject({ sites: 120, lines: 120 });
    expect(firstPage(fleet, FLEET_DEFAULTS)).toEqual({ fleet, whole: null });
  });
});
