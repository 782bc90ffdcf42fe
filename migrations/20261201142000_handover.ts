import type { Knex } from 'knex';

/** Handover packs: what was known of a site when it was handed over, kept as it was, version by version. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table handover_pack (
      id int4 generated always as identity primary key,
      ref uuid not null unique default gen_random_uuid(),
      site_id int4 not null references site,
      version int4 not null check (version > 0),
      made_by int4 not null references person,
      made_at timestamptz not null,
      remark text not null default '',
      fingerprint text not null, -- sha-256 of the data, canonical JSON
      data jsonb not null, -- what the papers say
      pdf bytea not null,
      csv bytea not null,
      unique (site_id, version)
    );
    alter table handover_pack alter column pdf set storage external, alter column csv set storage external;
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  const visible = `exists (select from site where site.id = handover_pack.site_id)`;
  await knex.raw(`
    alter table handover_pack enable row level security;
    create policy handover_pack_app on handover_pack to wakeline_app using (${visible}) with check (${visible});
    create policy handover_pack_ingest on handover_pack to wakeline_ingest using (true) with check (true);
    grant select on handover_pack to wakeline_app, wakeline_ingest;
    grant insert on handover_pack to wakeline_app;
    grant usage on all sequences in schema public to wakeline_app, wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table handover_pack');
}
