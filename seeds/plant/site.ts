import type { Knex } from 'knex';
import type { SitePlan } from '../../simulator/plant/plan';
import { seedLoggers } from './loggers';
import { insertRows, known, namedIds } from './rows';
import type { SeededSite, SeedOptions } from './seeded';

export interface SiteContext {
  organisationId: number;
  since: Date;
  moduleTypes: Map<string, number>;
  unitTypes: Map<string, number>;
  inverterTypes: Map<string, number>;
  options: SeedOptions;
}

/** A site with everything that stands on it. */
export async function seedSite(db: Knex, plan: SitePlan, context: SiteContext): Promise<SeededSite> {
  const site = await seedSiteRow(db, plan, context);
  const of = (rows: Record<string, unknown>[]) => rows.map((r) => ({ site_id: site.id, ...r }));

  const planes = await namedIds(
    db,
    'plane',
    { site_id: 'int4', name: 'text', surface_tilt: 'real', surface_azimuth: 'real', albedo: 'real' },
    of(
      plan.planes.map((p) => ({
        name: p.name,
        surface_tilt: p.surfaceTilt,
        surface_azimuth: p.surfaceAzimuth,
        albedo: p.albedo,
      })),
    ),
  );
  const inverters = await namedIds(
    db,
    'inverter',
    { site_id: 'int4', name: 'text', ac_power_max: 'real', inverter_type_id: 'int4' },
    of(
      plan.inverters.map((i) => ({
        name: i.name,
        ac_power_max: i.acPowerMax,
        inverter_type_id:
          i.type === undefined ? null : known(context.inverterTypes, i.type, 'the inverter type'),
      })),
    ),
  );
  const inputRows = await insertRows<{ id: number; inverter_id: number; number: number }>(
    db,
    'input',
    { site_id: 'int4', inverter_id: 'int4', number: 'int2' },
    of(
      plan.inverters.flatMap((i) =>
        i.inputs.map((number) => ({ inverter_id: known(inverters, i.name, 'the inverter'), number })),
      ),
    ),
    ['id', 'inverter_id', 'number'],
  );
  const inverterName = new Map([...inverters].map(([name, id]) => [id, name]));
  const inputs = new Map(
    inputRows.map((r) => [`${inverterName.get(r.inverter_id) ?? ''}/${r.number}`, r.id]),
  );
  const initiators = await namedIds(
    db,
    'initiator',
    { site_id: 'int4', name: 'text', place: 'text' },
    of(plan.initiators),
  );
  const zones = await namedIds(
    db,
    'zone',
    { site_id: 'int4', name: 'text', initiator_id: 'int4' },
    of(
      plan.zones.map((z) => ({
        name: z.name,
        initiator_id: known(initiators, z.initiator, 'the initiator'),
      })),
    ),
  );
  const transmitters = await namedIds(
    db,
    'transmitter',
    { site_id: 'int4', name: 'text', zone_id: 'int4' },
    of(plan.transmitters.map((t) => ({ name: t.name, zone_id: known(zones, t.zone, 'the zone') }))),
  );
  const { loggers, sensors } = await seedLoggers(db, plan, site.id, planes, context.options.secret);

  const strings = await insertRows<{ id: number; ref: string; name: string }>(
    db,
    'string',
    {
      site_id: 'int4',
      name: 'text',
      plane_id: 'int4',
      input_id: 'int4',
      zone_id: 'int4',
      logger_id: 'int4',
      roster_index: 'int2',
      unit_type_id: 'int4',
      kind: 'text',
      slots: 'int2',
      home_run_leaves_array: 'boolean',
      cable_resistance: 'real',
    },
    of(
      plan.strings.map((s) => ({
        name: s.name,
        plane_id: known(planes, s.plane, 'the plane'),
        input_id: known(inputs, `${s.inverter}/${s.input}`, 'the input'),
        zone_id: known(zones, s.zone, 'the zone'),
        logger_id: known(loggers, s.logger, 'the logger'),
        roster_index: s.rosterIndex,
        unit_type_id: known(context.unitTypes, s.unitType, 'the unit type'),
        kind: s.kind,
        slots: s.slots.length,
        home_run_leaves_array: s.homeRunLeavesArray,
        cable_resistance: s.cableResistance,
      })),
    ),
    ['id', 'ref', 'name'],
  );
  const seeded: SeededSite = {
    ...site,
    organisationId: context.organisationId,
    plan,
    strings: new Map(strings.map((s) => [s.name, { id: s.id, ref: s.ref }])),
    loggers,
    zones,
    transmitters,
    inverters,
    inputs,
    sensors,
    units: new Map(),
  };
  await insertRows(
    db,
    'transmitter_string',
    { site_id: 'int4', transmitter_id: 'int4', string_id: 'int4' },
    of(
      plan.strings.flatMap((s) =>
        s.transmitters.map((t) => ({
          transmitter_id: known(transmitters, t, 'the transmitter'),
          string_id: known(seeded.strings, s.name, 'the string').id,
        })),
      ),
    ),
    ['string_id'],
  );
  await seedUnits(db, seeded, context);
  return seeded;
}

