import type { AsBuilt, SlotBuilt, StringBuilt } from '../../schemas/api/as-built';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** The whole as-built of a site: four round trips whatever its size. */

type Head = Omit<AsBuilt, 'at' | 'strings'>;
const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });
const sorted = <T>(rows: T[], of: (row: T) => string): T[] =>
  rows.sort((a, b) => byName.compare(of(a), of(b)));
const iso = (at: string | null): string | null => at && new Date(at).toISOString();

/** Planes, inverters, strings with their slots, and all else that stands on a site; undefined where there is none. */
export async function asBuiltParts(tx: Tx, siteId: number): Promise<Omit<AsBuilt, 'at'> | undefined> {
  const { rows } = await tx.raw<{ rows: { head: Head }[] }>(
    `select json_build_object(
       'site', json_build_object('id', site.ref, 'stage', site.stage, 'name', site.name, 'place', site.place,
         'latitude', site.latitude, 'longitude', site.longitude, 'altitude', site.altitude, 'timeZone', site.time_zone,
         'ruleSet', site.rule_set, 'structure', site.structure, 'reportIntervalS', site.report_interval_s,
         'temperatureMin', site.temperature_min, 'temperatureMax', site.temperature_max,
         'shutdownSwitchPlace', site.shutdown_switch_place, 'contactName', site.contact_name,
         'contactPhone', site.contact_phone),
       'planes', (select coalesce(json_agg(json_build_object('id', ref, 'name', name, 'surfaceTilt', surface_tilt,
           'surfaceAzimuth', surface_azimuth, 'albedo', albedo)), '[]') from plane where site_id = site.id),
       'inverters', (select coalesce(json_agg(json_build_object('id', v.ref, 'name', v.name, 'inverterType', t.ref,
           'acPowerMax', v.ac_power_max,
           'inputs', (select coalesce(json_agg(json_build_object('id', i.ref, 'number', i.number) order by i.number), '[]')
                      from input i where i.inverter_id = v.id))), '[]')
         from inverter v left join inverter_type t on t.id = v.inverter_type_id where v.site_id = site.id),
       'initiators', (select coalesce(json_agg(json_build_object('id', ref, 'name', name, 'place', place)), '[]')
         from initiator where site_id = site.id),
       'zones', (select coalesce(json_agg(json_build_object('id', z.ref, 'name', z.name, 'initiator', i.ref)), '[]')
         from zone z join initiator i on i.id = z.initiator_id where z.site_id = site.id),
       'transmitters', (select coalesce(json_agg(json_build_object('id', t.ref, 'name', t.name, 'zone', z.ref,
           'strings', (select coalesce(json_agg(s.ref order by s.ref), '[]') from transmitter_string ts
                       join string s on s.id = ts.string_id where ts.transmitter_id = t.id))), '[]')
         from transmitter t join zone z on z.id = t.zone_id where t.site_id = site.id),
       'loggers', (select coalesce(json_agg(json_build_object('id', l.ref, 'serial', l.serial, 'lastSpokeAt', l.last_spoke_at,
           'tokenAt', (select max(k.created_at) from ingest_token k where k.logger_id = l.id
                       and (k.ended_at is null or k.ended_at > now())))), '[]')
         from logger l where l.site_id = site.id),
       'sensors', (select coalesce(json_agg(json_build_object('id', n.ref, 'kind', n.kind, 'logger', l.ref,
           'number', n.number, 'plane', p.ref)), '[]')
         from sensor n join logger l on l.id = n.logger_id left join plane p on p.id = n.plane_id where n.site_id = site.id),
       'catalogue', json_build_object(
         'moduleTypes', (select coalesce(json_agg(json_build_object('id', m.ref, 'name', m.name,
             'archived', m.archived_at is not null)), '[]') from module_type m
           where m.organisation_id = site.organisation_id
             and (m.archived_at is null or m.id in (select module_type_id from slot where site_id = site.id))),
         'unitTypes', (select coalesce(json_agg(json_build_object('id', u.ref, 'name', u.name,
             'archived', u.archived_at is not null, 'kind', u.kind)), '[]') from unit_type u
           where u.organisation_id = site.organisation_id
             and (u.archived_at is null or u.id in (select unit_type_id from string where site_id = site.id))),
         'inverterTypes', (select coalesce(json_agg(json_build_object('id', t.ref, 'name', t.name,
             'archived', t.archived_at is not null, 'acPowerMax', t.ac_power_max, 'inputs', t.inputs)), '[]')
           from inverter_type t where t.organisation_id = site.organisation_id
             and (t.archived_at is null or t.id in (select inverter_type_id from inverter where site_id = site.id)))
       )) as head
     from site where site.id = :siteId and ${SITE_VISIBLE}`,
    { siteId },
  );
  const head = rows[0]?.head;
  if (!head) return undefined;
  const { catalogue } = head;
  return {
    site: head.site,
    planes: sorted(head.planes, (p) => p.name),
    inverters: sorted(head.inverters, (v) => v.name),
    initiators: sorted(head.initiators, (i) => i.name),
    zones: sorted(head.zones, (z) => z.name),
    transmitters: sorted(head.transmitters, (t) => t.name),
    loggers: sorted(head.loggers, (l) => l.serial).map((l) => ({
      ...l,
      lastSpokeAt: iso(l.lastSpokeAt),
      tokenAt: iso(l.tokenAt),
    })),
    sensors: sorted(head.sensors, (s) => `${s.logger} ${s.number}`),
    strings: await stringsBuilt(tx, siteId),
    catalogue: {
      moduleTypes: sorted(catalogue.moduleTypes, (t) => t.name),
      unitTypes: sorted(catalogue.unitTypes, (t) => t.name),
      inverterTypes: sorted(catalogue.inverterTypes, (t) => t.name),
    },
  };
}

