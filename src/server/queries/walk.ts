import type { ModuleType } from '../../domain/equipment/module-type';
import type { UnitType } from '../../domain/equipment/unit-type';
import type { Tx } from '../db/transaction';

/** What a walk over the roof needs beside what holds now. Whoever calls has checked that the actor may see the site. */

export interface WalkSiteFacts {
  contactName: string;
  contactPhone: string;
  shutdownSwitchPlace: string;
  outline: [number, number][];
  rollCalled: boolean;
  latitude: number;
  longitude: number;
  altitude: number;
}

export async function walkSite(tx: Tx, siteId: number): Promise<WalkSiteFacts> {
  const { rows } = await tx.raw<{ rows: (Omit<WalkSiteFacts, 'outline'> & { outline: unknown })[] }>(
    `select contact_name as "contactName", contact_phone as "contactPhone",
            shutdown_switch_place as "shutdownSwitchPlace", outline, latitude, longitude, altitude,
            stage = 'operating' or exists (select from roll_call r where r.site_id = site.id)
              or exists (select from heard h where h.site_id = site.id) as "rollCalled"
     from site where id = :siteId`,
    { siteId },
  );
  const row = rows[0];
  if (!row) throw new Error(`site ${siteId} is gone`);
  return { ...row, outline: outlineOf(row.outline) };
}

const outlineOf = (value: unknown): [number, number][] =>
  Array.isArray(value)
    ? value.flatMap((p: unknown): [number, number][] =>
        Array.isArray(p) && typeof p[0] === 'number' && typeof p[1] === 'number' ? [[p[0], p[1]]] : [],
      )
    : [];

export interface WalkStringRow {
  ref: string;
  planeId: number;
  plane: string;
  x: (number | null)[];
  y: (number | null)[];
  unitTypeName: string;
  unitType: Pick<UnitType, 'kind' | 'outOfBox' | 'shutdownVoltage'>;
  module: ModuleType;
  moduleConnector: string | null;
  unitIn: string | null;
  unitOut: string | null;
  /** Units placed, and of them those that have answered a roll call here. */
  units: number;
  heard: number;
  /** W/m² and °C of the plane's sensor, where one spoke within a quarter of an hour; else null. */
  poaGlobal: number | null;
  temperatureModule: number | null;
}

/** Strings with the places of their slots, their types' connectors and the newest light on their plane. */
export async function walkStrings(tx: Tx, siteId: number, at: Date): Promise<WalkStringRow[]> {
  const { rows } = await tx.raw<{ rows: WalkStringRow[] }>(
    `with placed as materialized (
       select sl.string_id, array_agg(sl.roof_x order by sl.position) as x, array_agg(sl.roof_y order by sl.position) as y,
              mode() within group (order by sl.module_type_id) as module_type_id,
              count(u.id)::int as units, count(h.serial)::int as heard
       from slot sl
       left join placement p on p.slot_id = sl.id and p.placed_to is null
       left join unit u on u.id = p.unit_id
       left join heard h on h.site_id = sl.site_id and h.serial = u.serial
       where sl.site_id = :siteId group by sl.string_id)
     select s.ref, s.plane_id as "planeId", pl.name as plane, placed.x, placed.y, ut.name as "unitTypeName",
            json_build_object('kind', ut.kind, 'outOfBox', ut.out_of_box, 'shutdownVoltage', json_build_object(
              'nominal', ut.shutdown_voltage_nominal, 'min', ut.shutdown_voltage_min,
              'max', ut.shutdown_voltage_max)) as "unitType",
            json_build_object('name', m.name, 'vocRef', m.voc_ref, 'iscRef', m.isc_ref, 'vmpRef', m.vmp_ref,
              'impRef', m.imp_ref, 'betaVoc', m.beta_voc, 'alphaIsc', m.alpha_isc, 'gammaPmp', m.gamma_pmp,
              'cellsInSeries', m.cells_in_series, 'bypassGroups', m.bypass_groups, 'noct', m.noct) as module,
            mc.name as "moduleConnector", ci.name as "unitIn", co.name as "unitOut", placed.units,
            case when site.stage = 'operating' and placed.heard = 0 then placed.units else placed.heard end as heard,
            w.irradiance as "poaGlobal", w.temperature_module / 10.0::float8 as "temperatureModule"
     from string s
     join site on site.id = s.site_id
     join plane pl on pl.id = s.plane_id
     join unit_type ut on ut.id = s.unit_type_id
     join placed on placed.string_id = s.id
     join module_type m on m.id = placed.module_type_id
     left join connector_type mc on mc.id = m.connector_type_id
     left join connector_type ci on ci.id = ut.connector_in_id
     left join connector_type co on co.id = ut.connector_out_id
     left join lateral (
       select ws.irradiance, ws.temperature_module from sensor se join weather_state ws on ws.sensor_id = se.id
       where se.plane_id = s.plane_id and se.kind = 'poa_global' and ws.at > :at::timestamptz - interval '15 minutes'
       order by ws.at desc limit 1) w on true
     where s.site_id = :siteId
     order by s.id`,
    { siteId, at },
  );
  return rows;
}

/** Serials that have answered a roll call at the site. */
export async function answeredSerials(tx: Tx, siteId: number): Promise<string[]> {
  const { rows } = await tx.raw<{ rows: { serial: string }[] }>(
    'select serial from heard where site_id = ? order by serial',
    [siteId],
  );
  return rows.map((r) => r.serial);
}
