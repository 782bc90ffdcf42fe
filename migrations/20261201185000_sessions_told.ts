import type { Knex } from 'knex';

/**
 * Whoever is signed out, deactivated or given other rights loses open connections at once, in every process: the
 * database tells of it, whichever way it was written. The notice carries the person's number only.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create function tell_access_changed() returns trigger language plpgsql set search_path = public as $f$
    begin
      perform pg_notify('access', (case tg_table_name
        when 'person' then to_jsonb(new) ->> 'id'
        when 'session' then to_jsonb(old) ->> 'user_id'
        else coalesce(to_jsonb(new), to_jsonb(old)) ->> 'person_id' end));
      return null;
    end $f$;
    create trigger access_changed after update of active, role, organisation_id on person
      for each row when (old.active is distinct from new.active or old.role is distinct from new.role
        or old.organisation_id is distinct from new.organisation_id) execute function tell_access_changed();
    create trigger access_changed after delete on session for each row execute function tell_access_changed();
    create trigger access_changed after insert or delete on site_access
      for each row execute function tell_access_changed();
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop trigger access_changed on site_access;
    drop trigger access_changed on session;
    drop trigger access_changed on person;
    drop function tell_access_changed();
  `);
}
