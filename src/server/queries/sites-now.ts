import { solarPositionQuick } from '../../domain/photovoltaics/sun/position-quick';
import type { CommandNow, Counts, SiteNow } from '../../schemas/api/now';
import type { InForce } from '../../domain/verdicts/codes';
import type { Tx } from '../db/transaction';
import { isLightAt, isSilent, SILENT_AFTER } from './now';
import { SITE_VISIBLE } from './visible-site';

interface Place {
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
}

/** By the number of a site; one that has none of the kind is absent. Times as PostgreSQL writes them in JSON. */
type BySite<T> = Partial<Record<number, T>>;

interface Parts {
  judged: BySite<Omit<Counts, 'units'>>;
  units: BySite<number>;
  strings: BySite<number>;
  acPowerMax: BySite<number>;
  /** What the inverters gave that were heard with the newest of them. */
  output: BySite<{ acPower: number | null; at: string }>;
  reportedAt: BySite<string>;
  zones: BySite<number>;
  gatewaysHeard: BySite<(string | null)[]>;
  spokeAt: BySite<string | null>;
  said: BySite<
    { where: string; whereKind: CommandNow['whereKind']; inForce: InForce; since: string; by: string }[]
  >;
}

const NOTHING_JUDGED: Omit<Counts, 'units'> = {
  passing: 0,
  shutdown: 0,
  unheard: 0,
  silent: 0,
  dark: 0,
  stuck: 0,
  notShuttingDown: 0,
  unconfirmed: 0,
};

/** The newest command of a zone or transmitter `w`, by the index that keeps them in order, however many came before. */
const newestCommand = (of: 'zone_id' | 'transmitter_id'): string => `cross join lateral (
  select in_force, since, said_by from command
  where ${of} = w.id and ${of === 'zone_id' ? 'transmitter_id' : 'zone_id'} is null
  order by since desc limit 1) o`;

/**
 * What holds at `at` at the sites that the actor sees, or at those of the given numbers (then whoever calls has checked
 * them); by name. A fixed number of statements, however many sites.
 */
export async function sitesNow(tx: Tx, at: Date, siteIds?: readonly number[]): Promise<SiteNow[]> {
  const { rows: places } = await tx.raw<{ rows: Place[] }>(
    `select id, ref, name, place, time_zone as "timeZone", stage, latitude, longitude, altitude,
            report_interval_s as "reportIntervalS"
     from site where ${siteIds ? 'site.id = any (:siteIds)' : SITE_VISIBLE} order by name`,
    siteIds ? { siteIds: [...siteIds] } : {},
  );
  if (places.length === 0) return [];
  const ids = places.map((p) => p.id);
  const parts = await partsOf(tx, ids);
  const ratios = await performanceRatios(tx, ids, at);
  return places.map((place) => siteOf(place, parts, at, ratios.get(place.id) ?? null));
}

/**
 * What hangs on the sites of the given numbers. Each table is read once for all of them and summed by itself: joined, a
 * plan guesses few sites and goes through every other list for each.
 */