async function seedSiteRow(
  db: Knex,
  plan: SitePlan,
  context: SiteContext,
): Promise<{ id: number; ref: string }> {
  const [site] = await insertRows<{ id: number; ref: string }>(
    db,
    'site',
    {
      organisation_id: 'int4',
      name: 'text',
      place: 'text',
      latitude: 'real',
      longitude: 'real',
      altitude: 'real',
      time_zone: 'text',
      stage: 'text',
      rule_set: 'text',
      structure: 'text',
      temperature_min: 'real',
      temperature_max: 'real',
      switched_on_on: 'date',
      shutdown_switch_place: 'text',
      contact_name: 'text',
      contact_phone: 'text',
      outline: 'jsonb',
      report_interval_s: 'int2',
      created_at: 'timestamptz',
    },
    [
      {
        organisation_id: context.organisationId,
        name: plan.name,
        place: plan.place,
        latitude: plan.latitude,
        longitude: plan.longitude,
        altitude: plan.altitude,
        time_zone: plan.timeZone,
        stage: plan.stage,
        rule_set: plan.ruleSet,
        structure: plan.structure ?? 'other_building',
        temperature_min: plan.temperatureMin ?? null,
        temperature_max: plan.temperatureMax ?? null,
        switched_on_on: plan.switchedOnOn,
        shutdown_switch_place: plan.shutdownSwitchPlace,
        contact_name: plan.contactName,
        contact_phone: plan.contactPhone,
        outline: plan.outline,
        report_interval_s: plan.reportIntervalS,
        created_at: plan.switchedOnOn ?? context.since,
      },
    ],
    ['id', 'ref'],
  );
  if (!site) throw new Error(`The site ${plan.name} was not written.`);
  return site;
}

async function seedUnits(db: Knex, seeded: SeededSite, context: SiteContext): Promise<void> {
  const { plan } = seeded;
  const slots = await insertRows<{ id: number; string_id: number; position: number }>(
    db,
    'slot',
    {
      site_id: 'int4',
      string_id: 'int4',
      position: 'int2',
      module_type_id: 'int4',
      roof_x: 'real',
      roof_y: 'real',
      roof_place: 'text',
    },
    plan.strings.flatMap((s) =>
      s.slots.map((slot, i) => ({
        site_id: seeded.id,
        string_id: known(seeded.strings, s.name, 'the string').id,
        position: i + 1,
        module_type_id: known(context.moduleTypes, slot.moduleType, 'the module type'),
        roof_x: slot.roofX,
        roof_y: slot.roofY,
        roof_place: slot.roofPlace,
      })),
    ),
    ['id', 'string_id', 'position'],
  );
  const units = await insertRows<{ id: number; serial: string }>(
    db,
    'unit',
    { organisation_id: 'int4', unit_type_id: 'int4', serial: 'text' },
    plan.strings.flatMap((s) =>
      s.slots.flatMap((slot) =>
        slot.serial === null
          ? []
          : [
              {
                organisation_id: seeded.organisationId,
                unit_type_id: known(context.unitTypes, s.unitType, 'the unit type'),
                serial: slot.serial,
              },
            ],
      ),
    ),
    ['id', 'serial'],
  );
  for (const u of units) seeded.units.set(u.serial, u.id);
  const slotId = new Map(slots.map((s) => [`${s.string_id}/${s.position}`, s.id]));
  const placedFrom = plan.switchedOnOn ?? new Date(context.since.getTime() - 3 * 86_400_000);
  await insertRows(
    db,
    'placement',
    { site_id: 'int4', unit_id: 'int4', slot_id: 'int4', placed_from: 'timestamptz' },
    plan.strings.flatMap((s) => {
      const stringId = known(seeded.strings, s.name, 'the string').id;
      return s.slots.flatMap((slot, i) =>
        slot.serial === null
          ? []
          : [
              {
                site_id: seeded.id,
                unit_id: known(seeded.units, slot.serial, 'the unit'),
                slot_id: known(slotId, `${stringId}/${i + 1}`, 'the slot'),
                placed_from: placedFrom,
              },
            ],
      );
    }),
  );
}
