import type { Knex } from 'knex';

/**
 * Readings of the time before Wakeline, by import: each in tables of its own beside what was measured, so that it can be
 * taken back. Tokens of loggers with their name, their maker and when they were last used; what was refused, by reason.
 *
 * A series is one thing that an import says something about: a string, a unit of it, an input or an inverter.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table history_import (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      file_name text not null check (length(file_name) <= 200),
      content_hash bytea not null, -- sha-256 of the file's text: the same file twice is told
      layout jsonb not null, -- columns, time zone and what else the person decided: src/domain/history-import/layout.ts
      rows int4 not null,
      readings int4 not null,
      cells_left_out int4 not null,
      doubles int4 not null, -- rows that said the same thing about the same instant again: the first one counts
      from_at timestamptz not null,
      to_at timestamptz not null,
      note text not null default '' check (length(note) <= 500),
      made_by int4 not null references person,
      made_at timestamptz not null default now(),
      undone_by int4 references person,
      undone_at timestamptz,
      check (to_at >= from_at)
    );
    create unique index history_import_once on history_import (site_id, content_hash) where undone_at is null;
    create index history_import_site on history_import (site_id, made_at desc);

    create table history_series (
      id int4 generated always as identity primary key,
      import_id int4 not null references history_import,
      site_id int4 not null references site,
      string_id int4 references string on delete cascade,
      position int2 check (position between 1 and 63), -- of a unit in its string
      input_id int4 references input on delete cascade,
      inverter_id int4 references inverter on delete cascade,
      step_s int4 not null check (step_s > 0), -- how far its readings lie apart, mostly
      check (num_nonnulls(string_id, input_id, inverter_id) = 1 and (position is null or string_id is not null))
    );
    create index history_series_import on history_series (import_id);
    create index history_series_site on history_series (site_id);
    create index history_series_string on history_series (string_id) where string_id is not null;
    create index history_series_input on history_series (input_id) where input_id is not null;

    create table history_reading ( -- SI units, as the file says them; a mean over the step that begins at "at", or a moment
      series_id int4 not null references history_series on delete cascade,
      at timestamptz not null,
      voltage real, -- V
      current real, -- A
      power real, -- W
      energy real, -- Wh in the step
      temperature real, -- °C
      primary key (series_id, at)
    );

    create table history_day ( -- the site's local date, made from the readings at import
      series_id int4 not null references history_series on delete cascade,
      day date not null,
      readings int4 not null,
      energy real, -- Wh
      voltage_avg real, -- V, over the readings with power or energy; over all where the file has neither
      voltage_max real, -- V
      primary key (series_id, day)
    );

    alter table ingest_token
      add ref uuid not null unique default gen_random_uuid(),
      add name text not null default '' check (length(name) <= 80),
      add made_by int4 references person,
      add ended_by int4 references person,
      add last_used_at timestamptz,
      add last_address text;
    create index ingest_token_logger on ingest_token (logger_id);

    create table logger_refusal ( -- messages refused, gathered by what was wrong
      logger_id int4 not null references logger on delete cascade,
      kind text not null, -- field and reason without their figures
      field text not null, -- of the newest one
      reason text not null,
      count int8 not null,
      first_at timestamptz not null,
      last_at timestamptz not null,
      primary key (logger_id, kind)
    );

    create table wrong_token ( -- attempts with a token that nobody knows, by the address they came from
      address text primary key,
      count int8 not null,
      first_at timestamptz not null,
      last_at timestamptz not null
    );
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
  await enable('history_import', `exists (select from site where site.id = history_import.site_id)`);
  await enable('history_series', `exists (select from site where site.id = history_series.site_id)`);
  for (const table of ['history_reading', 'history_day'])
    await enable(table, `exists (select from history_series where history_series.id = ${table}.series_id)`);
  await enable('logger_refusal', `exists (select from logger where logger.id = logger_refusal.logger_id)`);
  // an attempt says nothing of whose it was: seen by whose loggers speak from the same address
  await enable('wrong_token', `exists (select from logger where logger.last_address = wrong_token.address)`);
  await knex.raw(`
    grant insert, update (rows, readings, cells_left_out, doubles, from_at, to_at, undone_by, undone_at)
      on history_import to wakeline_app;
    grant insert, update (step_s) on history_series to wakeline_app;
    grant insert, delete on history_reading, history_day to wakeline_app;
    grant select (ref, name, made_by, ended_by, last_used_at, last_address), update (ended_by)
      on ingest_token to wakeline_app;
    grant update (last_used_at, last_address) on ingest_token to wakeline_ingest;
    grant insert, update, delete on logger_refusal, wrong_token to wakeline_ingest;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table wrong_token, logger_refusal, history_day, history_reading, history_series, history_import;
    drop index ingest_token_logger;
    alter table ingest_token drop ref, drop name, drop made_by, drop ended_by, drop last_used_at, drop last_address;
  `);
}
