import type { Knex } from 'knex';

/**
 * Strings by the beginning of their name, from their index: behind row-level security a name may not choose rows, so that
 * each string of the fleet would be looked at. The function says itself whose strings they are.
 */

const FUNCTION = 'strings_named(text, text, int4)';

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    -- The first of those between two names of capitals, as far as the actor may see them: along the index until there are
    -- enough. A plan for any names guesses few and would rather gather and sort them all, of a large fleet every string.
    create function strings_named(first text, past text, most int4) returns setof int4
      language sql stable security definer set search_path = public, pg_temp set enable_bitmapscan = off as $f$
      select s.id
      from (select id, site_id, upper(name) as capitals from string
            where upper(name) ~>=~ first and upper(name) ~<~ past
            order by upper(name) using ~<~ offset 0) s
      cross join lateral (
        select from site
        where site.id = s.site_id and site.organisation_id = (select actor_organisation())
          and ((select actor_sites()) is null or site.id = any ((select actor_sites())::int4[])) limit 1) visible
      order by s.capitals using ~<~ limit most
    $f$;
    revoke execute on function ${FUNCTION} from public;
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (rows[0]?.roles_made) await knex.raw(`grant execute on function ${FUNCTION} to wakeline_app`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`drop function ${FUNCTION}`);
}
