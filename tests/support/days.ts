import type pg from 'pg';

/**
 * Days of a plant with a sensor in the plane: `sun` kWh/m² each, energy by a performance ratio of 0.85, warm modules of
 * 40 °C. Deterministic, oldest first; the site's own calendar.
 */
export async function writeDays(
  owner: pg.Client | pg.Pool,
  siteId: number,
  days: { from: string; count: number; nameplate: number; sun: number; lost?: number; complete?: number },
): Promise<void> {
  const { from, count, nameplate, sun, lost = 0, complete = 1 } = days;
  await owner.query(
    `insert into site_day (day, site_id, energy_ac, energy_dc, energy_expected, lost_minutes, lost_minutes_grid, complete,
       nameplate, gamma_pmp, quarters_due, quarters_lit, insolation, energy_ac_lit, energy_dc_lit, quarters_warm, insolation_warm,
       insolation_temperature, energy_ac_warm, minutes_lit, limited_minutes, lost_energy, lost_energy_grid)
     select $1::date + i, $2, round($4::float8 * $5::float8 * 0.85), round($4::float8 * $5::float8 * 0.88), round($4::float8 * $5), $6::int4, 0, $7::float8,
       $4::float8::int8, -0.004, 96, 96, $5::float8 * 1000, round($4::float8 * $5::float8 * 0.85), round($4::float8 * $5::float8 * 0.88), 96, $5::float8 * 1000,
       $5::float8 * 1000 * 40, round($4::float8 * $5::float8 * 0.85), 600, 0, round($6::int4 * $4::float8 * 0.5 / 60), 0
     from generate_series(0, $3 - 1) i`,
    [from, siteId, count, nameplate, sun, lost, complete],
  );
}
