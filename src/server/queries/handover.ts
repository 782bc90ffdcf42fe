import type { Tx } from '../db/transaction';

/** Packs, accepted gaps, and who is told. */

export async function addAcceptedGap(
  tx: Tx,
  gap: { siteId: number; step: string; gap: string; words: string; reason: string; personId: number },
): Promise<void> {
  await tx('accepted_gap').insert({
    site_id: gap.siteId,
    step: gap.step,
    gap: gap.gap,
    words: gap.words,
    reason: gap.reason,
    person_id: gap.personId,
  });
}

export interface PackRow {
  ref: string;
  version: number;
  madeBy: string;
  madeAt: Date;
  remark: string;
  fingerprint: string;
  pdfBytes: number;
  csvBytes: number;
  openPoints: number;
}

/** Packs of a site, the newest first. */
export async function packsOf(tx: Tx, siteId: number): Promise<PackRow[]> {
  const { rows } = await tx.raw<{ rows: PackRow[] }>(
    `select h.ref, h.version, person.name as "madeBy", h.made_at as "madeAt", h.remark, h.fingerprint,
            length(h.pdf) as "pdfBytes", length(h.csv) as "csvBytes",
            jsonb_array_length(h.data -> 'gaps') as "openPoints"
     from handover_pack h join person on person.id = h.made_by
     where h.site_id = ? order by h.version desc`,
    [siteId],
  );
  return rows;
}

/** Holds the site until the transaction ends, so that two packs can't take one version. @returns the next version */
export async function nextVersion(tx: Tx, siteId: number): Promise<number> {
  await tx.raw('select 1 from site where id = ? for no key update', [siteId]);
  const { rows } = await tx.raw<{ rows: { next: number }[] }>(
    'select coalesce(max(version), 0)::int + 1 as next from handover_pack where site_id = ?',
    [siteId],
  );
  return rows[0]?.next ?? 1;
}

export async function addPack(
  tx: Tx,
  pack: {
    siteId: number;
    version: number;
    personId: number;
    at: Date;
    remark: string;
    fingerprint: string;
    data: unknown;
    pdf: Buffer;
    csv: Buffer;
  },
): Promise<string> {
  const [row] = await tx('handover_pack')
    .insert({
      site_id: pack.siteId,
      version: pack.version,
      made_by: pack.personId,
      made_at: pack.at,
      remark: pack.remark,
      fingerprint: pack.fingerprint,
      data: JSON.stringify(pack.data),
      pdf: pack.pdf,
      csv: pack.csv,
    })
    .returning<{ ref: string }[]>('ref');
  if (!row) throw new Error('the pack was not stored');
  return row.ref;
}

/** One paper of a site that the actor sees: policies let no other through. */
export async function paperOf(
  tx: Tx,
  ref: string,
  form: 'pdf' | 'csv',
): Promise<{ bytes: Buffer; site: string; version: number } | undefined> {
  const { rows } = await tx.raw<{ rows: { bytes: Buffer; site: string; version: number }[] }>(
    `select h.${form === 'pdf' ? 'pdf' : 'csv'} as bytes, site.name as site, h.version
     from handover_pack h join site on site.id = h.site_id
     where h.ref = ? and site.organisation_id = (select actor_organisation())
       and ((select actor_sites()) is null or site.id = any ((select actor_sites())::int4[]))`,
    [ref],
  );
  return rows[0];
}

export async function beginOperating(tx: Tx, siteId: number, onDay: string): Promise<boolean> {
  const changed = await tx('site')
    .where({ id: siteId, stage: 'commissioning' })
    .update({ stage: 'operating', switched_on_on: tx.raw('coalesce(switched_on_on, ?)', [onDay]) });
  return changed > 0;
}

export interface Reader {
  personId: number;
  name: string;
  email: string;
}

/** Customers who see this site and can still sign in. */
export async function customersOf(tx: Tx, siteId: number): Promise<Reader[]> {
  const { rows } = await tx.raw<{ rows: Reader[] }>(
    `select person.id as "personId", person.name, person.email
     from person join site_access a on a.person_id = person.id
     where a.site_id = ? and person.active and person.role = 'customer' order by person.name`,
    [siteId],
  );
  return rows;
}

/** That papers were made is an event: people and other systems are told of it. */
export async function addHandoverEvent(
  tx: Tx,
  site: { id: number; organisationId: number },
  detail: { pack: string; version: number; person: string; personId: number },
  at: Date,
): Promise<void> {
  await tx('event').insert({
    at,
    organisation_id: site.organisationId,
    site_id: site.id,
    kind: 'handover_made',
    detail: JSON.stringify(detail),
  });
}
