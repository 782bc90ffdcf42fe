import knexFactory from 'knex';
import type { Actor } from '../../src/domain/access/permissions';
import { demoFleet, DEMO_SEED } from '../../simulator/scenarios/demo';
import type { FleetPlan } from '../../simulator/plant/plan';
import { seedPlant } from '../../seeds/plant/seed-plant';
import type { SeededPlant, SeededSite } from '../../seeds/plant/seeded';
import type { TestDatabase } from './database';

export const PASSWORD = 'roof-ladder-meter';
export const SECRET = 'a secret of the tests';

export interface TestFleet {
  plan: FleetPlan;
  seeded: SeededPlant;
  site(name: string): SeededSite;
  actor(email: string): Promise<Actor>;
}

/** Some sites of the demo fleet, laid out for `since`, with everybody who belongs to them and no history. */
export async function testFleet(
  db: TestDatabase,
  siteNames: readonly string[],
  since = Math.floor(Date.now() / 1000),
): Promise<TestFleet> {
  const whole = demoFleet(DEMO_SEED, since);
  const plan: FleetPlan = {
    ...whole,
    organisations: whole.organisations.map((o) => ({
      ...o,
      sites: o.sites.filter((s) => siteNames.includes(s.name)),
      people: o.people.map((p) => ({ ...p, sites: p.sites.filter((s) => siteNames.includes(s)) })),
    })),
  };
  const knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 1 } });
  try {
    const seeded = await knex.transaction((tx) =>
      seedPlant(tx, plan, { secret: SECRET, password: PASSWORD }),
    );
    const day = new Date(since * 1000).toISOString().slice(0, 10);
    await knex.raw(`select ensure_days(cast(? as date) - 1, cast(? as date) + 1)`, [day, day]);
    return {
      plan,
      seeded,
      site: (name) => {
        const found = seeded.sites.get(name);
        if (!found) throw new Error(`The test fleet has no site "${name}".`);
        return found;
      },
      actor: async (email) => {
        const { rows } = await db.owner.query<{
          id: number;
          org: number;
          role: Actor['role'];
          sites: number[];
        }>(
          `select p.id, p.organisation_id as org, p.role,
                  coalesce((select array_agg(site_id) from site_access a where a.person_id = p.id), '{}') as sites
           from person p where p.email = $1`,
          [email],
        );
        const [p] = rows;
        if (!p) throw new Error(`The test fleet has nobody with the address "${email}".`);
        return {
          personId: p.id,
          organisationId: p.org,
          role: p.role,
          sites: p.role === 'customer' ? p.sites : 'all',
        };
      },
    };
  } finally {
    await knex.destroy();
  }
}
