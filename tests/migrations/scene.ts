import type pg from 'pg';

/** The smallest plant that has one of everything, once for each of two organisations (ids 1 and 2). */
export interface Scene {
  organisation: number;
  site: number;
  otherSite: number;
  person: number;
  plane: number;
  inverter: number;
  input: number;
  initiator: number;
  zone: number;
  logger: number;
  transmitter: number;
  moduleType: number;
  monitoredType: number;
  shutdownOnlyType: number;
  string: number;
  slots: number[];
  units: number[];
}

type Value = string | number | boolean | null | Date | number[];

/** Inserts one row and gives its id; a table without one gives 0. */
export async function insert(
  db: pg.Pool | pg.ClientBase,
  table: string,
  row: Record<string, Value>,
): Promise<number> {
  const names = Object.keys(row);
  const { rows } = await db.query<{ id?: number }>(
    `insert into ${table} (${names.join(', ')}) values (${names.map((_, i) => `$${i + 1}`).join(', ')}) returning *`,
    Object.values(row),
  );
  return rows[0]?.id ?? 0;
}

export const SINCE = new Date('2026-06-01T00:00:00Z');

export const unitTypeRow = (organisation: number, name: string, kind: string): Record<string, Value> => ({
  organisation_id: organisation,
  name,
  kind,
  out_of_box: kind === 'shutdown_only' ? 'shutdown' : 'passing',
  released_by: kind === 'shutdown_only' ? 'keep_alive' : 'logger',
  on_command_loss: 'shuts_down',
  shutdown_voltage_min: 0.5,
  shutdown_voltage_max: 0.7,
  measures: kind === 'shutdown_only' ? 'none' : 'output',
  voltage_in_max: 80,
  current_max: 15,
});

export const moduleTypeRow = (organisation: number): Record<string, Value> => ({
  organisation_id: organisation,
  name: 'Slate 420',
  voc_ref: 49.5,
  isc_ref: 10.9,
  vmp_ref: 41.2,
  imp_ref: 10.2,
  beta_voc: -0.0026,
  alpha_isc: 0.0005,
  gamma_pmp: -0.0034,
  cells_in_series: 72,
});

export const siteRow = (organisation: number, name: string): Record<string, Value> => ({
  organisation_id: organisation,
  name,
  latitude: 51,
  longitude: 0,
  time_zone: 'Europe/London',
});

export async function makeScene(db: pg.Pool, word: string): Promise<Scene> {
  const organisation = await insert(db, 'organisation', { name: `Organisation ${word}` });
  const site = await insert(db, 'site', siteRow(organisation, `Site ${word}`));
  const otherSite = await insert(db, 'site', siteRow(organisation, `Other site ${word}`));
  const person = await insert(db, 'person', {
    organisation_id: organisation,
    email: `manager@${word}.example`,
    name: `Manager ${word}`,
    role: 'manager',
    password_hash: 'none',
  });
  const plane = await insert(db, 'plane', {
    site_id: site,
    name: 'South',
    surface_tilt: 30,
    surface_azimuth: 180,
  });
  const inverter = await insert(db, 'inverter', { site_id: site, name: 'Inverter 1', ac_power_max: 10_000 });
  const input = await insert(db, 'input', { site_id: site, inverter_id: inverter, number: 1 });
  const initiator = await insert(db, 'initiator', { site_id: site, name: 'Main switch' });
  const zone = await insert(db, 'zone', { site_id: site, initiator_id: initiator, name: 'Roof' });
  const logger = await insert(db, 'logger', { site_id: site, serial: `LG-${word.toUpperCase()}` });
  const transmitter = await insert(db, 'transmitter', {
    site_id: site,
    zone_id: zone,
    name: 'Transmitter 1',
  });
  const moduleType = await insert(db, 'module_type', moduleTypeRow(organisation));
  const monitoredType = await insert(
    db,
    'unit_type',
    unitTypeRow(organisation, 'Watching unit', 'monitored'),
  );
  const shutdownOnlyType = await insert(
    db,
    'unit_type',
    unitTypeRow(organisation, 'Plain unit', 'shutdown_only'),
  );
  const scene = {
    organisation,
    site,
    otherSite,
    person,
    plane,
    inverter,
    input,
    initiator,
    zone,
    logger,
    transmitter,
  };
  const string = await insert(db, 'string', stringRow({ ...scene, monitoredType }, 'A1', 0));
  const slots: number[] = [];
  const units: number[] = [];
  for (const position of [1, 2]) {
    const slot = await insert(db, 'slot', {
      site_id: site,
      string_id: string,
      position,
      module_type_id: moduleType,
    });
    const unit = await insert(db, 'unit', {
      organisation_id: organisation,
      unit_type_id: monitoredType,
      serial: `UN-${word.toUpperCase()}-${position}`,
    });
    await insert(db, 'placement', { site_id: site, unit_id: unit, slot_id: slot, placed_from: SINCE });
    slots.push(slot);
    units.push(unit);
  }
  return { ...scene, moduleType, monitoredType, shutdownOnlyType, string, slots, units };
}

type StringParts = Pick<Scene, 'site' | 'plane' | 'input' | 'zone' | 'logger' | 'monitoredType'>;

/** A monitored string of two units. */
export const stringRow = (scene: StringParts, name: string, rosterIndex: number): Record<string, Value> => ({
  site_id: scene.site,
  name,
  plane_id: scene.plane,
  input_id: scene.input,
  zone_id: scene.zone,
  logger_id: scene.logger,
  roster_index: rosterIndex,
  unit_type_id: scene.monitoredType,
  kind: 'monitored',
  slots: 2,
});

/** Some telemetry and what follows from it, so that there is something to hide. */
export async function addReadings(db: pg.Pool, scene: Scene, at: Date): Promise<void> {
  await db.query('select ensure_days($1::date, $1::date)', [at]);
  const arrays = { mask: 3, voltage_sum: 8000, power_sum: 100 };
  await insert(db, 'string_frame', {
    at,
    string_id: scene.string,
    ...arrays,
    voltage: [4000, 4000],
    current: [9000, 9000],
    temperature: [300, 300],
    signal: [-60, -60],
    via: [0, 0],
    state: [1, 1],
  });
  await insert(db, 'input_frame', { at, input_id: scene.input, voltage: 800, current: 90 });
  await insert(db, 'inverter_frame', { at, inverter_id: scene.inverter, ac_power: 700, status: 'running' });
  await insert(db, 'string_judgement', {
    string_id: scene.string,
    site_id: scene.site,
    judged_at: at,
    state: [1, 1],
    verdict: [0, 0],
    since: [0, 0],
  });
  await insert(db, 'unit_event', {
    at,
    string_id: scene.string,
    position: 1,
    site_id: scene.site,
    state: 1,
    verdict: 0,
  });
  await insert(db, 'event', {
    at,
    organisation_id: scene.organisation,
    site_id: scene.site,
    string_id: scene.string,
    kind: 'units_stuck',
  });
  await insert(db, 'audit_entry', { organisation_id: scene.organisation, action: 'trial', subject: 'trial' });
  await db.query(
    `insert into ingest_token (logger_id, hash) values ($1::int4, decode(md5('trial' || $1::int4), 'hex'))`,
    [scene.logger],
  );
}
