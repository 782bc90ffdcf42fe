import type { Knex } from 'knex';

/**
 * Low days of strings are few among all judged days: whoever lists them goes through no others. Made beside the running
 * system, outside a transaction.
 */
export const config = { transaction: false };

export async function up(knex: Knex): Promise<void> {
  // one that was broken off is there and of no use
  await knex.raw('drop index concurrently if exists output_day_low');
  await knex.raw(
    `create index concurrently output_day_low on output_day (site_id, day desc, string_id) where outcome = 'low'`,
  );
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop index concurrently if exists output_day_low');
}
