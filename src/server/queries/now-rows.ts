import type { FindingEvidence } from '../../domain/verdicts/memory';
import type { InForce, StringFinding } from '../../domain/verdicts/codes';
import type { UnitKind, UnitType } from '../../domain/equipment/unit-type';
import type { Tx } from '../db/transaction';

/** A string with its newest frame, its judgement and what it is compared with, as the database has it. */
export interface StringRow {
  id: number;
  ref: string;
  siteId: number;
  name: string;
  kind: UnitKind;
  loggerId: number | null;
  planeId: number;
  inputId: number;
  zoneId: number;
  positions: number[];
  serials: (string | null)[];
  roofPlaces: string[];
  /** Since when each slot's unit sits there, epoch s; 0: no unit there. */
  placedAt: number[];
  moduleTypeId: number;
  measures: UnitType['measures'];
  shutdownVoltage: number;
  bypassVoltage: number;
  inverter: string;
  inputNumber: number;
  inputStrings: number;
  inputVoltage: number | null; // dV
  inputCurrent: number | null; // cA
  inputAt: Date | null;
  at: Date | null;
  powerSum: number | null; // dW
  voltage: (number | null)[] | null; // cV
  voltageIn: (number | null)[] | null; // cV
  current: (number | null)[] | null; // mA
  power: (number | null)[] | null; // dW
  temperature: (number | null)[] | null; // 0.1 °C
  signal: (number | null)[] | null;
  via: (number | null)[] | null;
  seen: number[] | null; // epoch s
  state: (number | null)[] | null;
  verdict: (number | null)[] | null;
  since: (number | null)[] | null; // epoch s
  finding: StringFinding | null;
  findingSince: Date | null;
  evidence: { finding: FindingEvidence | null } | null;
}

export interface SaidRow {
  /** Zone, or null where a transmitter was told. */
  zoneId: number | null;
  transmitterId: number | null;
  name: string;
  inForce: InForce;
  since: string;
  by: string;
  /** Strings that hear this transmitter; null for a zone. */
  stringIds: number[] | null;
}

export interface SiteRow {
  id: number;
  latitude: number;
  longitude: number;
  altitude: number;
  reportIntervalS: number;
  planes: { id: number; name: string; surfaceTilt: number; surfaceAzimuth: number; albedo: number }[];
  modules: ({ id: number } & Record<string, number | string>)[];
  gateways: { loggerId: number; number: number; name: string }[];
  weather: {
    planeId: number | null;
    kind: string;
    at: string;
    irradiance: number | null; // W/m²
    temperatureAir: number | null; // 0.1 °C
    temperatureModule: number | null; // 0.1 °C
  }[];
  said: SaidRow[];
}

/**
 * Strings of one site in one round trip, with the site's context beside them. The strings that are not asked for but
 * share a plane come too: expectations rest on them.
 */
