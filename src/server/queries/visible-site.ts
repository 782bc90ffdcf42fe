import type { Tx } from '../db/transaction';

/**
 * The organisation's wall in the query itself, beside row-level security: it also stands where the
 * installation runs with one database role. `site` must be the table's name or alias in the query.
 */
export const SITE_VISIBLE = `(site.organisation_id = (select actor_organisation())
  and ((select actor_sites()) is null or site.id = any ((select actor_sites())::int4[])))`;

export interface VisibleSite {
  id: number;
  ref: string;
  organisationId: number;
  name: string;
  place: string;
  timeZone: string;
  stage: 'commissioning' | 'operating';
}

/** The site of a public identifier, if the actor may see it; undefined looks the same for absent and foreign. */
export async function visibleSite(tx: Tx, ref: string): Promise<VisibleSite | undefined> {
  const { rows } = await tx.raw<{ rows: VisibleSite[] }>(
    `select site.id, site.ref, site.organisation_id as "organisationId", site.name, site.place,
            site.time_zone as "timeZone", site.stage
     from site where site.ref = :ref and ${SITE_VISIBLE}`,
    { ref },
  );
  return rows[0];
}

/** Every site that the actor may see, by name. */
export async function visibleSites(tx: Tx): Promise<{ id: number; ref: string }[]> {
  const { rows } = await tx.raw<{ rows: { id: number; ref: string }[] }>(
    `select id, ref from site where ${SITE_VISIBLE} order by name, id`,
  );
  return rows;
}

/** Public identifiers of sites by their numbers; whoever calls has checked that they may be seen. */
export async function siteRefs(tx: Tx, siteIds: readonly number[]): Promise<{ id: number; ref: string }[]> {
  const { rows } = await tx.raw<{ rows: { id: number; ref: string }[] }>(
    'select id, ref from site where id = any (:siteIds)',
    { siteIds: [...siteIds] },
  );
  return rows;
}
