import { createHash } from 'node:crypto';
import type { Knex } from 'knex';
import { loggerToken } from '../../simulator/scenarios/tokens';

export const STRINGS_A_SITE = 5;
export const UNITS_A_STRING = 20;
export const UNITS_A_SITE = STRINGS_A_SITE * UNITS_A_STRING;

/** Organisations with the number of their sites: one that has nearly all, and two small neighbours. */
export const organisationsOf = (sites: number): { name: string; sites: number }[] => {
  const neighbour = Math.max(1, Math.round(sites / 100));
  return [
    { name: 'Broad Acre Works', sites },
    { name: 'Sluice Lane Solar', sites: neighbour },
    { name: 'Quarry Edge Power', sites: neighbour },
  ];
};

const ROLES = ['manager', 'analyst', 'technician', 'analyst'] as const;
/** How many people of the first organisation look at it. */
const PEOPLE = 12;

/** A zone of whole hours in which it is about noon now, and the longitude under the sun. */
export function noonPlace(nowS: number): { timeZone: string; longitude: number; noonHour: number } {
  const noonHour = (nowS % 86_400) / 3600;
  const hours = Math.round(12 - noonHour);
  const timeZone = hours === 0 ? 'UTC' : `Etc/GMT${hours > 0 ? '-' : '+'}${Math.abs(hours)}`;
  return { timeZone, longitude: 15 * (12 - noonHour), noonHour };
}

export interface FleetString {
  id: number;
  ref: string;
  siteId: number;
  index: number;
  logger: string;
  serials: string[];
}

/** Lays out organisations, people, sites with everything on them, loggers with their tokens. Nothing has a past yet. */
export async function layOutFleet(
  tx: Knex.Transaction,
  options: { sites: number; secret: string; nowS: number; passwordHash: string },
): Promise<FleetString[]> {
  const organisations = organisationsOf(options.sites);
  const now = new Date(options.nowS * 1000);
  const { timeZone, longitude } = noonPlace(options.nowS);
  await tx.raw(
    `insert into organisation (name, time_zone, created_at)
     select o.name, :timeZone, :now::timestamptz - interval '2 years' from json_to_recordset(:organisations) o(name text)`,
    { organisations: JSON.stringify(organisations), timeZone, now },
  );
  await tx.raw(
    `insert into person (organisation_id, email, name, role, password_hash)
     select o.id, 'person' || n || '.' || o.id || '@wakeline.example', 'Person ' || n,
            (:roles::text[])[1 + (n - 1) % cardinality(:roles::text[])], :passwordHash
     from organisation o, generate_series(1, :people::int4) n order by o.id, n`,
    { people: PEOPLE, roles: [...ROLES], passwordHash: options.passwordHash },
  );
  await tx.raw(
    `insert into module_type (organisation_id, name, voc_ref, isc_ref, vmp_ref, imp_ref, beta_voc, alpha_isc, gamma_pmp, cells_in_series)
     select id, 'Mono 430', 38.7, 13.95, 32.3, 13.32, -0.0025, 0.00045, -0.003, 54 from organisation`,
  );
  await tx.raw(
    `insert into unit_type (organisation_id, name, kind, out_of_box, released_by, on_command_loss, shutdown_voltage_min,
       shutdown_voltage_max, measures, voltage_in_max, current_max)
     select id, 'Reporting unit', 'monitored', 'passing', 'logger', 'shuts_down', 0.55, 0.66, 'output', 80, 15 from organisation`,
  );
  await tx.raw(
    `insert into site (organisation_id, name, place, latitude, longitude, time_zone, stage, switched_on_on, contact_name,
       contact_phone, shutdown_switch_place, created_at)
     select o.id, (array['Barn', 'Mill', 'Depot', 'School', 'Dairy', 'Store', 'Works', 'Hall'])[1 + n % 8] || ' ' ||
              (array['Amber', 'Birch', 'Cedar', 'Dale', 'Elm', 'Fern', 'Glade', 'Heath', 'Iris', 'Juniper'])[1 + (n / 8) % 10]
              || ' ' || lpad(n::text, 4, '0'),
            (array['Northfield', 'Eastmoor', 'Southbank', 'Westlea'])[1 + n % 4], n % 40 - 20, :longitude::real, :timeZone,
            'operating', (:now::timestamptz - interval '400 days')::date, 'Caretaker ' || n, '+00 000 ' || n, 'By the gate',
            :now::timestamptz - interval '410 days'
     from organisation o join json_to_recordset(:organisations) w(name text, sites int4) using (name),
          generate_series(1, w.sites) n
     order by o.id, n`,
    { organisations: JSON.stringify(organisations), longitude, timeZone, now },
  );
  await tx.raw(
    `insert into plane (site_id, name, surface_tilt, surface_azimuth) select id, 'South roof', 20, 180 from site order by id`,
  );
  await tx.raw(
    `insert into inverter (site_id, name, ac_power_max) select id, 'Inverter 1', 40000 from site order by id`,
  );
  await tx.raw(
    `insert into input (site_id, inverter_id, number)
     select v.site_id, v.id, n from inverter v, generate_series(1, :strings::int4) n order by v.id, n`,
    { strings: STRINGS_A_SITE },
  );
  await tx.raw(`insert into initiator (site_id, name) select id, 'Switch' from site order by id`);
  await tx.raw(
    `insert into zone (site_id, initiator_id, name) select site_id, id, 'Roof' from initiator order by id`,
  );
  await tx.raw(
    `insert into command (site_id, zone_id, in_force, since, said_by)
     select site_id, id, 'released', :now::timestamptz - interval '399 days', 'load' from zone order by id`,
    { now },
  );
  await layOutLoggers(tx, options.secret, now);
  await layOutUnits(tx, now);
  await tx.raw(
    `insert into person (organisation_id, email, name, role, password_hash)
     select o.id, 'customer.' || o.id || '@wakeline.example', 'Customer', 'customer', :passwordHash from organisation o`,
    { passwordHash: options.passwordHash },
  );
  await tx.raw(
    `insert into site_access (person_id, site_id)
     select p.id, min(s.id) from person p join site s using (organisation_id) where p.role = 'customer' group by p.id`,
  );
  const { rows } = await tx.raw<{ rows: FleetString[] }>(
    `select s.id, s.ref, s.site_id as "siteId", s.roster_index as index, l.serial as logger, u.serials
     from string s join logger l on l.id = s.logger_id
     join (select slot.string_id, json_agg(unit.serial order by slot.position) as serials
           from slot join placement p on p.slot_id = slot.id join unit on unit.id = p.unit_id group by 1) u on u.string_id = s.id
     order by s.id`,
  );
  return rows;
}

