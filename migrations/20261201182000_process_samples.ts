import type { Knex } from 'knex';

/** What each process of the installation measured of itself, once a minute; kept for some days. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table process_sample (
      process text not null,
      at timestamptz not null, -- the end of the span
      span_s real not null check (span_s > 0),
      host text not null,
      pid int4 not null,
      roles text[] not null,
      started_at timestamptz not null,
      figures jsonb not null,
      primary key (process, at)
    );
    create index process_sample_at on process_sample (at);
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  await knex.raw(`
    grant select on process_sample to wakeline_app, wakeline_ingest;
    grant insert, delete on process_sample to wakeline_ingest;
    grant select on knex_migrations to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table process_sample');
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (rows[0]?.roles_made)
    await knex.raw('revoke select on knex_migrations from wakeline_app, wakeline_ingest');
}
