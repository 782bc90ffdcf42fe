import { solarPositionQuick } from '../../domain/photovoltaics/sun/position-quick';
import type { CommandNow, Counts, SiteNow } from '../../schemas/api/now';
import type { InForce } from '../../domain/verdicts/codes';
import type { Tx } from '../db/transaction';
import { isFresh, isLight, isSilent } from './now';
import { SITE_VISIBLE } from './visible-site';

interface Row extends Counts {
  id: number;
  ref: string;
  name: string;
  place: string;
  timeZone: string;
  stage: SiteNow['stage'];
  latitude: number;
  longitude: number;
  altitude: number;
  reportIntervalS: number;
  strings: number;
  zones: number;
  acPower: number | null;
  acPowerAt: Date | null;
  acPowerMax: number;
  reportedAt: Date | null;
  gatewaysHeard: (string | null)[];
  spokeAt: Date | null;
  said: { where: string; whereKind: CommandNow['whereKind']; inForce: InForce; since: string; by: string }[];
}

/**
 * What holds at `at` at the sites that the actor sees, or at those of the given numbers (then whoever calls has checked
 * them); by name. A fixed number of statements, however many sites.
 */
export async function sitesNow(tx: Tx, at: Date, siteIds?: readonly number[]): Promise<SiteNow[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    // of every site its own lines, by their index: a plan that joins whole lists guesses one site, and takes n² for n
    `select c.id, c.ref, c.name, c.place, c.time_zone as "timeZone", c.stage, c.latitude, c.longitude, c.altitude,
            c.report_interval_s as "reportIntervalS", p.units, w.strings, j.*, m.*, r.*, z.*, g.*, l.*, d.*
     from (select * from site where ${siteIds ? 'site.id = any (:siteIds)' : SITE_VISIBLE}) c
     cross join lateral (
       select coalesce(sum(passing), 0)::int as passing, coalesce(sum(shutdown), 0)::int as shutdown,
              coalesce(sum(unheard), 0)::int as unheard, coalesce(sum(silent), 0)::int as silent,
              coalesce(sum(dark), 0)::int as dark, coalesce(sum(stuck), 0)::int as stuck,
              coalesce(sum(not_shutting_down), 0)::int as "notShuttingDown",
              coalesce(sum(unconfirmed), 0)::int as unconfirmed
       from string_judgement where site_id = c.id) j
     cross join lateral (
       select count(*)::int as units from placement where placed_to is null and site_id = c.id) p
     cross join lateral (select count(*)::int as strings from string where site_id = c.id) w
     cross join lateral (
       select coalesce(sum(inv.ac_power_max), 0) as "acPowerMax", sum(st.ac_power)::float8 as "acPower",
              max(st.at) as "acPowerAt"
       from inverter inv left join inverter_state st on st.inverter_id = inv.id where inv.site_id = c.id) m
     cross join lateral (select max(at) as "reportedAt" from string_state where site_id = c.id) r
     cross join lateral (select count(*)::int as zones from zone where site_id = c.id) z
     cross join lateral (
       select coalesce(json_agg(last_heard_at), '[]') as "gatewaysHeard" from gateway where site_id = c.id) g
     cross join lateral (
       select max(last_spoke_at) as "spokeAt" from logger where site_id = c.id and connected_at is not null) l
     cross join lateral (
       select coalesce(json_agg(json_build_object('where', s.name, 'whereKind', s.kind, 'inForce', s.in_force,
                       'since', s.since, 'by', s.said_by) order by s.since), '[]') as said
       from (select distinct on (o.zone_id, o.transmitter_id) o.in_force, o.since, o.said_by,
                    coalesce(z.name, t.name) as name, case when o.zone_id is null then 'transmitter' else 'zone' end as kind
             from command o
             left join zone z on z.id = o.zone_id
             left join transmitter t on t.id = o.transmitter_id
             where o.site_id = c.id
             order by o.zone_id, o.transmitter_id, o.since desc) s
       where s.in_force <> 'released') d
     order by c.name`,
    siteIds ? { siteIds: [...siteIds] } : {},
  );
  const ratios = await performanceRatios(
    tx,
    rows.map((r) => r.id),
    at,
  );
  return rows.map((row) => siteOf(row, at, ratios.get(row.id) ?? null));
}

