import { createHash } from 'node:crypto';
import type pg from 'pg';

/** A fleet for measuring: sites of equal strings, all at noon, one logger each. */
export interface BenchPlant {
  sites: { id: number; ref: string; logger: string; token: string; strings: { id: number; ref: string }[] }[];
  stringsPerSite: number;
  unitsPerString: number;
}

export async function plantFleet(
  db: pg.Client,
  sites: number,
  stringsPerSite: number,
  unitsPerString: number,
): Promise<BenchPlant> {
  const now = new Date();
  const noon = 15 * (12 - (now.getUTCHours() + now.getUTCMinutes() / 60));
  await db.query('begin');
  await db.query(`insert into organisation (name) values ('Measured Works')`);
  await db.query(
    `insert into module_type (organisation_id, name, voc_ref, isc_ref, vmp_ref, imp_ref, beta_voc, alpha_isc, gamma_pmp, cells_in_series)
     values (1, 'Mono 430', 38.7, 13.95, 32.3, 13.32, -0.0025, 0.00045, -0.003, 54)`,
  );
  await db.query(
    `insert into unit_type (organisation_id, name, kind, out_of_box, released_by, on_command_loss, shutdown_voltage_min,
       shutdown_voltage_max, measures, voltage_in_max, current_max)
     values (1, 'Reporting unit', 'monitored', 'passing', 'logger', 'shuts_down', 0.55, 0.66, 'output', 80, 15)`,
  );
  await db.query(
    `insert into site (organisation_id, name, latitude, longitude, time_zone, stage)
     select 1, 'Roof ' || n, 0, $2::real, 'UTC', 'operating' from generate_series(1, $1::int4) n`,
    [sites, noon],
  );
  await db.query(
    `insert into plane (site_id, name, surface_tilt, surface_azimuth) select id, 'South roof', 20, 180 from site`,
  );
  await db.query(
    `insert into inverter (site_id, name, ac_power_max) select id, 'Inverter 1', 100000 from site`,
  );
  await db.query(
    `insert into input (site_id, inverter_id, number) select v.site_id, v.id, n from inverter v, generate_series(1, $1::int4) n`,
    [stringsPerSite],
  );
  await db.query(`insert into initiator (site_id, name) select id, 'Switch' from site`);
  await db.query(`insert into zone (site_id, initiator_id, name) select site_id, id, 'Roof' from initiator`);
  await db.query(
    `insert into command (site_id, zone_id, in_force, since) select site_id, id, 'released', now() - interval '2 days' from zone`,
  );
  await db.query(`insert into logger (site_id, serial) select id, 'LG-BENCH-' || id from site`);
  await db.query(
    `insert into string (site_id, name, plane_id, input_id, zone_id, logger_id, roster_index, unit_type_id, kind, slots)
     select i.site_id, 'S' || i.number, p.id, i.id, z.id, l.id, i.number - 1, 1, 'monitored', $1::int2
     from input i join plane p using (site_id) join zone z using (site_id) join logger l using (site_id) order by i.site_id, i.number`,
    [unitsPerString],
  );
  await db.query(
    `insert into slot (site_id, string_id, position, module_type_id)
     select s.site_id, s.id, n, 1 from string s, generate_series(1, $1::int4) n`,
    [unitsPerString],
  );
  await db.query(
    `insert into unit (organisation_id, unit_type_id, serial) select 1, 1, 'BENCH-' || id from slot order by id`,
  );
  await db.query(
    `insert into placement (site_id, unit_id, slot_id, placed_from)
     select slot.site_id, unit.id, slot.id, now() - interval '30 days' from slot join unit on unit.serial = 'BENCH-' || slot.id`,
  );
  await db.query(
    `insert into heard (site_id, serial, unit_id, logger_id, gateway_number, first_heard_at, last_heard_at, signal)
     select p.site_id, u.serial, u.id, l.id, 1, now() - interval '29 days', now() - interval '29 days', -70
     from placement p join unit u on u.id = p.unit_id join logger l on l.site_id = p.site_id`,
  );
  await db.query('commit');
  await db.query('analyze');
  const { rows } = await db.query<{
    id: number;
    ref: string;
    logger: string;
    loggerId: number;
    strings: { id: number; ref: string }[];
  }>(
    `select site.id, site.ref, l.serial as logger, l.id as "loggerId",
       (select json_agg(json_build_object('id', s.id, 'ref', s.ref) order by s.roster_index) from string s where s.site_id = site.id) as strings
     from site join logger l on l.site_id = site.id order by site.id`,
  );
  const withTokens = rows.map(({ loggerId, ...s }) => ({
    ...s,
    loggerId,
    token: `bench-token-${s.id}-${s.ref}`,
  }));
  for (const { loggerId, token } of withTokens)
    await db.query('insert into ingest_token (logger_id, hash) values ($1, $2)', [
      loggerId,
      createHash('sha256').update(token).digest(),
    ]);
  return { sites: withTokens, stringsPerSite, unitsPerString };
}
