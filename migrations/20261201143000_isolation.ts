import type { Knex } from 'knex';

/** Watches for the isolation of one string: who asked, who was on site, and what the units' currents showed. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table isolation (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null,
      string_id int4 not null,
      string_name text not null, -- as it was called then
      started_by int4 not null references person,
      person_on_site text not null check (length(btrim(person_on_site)) between 1 and 120),
      started_at timestamptz not null default now(),
      stopped_at timestamptz,
      stopped_by int4 references person, -- null: its time was up
      finding jsonb, -- as concluded when it stopped: src/domain/commissioning/isolation-watch.ts
      foreign key (string_id, site_id) references string (id, site_id),
      check (stopped_at is null or stopped_at >= started_at)
    );
    create unique index isolation_one_open on isolation (site_id) where stopped_at is null;
    create index isolation_site on isolation (site_id, started_at desc);
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  await knex.raw(`
    alter table isolation enable row level security;
    create policy isolation_app on isolation to wakeline_app
      using (exists (select from site where site.id = isolation.site_id))
      with check (exists (select from site where site.id = isolation.site_id));
    create policy isolation_ingest on isolation to wakeline_ingest using (true) with check (true);
    grant select, insert, update on isolation to wakeline_app;
    grant select on isolation to wakeline_ingest;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table isolation');
}
