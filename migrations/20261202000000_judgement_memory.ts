import type { Knex } from 'knex';

/**
 * What a judgement carries from frame to frame is read whole and by the product alone: it is kept as the text that came,
 * which costs no parsing into a tree at each of its writings, and packed by lz4 where the server has it. One row a string.
 */
const kept = async (knex: Knex, type: 'json' | 'jsonb', packing: 'lz4' | 'default'): Promise<void> => {
  await knex.raw(`
    set local lock_timeout = '5s';
    alter table string_judgement alter memory type ${type} using memory::${type};
    do $$ begin
      alter table string_judgement alter memory set compression ${packing};
    exception when feature_not_supported then null;
    end $$;
  `);
};

export const up = (knex: Knex): Promise<void> => kept(knex, 'json', 'lz4');
export const down = (knex: Knex): Promise<void> => kept(knex, 'jsonb', 'default');
