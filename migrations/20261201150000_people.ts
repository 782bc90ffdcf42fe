import type { Knex } from 'knex';

/** How people come in, keep their account and leave; links that show a site without signing in. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table session
      add created_at timestamptz not null default now(),
      add used_at timestamptz not null default now(),
      add address text,
      add agent text;
    alter table person
      add deactivated_at timestamptz,
      add totp_secret text, -- base32; null: no second factor
      add totp_confirmed_at timestamptz,
      add totp_used_step int8, -- a code counts once
      add recovery_codes text[] not null default '{}', -- sha-256 each, as hex
      add check (totp_confirmed_at is null or totp_secret is not null);

    create table invitation (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      email text not null check (email like '%_@_%' and length(email) <= 254),
      name text not null check (length(btrim(name)) between 1 and 120),
      role text not null check (role in ('manager', 'technician', 'analyst', 'customer')),
      sites int4[] not null default '{}', -- what a customer will see
      token_hash bytea not null unique, -- sha-256
      invited_by int4 not null references person,
      created_at timestamptz not null default now(),
      expires_at timestamptz not null,
      accepted_at timestamptz,
      ended_at timestamptz
    );
    create index invitation_organisation on invitation (organisation_id, created_at desc);
    create unique index invitation_open on invitation (lower(email)) where accepted_at is null and ended_at is null;

    create table account_link ( -- sent by letter: sets a password anew, or proves an address
      id int4 generated always as identity primary key,
      person_id int4 not null references person on delete cascade,
      purpose text not null check (purpose in ('password_reset', 'email_change')),
      new_email text,
      token_hash bytea not null unique,
      created_at timestamptz not null default now(),
      expires_at timestamptz not null,
      used_at timestamptz,
      check (purpose <> 'email_change' or new_email is not null)
    );
    create index account_link_person on account_link (person_id);

    create table share_link ( -- read-only, without signing in, until it is ended
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      label text not null check (length(btrim(label)) between 1 and 80),
      kiosk boolean not null default false,
      token_hash bytea not null unique,
      created_by int4 not null references person,
      created_at timestamptz not null default now(),
      expires_at timestamptz,
      ended_at timestamptz,
      last_used_at timestamptz
    );
    create index share_link_site on share_link (site_id);
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  const enable = (table: string, app: string) =>
    knex.raw(`
      alter table ${table} enable row level security;
      create policy ${table}_app on ${table} to wakeline_app using (${app}) with check (${app});
      grant select, insert, update on ${table} to wakeline_app;
    `);
  await enable('invitation', `organisation_id = (select actor_organisation()) or (select signing_in())`);
  await enable(
    'account_link',
    `(select signing_in()) or exists (select from person where person.id = account_link.person_id)`,
  );
  await enable(
    'share_link',
    `(select signing_in()) or exists (select from site where site.id = share_link.site_id)`,
  );
  await knex.raw(`grant usage on all sequences in schema public to wakeline_app, wakeline_ingest`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table share_link, account_link, invitation;
    alter table person drop deactivated_at, drop totp_secret, drop totp_confirmed_at, drop totp_used_step, drop recovery_codes;
    alter table session drop created_at, drop used_at, drop address, drop agent;
  `);
}
