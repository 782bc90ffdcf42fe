import knexFactory from 'knex';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { seedFleet } from '../../seeds/fleet/seed-fleet';
import { UNITS_A_SITE } from '../../seeds/fleet/plant';
import { fleetLines } from '../../src/features/fleet/list';
import { firstPage, LINES_AT_ONCE } from '../../src/features/fleet/first-page';
import { FLEET_DEFAULTS } from '../../src/features/fleet/view';
import { UNIT_STATES } from '../../src/domain/verdicts/codes';
import { sentCause } from '../../src/schemas/api/causes-on-the-way';
import { asActor, asIngest } from '../../src/server/db/transaction';
import { WAITING_MAX_BYTES } from '../../src/server/live/connection';
import { sitesNow } from '../../src/server/queries/sites-now';
import { causesNow } from '../../src/server/services/causes';
import { readFleet, readShutdown } from '../../src/server/services/fleet';
import { KeptSites, type FleetStanding } from '../../src/server/services/kept-sites';
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

  describe('kept between looks', () => {
    const standing = (kept: KeptSites, ids: readonly number[], at = NOW) =>
      asIngest((tx) => kept.read(tx, at, ids));
    const idsOf = async (): Promise<number[]> => {
      const { rows } = await db.owner.query<{ id: number }>(
        'select id from site where organisation_id = $1 order by name',
        [actor.organisationId],
      );
      return rows.map((r) => r.id);
    };
    /** Another verdict at the first unit of a site. */
    const stick = (siteId: number, stuck: boolean) =>
      db.owner.query(
        `update string_judgement set verdict[1] = $2, state[1] = $3, stuck = $2
         where string_id = (select min(id) from string where site_id = $1)`,
        [siteId, stuck ? 1 : 0, stuck ? 2 : 1],
      );
    const isStuck = ({ sites, causes }: FleetStanding, at: number) =>
      causes.some(
        (c) => c.siteId === sites[at]?.id && c.verdict === 'stuck' && c.units.some((u) => u.position === 1),
      );

    it('is what a fresh reading says, in the order asked for, without sites that are gone', async () => {
      const ids = await idsOf();
      const fresh = {
        sites: await asIngest((tx) => sitesNow(tx, NOW, ids)),
        causes: await asIngest((tx) => causesNow(tx, NOW, ids)),
      };
      const kept = new KeptSites(() => true);
      for (const _ of ['read', 'kept']) {
        expect(await standing(kept, ids)).toEqual(fresh);
      }
      const turned = await standing(kept, [ids[2] ?? 0, 999_999, ids[0] ?? 0]);
      expect(turned.sites.map((s) => s.id)).toEqual([fresh.sites[2]?.id, fresh.sites[0]?.id]);
    });

    it('holds until somebody tells of a change, or for a minute', async () => {
      const ids = await idsOf();
      const [first = 0, second = 0] = ids;
      const kept = new KeptSites(() => true);
      await standing(kept, ids);
      await stick(first, true);
      await stick(second, true);
      expect(isStuck(await standing(kept, ids), 0)).toBe(false);
      kept.changed([first]);
      const told = await standing(kept, ids);
      expect(isStuck(told, 0)).toBe(true);
      expect(told.sites[0]).toEqual((await asIngest((tx) => sitesNow(tx, NOW, [first])))[0]);
      expect(isStuck(told, 1)).toBe(false);
      expect(isStuck(await standing(kept, ids, new Date(NOW.getTime() + 60_000)), 1)).toBe(true);
      await stick(first, false);
      await stick(second, false);
      kept.missed();
      const after = await standing(kept, ids);
      expect([isStuck(after, 0), isStuck(after, 1)]).toEqual([false, false]);
    });

    it('holds nothing while nobody tells of changes', async () => {
      const ids = await idsOf();
      const [first = 0] = ids;
      let hears = true;
      const kept = new KeptSites(() => hears);
      await standing(kept, ids);
      hears = false;
      await stick(first, true);
      expect(isStuck(await standing(kept, ids), 0)).toBe(true);
      await stick(first, false);
      expect(isStuck(await standing(kept, ids), 0)).toBe(false);
      kept.heardBy(() => true);
      await standing(kept, ids);
      await stick(first, true);
      expect(isStuck(await standing(kept, ids), 0)).toBe(false);
      await stick(first, false);
    });

    it('does not keep what changed while it was read', async () => {
      const ids = await idsOf();
      const [first = 0] = ids;
      const kept = new KeptSites(() => true);
      // read in a transaction that does not see the change any more
      await asIngest(async (tx) => {
        await tx.raw('set transaction isolation level repeatable read');
        await tx.raw('select 1 from site');
        await stick(first, true);
        const reading = kept.read(tx, NOW, ids);
        kept.changed([first]);
        expect(isStuck(await reading, 0)).toBe(false);
      });
      expect(isStuck(await standing(kept, ids), 0)).toBe(true);
      await stick(first, false);
    });

    it('leaves no site out that changed while others were read', async () => {
      const ids = await idsOf();
      const [first = 0, second = 0] = ids;
      const kept = new KeptSites(() => true);
      await standing(kept, ids);
      for (const meanwhile of [() => kept.changed([second]), () => kept.missed()]) {
        kept.changed([first]);
        const { sites } = await asIngest((tx) => {
          const reading = kept.read(tx, NOW, ids);
          meanwhile();
          return reading;
        });
        expect(sites).toHaveLength(SITES);
      }
    });

    it('is read ahead of the next look', async () => {
      const ids = await idsOf();
      const [first = 0] = ids;
      const kept = new KeptSites(() => true);
      await standing(kept, ids);
      await stick(first, true);
      kept.changed([first]);
      await kept.readAhead(NOW);
      await stick(first, false);
      expect(isStuck(await standing(kept, ids), 0)).toBe(true);
      // what nobody asks for any more is not read
      kept.changed([first]);
      const later = new Date(NOW.getTime() + 11 * 60_000);
      await kept.readAhead(later);
      await stick(first, true);
      expect(isStuck(await standing(kept, ids, later), 0)).toBe(true);
      await stick(first, false);
    });
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

describe('an outage in which every logger is away', () => {
  it('leaves every unit silent with a cause, and a thousand such sites below what may wait for a browser', async () => {
    await db.owner.query(
      `update string_judgement set state = array_fill($1::int2, array[cardinality(state)]),
         verdict = array_fill(0::int2, array[cardinality(state)]),
         silent = cardinality(state), passing = 0, shutdown = 0, stuck = 0`,
      [UNIT_STATES.indexOf('silent')],
    );
    const { sites, causes } = await asActor(actor, (tx) => readFleet(tx, NOW));
    expect(causes.flatMap((c) => c.units)).toHaveLength(SITES * UNITS_A_SITE);
    expect(causes.every((c) => c.verdict === 'silent')).toBe(true);
    const bytes = JSON.stringify({ sites, causes: causes.map(sentCause) }).length;
    expect((bytes / SITES) * 1000).toBeLessThan(WAITING_MAX_BYTES);
  });
});
