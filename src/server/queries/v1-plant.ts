import type { UnitKind } from '../../domain/equipment/unit-type';
import type { SiteNow } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/**
 * The plant as lists for other programs: in an order that holds, from a key on, one row further than asked for.
 * Sites are ordered by name, strings by their site's and their own, units by position within those.
 */
export interface Named {
  id: string;
  name: string;
}

export interface SiteRow {
  number: number;
  id: string;
  name: string;
  place: string;
  latitude: number;
  longitude: number;
  timeZone: string;
  stage: SiteNow['stage'];
  ruleSet: string;
  switchedOnOn: string | null;
}
export async function sitesFrom(
  tx: Tx,
  filter: { site?: string | undefined; stage?: string | undefined; search?: string | undefined },
  after: string | null,
  rows: number,
): Promise<SiteRow[]> {
  const found = await tx.raw<{ rows: SiteRow[] }>(
    `select id as number, ref as id, name, place, latitude::numeric::float8 as latitude, longitude::numeric::float8 as longitude,
            time_zone as "timeZone", stage, rule_set as "ruleSet", to_char(switched_on_on, 'YYYY-MM-DD') as "switchedOnOn"
     from site
     where ${SITE_VISIBLE} and (:site::uuid is null or ref = :site) and (:stage::text is null or stage = :stage)
       and (:search::text is null or position(lower(:search) in lower(name || ' ' || place)) > 0)
       and (:after::text is null or name > :after)
     order by name limit :rows`,
    { site: filter.site ?? null, stage: filter.stage ?? null, search: filter.search ?? null, after, rows },
  );
  return found.rows;
}

export interface StringRow {
  number: number;
  siteNumber: number;
  id: string;
  name: string;
  siteId: string;
  siteName: string;
  kind: UnitKind;
  slots: number;
  unitType: string;
  plane: string;
  surfaceTilt: number;
  surfaceAzimuth: number;
  inverter: string;
  input: number;
  zone: string;
  logger: string | null;
  reportedAt: Date | null;
  voltage: number | null;
  power: number | null;
}
export interface StringFilter {
  site?: string | undefined;
  string?: string | undefined;
  /** Has a unit of this serial in it now. */
  serial?: string | undefined;
  /** Only those with something to say: a verdict that is not ok, or a finding. */
  abnormal?: boolean | undefined;
  kind?: string | undefined;
}
/** @param from strings after this one, or from this one on where `inclusive` */
export async function stringsFrom(
  tx: Tx,
  filter: StringFilter,
  from: { site: string; name: string; inclusive: boolean } | null,
  rows: number,
): Promise<StringRow[]> {
  const found = await tx.raw<{ rows: StringRow[] }>(
    `select s.id as number, site.id as "siteNumber", s.ref as id, s.name, site.ref as "siteId", site.name as "siteName",
            s.kind, s.slots, ut.name as "unitType", p.name as plane, p.surface_tilt::numeric::float8 as "surfaceTilt",
            p.surface_azimuth::numeric::float8 as "surfaceAzimuth", inv.name as inverter, i.number as input, z.name as zone,
            l.serial as logger, st.at as "reportedAt", st.voltage_sum / 100.0::float8 as voltage,
            st.power_sum / 10.0::float8 as power
     from string s
     join site on site.id = s.site_id
     join unit_type ut on ut.id = s.unit_type_id
     join plane p on p.id = s.plane_id
     join input i on i.id = s.input_id
     join inverter inv on inv.id = i.inverter_id
     join zone z on z.id = s.zone_id
     left join logger l on l.id = s.logger_id
     left join string_state st on st.string_id = s.id
     where ${SITE_VISIBLE} and (:site::uuid is null or site.ref = :site) and (:string::uuid is null or s.ref = :string)
       and (:kind::text is null or s.kind = :kind)
       and (:serial::text is null or exists (
         select from slot sl join placement pl on pl.slot_id = sl.id and pl.placed_to is null join unit u on u.id = pl.unit_id
         where sl.string_id = s.id and u.serial = upper(:serial)))
       and (not :abnormal::boolean or exists (
         select from string_judgement j where j.string_id = s.id and (j.finding is not null or 0 <> any (j.verdict))))
       and (:fromName::text is null or (site.name, s.name) > (:fromSite, :fromName)
            or (:inclusive::boolean and site.name = :fromSite and s.name = :fromName))
     order by site.name, s.name limit :rows`,
    {
      site: filter.site ?? null,
      string: filter.string ?? null,
      kind: filter.kind ?? null,
      serial: filter.serial ?? null,
      abnormal: filter.abnormal ?? false,
      fromSite: from?.site ?? null,
      fromName: from?.name ?? null,
      inclusive: from?.inclusive ?? false,
      rows,
    },
  );
  return found.rows;
}

