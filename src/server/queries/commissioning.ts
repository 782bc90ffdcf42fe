import type { Tx } from '../db/transaction';
import { SITE_VISIBLE, type VisibleSite } from './visible-site';

/** Sites that the actor sees and that are being commissioned, or where a roll call runs; by name. */
export async function sitesCommissioned(tx: Tx): Promise<VisibleSite[]> {
  const { rows } = await tx.raw<{ rows: VisibleSite[] }>(
    `select site.id, site.ref, site.organisation_id as "organisationId", site.name, site.place,
            site.time_zone as "timeZone", site.stage
     from site where ${SITE_VISIBLE}
       and (stage = 'commissioning'
            or exists (select from roll_call r where r.site_id = site.id and r.stopped_at is null))
     order by name`,
  );
  return rows;
}
