import type { Knex } from 'knex';

/** What every installation needs, demo or not: partitions for readings that may come today and the next days. */
export async function seed(knex: Knex): Promise<void> {
  await knex.raw(
    `select ensure_days((now() at time zone 'UTC')::date - 1, (now() at time zone 'UTC')::date + 3)`,
  );
}