async function partsOf(tx: Tx, siteIds: readonly number[]): Promise<Parts> {
  const bySite = (value: string, from: string): string =>
    `(select coalesce(json_object_agg(site_id, ${value}), '{}') from (${from} group by site_id) x)`;
  const here = 'site_id = any (:siteIds::int4[])';
  const { rows } = await tx.raw<{ rows: Parts[] }>(
    `select
       ${bySite(
         `json_build_object('passing', passing, 'shutdown', shutdown, 'unheard', unheard, 'silent', silent, 'dark', dark,
            'stuck', stuck, 'notShuttingDown', not_shutting_down, 'unconfirmed', unconfirmed)`,
         `select site_id, sum(passing) as passing, sum(shutdown) as shutdown, sum(unheard) as unheard,
            sum(silent) as silent, sum(dark) as dark, sum(stuck) as stuck, sum(not_shutting_down) as not_shutting_down,
            sum(unconfirmed) as unconfirmed from string_judgement where ${here}`,
       )} as judged,
       ${bySite('n', `select site_id, count(*) as n from placement where placed_to is null and ${here}`)} as units,
       ${bySite('n', `select site_id, count(*) as n from string where ${here}`)} as strings,
       ${bySite('w', `select site_id, sum(ac_power_max) as w from inverter where ${here}`)} as "acPowerMax",
       ${bySite(
         `json_build_object('acPower', w, 'at', at)`,
         // one that fell silent long before the others gives nothing that is known
         `select site_id, sum(ac_power) filter (where newest - at <= silent_after) as w, max(at) as at
          from (select i.site_id, i.ac_power, i.at, max(i.at) over (partition by i.site_id) as newest,
                  ${SILENT_AFTER} as silent_after
                from inverter_state i join site on site.id = i.site_id where i.${here}) heard`,
       )} as output,
       ${bySite('at', `select site_id, max(at) as at from string_state where ${here}`)} as "reportedAt",
       ${bySite('n', `select site_id, count(*) as n from zone where ${here}`)} as zones,
       ${bySite('heard', `select site_id, array_agg(last_heard_at) as heard from gateway where ${here}`)} as "gatewaysHeard",
       ${bySite(
         'at',
         `select site_id, max(last_spoke_at) as at from logger where connected_at is not null and ${here}`,
       )} as "spokeAt",
       ${bySite(
         'said',
         `select site_id, json_agg(json_build_object('where', name, 'whereKind', kind, 'inForce', in_force, 'since', since,
            'by', said_by) order by since) as said
          from (select site_id, name, 'zone' as kind, o.* from zone w ${newestCommand('zone_id')} where ${here}
                union all
                select site_id, name, 'transmitter', o.* from transmitter w ${newestCommand('transmitter_id')}
                where ${here}) newest
          where in_force <> 'released'`,
       )} as said`,
    // as text: it stands there ten times, and the driver would quote each number
    { siteIds: `{${siteIds.join(',')}}` },
  );
  const [parts] = rows;
  if (!parts) throw new Error('A statement without a from has one row.');
  return parts;
}

function siteOf(place: Place, parts: Parts, at: Date, performanceRatio: number | null): SiteNow {
  const { id } = place;
  const commands = (parts.said[id] ?? []).map((s) => ({ ...s, since: new Date(s.since).toISOString() }));
  const zonesDown = commands.filter((c) => c.whereKind === 'zone');
  const zones = parts.zones[id] ?? 0;
  const output = parts.output[id];
  const isNow = output !== undefined && !isSilent(new Date(output.at), at, place.reportIntervalS);
  const reportedAt = parts.reportedAt[id];
  const spokeAt = parts.spokeAt[id];
  const elevation = solarPositionQuick(at.getTime(), place).apparentElevation;
  return {
    id: place.ref,
    name: place.name,
    place: place.place,
    timeZone: place.timeZone,
    stage: place.stage,
    counts: { units: parts.units[id] ?? 0, ...(parts.judged[id] ?? NOTHING_JUDGED) },
    strings: parts.strings[id] ?? 0,
    power: isNow ? output.acPower : null,
    madeLast:
      output && !isNow && output.acPower !== null
        ? { power: output.acPower, at: new Date(output.at).toISOString() }
        : null,
    acPowerMax: parts.acPowerMax[id] ?? 0,
    reportedAt: reportedAt === undefined ? null : new Date(reportedAt).toISOString(),
    daylight: elevation > 0,
    // every zone is in shutdown since the last of them went
    inShutdownSince:
      zones > 0 && zonesDown.length === zones
        ? (zonesDown
            .map((c) => c.since)
            .sort()
            .at(-1) ?? null)
        : null,
    commands,
    silentGateways: isLightAt(elevation)
      ? (parts.gatewaysHeard[id] ?? []).filter((heard) =>
          isSilent(heard ? new Date(heard) : null, at, place.reportIntervalS),
        ).length
      : 0,
    loggerConnected:
      typeof spokeAt === 'string' && !isSilent(new Date(spokeAt), at, Math.max(60, place.reportIntervalS)),
    performanceRatio30d: performanceRatio,
  };
}

// thirty days change little in a quarter of an hour, and /live asks often
const RATIO_KEPT_MS = 15 * 60_000;
/** Not of all sites of a fleet at once. */
const RATIO_SPREAD_S = 300;
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
    const found = new Map(rows.map((r) => [r.siteId, r.ratio]));
    for (const id of asked)
      ratiosKept.set(id, {
        untilMs: at.getTime() + RATIO_KEPT_MS + (id % RATIO_SPREAD_S) * 1000,
        ratio: found.get(id) ?? null,
      });
  }
  return new Map(siteIds.map((id) => [id, ratiosKept.get(id)?.ratio ?? null]));
}
