import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

export interface AsBuiltSite {
  id: number;
  ref: string;
  organisationId: number;
  name: string;
  stage: 'commissioning' | 'operating';
  timeZone: string;
  /** The database's clock, epoch ms. */
  nowMs: number;
}

/** A site that the actor may see, by its number in the database. */
export async function asBuiltSite(tx: Tx, siteId: number): Promise<AsBuiltSite | undefined> {
  const { rows } = await tx.raw<{ rows: AsBuiltSite[] }>(
    `select site.id, site.ref, site.organisation_id as "organisationId", site.name, site.stage,
            site.time_zone as "timeZone", (extract(epoch from now()) * 1000)::float8 as "nowMs"
     from site where site.id = :siteId and ${SITE_VISIBLE}`,
    { siteId },
  );
  return rows[0];
}
