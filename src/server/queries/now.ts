import type { GatewayNow, InverterNow, StringNow } from '../../schemas/api/now';
import type { InverterStatus } from '../../domain/verdicts/codes';
import { DIM_BELOW_ELEVATION } from '../../domain/verdicts/context';
import { solarPositionQuick } from '../../domain/photovoltaics/sun/position-quick';
import type { Tx } from '../db/transaction';
import { mapStrings } from './now-mapping';
import { nowRows, sitesOfStrings } from './now-rows';

/**
 * What holds at `at`. Whoever calls with a site's or a string's number has checked that the actor may see it.
 */
const byName = new Intl.Collator('en', { numeric: true });

/** Strings of a site, or chosen ones, of one site where it is known; in the order of their names ("A2" before "A10"). */
export async function stringsNow(
  tx: Tx,
  at: Date,
  which: { siteId: number; stringIds?: readonly number[] } | { stringIds: readonly number[] },
): Promise<StringNow[]> {
  const wanted = which.stringIds && new Set(which.stringIds);
  const siteIds = 'siteId' in which ? [which.siteId] : await sitesOfStrings(tx, which.stringIds);
  const strings: StringNow[] = [];
  for (const siteId of siteIds) {
    const { site, strings: rows } = await nowRows(tx, siteId);
    if (site) strings.push(...mapStrings(site, rows, at, wanted));
  }
  return strings.sort((a, b) => byName.compare(a.name, b.name));
}

/** Inverters of a site with their inputs. */
export async function invertersNow(tx: Tx, at: Date, siteId: number): Promise<InverterNow[]> {
  interface Row {
    name: string;
    at: Date | null;
    acPower: number | null;
    acPowerMax: number;
    status: InverterStatus | null;
    powerLimit: number | null;
    insulation: number | null;
    arcFlag: boolean | null;
    earthFaultFlag: boolean | null;
    reportIntervalS: number;
    inputs: { number: number; voltage: number | null; current: number | null; strings: string[] }[];
  }
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select inv.name, st.at, st.ac_power as "acPower", inv.ac_power_max as "acPowerMax", st.status,
            st.power_limit as "powerLimit", st.insulation, st.arc_flag as "arcFlag",
            st.earth_fault_flag as "earthFaultFlag", site.report_interval_s as "reportIntervalS",
            coalesce((select json_agg(json_build_object('number', i.number, 'voltage', ist.voltage,
                        'current', ist.current, 'strings', coalesce((select json_agg(s.name order by s.name)
                          from string s where s.input_id = i.id), '[]')) order by i.number)
                      from input i left join input_state ist on ist.input_id = i.id
                      where i.inverter_id = inv.id), '[]') as inputs
     from inverter inv
     join site on site.id = inv.site_id
     left join inverter_state st on st.inverter_id = inv.id
     where inv.site_id = :siteId`,
    { siteId },
  );
  return rows
    .map(({ reportIntervalS, ...r }) => ({
      ...r,
      at: r.at?.toISOString() ?? null,
      // an old figure is no power now
      acPower: !isSilent(r.at, at, reportIntervalS) ? r.acPower : null,
      arcFlag: r.arcFlag ?? false,
      earthFaultFlag: r.earthFaultFlag ?? false,
      inputs: r.inputs.map((i) => ({
        number: i.number,
        voltage: i.voltage === null ? null : i.voltage / 10,
        current: i.current === null ? null : i.current / 100,
        strings: i.strings.sort(byName.compare),
      })),
    }))
    .sort((a, b) => byName.compare(a.name, b.name));
}

/** Three report intervals without a word, as for a unit. An older figure is none of now. */
export const isSilent = (heard: Date | null, at: Date, reportIntervalS: number): boolean =>
  heard === null || at.getTime() - heard.getTime() > 3 * reportIntervalS * 1000;

/** The same length of time in SQL, for a row of `site`. */
export const SILENT_AFTER = `interval '3 s' * site.report_interval_s`;

/** Gateways of a site. In the dark no unit reports, so a gateway that hears none is not silent. */
export async function gatewaysNow(tx: Tx, at: Date, siteId: number): Promise<GatewayNow[]> {
  interface Row {
    name: string;
    number: number;
    lastHeardAt: Date | null;
    units: number;
    reportIntervalS: number;
    latitude: number;
    longitude: number;
    altitude: number;
  }
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `with carried as (
       select s.logger_id, v.via as number, count(*)::int as units
       from string_state st join string s on s.id = st.string_id
       cross join lateral unnest(st.via) as v(via)
       where st.site_id = :siteId and v.via is not null
       group by 1, 2)
     select g.name, g.number, g.last_heard_at as "lastHeardAt", coalesce(c.units, 0) as units,
            site.report_interval_s as "reportIntervalS", site.latitude, site.longitude, site.altitude
     from gateway g
     join site on site.id = g.site_id
     left join carried c on c.logger_id = g.logger_id and c.number = g.number
     where g.site_id = :siteId
     order by g.number, g.name`,
    { siteId },
  );
  return rows.map((r) => ({
    name: r.name,
    number: r.number,
    lastHeardAt: r.lastHeardAt?.toISOString() ?? null,
    units: r.units,
    silent: isLight(r, at) && isSilent(r.lastHeardAt, at, r.reportIntervalS),
  }));
}

/** Light enough at the place for every unit to be awake under an ordinary sky. */
export const isLight = (
  place: { latitude: number; longitude: number; altitude: number },
  at: Date,
): boolean => isLightAt(solarPositionQuick(at.getTime(), place).apparentElevation);

/** The same by the sun's elevation there, degrees. */
export const isLightAt = (elevation: number): boolean => elevation >= DIM_BELOW_ELEVATION;
