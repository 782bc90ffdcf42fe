import type { Knex } from 'knex';

/**
 * What jobs keep: their runs, the nights that were judged, the resistance of each string's loop over time, since when
 * an open cause shows no more, and since when a gateway is silent.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table cause add clear_since timestamptz; -- open, and nothing shows it any more since then
    alter table gateway add silent_since timestamptz; -- null: heard

    create table job_run (
      id int8 generated always as identity primary key,
      task text not null,
      site_id int4 references site on delete cascade, -- null: every site
      started_at timestamptz not null,
      ended_at timestamptz, -- null: it runs, or its process died
      attempt int2 not null default 1,
      failed text, -- what went wrong, in the error's words
      done jsonb not null default '{}', -- counts of what it did
      worker text not null
    );
    create index job_run_task on job_run (task, started_at desc);

    create table output_night ( -- nights on which a site's output was judged
      site_id int4 not null references site on delete cascade,
      day date not null, -- the site's local date
      judged_at timestamptz not null,
      strings int4 not null,
      cant_tell int4 not null,
      low int4 not null,
      primary key (site_id, day)
    );

    create table loop_fit ( -- resistance between units and input, as fitted over some sunny days
      string_id int4 not null references string on delete cascade,
      site_id int4 not null references site on delete cascade,
      day date not null, -- the last of those days, local
      from_day date not null,
      ohm real not null,
      low real not null,
      high real not null,
      shared_ohm real,
      gain real not null,
      samples int4 not null,
      highest_a real not null,
      outcome text not null check (outcome in ('usual', 'excess', 'growing', 'cant_tell')),
      finding jsonb not null,
      primary key (string_id, day)
    );
    create index loop_fit_site on loop_fit (site_id, day desc);
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  const enable = (table: string, app: string) =>
    knex.raw(`
      alter table ${table} enable row level security;
      create policy ${table}_app on ${table} to wakeline_app using (${app}) with check (${app});
      create policy ${table}_ingest on ${table} to wakeline_ingest using (true) with check (true);
      grant select on ${table} to wakeline_app;
      grant select, insert, update, delete on ${table} to wakeline_ingest;
    `);
  const ofSite = (table: string) => `exists (select from site where site.id = ${table}.site_id)`;
  await enable('job_run', `site_id is null or ${ofSite('job_run')}`);
  await enable('output_night', ofSite('output_night'));
  await enable('loop_fit', ofSite('loop_fit'));
  await knex.raw(`grant usage on all sequences in schema public to wakeline_app, wakeline_ingest`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    drop table loop_fit, output_night, job_run;
    alter table gateway drop silent_since;
    alter table cause drop clear_since;
  `);
}
