import type { Knex } from 'knex';

/** What is commanded, what is concluded, and what people did on site. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table command ( -- what came in force in a zone or at a transmitter, as the logger reported it
      id int8 generated always as identity primary key,
      site_id int4 not null references site,
      zone_id int4,
      transmitter_id int4,
      in_force text not null check (in_force in ('initiator', 'keep_alive_lost', 'power_lost', 'released')),
      since timestamptz not null,
      said_by text not null default '',
      recorded_at timestamptz not null default now(),
      foreign key (zone_id, site_id) references zone (id, site_id),
      foreign key (transmitter_id, site_id) references transmitter (id, site_id),
      check (num_nonnulls(zone_id, transmitter_id) = 1),
      unique nulls not distinct (zone_id, transmitter_id, since)
    );
    create index command_site on command (site_id, since desc);

    create table roll_call (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      started_by int4 not null references person,
      person_on_site text not null check (length(btrim(person_on_site)) between 1 and 120),
      started_at timestamptz not null default now(),
      stopped_at timestamptz,
      stopped_by int4 references person,
      check (stopped_at is null or stopped_at >= started_at),
      unique (id, site_id)
    );
    create unique index roll_call_one_open on roll_call (site_id) where stopped_at is null;

    create table heard ( -- each serial's first answer at a site, on the as-built or not
      site_id int4 not null references site,
      serial text not null,
      unit_id int4 references unit, -- null: on no as-built of this site
      roll_call_id int4,
      logger_id int4 not null,
      gateway_number int2 not null,
      first_heard_at timestamptz not null,
      last_heard_at timestamptz not null,
      signal int2, -- dBm, strongest
      voltage int2, -- cV
      current int2, -- mA
      primary key (site_id, serial),
      foreign key (roll_call_id, site_id) references roll_call (id, site_id),
      foreign key (logger_id, site_id) references logger (id, site_id)
    );
    create index heard_unit on heard (unit_id);
    create index heard_roll_call on heard (roll_call_id, first_heard_at);

    create table string_judgement ( -- state and verdict of each unit, as of the frame at frame_at
      string_id int4 primary key references string on delete cascade,
      site_id int4 not null,
      frame_at timestamptz, -- frames up to this instant are judged: the watermark
      judged_at timestamptz not null,
      state int2[] not null, -- codes in src/domain/verdicts/codes.ts
      verdict int2[] not null,
      since int4[] not null, -- epoch seconds: since when the verdict (or the state, where ok) holds
      finding text, -- string-level: not_shutting_down with its position unknown, say
      finding_since timestamptz,
      evidence jsonb,
      memory jsonb, -- what the judgement carries from frame to frame
      passing int2 not null default 0, shutdown int2 not null default 0, unheard int2 not null default 0,
      silent int2 not null default 0, dark int2 not null default 0,
      stuck int2 not null default 0, not_shutting_down int2 not null default 0, unconfirmed int2 not null default 0
    ) with (fillfactor = 60);
    create index string_judgement_site on string_judgement (site_id)
      include (passing, shutdown, unheard, silent, dark, stuck, not_shutting_down, unconfirmed);
    create index string_judgement_abnormal on string_judgement (site_id)
      where stuck > 0 or not_shutting_down > 0 or unconfirmed > 0 or finding is not null;

    create table unit_event ( -- only changes of state or verdict
      at timestamptz not null,
      string_id int4 not null references string on delete cascade,
      position int2 not null,
      site_id int4 not null,
      state int2 not null, state_before int2,
      verdict int2 not null, verdict_before int2,
      primary key (string_id, position, at)
    );
    create index unit_event_site on unit_event (site_id, at desc);

    create table event ( -- append-only; read by cursor (xid, id) below the oldest running transaction
      id int8 generated always as identity primary key,
      xid xid8 not null default pg_current_xact_id(),
      at timestamptz not null,
      recorded_at timestamptz not null default now(),
      organisation_id int4 not null references organisation,
      site_id int4 not null references site,
      string_id int4,
      kind text not null, -- src/domain/verdicts/codes.ts names them
      detail jsonb not null default '{}',
      supersedes int8
    );
    create index event_cursor on event (xid, id);
    create index event_site on event (site_id, at desc);
    create index event_superseded on event (supersedes) where supersedes is not null;
    create index event_acknowledged on event ((detail ->> 'key')) where kind = 'hazard_acknowledged';
    create index event_string on event (string_id, at desc) where string_id is not null;

    create table shutdown_test (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      zone_id int4,
      at timestamptz not null,
      made_by text not null,
      result text not null check (result in ('passed', 'failed', 'consistent', 'not_witnessed')),
      strings int2 not null,
      detail jsonb not null default '{}',
      superseded_by int4 references shutdown_test,
      foreign key (zone_id, site_id) references zone (id, site_id)
    );
    create index shutdown_test_site on shutdown_test (site_id, at desc);

    create table meter_reading (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      string_id int4 not null,
      person_id int4 not null references person,
      at timestamptz not null,
      stage text not null check (stage in ('before_energising', 'after_keep_alive', 'after_roll_call')),
      reading_kind text not null check (reading_kind in ('positive_to_negative', 'positive_to_earth', 'negative_to_earth')),
      light text not null check (light in ('bright', 'dull', 'snow', 'night')),
      meter_mode text not null default 'high_impedance' check (meter_mode in ('high_impedance', 'low_impedance')),
      voltage real not null check (voltage between -2000 and 2000),
      findings jsonb not null default '[]',
      foreign key (string_id, site_id) references string (id, site_id)
    );
    create index meter_reading_string on meter_reading (string_id, at desc);

    create table install_check (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      string_id int4 not null,
      check_name text not null,
      result text not null check (result in ('pass', 'fail', 'not_applicable')),
      reason text not null default '',
      person_id int4 not null references person,
      at timestamptz not null,
      check (result <> 'not_applicable' or length(btrim(reason)) > 0),
      foreign key (string_id, site_id) references string (id, site_id)
    );
    create index install_check_string on install_check (string_id, check_name, at desc);
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table install_check, meter_reading, shutdown_test, event, unit_event, string_judgement, heard, roll_call, command;
  `);
}
