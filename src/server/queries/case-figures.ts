import type { Tx } from '../db/transaction';

/** What the figures of a case rest on beside the state of the moment. Whoever calls has checked the site. */

export interface CasePlace {
  id: number;
  ref: string;
  timeZone: string;
  latitude: number;
  longitude: number;
  altitude: number;
  /** W/m² of the newest word of a sensor in a plane, at most a quarter of an hour old. */
  poaGlobal: number | null;
  /** Wh AC since midnight at the site; null: nothing is rolled up yet. */
  energyToday: number | null;
}

export async function casePlace(tx: Tx, siteId: number, at: Date): Promise<CasePlace | undefined> {
  const { rows } = await tx.raw<{ rows: CasePlace[] }>(
    `select site.id, site.ref, site.time_zone as "timeZone", site.latitude, site.longitude, site.altitude,
            (select max(w.irradiance)::float8 from weather_state w join sensor s on s.id = w.sensor_id
             where w.site_id = site.id and s.plane_id is not null
               and w.at between :at::timestamptz - interval '15 minutes' and :at::timestamptz) as "poaGlobal",
            (select sum(q.ac_power)::float8 / 4 from site_quarter q
             where q.site_id = site.id and q.at >= (date_trunc('day', :at::timestamptz at time zone site.time_zone))
                     at time zone site.time_zone and q.at < :at::timestamptz) as "energyToday"
     from site where site.id = :siteId`,
    { siteId, at },
  );
  return rows[0];
}

export interface StringSums {
  ref: string;
  energyToday: number | null; // Wh
  outputDay: string | null;
  outputRatio: number | null;
}

/** Of each string of a site: energy since midnight there, and the newest day's ratio of a week. */
export async function stringSums(tx: Tx, siteId: number, at: Date): Promise<StringSums[]> {
  const { rows } = await tx.raw<{ rows: StringSums[] }>(
    `select s.ref,
            (select sum(q.energy)::float8 / 600 from string_quarter q
             where q.string_id = s.id and q.at >= (date_trunc('day', :at::timestamptz at time zone site.time_zone))
                     at time zone site.time_zone and q.at < :at::timestamptz) as "energyToday",
            o.day::text as "outputDay", o.ratio::float8 as "outputRatio"
     from site join string s on s.site_id = site.id
     left join lateral (
       select day, ratio from output_day
       where string_id = s.id and ratio is not null
         and day >= (:at::timestamptz at time zone site.time_zone)::date - 7
         and day <= (:at::timestamptz at time zone site.time_zone)::date
       order by day desc limit 1) o on true
     where site.id = :siteId`,
    { siteId, at },
  );
  return rows;
}
