import { hash } from '@node-rs/argon2';
import type { Knex } from 'knex';
import type { FleetPlan, OrganisationPlan } from '../../simulator/plant/plan';
import { seedEquipment, seedPairs } from './equipment';
import { insertRows, known } from './rows';
import type { SeededPlant, SeedOptions } from './seeded';
import { seedSite } from './site';

const ARGON = { memoryCost: 19_456, timeCost: 2, parallelism: 1, outputLen: 32 };

/**
 * Writes a plan's organisations, people, equipment and as-built into an empty or used database, without any
 * history. Runs in the connection given: pass a transaction to have all of it or nothing.
 */
export async function seedPlant(db: Knex, plan: FleetPlan, options: SeedOptions): Promise<SeededPlant> {
  const seeded: SeededPlant = { organisations: new Map(), people: new Map(), sites: new Map() };
  const since = new Date(plan.since * 1000);
  for (const organisation of plan.organisations)
    await seedOrganisation(db, organisation, since, options, seeded);
  return seeded;
}

async function seedOrganisation(
  db: Knex,
  organisation: OrganisationPlan,
  since: Date,
  options: SeedOptions,
  seeded: SeededPlant,
): Promise<void> {
  const [made] = await insertRows<{ id: number; ref: string }>(
    db,
    'organisation',
    { name: 'text', time_zone: 'text', phone: 'text', created_at: 'timestamptz' },
    [
      {
        name: organisation.name,
        time_zone: organisation.timeZone,
        phone: organisation.phone,
        created_at: since,
      },
    ],
    ['id', 'ref'],
  );
  if (!made) throw new Error('The organisation was not written.');
  seeded.organisations.set(organisation.name, made);

  const { connectorTypes, ...types } = await seedEquipment(db, organisation, made.id);
  for (const site of organisation.sites)
    seeded.sites.set(
      site.name,
      await seedSite(db, site, { organisationId: made.id, since, ...types, options }),
    );
  await seedPeople(db, organisation, made.id, options, seeded);
  const manager = organisation.people.find((p) => p.role === 'manager');
  if (manager)
    await seedPairs(db, made.id, connectorTypes, known(seeded.people, manager.email, 'the person').id);
}

async function seedPeople(
  db: Knex,
  organisation: OrganisationPlan,
  organisationId: number,
  options: SeedOptions,
  seeded: SeededPlant,
): Promise<void> {
  const rows = await Promise.all(
    organisation.people.map(async (p) => ({
      organisation_id: organisationId,
      email: p.email,
      name: p.name,
      role: p.role,
      password_hash: options.password === undefined ? '!' : await hash(options.password, ARGON),
    })),
  );
  const people = await insertRows<{ id: number; ref: string; email: string }>(
    db,
    'person',
    { organisation_id: 'int4', email: 'text', name: 'text', role: 'text', password_hash: 'text' },
    rows,
    ['id', 'ref', 'email'],
  );
  for (const p of people) seeded.people.set(p.email, { id: p.id, ref: p.ref });
  await insertRows(
    db,
    'site_access',
    { person_id: 'int4', site_id: 'int4' },
    organisation.people.flatMap((p) =>
      p.sites.map((name) => ({
        person_id: known(seeded.people, p.email, 'the person').id,
        site_id: known(seeded.sites, name, 'the site').id,
      })),
    ),
    ['site_id'],
  );
}
