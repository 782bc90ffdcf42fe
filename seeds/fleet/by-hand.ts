import { hash } from '@node-rs/argon2';
import knexFactory from 'knex';
import { seedFleet } from './seed-fleet';

/**
 * Makes a big fleet in the migrated, empty database of DATABASE_URL: `node --import tsx seeds/fleet/by-hand.ts 100000`
 * (units, in steps of 100). Its loggers' tokens are made of WAKELINE_DEMO_SECRET. Signs in: person1.1@wakeline.example.
 */
const units = Number(process.argv[2] ?? 100_000);
if (!Number.isInteger(units / 100) || units < 100 || units > 1_000_000)
  throw new Error('Say how many units: a multiple of 100, at most 1,000,000.');
const secret = process.env.WAKELINE_DEMO_SECRET;
if (!secret) throw new Error('WAKELINE_DEMO_SECRET is not set: the same text as the load has.');
const knex = knexFactory({
  client: 'pg',
  connection: process.env.DATABASE_URL ?? '',
  pool: { min: 0, max: 2 },
});
try {
  const passwordHash = await hash('roof-ladder-meter', {
    memoryCost: 19_456,
    timeCost: 2,
    parallelism: 1,
    outputLen: 32,
  });
  const made = await seedFleet(
    knex,
    { sites: units / 100, secret, passwordHash, nowS: Math.floor(Date.now() / 1000) },
    console.log,
  );
  console.log(`${made.units} units in ${made.seconds.toFixed(1)} s`);
} finally {
  await knex.destroy();
}