export async function nowRows(
  tx: Tx,
  siteId: number,
): Promise<{ site: SiteRow | null; strings: StringRow[] }> {
  const { rows } = await tx.raw<{ rows: (StringRow & { site: SiteRow | null })[] }>(
    `with said as (
       select distinct on (c.zone_id, c.transmitter_id)
              c.zone_id as "zoneId", c.transmitter_id as "transmitterId", coalesce(z.name, t.name) as name,
              c.in_force as "inForce", c.since, c.said_by as by,
              case when t.id is not null then
                (select array_agg(ts.string_id) from transmitter_string ts where ts.transmitter_id = t.id) end
                as "stringIds"
       from command c
       left join zone z on z.id = c.zone_id
       left join transmitter t on t.id = c.transmitter_id
       where c.site_id = :siteId
       order by c.zone_id, c.transmitter_id, c.since desc),
     types as (select distinct module_type_id from slot where site_id = :siteId),
     around as (
       select json_build_object(
         'id', site.id, 'latitude', site.latitude, 'longitude', site.longitude, 'altitude', site.altitude,
         'reportIntervalS', site.report_interval_s,
         'planes', (select json_agg(json_build_object('id', id, 'name', name, 'surfaceTilt', surface_tilt,
                      'surfaceAzimuth', surface_azimuth, 'albedo', albedo)) from plane where site_id = site.id),
         'modules', (select json_agg(json_build_object('id', m.id, 'name', m.name, 'vocRef', m.voc_ref,
                      'iscRef', m.isc_ref, 'vmpRef', m.vmp_ref, 'impRef', m.imp_ref, 'betaVoc', m.beta_voc,
                      'alphaIsc', m.alpha_isc, 'gammaPmp', m.gamma_pmp, 'cellsInSeries', m.cells_in_series,
                      'bypassGroups', m.bypass_groups, 'noct', m.noct))
                     from module_type m where m.id in (select module_type_id from types)),
         'gateways', coalesce((select json_agg(json_build_object('loggerId', logger_id, 'number', number,
                      'name', name)) from gateway where site_id = site.id), '[]'),
         'weather', coalesce((select json_agg(json_build_object('planeId', s.plane_id, 'kind', s.kind, 'at', w.at,
                      'irradiance', w.irradiance, 'temperatureAir', w.temperature_air,
                      'temperatureModule', w.temperature_module))
                     from weather_state w join sensor s on s.id = w.sensor_id where w.site_id = site.id), '[]'),
         'said', coalesce((select json_agg(said) from said), '[]')) as site
       from site where site.id = :siteId),
     -- once, also where the planner has no statistics yet and would repeat it for every string
     placed as materialized (
       select sl.string_id, array_agg(sl.position order by sl.position) as positions,
              array_agg(u.serial order by sl.position) as serials,
              array_agg(sl.roof_place order by sl.position) as roof_places,
              array_agg(coalesce(ceil(extract(epoch from p.placed_from))::int4, 0) order by sl.position) as placed_at,
              min(sl.module_type_id) as module_type_id
       from slot sl
       left join placement p on p.slot_id = sl.id and p.placed_to is null
       left join unit u on u.id = p.unit_id
       where sl.site_id = :siteId
       group by sl.string_id),
     shared as (select input_id, count(*)::int as strings from string where site_id = :siteId group by input_id)
     select s.id, s.ref, s.site_id as "siteId", s.name, s.kind, s.logger_id as "loggerId", s.plane_id as "planeId",
            s.input_id as "inputId", s.zone_id as "zoneId",
            coalesce(placed.positions, '{}') as positions, coalesce(placed.serials, '{}') as serials,
            coalesce(placed.roof_places, '{}') as "roofPlaces",
            coalesce(placed.placed_at, '{}') as "placedAt", placed.module_type_id as "moduleTypeId",
            ut.measures, ut.shutdown_voltage_nominal as "shutdownVoltage", ut.bypass_voltage as "bypassVoltage",
            inv.name as inverter, i.number as "inputNumber", shared.strings as "inputStrings",
            ist.voltage as "inputVoltage", ist.current as "inputCurrent", ist.at as "inputAt",
            st.at, st.power_sum as "powerSum", st.voltage, st.voltage_in as "voltageIn", st.current, st.power,
            st.temperature, st.signal, st.via, st.seen,
            j.state, j.verdict, j.since, j.finding, j.finding_since as "findingSince", j.evidence,
            case when row_number() over (order by s.id) = 1 then (select site from around) end as site
     from string s
     join unit_type ut on ut.id = s.unit_type_id
     join input i on i.id = s.input_id
     join inverter inv on inv.id = i.inverter_id
     join shared on shared.input_id = s.input_id
     left join placed on placed.string_id = s.id
     left join input_state ist on ist.input_id = s.input_id
     left join string_state st on st.string_id = s.id
     left join string_judgement j on j.string_id = s.id
     where s.site_id = :siteId
     order by s.id`,
    { siteId },
  );
  return { site: rows[0]?.site ?? null, strings: rows };
}

/** Sites of the strings, by the strings' numbers. */
export async function sitesOfStrings(tx: Tx, stringIds: readonly number[]): Promise<number[]> {
  const { rows } = await tx.raw<{ rows: { siteId: number }[] }>(
    `select distinct site_id as "siteId" from string where id = any (:stringIds)`,
    { stringIds: [...stringIds] },
  );
  return rows.map((r) => r.siteId);
}
