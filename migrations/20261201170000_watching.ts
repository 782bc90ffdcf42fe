import type { Knex } from 'knex';

/**
 * Years of watching: what explains units and strings that are not as they should be, the cases that people work on,
 * notices, planned works, notes on the time axis, tariffs, and what an organisation sets for itself.
 *
 * Causes are written by judgement and jobs; people only acknowledge. Every change of a cause or case is an `event` too,
 * in the same transaction; notices and letters are made from events.
 */
const BY_SITE: Record<string, { app: string; ingest: string }> = {
  cause: { app: 'update (acknowledged_by, acknowledged_at)', ingest: 'insert, update' },
  output_day: { app: '', ingest: 'insert, update, delete' },
  case_file: { app: 'insert, update', ingest: 'update' },
  case_entry: { app: 'insert', ingest: 'insert' },
  planned_work: { app: 'insert, update', ingest: '' },
  annotation: { app: 'insert, update', ingest: '' },
  tariff: { app: 'insert, delete', ingest: '' },
};

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table organisation
      add currency text check (currency ~ '^[A-Z]{3}$'), -- ISO 4217; null: no money is shown
      add units text not null default 'metric' check (units in ('metric', 'imperial')),
      add thresholds jsonb not null default '{}', -- what differs from the defaults: src/domain/settings/thresholds.ts
      add hide_raw_after_days int2 check (hide_raw_after_days between 1 and 90),
      add logo_id int4 references attachment;

    create table cause ( -- one explanation of several units' or one string's conduct, as long as it lasts
      id int8 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      key text not null, -- of the judgement: stable while it lasts
      kind text not null, -- src/domain/causes: not_shutting_down, stuck, unconfirmed, silent, low_output, loop_resistance, wrong_string, weak_unit
      hazard boolean not null default false, -- outranks everything; can't be muted, only taken on with a name
      shared_part jsonb, -- {kind, name}
      headline text not null,
      evidence text not null,
      figures jsonb not null default '{}', -- the finding itself, by kind
      alternatives jsonb not null default '[]',
      confidence real not null check (confidence between 0 and 1),
      units jsonb not null default '[]', -- [{stringId, stringName, position, serial, since}]
      string_ids int4[] not null default '{}',
      since timestamptz not null,
      opened_at timestamptz not null, -- when it was first concluded
      changed_at timestamptz not null,
      closed_at timestamptz,
      reopened int2 not null default 0,
      loss_wh_day float8, -- null: not known
      loss_wh float8 not null default 0, -- since it opened
      loss_until timestamptz, -- loss_wh counts up to here
      acknowledged_by int4 references person,
      acknowledged_at timestamptz,
      check (closed_at is null or closed_at >= opened_at)
    );
    create unique index cause_one_open on cause (site_id, key) where closed_at is null;
    create index cause_site on cause (site_id, opened_at desc);
    create index cause_open on cause (kind) where closed_at is null;

    create table output_day ( -- the night's judgement of a string's output
      string_id int4 not null references string on delete cascade,
      site_id int4 not null references site,
      day date not null, -- the site's local date
      outcome text not null check (outcome in ('low', 'as_expected', 'cant_tell')),
      method text not null, -- siblings, model
      ratio real, -- of that day to what was expected; null: the day was left out
      z real,
      loss_wh float8,
      expected_wh float8,
      signature text,
      finding jsonb not null, -- src/domain/output/low-output.ts OutputFinding
      judged_at timestamptz not null,
      primary key (string_id, day)
    );
    create index output_day_site on output_day (site_id, day desc);

    create table case_file (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      number int4 not null, -- counts within the organisation
      organisation_id int4 not null references organisation,
      title text not null check (length(btrim(title)) between 1 and 160),
      what text not null default '' check (length(what) <= 8000),
      kind text not null default 'other', -- the cause's kind, or other; names the checklist
      origin text not null check (origin in ('cause', 'string', 'hand', 'customer')),
      cause_id int8 references cause,
      string_ids int4[] not null default '{}',
      units jsonb not null default '[]', -- as in cause
      state text not null default 'open' check (state in ('open', 'waiting', 'done', 'no_fault_found')),
      assignee_id int4 references person,
      due_on date,
      opened_by int4 references person,
      opened_at timestamptz not null default now(),
      changed_at timestamptz not null default now(),
      closed_at timestamptz,
      closed_by int4 references person,
      checklist jsonb not null default '[]', -- [{key, done, by, at, note}]
      before jsonb, -- figures of the minute it was opened
      after jsonb, -- figures found again after closing
      checked_at timestamptz, -- when those were last looked at
      version int4 not null default 1, -- two people at one case: the second is told
      unique (organisation_id, number),
      foreign key (site_id, organisation_id) references site (id, organisation_id),
      check ((state in ('done', 'no_fault_found')) = (closed_at is not null))
    );
    create index case_file_site on case_file (site_id, opened_at desc);
    create index case_file_cause on case_file (cause_id);
    create index case_file_open on case_file (organisation_id, due_on) where closed_at is null;

    create table case_entry ( -- history of a case: only added to
      id int8 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      case_id int4 not null references case_file,
      site_id int4 not null references site,
      at timestamptz not null default now(),
      person_id int4 references person, -- null: Wakeline itself
      kind text not null, -- comment, change, checklist, photo, checked, reopened, …
      body text not null default '' check (length(body) <= 8000),
      mentions int4[] not null default '{}', -- person ids
      detail jsonb not null default '{}'
    );
    create index case_entry_case on case_entry (case_id, id);

    create table planned_work ( -- a maintenance window: what happens in it is no alarm, but a hazard is
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      string_ids int4[], -- null: the whole site
      starts_at timestamptz not null,
      ends_at timestamptz not null,
      reason text not null check (length(btrim(reason)) between 1 and 500),
      created_by int4 not null references person,
      created_at timestamptz not null default now(),
      ended_by int4 references person, -- ended before its time, or taken back
      check (ends_at > starts_at)
    );
    create index planned_work_site on planned_work (site_id, starts_at desc);

    create table annotation ( -- a note pinned on the time axis
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      string_id int4 references string on delete cascade,
      from_at timestamptz not null,
      to_at timestamptz,
      text text not null check (length(btrim(text)) between 1 and 2000),
      created_by int4 not null references person,
      created_at timestamptz not null default now(),
      removed_at timestamptz,
      removed_by int4 references person,
      check (to_at is null or to_at > from_at)
    );
    create index annotation_site on annotation (site_id, from_at desc);

    create table tariff ( -- what a kWh is worth at a site from a day on, in the organisation's currency
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      from_on date not null,
      price_kwh numeric(12, 6) not null check (price_kwh >= 0),
      created_by int4 not null references person,
      created_at timestamptz not null default now(),
      unique (site_id, from_on)
    );

    create table notice ( -- in the product, for one person
      id int8 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      person_id int4 not null references person on delete cascade,
      site_id int4 references site,
      event_key text not null,
      kind text not null,
      headline text not null,
      body text not null default '',
      href text not null,
      hazard boolean not null default false,
      created_at timestamptz not null default now(),
      read_at timestamptz,
      unique (person_id, event_key)
    );
    create index notice_person on notice (person_id, id desc);
    create index notice_unread on notice (person_id) where read_at is null;
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
  for (const [table, rights] of Object.entries(BY_SITE)) {
    await enable(table, `exists (select from site where site.id = ${table}.site_id)`);
    if (rights.app) await knex.raw(`grant ${rights.app} on ${table} to wakeline_app`);
    if (rights.ingest) await knex.raw(`grant ${rights.ingest} on ${table} to wakeline_ingest`);
  }
  await enable('notice', `organisation_id = (select actor_organisation())`);
  await knex.raw(`
    grant insert, update (read_at) on notice to wakeline_app;
    grant insert on notice to wakeline_ingest;
    grant update (name, time_zone, phone, currency, units, thresholds, hide_raw_after_days, logo_id)
      on organisation to wakeline_app;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    do $$ begin
      if exists (select from pg_roles where rolname = 'wakeline_app') then
        revoke update (name, time_zone, phone) on organisation from wakeline_app;
      end if;
    end $$;
    drop table notice, tariff, annotation, planned_work, case_entry, case_file, output_day, cause;
    alter table organisation drop currency, drop units, drop thresholds, drop hide_raw_after_days, drop logo_id;
  `);
}
