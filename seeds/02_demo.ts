import type { Knex } from 'knex';
import { DEMO_SEED, demoFleet } from '../simulator/scenarios/demo';
import { seedHistory } from './history/fleet-history';
import { clearFleet } from './plant/clear';
import { seedPlant } from './plant/seed-plant';
import { seedAudit } from './records/audit';
import { seedCases } from './records/cases';
import { seedCommissioningRecords } from './records/commissioning';
import { seedPrices } from './records/prices';

export const DEMO_PASSWORD = 'roof-ladder-meter';

/**
 * The demo fleet with its past. Does nothing in a database that already has an organisation, unless
 * WAKELINE_SEED_FRESH=1 asks to empty it first. WAKELINE_DEMO_SECRET must be the simulator's too,
 * and so must WAKELINE_DEMO_SINCE (epoch seconds for which the fleet is laid out; now where it is not given).
 */
export async function seed(knex: Knex): Promise<void> {
  const secret = process.env.WAKELINE_DEMO_SECRET;
  const fresh = process.env.WAKELINE_SEED_FRESH === '1';
  const since = Number(process.env.WAKELINE_DEMO_SINCE) || Math.floor(Date.now() / 60_000) * 60;
  const there = await knex('organisation').first<{ id: number } | undefined>('id');
  if (there && !fresh) return;
  if (!secret)
    throw new Error(
      'WAKELINE_DEMO_SECRET is not set: give the seed and the simulator the same secret text, so that the demo’s loggers may report.',
    );
  await knex.transaction(async (tx) => {
    if (there) await clearFleet(tx);
    const fleet = demoFleet(DEMO_SEED, since);
    const plant = await seedPlant(tx, fleet, { secret, password: DEMO_PASSWORD });
    await seedCommissioningRecords(tx, plant, since);
    await seedPrices(tx);
    await seedCases(tx, plant, since);
    await seedAudit(tx, plant, since);
    await seedHistory(tx, fleet, plant, (line) => console.log(line));
  });
  // All but the frames: those are only ever read by string and time, and statistics of their arrays cost seconds.
  const { rows } = await knex.raw<{ rows: { name: string }[] }>(
    `select format('%I', c.relname) as name from pg_class c join pg_namespace n on n.oid = c.relnamespace
     where n.nspname = 'public' and c.relkind = 'r' and not c.relispartition`,
  );
  await knex.raw(`analyze ${rows.map((r) => r.name).join(', ')}`);
}
