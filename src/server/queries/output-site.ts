import type { Tx } from '../db/transaction';

/** What a night's judgement must know of a site; `judged`: that day was judged already. Undefined: no such site. */
export async function seriesSite(
  tx: Tx,
  siteId: number,
  day: string,
): Promise<
  | {
      id: number;
      latitude: number;
      longitude: number;
      altitude: number;
      reportIntervalS: number;
      /** As kept with the organisation: domain/settings/thresholds reads it. */
      thresholds: unknown;
      judged: boolean;
    }
  | undefined
> {
  const { rows } = await tx.raw<{
    rows: {
      id: number;
      latitude: number;
      longitude: number;
      altitude: number;
      reportIntervalS: number;
      /** As kept with the organisation: domain/settings/thresholds reads it. */
      thresholds: unknown;
      judged: boolean;
    }[];
  }>(
    `select s.id, s.latitude, s.longitude, s.altitude, s.report_interval_s as "reportIntervalS",
            (select o.thresholds from organisation o where o.id = s.organisation_id) as thresholds,
            exists (select from output_night n where n.site_id = s.id and n.day = :day) as judged
     from site s where s.id = :siteId`,
    { siteId, day },
  );
  return rows[0];
}
