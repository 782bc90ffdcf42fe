import knexFactory from 'knex';
import type pg from 'pg';
import { clearFleet } from '../../../seeds/plant/clear';
import { seedFleet, shapeOf } from '../../../seeds/fleet/seed-fleet';
import { startLoad, type LoadRun } from '../../../simulator/load/run';
import type { LoadInput } from '../../../simulator/load/options';
import { openSession } from '../../../src/server/auth/sessions';

export const SECRET = 'loggers of a bench';
export const say = (text: string): void => void process.stderr.write(`${text}\n`);
export const printer =
  (bench: string) =>
  (name: string, value: number, unit: string, digits = 1): void =>
    void process.stdout.write(`${bench}.${name} ${value.toFixed(digits)} ${unit}\n`);

export interface Staged {
  nowS: number;
  units: number;
  sites: number;
}

/** A fleet of so many units for measuring, in place of what the bench's database held. */
export async function stageFleet(sites: number): Promise<Staged & { seconds: number }> {
  const knex = knexFactory({
    client: 'pg',
    connection: process.env.DATABASE_URL ?? '',
    pool: { min: 0, max: 2 },
  });
  try {
    if (await knex('organisation').first('id')) await knex.transaction((tx) => clearFleet(tx));
    const nowS = Math.floor(Date.now() / 1000);
    const made = await seedFleet(knex, { sites, secret: SECRET, nowS }, say);
    return { nowS, units: made.units, sites, seconds: made.seconds };
  } finally {
    await knex.destroy();
  }
}

/** Loggers of the staged fleet, all of them, in the background. */
export const loadOn = (
  staged: Staged,
  port: number,
  more: Partial<LoadInput> & { duration: number },
): LoadRun =>
  startLoad({
    url: `ws://127.0.0.1:${port}/ingest/v1`,
    secret: SECRET,
    loggers: staged.units / 100,
    noonHour: shapeOf(staged).noonHour,
    ...more,
  });

export interface Looker {
  organisationId: number;
  personId: number;
  cookie: string;
  get(path: string): Promise<{ ms: number; text: string }>;
}

/** Somebody of the first organisation who is signed in. */
export async function lookerAt(db: pg.Client, port: number): Promise<Looker> {
  const { rows } = await db.query<{ id: number; organisation: number }>(
    `select id, organisation_id as organisation from person where role = 'manager' order by id limit 1`,
  );
  const person = rows[0];
  if (!person) throw new Error('The fleet has nobody in it.');
  const cookie = (await openSession(person.id, false)).split(';')[0] ?? '';
  return {
    organisationId: person.organisation,
    personId: person.id,
    cookie,
    get: async (path) => {
      const start = performance.now();
      const answer = await fetch(`http://127.0.0.1:${port}${path}`, {
        headers: { cookie },
        redirect: 'manual',
      });
      const text = await answer.text();
      if (answer.status !== 200) throw new Error(`${path} answered ${answer.status}: ${text.slice(0, 300)}`);
      return { ms: performance.now() - start, text };
    },
  };
}