async function layOutLoggers(tx: Knex.Transaction, secret: string, now: Date): Promise<void> {
  await tx.raw(
    `insert into logger (site_id, serial, firmware, last_spoke_at)
     select id, 'LG-FLEET-' || lpad(row_number() over (order by id)::text, 6, '0'), 'load', :now::timestamptz from site order by id`,
    { now },
  );
  const { rows } = await tx.raw<{ rows: { id: number; serial: string }[] }>(
    'select id, serial from logger order by id',
  );
  await tx.raw(
    `insert into ingest_token (logger_id, hash) select id, decode(hash, 'hex') from unnest(:ids::int4[], :hashes::text[]) t(id, hash)`,
    {
      ids: rows.map((l) => l.id),
      hashes: rows.map((l) => createHash('sha256').update(loggerToken(secret, l.serial)).digest('hex')),
    },
  );
  await tx.raw(
    `insert into gateway (site_id, logger_id, number, name, last_heard_at)
     select l.site_id, l.id, n, 'Gateway ' || n, :now::timestamptz from logger l, generate_series(1, 3) n order by l.id, n`,
    { now },
  );
  await tx.raw(
    `insert into sensor (site_id, logger_id, plane_id, number, kind)
     select l.site_id, l.id, case when k.number = 0 then p.id end, k.number, k.kind
     from logger l join plane p using (site_id), (values (0, 'poa_global'), (1, 'ambient')) k(number, kind) order by l.id, k.number`,
  );
}

async function layOutUnits(tx: Knex.Transaction, now: Date): Promise<void> {
  const sizes = { units: UNITS_A_STRING };
  await tx.raw(
    `insert into string (site_id, name, plane_id, input_id, zone_id, logger_id, roster_index, unit_type_id, kind, slots)
     select i.site_id, 'S' || i.number, p.id, i.id, z.id, l.id, i.number - 1, ut.id, 'monitored', :units::int2
     from input i join site on site.id = i.site_id join plane p using (site_id) join zone z using (site_id)
       join logger l using (site_id) join unit_type ut on ut.organisation_id = site.organisation_id
     order by i.site_id, i.number`,
    sizes,
  );
  await tx.raw(
    `insert into slot (site_id, string_id, position, module_type_id, roof_x, roof_y)
     select s.site_id, s.id, n, mt.id, n * 1.15, s.roster_index * 1.8
     from string s join site on site.id = s.site_id join module_type mt on mt.organisation_id = site.organisation_id,
       generate_series(1, :units::int4) n order by s.id, n`,
    sizes,
  );
  await tx.raw(
    `insert into unit (organisation_id, unit_type_id, serial)
     select site.organisation_id, s.unit_type_id, 'FU-' || lpad(slot.id::text, 8, '0')
     from slot join string s on s.id = slot.string_id join site on site.id = slot.site_id order by slot.id`,
  );
  await tx.raw(
    `insert into placement (site_id, unit_id, slot_id, placed_from)
     select slot.site_id, unit.id, slot.id, :now::timestamptz - interval '400 days'
     from slot join unit on unit.serial = 'FU-' || lpad(slot.id::text, 8, '0') order by slot.id`,
    { now },
  );
  await tx.raw(
    `insert into heard (site_id, serial, unit_id, logger_id, gateway_number, first_heard_at, last_heard_at, signal)
     select p.site_id, u.serial, u.id, l.id, 1, :now::timestamptz - interval '399 days', :now::timestamptz - interval '399 days', -70
     from placement p join unit u on u.id = p.unit_id join logger l on l.site_id = p.site_id order by p.id`,
    { now },
  );
}
