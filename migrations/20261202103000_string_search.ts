import type { Knex } from 'knex';

/**
 * Strings by the beginning of their name, from their index: behind row-level security a name may not choose rows, so that
 * each string of the fleet would be looked at. The function says itself whose strings they are.
 */

const FUNCTION = 'strings_named(text, text, int4)';

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    -- the first of those between two names of capitals, as far as the actor may see them
    create function strings_named(first text, past text, most int4) returns setof int4
      language sql stable security definer set search_path = public, pg_temp as $f$
      select s.id from string s join site on site.id = s.site_id
      where upper(s.name) ~>=~ first and upper(s.name) ~<~ past
        and site.organisation_id = (select actor_organisation())
        and ((select actor_sites()) is null or site.id = any ((select actor_sites())::int4[]))
      order by upper(s.name) using ~<~ limit most
    $f$;
    revoke execute on function ${FUNCTION} from public;
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (rows[0]?.roles_made) await knex.raw(`grant execute on function ${FUNCTION} to wakeline_app`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`drop function ${FUNCTION}`);
}
