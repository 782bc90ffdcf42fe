import type { Knex } from 'knex';

/**
 * What yields and ratios of any span are summed from, a site's local day each: quarters that have both light and
 * power ("lit"), and those that have module temperature too ("warm"). NULL on days from before, or without a sensor.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table site_day
      add nameplate int8, -- W at STC of the modules placed that day
      add gamma_pmp real, -- 1/K, weighted by nameplate
      add quarters_due int2, -- of the day: 92, 96 or 100
      add quarters_lit int2,
      add insolation real, -- Wh/m² in the plane, lit quarters
      add energy_ac_lit int8, -- Wh
      add energy_dc_lit int8, -- Wh
      add quarters_warm int2,
      add insolation_warm real, -- Wh/m²
      add insolation_temperature real, -- Wh/m² times °C of the modules
      add energy_ac_warm int8, -- Wh
      add minutes_lit int2, -- with enough light to run by and a report of both
      add limited_minutes int2, -- of them derated or curtailed
      add lost_energy int8, -- Wh: nameplate by the light of the lost minutes
      add lost_energy_grid int8;
  `);
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`
    alter table site_day drop nameplate, drop gamma_pmp, drop quarters_due, drop quarters_lit, drop insolation,
      drop energy_ac_lit, drop energy_dc_lit, drop quarters_warm, drop insolation_warm, drop insolation_temperature,
      drop energy_ac_warm, drop minutes_lit, drop limited_minutes, drop lost_energy, drop lost_energy_grid;
  `);
}
