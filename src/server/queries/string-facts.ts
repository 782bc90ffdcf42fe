import type { FindingEvidence } from '../../domain/verdicts/memory';
import type { VerdictEvidence } from '../../domain/verdicts/evidence';
import type { UnitKind, UnitType } from '../../domain/equipment/unit-type';
import type { ModuleType } from '../../domain/equipment/module-type';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** What is written down about one string, for its page and its history. */
export interface StringFacts {
  id: number;
  ref: string;
  name: string;
  kind: UnitKind;
  slots: number;
  units: number;
  inputId: number;
  inputStrings: number;
  zoneId: number;
  siteId: number;
  siteRef: string;
  siteName: string;
  stage: 'commissioning' | 'operating';
  timeZone: string;
  latitude: number;
  longitude: number;
  altitude: number;
  reportIntervalS: number;
  planeId: number;
  planeName: string;
  surfaceTilt: number;
  surfaceAzimuth: number;
  albedo: number;
  unitTypeName: string;
  measures: UnitType['measures'];
  insulationTestMax: number | null;
  /** V of one unit in shutdown, nominal; V of its bypass path under load. */
  shutdownVoltage: number;
  bypassVoltage: number;
  cableOhm: number;
  moduleTypeId: number;
  module: ModuleType;
  evidence: { units?: Record<string, VerdictEvidence>; finding?: FindingEvidence | null } | null;
  poaGlobal: number | null;
  temperatureModule: number | null;
}

/** A string that the actor may see, by its public identifier; undefined for every other. */
export async function stringFacts(tx: Tx, ref: string): Promise<StringFacts | undefined> {
  const { rows } = await tx.raw<{ rows: StringFacts[] }>(
    `select s.id, s.ref, s.name, s.kind, s.slots, s.input_id as "inputId", s.zone_id as "zoneId",
            (select count(*)::int from slot sl join placement p on p.slot_id = sl.id and p.placed_to is null
             where sl.string_id = s.id) as units,
            (select count(*)::int from string o where o.input_id = s.input_id) as "inputStrings",
            site.id as "siteId", site.ref as "siteRef", site.name as "siteName", site.stage,
            site.time_zone as "timeZone", site.latitude, site.longitude, site.altitude,
            site.report_interval_s as "reportIntervalS",
            p.id as "planeId", p.name as "planeName", p.surface_tilt as "surfaceTilt",
            p.surface_azimuth as "surfaceAzimuth", p.albedo,
            ut.name as "unitTypeName", ut.measures, ut.insulation_test_max as "insulationTestMax",
            ut.shutdown_voltage_nominal::float8 as "shutdownVoltage", ut.bypass_voltage::float8 as "bypassVoltage",
            s.cable_resistance::float8 as "cableOhm",
            m.id as "moduleTypeId",
            json_build_object('name', m.name, 'vocRef', m.voc_ref, 'iscRef', m.isc_ref, 'vmpRef', m.vmp_ref,
              'impRef', m.imp_ref, 'betaVoc', m.beta_voc, 'alphaIsc', m.alpha_isc, 'gammaPmp', m.gamma_pmp,
              'cellsInSeries', m.cells_in_series, 'bypassGroups', m.bypass_groups, 'noct', m.noct) as module,
            j.evidence,
            w.irradiance as "poaGlobal", w.temperature_module / 10.0::float8 as "temperatureModule"
     from string s
     join site on site.id = s.site_id
     join plane p on p.id = s.plane_id
     join unit_type ut on ut.id = s.unit_type_id
     join module_type m on m.id = (select module_type_id from slot where string_id = s.id order by position limit 1)
     left join string_judgement j on j.string_id = s.id
     left join lateral (
       select ws.irradiance, ws.temperature_module from sensor se join weather_state ws on ws.sensor_id = se.id
       where se.plane_id = s.plane_id and se.kind = 'poa_global' and ws.at > now() - interval '15 minutes'
       order by ws.at desc limit 1) w on true
     where s.ref = :ref and ${SITE_VISIBLE}`,
    { ref },
  );
  return rows[0];
}

/** All strings of a site by name, for going to the next one. */
export async function stringNames(tx: Tx, siteId: number): Promise<{ id: string; name: string }[]> {
  const { rows } = await tx.raw<{ rows: { id: string; name: string }[] }>(
    `select ref as id, name from string where site_id = :siteId`,
    { siteId },
  );
  const order = new Intl.Collator('en', { numeric: true });
  return rows.sort((a, b) => order.compare(a.name, b.name));
}

export interface Sibling {
  id: number;
  ref: string;
  name: string;
  units: number;
}

/** Strings to compare with: same plane, same module type, same way of working. At most a dozen: a median needs no more. */
export async function siblingsOf(tx: Tx, facts: StringFacts): Promise<Sibling[]> {
  const { rows } = await tx.raw<{ rows: Sibling[] }>(
    `select s.id, s.ref, s.name, s.slots::int as units
     from string s
     where s.plane_id = :planeId and s.id <> :id and s.kind <> 'shutdown_only'
       and (s.kind = 'optimizing') = (:kind = 'optimizing')
       and exists (select from slot sl where sl.string_id = s.id and sl.module_type_id = :moduleTypeId)
     order by abs(s.id - :id) limit 12`,
    { planeId: facts.planeId, id: facts.id, kind: facts.kind, moduleTypeId: facts.moduleTypeId },
  );
  return rows;
}

/** The strings of an input, in the order in which they were entered. */
export async function stringsOnInput(tx: Tx, inputId: number): Promise<number[]> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    'select id from string where input_id = ? order by id',
    [inputId],
  );
  return rows.map((r) => r.id);
}

/** The open case that names a string, the newest. */
export async function openCaseOf(
  tx: Tx,
  string: { id: number; siteId: number },
): Promise<{ id: string; number: number; title: string } | null> {
  const { rows } = await tx.raw<{ rows: { id: string; number: number; title: string }[] }>(
    `select ref as id, number, title from case_file
     where site_id = :siteId and closed_at is null and string_ids @> array[:id::int4]
     order by opened_at desc limit 1`,
    string,
  );
  return rows[0] ?? null;
}
