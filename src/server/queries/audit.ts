import type { AuditItem, AuditView } from '../../schemas/api/audit';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

interface Row extends Omit<AuditItem, 'at' | 'site'> {
  at: Date;
  siteRef: string | null;
  siteName: string | null;
}

const like = (text: string): string => `%${text.replaceAll(/[\\%_]/g, (c) => `\\${c}`)}%`;

/** Entries of the actor's organisation, newest first; words are looked for in who, what, why and what changed. */
export async function auditEntries(
  tx: Tx,
  { q, area, before }: AuditView,
  limit: number,
): Promise<AuditItem[]> {
  const words = q.trim();
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `select a.id, a.at, person.name as person, a.address, a.action, a.subject, a.reason, a.before, a.after,
            site.ref as "siteRef", site.name as "siteName"
     from audit_entry a
     left join person on person.id = a.person_id
     left join site on site.id = a.site_id and ${SITE_VISIBLE}
     where a.organisation_id = (select actor_organisation())
       and (cast(:before as int8) is null or a.id < :before)
       and (cast(:area as text) is null or a.action like :area || '.%')
       and (cast(:words as text) is null or person.name ilike :words or site.name ilike :words or a.action ilike :words
            or a.subject ilike :words or a.reason ilike :words or a.address ilike :words
            or a.before::text ilike :words or a.after::text ilike :words)
     order by a.id desc limit :limit`,
    {
      before: before ?? null,
      area: area === 'all' ? null : area.replaceAll('_', '\\_'),
      words: words === '' ? null : like(words),
      limit,
    },
  );
  return rows.map(({ at, siteRef, siteName, ...row }) => ({
    ...row,
    at: at.toISOString(),
    site: siteRef && siteName ? { id: siteRef, name: siteName } : null,
  }));
}
