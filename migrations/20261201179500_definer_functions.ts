import type { Knex } from 'knex';

/**
 * Functions that run as the owner: names in them are looked up in our schema first and in nobody's temporary tables,
 * which PostgreSQL would else look into before.
 */
const DEFINERS = [
  'ensure_days(date, date)',
  'drop_days_before(date)',
  'next_case_number(int4)',
  'shutdown_test_supersedes()',
];

export async function up(knex: Knex): Promise<void> {
  for (const name of DEFINERS) await knex.raw(`alter function ${name} set search_path = public, pg_temp`);
}

export async function down(knex: Knex): Promise<void> {
  for (const name of DEFINERS) await knex.raw(`alter function ${name} set search_path = public`);
}