/**
 * Numbers of the visible sites that shutdown is about: those with these public identifiers, and those where something
 * other than a release is in force.
 */
export async function sitesForShutdown(tx: Tx, refs: readonly string[]): Promise<number[]> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `select site.id from site
     where ${SITE_VISIBLE} and (site.ref = any (:refs::uuid[]) or exists (
       select from (
         select distinct on (c.zone_id, c.transmitter_id) c.in_force from command c
         where c.site_id = site.id order by c.zone_id, c.transmitter_id, c.since desc) newest
       where newest.in_force <> 'released'))`,
    { refs: [...refs] },
  );
  return rows.map((r) => r.id);
}

function siteOf(row: Row, at: Date, performanceRatio: number | null): SiteNow {
  const commands = row.said.map((s) => ({ ...s, since: new Date(s.since).toISOString() }));
  const zonesDown = commands.filter((c) => c.whereKind === 'zone');
  const power =
    row.acPower !== null && row.acPowerAt && isFresh(row.acPowerAt, at, row.reportIntervalS)
      ? row.acPower
      : null;
  const light = isLight(row, at);
  return {
    id: row.ref,
    name: row.name,
    place: row.place,
    timeZone: row.timeZone,
    stage: row.stage,
    counts: {
      units: row.units,
      passing: row.passing,
      shutdown: row.shutdown,
      unheard: row.unheard,
      silent: row.silent,
      dark: row.dark,
      stuck: row.stuck,
      notShuttingDown: row.notShuttingDown,
      unconfirmed: row.unconfirmed,
    },
    strings: row.strings,
    power,
    acPowerMax: row.acPowerMax,
    reportedAt: row.reportedAt?.toISOString() ?? null,
    daylight: solarPositionQuick(at.getTime(), row).apparentElevation > 0,
    // every zone is in shutdown since the last of them went
    inShutdownSince:
      row.zones > 0 && zonesDown.length === row.zones
        ? (zonesDown
            .map((c) => c.since)
            .sort()
            .at(-1) ?? null)
        : null,
    commands,
    silentGateways: light
      ? row.gatewaysHeard.filter((heard) => isSilent(heard ? new Date(heard) : null, at, row.reportIntervalS))
          .length
      : 0,
    loggerConnected: row.spokeAt !== null && !isSilent(row.spokeAt, at, Math.max(60, row.reportIntervalS)),
    performanceRatio30d: performanceRatio,
  };
}

// thirty days change little in a quarter of an hour, and /live asks often
const RATIO_KEPT_MS = 15 * 60_000;
const ratiosKept = new Map<number, { untilMs: number; ratio: number | null }>();

/**
 * Performance ratio (IEC 61724-1: final yield over reference yield) of the last 30 days as they are rolled up, over the
 * quarters whose plane irradiance was measured; null without a sensor or with less than 5 kWh/m².
 */
async function performanceRatios(
  tx: Tx,
  siteIds: readonly number[],
  at: Date,
): Promise<Map<number, number | null>> {
  const asked = siteIds.filter((id) => (ratiosKept.get(id)?.untilMs ?? 0) <= at.getTime());
  if (asked.length > 0) {
    const { rows } = await tx.raw<{ rows: { siteId: number; ratio: number | null }[] }>(
      `select d.site_id as "siteId",
              case when sum(d.insolation) >= 5000
                   then sum(d.energy_ac_lit)::float8 / nullif(sum(d.nameplate::float8 * d.insolation) / 1000, 0) end as ratio
       from site_day d join site on site.id = d.site_id
       where d.site_id = any (:asked) and d.insolation is not null
         and d.day between (:from::timestamptz at time zone site.time_zone)::date
                       and (:at::timestamptz at time zone site.time_zone)::date
       group by d.site_id`,
      { asked: [...asked], at, from: new Date(at.getTime() - 30 * 86_400_000) },
    );
    const untilMs = at.getTime() + RATIO_KEPT_MS;
    for (const id of asked)
      ratiosKept.set(id, { untilMs, ratio: rows.find((r) => r.siteId === id)?.ratio ?? null });
  }
  return new Map(siteIds.map((id) => [id, ratiosKept.get(id)?.ratio ?? null]));
}
