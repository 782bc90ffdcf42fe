import type { Structure } from '../../domain/photovoltaics/limits/design';
import type { RuleSet } from '../../domain/verdicts/context';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

export interface DesignSiteRow {
  ref: string;
  name: string;
  timeZone: string;
  stage: 'commissioning' | 'operating';
  ruleSet: RuleSet;
  structure: Structure;
  latitude: number;
  altitude: number;
  temperatureMin: number | null;
  temperatureMax: number | null;
}

/** What design checks need to know of a site; undefined for one that the actor may not see. */
export async function designSite(tx: Tx, siteId: number): Promise<DesignSiteRow | undefined> {
  const { rows } = await tx.raw<{ rows: DesignSiteRow[] }>(
    `select site.ref, site.name, site.time_zone as "timeZone", site.stage, site.rule_set as "ruleSet", site.structure,
            site.latitude, site.altitude, site.temperature_min as "temperatureMin",
            site.temperature_max as "temperatureMax"
     from site where site.id = :siteId and ${SITE_VISIBLE}`,
    { siteId },
  );
  return rows[0];
}

export interface DesignStringRow {
  id: string;
  name: string;
  unitType: string;
  inverterType: string | null;
  inputId: string;
  inputName: string;
  planeName: string;
  surfaceTilt: number;
  surfaceAzimuth: number;
  homeRunLeavesArray: boolean;
  /** In order of position: module type's public identifier, name of the sitting unit's type. */
  slots: { position: number; module: string; unitTypeName: string | null }[];
}

/** The strings of a site with the types that stand on them, at an instant. */
export async function designStrings(tx: Tx, siteId: number, at: Date): Promise<DesignStringRow[]> {
  const { rows } = await tx.raw<{ rows: DesignStringRow[] }>(
    `with slots as materialized (
       select sl.string_id,
              json_agg(json_build_object('position', sl.position, 'module', m.ref, 'unitTypeName', ut.name)
                       order by sl.position) as slots
       from slot sl join module_type m on m.id = sl.module_type_id
       left join placement p on p.slot_id = sl.id and p.placed_from <= :at and (p.placed_to is null or p.placed_to > :at)
       left join unit u on u.id = p.unit_id left join unit_type ut on ut.id = u.unit_type_id
       where sl.site_id = :siteId group by sl.string_id)
     select s.ref as id, s.name, t.ref as "unitType", it.ref as "inverterType", i.ref as "inputId",
            v.name || ', input ' || i.number as "inputName", p.name as "planeName",
            p.surface_tilt as "surfaceTilt", p.surface_azimuth as "surfaceAzimuth",
            s.home_run_leaves_array as "homeRunLeavesArray", coalesce(slots.slots, '[]') as slots
     from string s
     join unit_type t on t.id = s.unit_type_id
     join input i on i.id = s.input_id join inverter v on v.id = i.inverter_id
     left join inverter_type it on it.id = v.inverter_type_id
     join plane p on p.id = s.plane_id
     left join slots on slots.string_id = s.id
     where s.site_id = :siteId`,
    { siteId, at },
  );
  return rows;
}
