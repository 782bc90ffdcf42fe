import type { Knex } from 'knex';

/** A list as somebody likes to see it: its address without the page, under a name; the organisation's where it is shared. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table saved_view (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      organisation_id int4 not null references organisation,
      person_id int4 not null references person on delete cascade,
      list text not null check (list ~ '^[a-z_]{1,40}$'), -- which list: src/domain/saved-views/lists.ts
      name text not null check (length(btrim(name)) between 1 and 80),
      query text not null default '' check (length(query) <= 2000), -- of the address, without its question mark
      shared boolean not null default false,
      created_at timestamptz not null default now(),
      unique (person_id, list, name)
    );
    create index saved_view_organisation on saved_view (organisation_id, list);
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  await knex.raw(`
    alter table saved_view enable row level security;
    create policy saved_view_app on saved_view to wakeline_app
      using (organisation_id = (select actor_organisation()))
      with check (organisation_id = (select actor_organisation()));
    create policy saved_view_ingest on saved_view to wakeline_ingest using (true) with check (true);
    grant select on saved_view to wakeline_app, wakeline_ingest;
    grant insert, delete, update (name, query, shared) on saved_view to wakeline_app;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`drop table saved_view`);
}
