import type { Knex } from 'knex';

/**
 * From drawing to handover: the rest of the catalogue, what is recorded on the roof, files, and the outbox.
 *
 * What a phone records carries its own `ref` (so that sending it twice stores it once), the phone's time in `at` and
 * the server's in `recorded_at`. Records are never changed: a newer one supersedes.
 */
const BY_SITE = ['string_sign_off', 'accepted_gap'];
const BY_ORGANISATION = ['connector_type', 'connector_pair', 'inverter_type', 'message'];

/** The web writes the plant from here on. */
const APP_WRITES: Record<string, string> = {
  module_type: 'insert, update',
  unit_type: 'insert, update',
  connector_type: 'insert, update',
  connector_pair: 'insert, update',
  inverter_type: 'insert, update',
  plane: 'insert, update, delete',
  inverter: 'insert, update, delete',
  input: 'insert, update, delete',
  initiator: 'insert, update, delete',
  zone: 'insert, update, delete',
  transmitter: 'insert, update, delete',
  transmitter_string: 'insert, delete',
  logger: 'insert, update, delete',
  ingest_token: 'insert',
  sensor: 'insert, update, delete',
  string: 'insert, update, delete',
  slot: 'insert, update, delete',
  unit: 'insert, update',
  placement: 'insert, update, delete',
  string_sign_off: 'insert',
  accepted_gap: 'insert',
  attachment: 'insert',
  attachment_data: 'insert',
  message: 'insert',
};

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table connector_type (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      name text not null check (length(btrim(name)) between 1 and 80),
      maker text not null check (length(btrim(maker)) between 1 and 80),
      family text not null check (length(btrim(family)) between 1 and 80), -- the maker's type designation
      voltage_max real not null check (voltage_max between 50 and 2000), -- V
      current_max real not null check (current_max between 1 and 200), -- A
      temperature_max real not null default 85 check (temperature_max between 40 and 150), -- °C
      tool text not null default '', -- what crimps and what opens it
      archived_at timestamptz,
      unique (organisation_id, name),
      unique (id, organisation_id)
    );

    create table connector_pair ( -- two different types that a document says may be mated; a manager records it
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      first_id int4 not null,
      second_id int4 not null,
      evidence text not null check (length(btrim(evidence)) between 10 and 2000), -- document, edition, page
      recorded_by int4 not null references person,
      recorded_at timestamptz not null default now(),
      ended_at timestamptz,
      foreign key (first_id, organisation_id) references connector_type (id, organisation_id),
      foreign key (second_id, organisation_id) references connector_type (id, organisation_id),
      check (first_id < second_id)
    );
    create unique index connector_pair_in_force on connector_pair (first_id, second_id) where ended_at is null;

    create table inverter_type (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      name text not null check (length(btrim(name)) between 1 and 80),
      ac_power_max real not null check (ac_power_max between 100 and 10000000), -- W
      inputs int2 not null check (inputs between 1 and 64),
      strings_per_input int2 not null default 2 check (strings_per_input between 1 and 64),
      voltage_max real not null check (voltage_max between 30 and 2000), -- V
      mppt_min real not null check (mppt_min > 0), -- V
      mppt_max real not null, -- V
      current_max real not null check (current_max between 1 and 1000), -- A, of one input
      isc_max real not null, -- A, of one input
      archived_at timestamptz,
      check (mppt_min < mppt_max and mppt_max <= voltage_max and current_max <= isc_max),
      unique (organisation_id, name)
    );

    alter table module_type
      add voltage_system_max real not null default 1000 check (voltage_system_max between 50 and 2000), -- V
      add fuse_max real not null default 20 check (fuse_max between 1 and 100), -- A, in series with a string
      add length_m real not null default 1.72 check (length_m between 0.2 and 4),
      add width_m real not null default 1.13 check (width_m between 0.2 and 4),
      add connector_type_id int4 references connector_type;
    alter table unit_type
      add voltage_system_max real not null default 1000 check (voltage_system_max between 50 and 2000), -- V
      add power_max real not null default 700 check (power_max between 50 and 3000), -- W of the module behind it
      add connector_in_id int4 references connector_type, -- towards the module
      add connector_out_id int4 references connector_type; -- towards the neighbours
    alter table inverter add inverter_type_id int4 references inverter_type;

    alter table site
      add structure text not null default 'other_building'
        check (structure in ('one_or_two_family_dwelling', 'other_building', 'not_on_building')), -- NEC 690.7
      add temperature_min real check (temperature_min between -60 and 30), -- °C, coldest expected; null: not entered
      add temperature_max real check (temperature_max between 0 and 60), -- °C, hottest air expected
      add check (temperature_min < temperature_max);

    alter table audit_entry
      add site_id int4 references site,
      add string_id int4 references string on delete set null,
      add reason text not null default '';
    create index audit_entry_site on audit_entry (site_id, at desc) where site_id is not null;

    alter table install_check
      add recorded_at timestamptz not null default now(),
      add note text not null default '',
      add figures jsonb not null default '{}', -- what was measured or chosen: keys in src/domain/commissioning
      add supersedes int4 references install_check;
    alter table install_check add unique (supersedes); -- two people can't both replace the same record unseen
    alter table meter_reading
      add recorded_at timestamptz not null default now(),
      add note text not null default '',
      add commanded text not null default 'unknown' check (commanded in ('released', 'shutdown', 'unknown')),
      add siblings jsonb not null default '[]', -- refs of the readings of other strings that were used
      add supersedes int4 references meter_reading;
    alter table meter_reading add unique (supersedes);

    create table string_sign_off ( -- the install checks of a string, as they stood, signed by one person
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      string_id int4 not null,
      person_id int4 not null references person,
      at timestamptz not null default now(),
      fingerprint text not null, -- sha-256 of the records signed
      foreign key (string_id, site_id) references string (id, site_id)
    );
    create index string_sign_off_string on string_sign_off (string_id, at desc);

    create table accepted_gap ( -- what a manager lets stand open at handover, by name and with a reason
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      step text not null,
      gap text not null, -- the key of the blocking point
      words text not null,
      reason text not null check (length(btrim(reason)) between 3 and 2000),
      person_id int4 not null references person,
      at timestamptz not null default now()
    );
    create index accepted_gap_site on accepted_gap (site_id);

    create table attachment (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(), -- made on the phone: sent twice is stored once
      organisation_id int4 not null references organisation,
      site_id int4,
      string_id int4,
      subject text not null, -- install_check, meter_reading, shutdown_test, connector_pair, …
      subject_ref uuid, -- may arrive before its subject
      name text not null,
      media_type text not null,
      byte_size int4 not null check (byte_size between 1 and 104857600),
      sha256 bytea not null,
      width int4,
      height int4,
      note text not null default '',
      place_kept boolean not null default false, -- whether EXIF's place was wanted
      person_id int4 references person,
      at timestamptz not null,
      recorded_at timestamptz not null default now(),
      foreign key (site_id, organisation_id) references site (id, organisation_id),
      foreign key (string_id, site_id) references string (id, site_id)
    );
    create index attachment_subject on attachment (subject_ref);
    create index attachment_site on attachment (site_id, at desc);

    create table attachment_data ( -- the bytes lie in the database: one backup, one transaction, every process
      attachment_id int4 not null references attachment on delete cascade,
      variant text not null check (variant in ('full', 'thumbnail')),
      media_type text not null,
      data bytea not null,
      primary key (attachment_id, variant)
    );
    alter table attachment_data alter column data set storage external;

    create table message ( -- outbox: written with the change that it tells of, sent by a job
      id int8 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      person_id int4 references person,
      site_id int4 references site,
      kind text not null,
      event_key text not null, -- one message a person and event, never two
      to_address text not null,
      to_name text not null default '',
      subject text not null,
      text_body text not null,
      html_body text not null,
      created_at timestamptz not null default now(),
      not_before timestamptz not null default now(),
      attempts int2 not null default 0,
      last_error text,
      given_up_at timestamptz,
      sent_at timestamptz,
      unique (event_key, to_address)
    );
    create index message_waiting on message (not_before) where sent_at is null and given_up_at is null;
    create index message_organisation on message (organisation_id, created_at desc);
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;

  const enable = (table: string, app: string) =>
    knex.raw(`
      alter table ${table} enable row level security;
      create policy ${table}_app on ${table} to wakeline_app using (${app}) with check (${app});
      create policy ${table}_ingest on ${table} to wakeline_ingest using (true) with check (true);
      grant select on ${table} to wakeline_app, wakeline_ingest;
    `);
  for (const t of BY_SITE) await enable(t, `exists (select from site where site.id = ${t}.site_id)`);
  for (const t of BY_ORGANISATION) await enable(t, `organisation_id = (select actor_organisation())`);
  await enable(
    'attachment',
    `organisation_id = (select actor_organisation())
     and (site_id is null or exists (select from site where site.id = attachment.site_id))`,
  );
  await enable(
    'attachment_data',
    `exists (select from attachment where attachment.id = attachment_data.attachment_id)`,
  );
  await knex.raw(`
    grant select (id, logger_id, created_at, ended_at) on ingest_token to wakeline_app;
    grant update (ended_at) on ingest_token to wakeline_app;
    grant update (unit_id) on heard to wakeline_app;
    grant insert, update on message to wakeline_ingest;
    grant insert on attachment, attachment_data to wakeline_ingest;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
  for (const [table, rights] of Object.entries(APP_WRITES))
    await knex.raw(`grant ${rights} on ${table} to wakeline_app`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    do $$ begin
      if exists (select from pg_roles where rolname = 'wakeline_app') then
        revoke insert, update, delete on module_type, unit_type, plane, inverter, input, initiator, zone, transmitter,
          transmitter_string, logger, ingest_token, sensor, string, slot, unit, placement from wakeline_app;
        revoke select (id, logger_id, created_at, ended_at), update (ended_at) on ingest_token from wakeline_app;
        revoke update (unit_id) on heard from wakeline_app;
      end if;
    end $$;
    drop table message, attachment_data, attachment, accepted_gap, string_sign_off;
    alter table meter_reading drop recorded_at, drop note, drop commanded, drop siblings, drop supersedes;
    alter table install_check drop recorded_at, drop note, drop figures, drop supersedes;
    drop index audit_entry_site;
    alter table audit_entry drop site_id, drop string_id, drop reason;
    alter table site drop structure, drop temperature_min, drop temperature_max;
    alter table inverter drop inverter_type_id;
    alter table unit_type drop voltage_system_max, drop power_max, drop connector_in_id, drop connector_out_id;
    alter table module_type drop voltage_system_max, drop fuse_max, drop length_m, drop width_m, drop connector_type_id;
    drop table inverter_type, connector_pair, connector_type;
  `);
}
