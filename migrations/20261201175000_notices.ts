import type { Knex } from 'knex';

/**
 * Who is told of what, when and how; letters with a picture and a way out; signed calls to other systems.
 * One reader goes through `event` by a cursor and writes notices, letters and calls in the same transaction.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table person add time_zone text; -- null: the organisation's

    create table event_reader ( -- how far a reader of event has come: everything up to it was read
      reader text primary key,
      xid xid8 not null,
      id int8 not null
    );
    insert into event_reader select 'notices', pg_snapshot_xmin(pg_current_snapshot()), 0;

    create table notice_choice ( -- what a person has chosen; no row: the defaults of the role
      person_id int4 primary key references person on delete cascade,
      organisation_id int4 not null references organisation,
      rules jsonb not null default '{}', -- {kind: how}: src/domain/notices/kinds.ts
      site_ids int4[], -- null: every site that the person sees
      digest_at int2 not null default 420 check (digest_at between 0 and 1439), -- minute of the person's day
      quiet_from int2 check (quiet_from between 0 and 1439),
      quiet_to int2 check (quiet_to between 0 and 1439),
      key bytea not null default decode(replace(gen_random_uuid()::text || gen_random_uuid()::text, '-', ''), 'hex'),
      changed_at timestamptz not null default now(),
      check ((quiet_from is null) = (quiet_to is null)),
      check (quiet_from <> quiet_to)
    );

    create table notice_subject ( -- what comes and goes, and what people were told of it
      subject text primary key, -- cause:REF, logger:SITE:SERIAL, gateway:SITE:NAME
      organisation_id int4 not null references organisation,
      site_id int4 not null references site,
      told_at timestamptz, -- people know that it is there; null: they don't
      came int2 not null default 0, -- how often it came back since they know
      seen_event int8 not null, -- the newest event that was looked at
      waiting_event int8, -- told at due_at, if it still holds then
      due_at timestamptz,
      check ((waiting_event is null) = (due_at is null))
    );
    create index notice_subject_due on notice_subject (due_at) where due_at is not null;
    create index notice_subject_site on notice_subject (site_id);

    alter table notice
      add subject text,
      add event_id int8,
      add came int2 not null default 0, -- how often it went and came back, in this one line
      add over_at timestamptz, -- what it tells of is over
      add letter_due timestamptz, -- waits for a letter that gathers several
      add lettered_at timestamptz;
    create index notice_letter_due on notice (letter_due) where lettered_at is null and letter_due is not null;
    create index notice_subject_open on notice (subject) where subject is not null and over_at is null;

    create table letter_picture ( -- drawings inside letters; one of the same content is kept once
      id int8 generated always as identity primary key,
      organisation_id int4 not null references organisation,
      sha256 bytea not null,
      png bytea not null,
      created_at timestamptz not null default now(),
      unique (organisation_id, sha256)
    );
    alter table message
      add picture_id int8 references letter_picture on delete set null,
      add unsubscribe_url text;
    create index message_picture on message (picture_id) where picture_id is not null;

    create table webhook (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      name text not null check (length(btrim(name)) between 1 and 80),
      url text not null check (length(url) <= 2000),
      secret text not null, -- signs; shown once
      kinds text[] not null check (cardinality(kinds) > 0),
      active boolean not null default true,
      created_by int4 not null references person,
      created_at timestamptz not null default now(),
      failing_since timestamptz, -- no call has succeeded since
      disabled_at timestamptz, -- by Wakeline, after days of failing
      removed_at timestamptz
    );
    create index webhook_organisation on webhook (organisation_id) where removed_at is null;

    create table webhook_delivery (
      id int8 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      webhook_id int4 not null references webhook,
      organisation_id int4 not null references organisation,
      site_id int4 references site,
      event_key text not null, -- one call an event, never two
      kind text not null,
      body text not null, -- as it is signed
      created_at timestamptz not null default now(),
      not_before timestamptz not null default now(),
      claimed_until timestamptz, -- a process is at it
      attempts int2 not null default 0,
      delivered_at timestamptz,
      given_up_at timestamptz,
      unique (webhook_id, event_key)
    );
    create index webhook_delivery_due on webhook_delivery (webhook_id, not_before)
      where delivered_at is null and given_up_at is null;
    create index webhook_delivery_newest on webhook_delivery (webhook_id, id desc);

    create table webhook_attempt (
      id int8 generated always as identity primary key,
      delivery_id int8 not null references webhook_delivery on delete cascade,
      organisation_id int4 not null references organisation,
      at timestamptz not null,
      status int2, -- HTTP; null: no answer
      latency_ms int4 not null,
      excerpt text not null default '', -- of the answer
      error text
    );
    create index webhook_attempt_delivery on webhook_attempt (delivery_id, id);
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
  const own = 'organisation_id = (select actor_organisation())';
  for (const table of ['letter_picture', 'webhook', 'webhook_delivery', 'webhook_attempt'])
    await enable(table, own);
  await enable('notice_subject', 'exists (select from site where site.id = notice_subject.site_id)');
  // unsubscribing works signed out, as signing in does; the shell counts what is unread before it knows the actor
  await enable('notice_choice', `${own} or (select signing_in())`);
  await knex.raw(`
    drop policy notice_app on notice;
    create policy notice_app on notice to wakeline_app
      using (${own} or (select signing_in())) with check (${own});
    grant update on notice to wakeline_ingest;
    grant select on event_reader to wakeline_app, wakeline_ingest;
    grant update on event_reader to wakeline_ingest;
    grant insert, update, delete on notice_choice to wakeline_app;
    grant insert on notice_choice to wakeline_ingest;
    grant insert, update, delete on notice_subject to wakeline_ingest;
    grant insert, delete on letter_picture to wakeline_ingest;
    grant update (time_zone) on person to wakeline_app;
    revoke select on webhook from wakeline_app;
    grant select (id, ref, organisation_id, name, url, kinds, active, created_by, created_at, failing_since,
                  disabled_at, removed_at),
          insert, update on webhook to wakeline_app;
    grant update (failing_since, disabled_at, active) on webhook to wakeline_ingest;
    grant insert, update (not_before, given_up_at) on webhook_delivery to wakeline_app;
    grant insert, update, delete on webhook_delivery to wakeline_ingest;
    grant insert on webhook_attempt to wakeline_ingest;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table webhook_attempt, webhook_delivery, webhook, notice_subject, notice_choice, event_reader;
    alter table message drop picture_id, drop unsubscribe_url;
    drop table letter_picture;
    do $$ begin
      if (select roles_made from installation) then
        revoke update on notice from wakeline_ingest;
        drop policy notice_app on notice;
        create policy notice_app on notice to wakeline_app
          using (organisation_id = (select actor_organisation()))
          with check (organisation_id = (select actor_organisation()));
      end if;
    end $$;
    alter table notice drop subject, drop event_id, drop came, drop over_at, drop letter_due, drop lettered_at;
    alter table person drop time_zone;
  `);
}
