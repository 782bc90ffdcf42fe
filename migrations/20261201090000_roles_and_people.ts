import type { Knex } from 'knex';

/**
 * Database roles, organisations, people, sessions.
 *
 * Roles: the migrating account owns everything; `wakeline_app` serves the web and cannot pass row-level
 * security; `wakeline_ingest` writes telemetry and judges it for every organisation.
 * Where the account may not create roles the installation runs with one role; `installation.roles_made` says so.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create extension if not exists btree_gist;

    create table installation (
      only_row boolean primary key default true check (only_row),
      roles_made boolean not null,
      made_at timestamptz not null default now()
    );

    do $$
    begin
      if not exists (select from pg_roles where rolname = 'wakeline_app') then create role wakeline_app nologin; end if;
      if not exists (select from pg_roles where rolname = 'wakeline_ingest') then create role wakeline_ingest nologin; end if;
      execute format('grant wakeline_app, wakeline_ingest to %I', current_user);
      insert into installation (roles_made) values (true);
    exception when insufficient_privilege then
      insert into installation (roles_made) values (false);
    end $$;

    create table organisation (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      name text not null check (length(btrim(name)) between 1 and 120),
      time_zone text not null default 'UTC',
      phone text,
      created_at timestamptz not null default now()
    );

    create table person (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      email text not null check (email like '%_@_%' and length(email) <= 254),
      name text not null check (length(btrim(name)) between 1 and 120),
      role text not null check (role in ('manager', 'technician', 'analyst', 'customer')),
      password_hash text not null,
      theme text not null default 'system' check (theme in ('system', 'light', 'dark')),
      active boolean not null default true,
      last_seen_at timestamptz,
      fleet_looked_at timestamptz, -- newest look at the fleet page
      fleet_looked_before_at timestamptz, -- last look of the visit before this one
      created_at timestamptz not null default now()
    );
    create unique index person_email_key on person (lower(email));
    create index person_organisation on person (organisation_id);

    create table session (
      id text primary key,
      user_id int4 not null references person on delete cascade,
      expires_at timestamptz not null,
      kept boolean not null default false
    );
    create index session_person on session (user_id);

    create table rate_limit ( -- rate-limiter-flexible counts here, so that several processes share the count
      key varchar(255) primary key,
      points int4 not null default 0,
      expire int8
    );

    create table audit_entry (
      id int8 generated always as identity primary key,
      organisation_id int4 references organisation,
      person_id int4 references person,
      at timestamptz not null default now(),
      address text,
      action text not null,
      subject text not null,
      before jsonb,
      after jsonb
    );
    create index audit_entry_organisation on audit_entry (organisation_id, at desc);
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table audit_entry, rate_limit, session, person, organisation, installation;
    drop extension if exists btree_gist;
  `);
}
