import type { Knex } from 'knex';

/**
 * Name and place of a site as a search asks for them: small letters, a space before every word. Behind row-level security
 * a name may not choose rows by an index, so that each site of the fleet is looked at; this is one look where there were
 * four, in letters made small beforehand. The table has a row a site: writing it anew takes some milliseconds.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    set local lock_timeout = '3s';
    alter table site add column beginnings text not null
      generated always as (' ' || lower(name) || E'\\n ' || lower(place)) stored;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    set local lock_timeout = '3s';
    alter table site drop column beginnings;
  `);
}
