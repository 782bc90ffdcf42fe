import type { Knex } from 'knex';

/** Who asked for a letter about a roof each week or month. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table roof_letter (
      person_id int4 not null references person on delete cascade,
      site_id int4 not null references site,
      every text not null check (every in ('week', 'month')),
      asked_at timestamptz not null default now(),
      last_period text not null, -- the newest week or month that was written about, or that was over when it was asked for
      primary key (person_id, site_id)
    );
    create index roof_letter_site on roof_letter (site_id);
  `);
  const { rows } = await knex.raw<{ rows: { roles_made: boolean }[] }>('select roles_made from installation');
  if (!rows[0]?.roles_made) return;
  await knex.raw(`
    alter table roof_letter enable row level security;
    create policy roof_letter_app on roof_letter to wakeline_app
      using (exists (select from site where site.id = roof_letter.site_id)
             and exists (select from person where person.id = roof_letter.person_id))
      with check (exists (select from site where site.id = roof_letter.site_id)
             and exists (select from person where person.id = roof_letter.person_id));
    create policy roof_letter_ingest on roof_letter to wakeline_ingest using (true) with check (true);
    grant select, insert, update, delete on roof_letter to wakeline_app;
    grant select, update (last_period), delete on roof_letter to wakeline_ingest;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table roof_letter');
}
