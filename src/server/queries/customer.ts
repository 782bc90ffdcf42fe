import type { CustomerSite } from '../../schemas/api/customer';
import type { Tx } from '../db/transaction';
import { gravestTestOf } from './shutdown-tests';
import { SITE_VISIBLE } from './visible-site';

/** What the owner's page needs beside the state of the moment. The site's number was found as the actor. */

export interface RoofRow {
  siteId: number;
  ref: string;
  name: string;
  place: string;
  timeZone: string;
  latitude: number;
  longitude: number;
  altitude: number;
  switchedOnOn: string | null;
  shutdownSwitchPlace: string;
  ruleSet: CustomerSite['site']['ruleSet'];
  organisation: string;
  organisationPhone: string | null;
  currency: string | null;
  logo: string | null;
  strings: number;
  modules: number;
  reporting: number;
  stringsNotShuttingDown: number;
  zones: number;
  loggers: number;
  quietLoggers: number;
  lastSpokeAt: Date | null;
  inverters: number;
  gridLost: number;
  inverterFaults: number;
  limited: number;
  acPowerMax: number;
  planes: { surfaceTilt: number; surfaceAzimuth: number; albedo: number; pmpRef: number }[];
}

/** A logger is quiet when it has not spoken for five report intervals, and for five minutes at least. */
const QUIET = `(l.last_spoke_at is null
  or l.last_spoke_at < cast(:at as timestamptz) - make_interval(secs => greatest(300, 5 * site.report_interval_s)))`;

/** Every visible site, or the one of the public identifier, by name. */
export async function roofRows(tx: Tx, at: Date, ref?: string): Promise<RoofRow[]> {
  const { rows } = await tx.raw<{ rows: RoofRow[] }>(
    `select site.id as "siteId", site.ref, site.name, site.place, site.time_zone as "timeZone",
            site.latitude, site.longitude, site.altitude, site.switched_on_on::text as "switchedOnOn",
            site.shutdown_switch_place as "shutdownSwitchPlace", site.rule_set as "ruleSet",
            o.name as organisation, o.phone as "organisationPhone", o.currency,
            (select a.ref::text from attachment a where a.id = o.logo_id) as logo,
            (select count(*)::int from string s where s.site_id = site.id) as strings,
            built.modules, built.reporting,
            (select count(*)::int from string_judgement j
              where j.site_id = site.id and j.finding = 'not_shutting_down') as "stringsNotShuttingDown",
            (select count(*)::int from zone z where z.site_id = site.id) as zones,
            heard.loggers, heard.quiet as "quietLoggers", heard.last as "lastSpokeAt",
            inv.total as inverters, inv.grid_lost as "gridLost", inv.faults as "inverterFaults", inv.limited,
            inv.ac_power_max as "acPowerMax", built.planes
     from site
     join organisation o on o.id = site.organisation_id
     cross join lateral (
       select coalesce(sum(p.modules), 0)::int as modules, coalesce(sum(p.reporting), 0)::int as reporting,
              coalesce(json_agg(json_build_object('surfaceTilt', p.surface_tilt, 'surfaceAzimuth', p.surface_azimuth,
                'albedo', p.albedo, 'pmpRef', p.pmp_ref)), '[]') as planes
       from (
         select plane.id, plane.surface_tilt, plane.surface_azimuth, plane.albedo, count(*) as modules,
                count(pl.id) filter (where s.kind <> 'shutdown_only') as reporting,
                sum(m.vmp_ref * m.imp_ref) as pmp_ref
         from plane
         join string s on s.plane_id = plane.id
         join slot sl on sl.string_id = s.id
         join module_type m on m.id = sl.module_type_id
         left join placement pl on pl.slot_id = sl.id and pl.placed_to is null
         where plane.site_id = site.id
         group by plane.id) p
     ) built
     cross join lateral (
       select count(*)::int as loggers, count(*) filter (where ${QUIET})::int as quiet, max(l.last_spoke_at) as last
       from logger l where l.site_id = site.id
     ) heard
     cross join lateral (
       select count(*)::int as total, coalesce(sum(i.ac_power_max), 0)::real as ac_power_max,
              count(*) filter (where st.status = 'grid_lost')::int as grid_lost,
              count(*) filter (where st.status = 'fault')::int as faults,
              count(*) filter (where st.status in ('derated', 'curtailed'))::int as limited
       from inverter i left join inverter_state st on st.inverter_id = i.id where i.site_id = site.id
     ) inv
     where ${SITE_VISIBLE} and (cast(:ref as uuid) is null or site.ref = cast(:ref as uuid))
     order by site.name`,
    { at, ref: ref ?? null },
  );
  return rows;
}

export interface QuarterRow {
  at: Date;
  power: number; // W
}
export interface LocalDay {
  day: string;
  from: Date;
  to: Date;
}

/** The site's calendar day that holds the instant, as a day and as instants; 23 and 25 hours happen. */
export async function localDayOf(tx: Tx, timeZone: string, at: Date): Promise<LocalDay> {
  const { rows } = await tx.raw<{ rows: LocalDay[] }>(
    `select d::date::text as day, d at time zone :zone as from, (d + interval '1 day') at time zone :zone as to
     from (select date_trunc('day', cast(:at as timestamptz) at time zone :zone) as d) x`,
    { at, zone: timeZone },
  );
  const [day] = rows;
  if (!day) throw new Error('The database gave no day for an instant.');
  return day;
}

/** Quarters of an hour with their mean AC power, oldest first. */
export async function quartersOf(tx: Tx, siteId: number, from: Date, to: Date): Promise<QuarterRow[]> {
  const { rows } = await tx.raw<{ rows: QuarterRow[] }>(
    `select at, ac_power as power from site_quarter where site_id = :siteId and at >= :from and at < :to order by at`,
    { siteId, from, to },
  );
  return rows;
}

export interface DaysRow {
  days: number;
  energy: number; // Wh
  measured: number; // Wh on the days with an expectation
  expected: number | null; // Wh
  lostMinutes: number;
  lostMinutesGrid: number;
  completeness: number | null;
  first: string | null;
  last: string | null;
}

/** Whole days of the site from `from` up to and without `before`, summed. */
export async function daysOf(tx: Tx, siteId: number, from: string, before: string): Promise<DaysRow> {
  const { rows } = await tx.raw<{ rows: DaysRow[] }>(
    `select count(*)::int as days, coalesce(sum(energy_ac), 0)::float8 as energy,
            coalesce(sum(energy_ac) filter (where energy_expected is not null), 0)::float8 as measured,
            sum(energy_expected)::float8 as expected,
            coalesce(sum(lost_minutes), 0)::int as "lostMinutes",
            coalesce(sum(lost_minutes_grid), 0)::int as "lostMinutesGrid",
            avg(complete)::float8 as completeness, min(day)::text as first, max(day)::text as last
     from site_day where site_id = :siteId and day >= cast(:from as date) and day < cast(:before as date)`,
    { siteId, from, before },
  );
  const [row] = rows;
  if (!row) throw new Error('The database gave no sums for a span of days.');
  return row;
}

/** The shutdown test in force; where a site has several zones, the gravest of theirs. */
export async function lastTestOf(tx: Tx, siteId: number): Promise<CustomerSite['lastTest']> {
  const { rows } = await tx.raw<{
    rows: {
      at: Date;
      result: NonNullable<CustomerSite['lastTest']>['result'];
      strings: number;
      madeBy: string;
    }[];
  }>(`select at, result, strings, made_by as "madeBy" from ${gravestTestOf('?')} test`, [siteId]);
  const [test] = rows;
  return test ? { ...test, at: test.at.toISOString() } : null;
}
