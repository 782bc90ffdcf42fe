import type { Knex } from 'knex';

/** A lobby screen may stand in a frame of one page that its link names. */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table share_link add framed_by text,
      add constraint share_link_framed
        check (framed_by is null or (kiosk and length(framed_by) <= 200 and framed_by !~ '[^][a-z0-9.:/-]'))`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`alter table share_link drop framed_by`);
}
