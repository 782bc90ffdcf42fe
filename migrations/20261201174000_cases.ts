import type { Knex } from 'knex';

/**
 * Numbers of cases count within the organisation. Whoever opens a case may see only some of its sites, so the newest
 * number is read by the owner, one opener at a time.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create function next_case_number(organisation int4) returns int4 language plpgsql security definer
      set search_path = public as $f$
    begin
      if actor_organisation() is distinct from organisation then
        raise exception 'cases are numbered by their own organisation';
      end if;
      perform pg_advisory_xact_lock(727020, organisation);
      return (select coalesce(max(number), 0) + 1 from case_file where organisation_id = organisation);
    end $f$;
    create index case_file_unchecked on case_file (closed_at) where closed_at is not null and checked_at is null;
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  await knex.raw(`
    revoke execute on function next_case_number(int4) from public;
    grant execute on function next_case_number(int4) to wakeline_app;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`drop index case_file_unchecked; drop function next_case_number(int4)`);
}
