import type { Knex } from 'knex';

/**
 * What a page asks of one site is found by the site, however many others there are: these tables were only indexed by
 * what else they hang on. Made beside the running system, outside a transaction.
 */
export const config = { transaction: false };

const INDEXES: Record<string, string> = {
  placement_current_site: 'placement (site_id) where placed_to is null',
  slot_site: 'slot (site_id)',
  gateway_site: 'gateway (site_id)',
  input_site: 'input (site_id)',
  sensor_site: 'sensor (site_id)',
  transmitter_site: 'transmitter (site_id)',
  // what happened while a person was away, over all sites of their organisation
  event_recorded: 'event (organisation_id, recorded_at)',
};

export async function up(knex: Knex): Promise<void> {
  for (const [name, on] of Object.entries(INDEXES)) {
    // one that was broken off is there and of no use
    await knex.raw(`drop index concurrently if exists ${name}`);
    await knex.raw(`create index concurrently ${name} on ${on}`);
  }
}

export async function down(knex: Knex): Promise<void> {
  for (const name of Object.keys(INDEXES)) await knex.raw(`drop index concurrently if exists ${name}`);
}