/**
 * Strings, their slots and what sits in them, in three plain statements put together here: a planner without statistics,
 * as after a large import, has no joins to get wrong.
 */
async function stringsBuilt(tx: Tx, siteId: number): Promise<AsBuilt['strings']> {
  const { rows: strings } = await tx.raw<{ rows: (Omit<StringBuilt, 'slots'> & { dbId: number })[] }>(
    `select s.id as "dbId", s.ref as id, s.name, s.kind, t.ref as "unitType", p.ref as plane, i.ref as input, z.ref as zone,
       l.ref as logger,
       (select coalesce(array_agg(tr.ref::text order by tr.ref), '{}') from transmitter_string ts
          join transmitter tr on tr.id = ts.transmitter_id where ts.string_id = s.id) as transmitters,
       s.cable_resistance as "cableResistance", s.home_run_leaves_array as "homeRunLeavesArray"
     from string s
     join unit_type t on t.id = s.unit_type_id
     join plane p on p.id = s.plane_id
     join input i on i.id = s.input_id
     join zone z on z.id = s.zone_id
     left join logger l on l.id = s.logger_id
     where s.site_id = ?`,
    [siteId],
  );
  const { rows: slots } = await tx.raw<{
    rows: (Omit<SlotBuilt, 'serial' | 'placedFrom'> & { dbId: number; stringId: number })[];
  }>(
    `select slot.id as "dbId", slot.string_id as "stringId", slot.position, m.ref as "moduleType",
       slot.roof_place as "roofPlace", slot.roof_x as "roofX", slot.roof_y as "roofY"
     from slot join module_type m on m.id = slot.module_type_id
     where slot.string_id = any (?::int4[]) order by slot.string_id, slot.position`,
    [strings.map((s) => s.dbId)],
  );
  const { rows: placed } = await tx.raw<{ rows: { slotId: number; serial: string; from: Date }[] }>(
    `select p.slot_id as "slotId", u.serial, p.placed_from as "from"
     from placement p join unit u on u.id = p.unit_id where p.slot_id = any (?::int4[]) and p.placed_to is null`,
    [slots.map((s) => s.dbId)],
  );
  const unitOf = new Map(placed.map((p) => [p.slotId, p]));
  const slotsOf = new Map<number, SlotBuilt[]>(strings.map((s) => [s.dbId, []]));
  for (const { dbId, stringId, ...slot } of slots) {
    const unit = unitOf.get(dbId);
    slotsOf.get(stringId)?.push({
      ...slot,
      serial: unit?.serial ?? null,
      placedFrom: unit?.from.toISOString() ?? null,
    });
  }
  const built = strings.map(({ dbId, ...string }) => ({ ...string, slots: slotsOf.get(dbId) ?? [] }));
  return sorted(built, (s) => s.name);
}
