import type { Knex } from 'knex';

/** Equipment types and the as-built plant, with the constraints that keep nonsense out. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table module_type (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      name text not null,
      voc_ref real not null check (voc_ref between 1 and 200),
      isc_ref real not null check (isc_ref between 0.1 and 40),
      vmp_ref real not null,
      imp_ref real not null,
      beta_voc real not null check (beta_voc between -0.01 and 0), -- relative, 1/K
      alpha_isc real not null check (alpha_isc between -0.002 and 0.005), -- relative, 1/K
      gamma_pmp real not null check (gamma_pmp between -0.01 and 0), -- relative, 1/K
      cells_in_series int2 not null check (cells_in_series between 1 and 300),
      bypass_groups int2 not null default 3 check (bypass_groups between 1 and 12),
      noct real not null default 45 check (noct between 30 and 70), -- °C
      archived_at timestamptz,
      check (vmp_ref > 0 and vmp_ref < voc_ref and imp_ref > 0 and imp_ref < isc_ref),
      unique (organisation_id, name)
    );

    create table unit_type (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      name text not null,
      kind text not null check (kind in ('shutdown_only', 'monitored', 'optimizing')),
      out_of_box text not null check (out_of_box in ('shutdown', 'passing')),
      released_by text not null check (released_by in ('keep_alive', 'logger')),
      on_command_loss text not null check (on_command_loss in ('shuts_down', 'holds')),
      command_loss_after_s real not null default 15 check (command_loss_after_s between 0 and 600),
      shutdown_voltage_nominal real not null default 0.6,
      shutdown_voltage_min real not null,
      shutdown_voltage_max real not null,
      bypass_voltage real not null default -0.5 check (bypass_voltage between -3 and 0), -- V, under string current
      measures text not null check (measures in ('none', 'input', 'output', 'both')),
      voltage_accuracy real not null default 0.01 check (voltage_accuracy between 0 and 0.2), -- relative
      current_accuracy real not null default 0.01 check (current_accuracy between 0 and 0.2), -- relative
      voltage_in_max real not null check (voltage_in_max between 10 and 200),
      current_max real not null check (current_max between 1 and 40),
      insulation_test_max real, -- V; null: the maker allows none
      faces_allowed text not null default 'either' check (faces_allowed in ('either', 'label_out')),
      archived_at timestamptz,
      check (0 <= shutdown_voltage_min and shutdown_voltage_min <= shutdown_voltage_nominal
             and shutdown_voltage_nominal <= shutdown_voltage_max and shutdown_voltage_max <= 5),
      check (kind = 'shutdown_only' or measures <> 'none'),
      unique (organisation_id, name),
      unique (id, kind)
    );

    create table site (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      name text not null check (length(btrim(name)) between 1 and 120),
      place text not null default '',
      latitude real not null check (latitude between -90 and 90),
      longitude real not null check (longitude between -180 and 180),
      altitude real not null default 0 check (altitude between -450 and 6000), -- m
      time_zone text not null,
      stage text not null default 'commissioning' check (stage in ('commissioning', 'operating')),
      rule_set text not null default 'rapid_shutdown_30s'
        check (rule_set in ('rapid_shutdown_30s', 'rapid_shutdown_10s', 'hazard_control', 'none')),
      switched_on_on date,
      shutdown_switch_place text not null default '',
      contact_name text not null default '',
      contact_phone text not null default '',
      outline jsonb, -- roof outline in metres: [[x, y], …]
      report_interval_s int2 not null default 60 check (report_interval_s between 10 and 900),
      created_at timestamptz not null default now(),
      unique (organisation_id, name),
      unique (id, organisation_id)
    );

    create table site_access (
      person_id int4 not null references person on delete cascade,
      site_id int4 not null references site on delete cascade,
      primary key (person_id, site_id)
    );
    create index site_access_site on site_access (site_id);

    create table plane (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      name text not null,
      surface_tilt real not null check (surface_tilt between 0 and 90),
      surface_azimuth real not null check (surface_azimuth >= 0 and surface_azimuth < 360),
      albedo real not null default 0.2 check (albedo between 0 and 1),
      unique (site_id, name),
      unique (id, site_id)
    );

    create table inverter (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      name text not null,
      ac_power_max real not null check (ac_power_max > 0), -- W
      unique (site_id, name),
      unique (id, site_id)
    );

    create table input (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      inverter_id int4 not null,
      number int2 not null check (number between 1 and 64),
      foreign key (inverter_id, site_id) references inverter (id, site_id),
      unique (inverter_id, number),
      unique (id, site_id)
    );

    create table initiator (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      name text not null,
      place text not null default '',
      unique (site_id, name),
      unique (id, site_id)
    );

    create table zone (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      initiator_id int4 not null,
      name text not null,
      foreign key (initiator_id, site_id) references initiator (id, site_id),
      unique (site_id, name),
      unique (id, site_id)
    );

    create table logger (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      serial text not null unique,
      firmware text,
      connected_at timestamptz,
      last_spoke_at timestamptz,
      last_address text,
      refused_count int8 not null default 0,
      last_refusal jsonb, -- {at, field, reason}
      leased_by text,
      leased_until timestamptz,
      unique (id, site_id)
    );
    create index logger_site on logger (site_id);

    create table ingest_token (
      id int4 generated always as identity primary key,
      logger_id int4 not null references logger on delete cascade,
      hash bytea not null unique, -- sha-256 of the token
      created_at timestamptz not null default now(),
      ended_at timestamptz
    );

    create table gateway ( -- learned from what is heard
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      logger_id int4 not null,
      number int2 not null check (number between 0 and 255), -- the index that frames carry in via
      name text not null,
      last_heard_at timestamptz,
      foreign key (logger_id, site_id) references logger (id, site_id),
      unique (logger_id, number)
    );

    create table transmitter (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      zone_id int4 not null,
      name text not null,
      foreign key (zone_id, site_id) references zone (id, site_id),
      unique (site_id, name),
      unique (id, site_id)
    );

    create table sensor (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      logger_id int4 not null,
      plane_id int4,
      number int2 not null,
      kind text not null check (kind in ('poa_global', 'ghi', 'ambient')),
      foreign key (logger_id, site_id) references logger (id, site_id),
      foreign key (plane_id, site_id) references plane (id, site_id),
      check (kind <> 'poa_global' or plane_id is not null),
      unique (logger_id, number)
    );

    create table string (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      name text not null check (length(btrim(name)) between 1 and 40),
      plane_id int4 not null,
      input_id int4 not null,
      zone_id int4 not null,
      logger_id int4,
      roster_index int2, -- the place of this string in its logger's roster
      unit_type_id int4 not null,
      kind text not null,
      slots int2 not null check (slots between 1 and 63),
      home_run_leaves_array boolean not null default true,
      cable_resistance real not null default 0.3 check (cable_resistance between 0 and 20), -- ohm, home run and leads
      foreign key (plane_id, site_id) references plane (id, site_id),
      foreign key (input_id, site_id) references input (id, site_id),
      foreign key (zone_id, site_id) references zone (id, site_id),
      foreign key (logger_id, site_id) references logger (id, site_id),
      foreign key (unit_type_id, kind) references unit_type (id, kind),
      constraint string_monitored_has_logger
        check (kind = 'shutdown_only' or (logger_id is not null and roster_index is not null)),
      unique (site_id, name),
      unique (logger_id, roster_index),
      unique (id, site_id)
    );
    create index string_input on string (input_id);
    create index string_plane on string (plane_id);
    create index string_zone on string (zone_id);
    create index string_name_search on string (upper(name) text_pattern_ops);

    create table transmitter_string (
      transmitter_id int4 not null,
      string_id int4 not null,
      site_id int4 not null,
      primary key (transmitter_id, string_id),
      foreign key (transmitter_id, site_id) references transmitter (id, site_id) on delete cascade,
      foreign key (string_id, site_id) references string (id, site_id) on delete cascade
    );
    create index transmitter_string_string on transmitter_string (string_id);

    -- a shutdown-only string names its transmitters: checked when the transaction ends
    create function shutdown_only_names_transmitters() returns trigger language plpgsql as $f$
    declare checked int4;
    begin
      if tg_table_name = 'string' then checked := new.id; else checked := old.string_id; end if;
      if exists (select from string where id = checked and kind = 'shutdown_only')
         and not exists (select from transmitter_string where string_id = checked) then
        raise exception 'string % is shutdown-only and names no transmitter', checked
          using errcode = 'check_violation', constraint = 'string_shutdown_only_names_transmitters';
      end if;
      return null;
    end $f$;
    create constraint trigger string_names_transmitters after insert or update on string
      deferrable initially deferred for each row execute function shutdown_only_names_transmitters();
    create constraint trigger transmitter_string_kept after delete or update on transmitter_string
      deferrable initially deferred for each row execute function shutdown_only_names_transmitters();

    create table slot (
      id int4 generated always as identity primary key,
      site_id int4 not null,
      string_id int4 not null,
      position int2 not null check (position between 1 and 63), -- 1 is at the negative end
      module_type_id int4 not null references module_type,
      roof_x real, -- m
      roof_y real, -- m
      roof_place text not null default '', -- as a person would say it: "upper row, fifth from the gable"
      foreign key (string_id, site_id) references string (id, site_id),
      unique (string_id, position),
      unique (id, site_id)
    );

    create table unit (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      unit_type_id int4 not null references unit_type,
      serial text not null check (serial ~ '^[A-Z0-9][A-Z0-9-]{3,31}$'),
      unique (organisation_id, serial)
    );
    create index unit_serial_search on unit (organisation_id, serial text_pattern_ops);

    create table placement (
      id int4 generated always as identity primary key,
      site_id int4 not null,
      unit_id int4 not null references unit,
      slot_id int4 not null,
      placed_from timestamptz not null,
      placed_to timestamptz,
      foreign key (slot_id, site_id) references slot (id, site_id),
      check (placed_to is null or placed_to > placed_from),
      constraint placement_one_place_at_a_time
        exclude using gist (unit_id with =, tstzrange(placed_from, placed_to) with &&),
      constraint placement_one_unit_at_a_time
        exclude using gist (slot_id with =, tstzrange(placed_from, placed_to) with &&)
    );
    create index placement_current_slot on placement (slot_id) where placed_to is null;
    create index placement_current_unit on placement (unit_id) where placed_to is null;

    create table roster_version (
      id int4 generated always as identity primary key,
      site_id int4 not null,
      logger_id int4 not null,
      version int4 not null check (version > 0),
      roster jsonb not null, -- the message as sent, and string ids beside it: a replay is read by it
      made_at timestamptz not null default now(),
      foreign key (logger_id, site_id) references logger (id, site_id),
      unique (logger_id, version)
    );
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table roster_version, placement, unit, slot, transmitter_string, string, sensor, transmitter, gateway,
      ingest_token, logger, zone, initiator, input, inverter, plane, site_access, site, unit_type, module_type;
    drop function shutdown_only_names_transmitters();
  `);
}
