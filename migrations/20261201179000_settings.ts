import type { Knex } from 'knex';

/**
 * An organisation may hide raw readings earlier than the installation gives them up: one policy says so for every page,
 * download and program. The instant is found once a statement.
 */
const RAW: Record<string, string> = {
  string_frame: 'string',
  input_frame: 'input',
  inverter_frame: 'inverter',
  weather_frame: 'sensor',
};

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create function actor_raw_from() returns timestamptz language sql stable parallel safe as
      $f$ select coalesce((select now() - make_interval(days => hide_raw_after_days) from organisation
            where id = actor_organisation()), '-infinity'::timestamptz) $f$;
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  for (const [table, parent] of Object.entries(RAW))
    await knex.raw(
      `alter policy ${table}_app on ${table} using (
         exists (select from ${parent} where ${parent}.id = ${table}.${parent}_id)
         and ${table}.at >= (select actor_raw_from()))`,
    );
}

export async function down(knex: Knex): Promise<void> {
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (rows[0]?.roles_made)
    for (const [table, parent] of Object.entries(RAW))
      await knex.raw(
        `alter policy ${table}_app on ${table} using (exists (select from ${parent} where ${parent}.id = ${table}.${parent}_id))`,
      );
  await knex.raw('drop function actor_raw_from');
}
