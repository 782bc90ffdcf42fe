import fs from 'node:fs';
import path from 'node:path';
import knexFactory, { type Knex } from 'knex';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { testDatabase, type TestDatabase } from '../support/database';
import { describeSchema } from './schema';

const FOLDER = path.resolve(import.meta.dirname, '../../migrations');
let db: TestDatabase;
let knex: Knex;
beforeAll(async () => {
  db = await testDatabase();
  knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 1 } });
});
afterAll(async () => {
  await knex.destroy();
  await db.drop();
});

/** The files under the names that the command line notes them by, read by the tests' own loader: one process for all steps. */
const migrationSource: Knex.MigrationSource<string> = {
  getMigrations: () =>
    Promise.resolve(
      fs
        .readdirSync(FOLDER)
        .filter((name) => name.endsWith('.ts'))
        .sort(),
    ),
  getMigrationName: (name) => name,
  getMigration: (name) => import(path.join(FOLDER, name)) as Promise<Knex.Migration>,
};

it('each step goes down, the last one to nothing, and up again to the same', async () => {
  const steps = (await migrationSource.getMigrations([])).length;
  const levels = [await describeSchema(db.owner)];
  for (let step = 0; step < steps; step++) {
    await knex.migrate.down({ migrationSource });
    levels.push(await describeSchema(db.owner));
  }
  expect(levels[0]?.length).toBeGreaterThan(300);
  expect(levels.at(-1)).toEqual([]);
  for (const level of levels.reverse().slice(1)) {
    await knex.migrate.up({ migrationSource });
    expect(await describeSchema(db.owner)).toEqual(level);
  }
}, 120_000);
