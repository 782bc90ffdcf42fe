import { execFile } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import { promisify } from 'node:util';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { testDatabase, type TestDatabase } from '../support/database';
import { describeSchema } from './schema';

const exec = promisify(execFile);
const ROOT = path.resolve(import.meta.dirname, '../..');
let db: TestDatabase;
beforeAll(async () => {
  db = await testDatabase();
});
afterAll(() => db.drop());

const knex = (command: string) =>
  exec(process.execPath, ['--import', 'tsx', 'node_modules/knex/bin/cli.js', command], {
    cwd: ROOT,
    env: { ...process.env, DATABASE_URL: db.url },
  });

it(
  'each step goes down, the last one to nothing, and up again to the same',
  { timeout: 120_000 },
  async () => {
    const steps = fs.readdirSync(path.join(ROOT, 'migrations')).length;
    const levels = [await describeSchema(db.owner)];
    for (let step = 0; step < steps; step++) {
      await knex('migrate:down');
      levels.push(await describeSchema(db.owner));
    }
    expect(levels[0]?.length).toBeGreaterThan(300);
    expect(levels.at(-1)).toEqual([]);
    for (const level of levels.reverse().slice(1)) {
      await knex('migrate:up');
      expect(await describeSchema(db.owner)).toEqual(level);
    }
  },
);
