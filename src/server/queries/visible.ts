import type { Tx } from '../db/transaction';

/**
 * The organisation's wall in the query itself, beside row-level security: it also stands where the
 * installation runs with one database role. `site` must be the table's name or alias in the query.
 */
export const VISIBLE_SITE = `(site.organisation_id = (select actor_organisation())
  and ((select actor_sites()) is null or site.id = any ((select actor_sites())::int4[])))`;

/** The database's number of a site that the actor may see; undefined for every other identifier. */
export async function visibleSiteId(tx: Tx, ref: string): Promise<number | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `select site.id from site where site.ref = :ref and ${VISIBLE_SITE}`,
    { ref },
  );
  return rows[0]?.id;
}
