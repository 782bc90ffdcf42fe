import type { Knex } from 'knex';

/**
 * The second wall. The actor is in two settings of the transaction, set by server/db/transaction.ts:
 * wakeline.organisation (an id) and wakeline.sites ('*' or ids with commas). A site is visible by them,
 * everything on a site through its site, frames through their string.
 * The sign-in pool carries wakeline.purpose = 'sign_in' from its connection on.
 */
const BY_SITE = [
  'plane',
  'inverter',
  'input',
  'initiator',
  'zone',
  'logger',
  'gateway',
  'transmitter',
  'sensor',
  'string',
  'transmitter_string',
  'slot',
  'placement',
  'roster_version',
  'string_state',
  'input_state',
  'inverter_state',
  'weather_state',
  'string_day',
  'site_quarter',
  'site_day',
  'trace',
  'command',
  'roll_call',
  'heard',
  'string_judgement',
  'unit_event',
  'event',
  'shutdown_test',
  'meter_reading',
  'install_check',
];
const BY_ORGANISATION = ['module_type', 'unit_type', 'unit', 'audit_entry'];
const BY_STRING = ['string_frame', 'string_quarter', 'rollup_dirty', 'late_frame'];
const PARENT: Record<string, string> = {
  input_frame: 'input',
  inverter_frame: 'inverter',
  weather_frame: 'sensor',
  ingest_token: 'logger',
};
const OTHERS = ['organisation', 'person', 'session', 'site', 'site_access'];

/** What ingest, judgement and jobs may write; the plant is the web's. */
const INGEST_WRITES = [
  'string_frame',
  'input_frame',
  'inverter_frame',
  'weather_frame',
  'string_quarter',
  'late_frame',
  'string_state',
  'input_state',
  'inverter_state',
  'weather_state',
  'rollup_dirty',
  'rollup_watermark',
  'string_day',
  'site_quarter',
  'site_day',
  'trace',
  'command',
  'heard',
  'gateway',
  'roster_version',
  'string_judgement',
  'unit_event',
];

/** What the web may write; it reads everything that its policies let through. Telemetry is read-only to it. */
const APP_WRITES: Record<string, string> = {
  session: 'insert, update, delete',
  person: 'insert, update',
  site_access: 'insert, delete',
  site: 'insert, update',
  audit_entry: 'insert',
  event: 'insert',
  roll_call: 'insert, update',
  meter_reading: 'insert',
  install_check: 'insert',
  shutdown_test: 'insert',
};

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create function actor_organisation() returns int4 language sql stable parallel safe as
      $f$ select nullif(current_setting('wakeline.organisation', true), '')::int4 $f$;
    create function actor_sites() returns int4[] language sql stable parallel safe as
      $f$ select case current_setting('wakeline.sites', true) when '*' then null
                 else string_to_array(coalesce(current_setting('wakeline.sites', true), ''), ',')::int4[] end $f$;
    create function signing_in() returns boolean language sql stable parallel safe as
      $f$ select coalesce(current_setting('wakeline.purpose', true), '') = 'sign_in' $f$;
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;

  const enable = (table: string, app: string) =>
    knex.raw(`
      alter table ${table} enable row level security;
      create policy ${table}_app on ${table} to wakeline_app using (${app}) with check (${app});
      create policy ${table}_ingest on ${table} to wakeline_ingest using (true) with check (true);
    `);
  for (const t of BY_SITE) await enable(t, `exists (select from site where site.id = ${t}.site_id)`);
  for (const t of BY_ORGANISATION) await enable(t, `organisation_id = (select actor_organisation())`);
  for (const t of BY_STRING) await enable(t, `exists (select from string where string.id = ${t}.string_id)`);
  for (const [t, parent] of Object.entries(PARENT))
    await enable(t, `exists (select from ${parent} where ${parent}.id = ${t}.${parent}_id)`);
  await enable('organisation', `id = (select actor_organisation()) or (select signing_in())`);
  await enable('person', `organisation_id = (select actor_organisation()) or (select signing_in())`);
  await enable(
    'session',
    `(select signing_in()) or exists (select from person where person.id = session.user_id)`,
  );
  await enable(
    'site_access',
    `(select signing_in()) or exists (select from person where person.id = site_access.person_id)`,
  );
  await enable(
    'site',
    `organisation_id = (select actor_organisation())
     and ((select actor_sites()) is null or id = any ((select actor_sites())::int4[]))`,
  );

  const all = [
    ...BY_SITE,
    ...BY_ORGANISATION,
    ...BY_STRING,
    ...Object.keys(PARENT),
    ...OTHERS,
    'installation',
    'rollup_watermark',
  ];
  await knex.raw(`
    grant usage on schema public to wakeline_app, wakeline_ingest;
    grant select on ${all.join(', ')} to wakeline_app, wakeline_ingest;
    revoke select on ingest_token from wakeline_app;
    grant insert, update on ${INGEST_WRITES.join(', ')} to wakeline_ingest;
    grant update on logger to wakeline_ingest;
    grant insert on event, audit_entry to wakeline_ingest;
    grant delete on rollup_dirty, late_frame to wakeline_ingest;
    revoke execute on function ensure_days(date, date), drop_days_before(date) from public;
    grant execute on function ensure_days(date, date), drop_days_before(date) to wakeline_ingest;
    grant select, insert, update, delete on rate_limit to wakeline_app;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
  for (const [table, rights] of Object.entries(APP_WRITES))
    await knex.raw(`grant ${rights} on ${table} to wakeline_app`);
}

export async function down(knex: Knex): Promise<void> {
  const all = [...BY_SITE, ...BY_ORGANISATION, ...BY_STRING, ...Object.keys(PARENT), ...OTHERS];
  for (const t of all)
    await knex.raw(`
      drop policy if exists ${t}_app on ${t};
      drop policy if exists ${t}_ingest on ${t};
      alter table ${t} disable row level security;
    `);
  await knex.raw(`
    do $$ begin
      if exists (select from pg_roles where rolname = 'wakeline_app') then
        revoke all on all tables in schema public from wakeline_app, wakeline_ingest;
        revoke all on all sequences in schema public from wakeline_app, wakeline_ingest;
        revoke all on function ensure_days(date, date), drop_days_before(date) from wakeline_ingest;
        grant execute on function ensure_days(date, date) to public;
        grant execute on function drop_days_before(date) to public;
        revoke usage on schema public from wakeline_app, wakeline_ingest;
      end if;
    end $$;
    drop function signing_in, actor_sites, actor_organisation;
  `);
}