/** Since when each slot of these strings has the unit that it has, by string's public identifier and position. */
export async function placedSince(tx: Tx, stringIds: readonly number[]): Promise<Map<string, Date>> {
  const { rows } = await tx.raw<{ rows: { string: string; position: number; since: Date }[] }>(
    `select s.ref as string, sl.position, pl.placed_from as since
     from placement pl join slot sl on sl.id = pl.slot_id join string s on s.id = sl.string_id
     where pl.placed_to is null and s.id = any (:ids)`,
    { ids: [...stringIds] },
  );
  return new Map(rows.map((r) => [`${r.string} ${r.position}`, r.since]));
}

export interface PlacementRow {
  serial: string;
  unitType: string;
  siteId: string;
  siteName: string;
  stringId: string;
  stringName: string;
  position: number;
  placedFrom: Date;
  placedTo: Date | null;
  /** The instant to the microsecond, as the next page begins there. */
  key: string;
}
/** Stays of units in slots, the newest first. A unit has one place at a time: instant and serial name a stay. */
export async function placementsFrom(
  tx: Tx,
  filter: {
    site?: string | undefined;
    string?: string | undefined;
    serial?: string | undefined;
    now?: boolean | undefined;
  },
  after: readonly [at: string, serial: string] | null,
  rows: number,
): Promise<PlacementRow[]> {
  const found = await tx.raw<{ rows: PlacementRow[] }>(
    `select u.serial, ut.name as "unitType", site.ref as "siteId", site.name as "siteName", s.ref as "stringId",
            s.name as "stringName", sl.position, pl.placed_from as "placedFrom", pl.placed_to as "placedTo",
            (pl.placed_from at time zone 'UTC')::text as key
     from placement pl
     join unit u on u.id = pl.unit_id
     join unit_type ut on ut.id = u.unit_type_id
     join slot sl on sl.id = pl.slot_id
     join string s on s.id = sl.string_id
     join site on site.id = pl.site_id
     where ${SITE_VISIBLE} and (:site::uuid is null or site.ref = :site) and (:string::uuid is null or s.ref = :string)
       and (:serial::text is null or u.serial = upper(:serial)) and (not :now::boolean or pl.placed_to is null)
       and (:at::text is null or (pl.placed_from, u.serial) < (:at::timestamp at time zone 'UTC', :afterSerial))
     order by pl.placed_from desc, u.serial desc limit :rows`,
    {
      site: filter.site ?? null,
      string: filter.string ?? null,
      serial: filter.serial ?? null,
      now: filter.now ?? false,
      at: after?.[0] ?? null,
      afterSerial: after?.[1] ?? null,
      rows,
    },
  );
  return found.rows;
}

export interface LoggerRow {
  id: string;
  siteId: string;
  siteName: string;
  serial: string;
  firmware: string | null;
  connected: boolean;
  lastSpokeAt: Date | null;
  refused: number;
}
export async function loggersFrom(
  tx: Tx,
  site: string | undefined,
  after: string | null,
  rows: number,
): Promise<LoggerRow[]> {
  const found = await tx.raw<{ rows: LoggerRow[] }>(
    `select l.ref as id, site.ref as "siteId", site.name as "siteName", l.serial, l.firmware,
            coalesce(l.leased_until > now(), false) as connected, l.last_spoke_at as "lastSpokeAt",
            l.refused_count as refused
     from logger l join site on site.id = l.site_id
     where ${SITE_VISIBLE} and (:site::uuid is null or site.ref = :site) and (:after::text is null or l.serial > :after)
     order by l.serial limit :rows`,
    { site: site ?? null, after, rows },
  );
  return found.rows;
}

/** A site that the actor sees and one of its strings, for examples. */
export async function exampleOfPlant(tx: Tx): Promise<{ site: string; string: string } | undefined> {
  const { rows } = await tx.raw<{ rows: { site: string; string: string }[] }>(
    `select site.ref as site, s.ref as string from string s join site on site.id = s.site_id
     where ${SITE_VISIBLE} and s.kind <> 'shutdown_only' order by site.name, s.name limit 1`,
  );
  return rows[0];
}
