import type { NoticeItem, NoticesView } from '../../schemas/api/notices';
import type { NoticesNow } from '../../schemas/live';
import type { Tx } from '../db/transaction';
import { tellNoticed } from './notices-write';

/** Notices as their person sees them. Row-level security knows the organisation; the person stands in each query. */

interface Row extends Omit<NoticeItem, 'at' | 'readAt' | 'overAt' | 'site'> {
  at: Date;
  readAt: Date | null;
  overAt: Date | null;
  siteRef: string | null;
  siteName: string | null;
  timeZone: string | null;
}
const toItem = ({ at, readAt, overAt, siteRef, siteName, timeZone, ...row }: Row): NoticeItem => ({
  ...row,
  at: at.toISOString(),
  readAt: readAt?.toISOString() ?? null,
  overAt: overAt?.toISOString() ?? null,
  site: siteRef && siteName && timeZone ? { id: siteRef, name: siteName, timeZone } : null,
});
const NOTICE = `select n.ref as id, n.id as number, n.kind, n.headline, n.body, n.href, n.hazard, n.came,
    n.created_at as at, n.read_at as "readAt", n.over_at as "overAt",
    site.ref as "siteRef", site.name as "siteName", site.time_zone as "timeZone"
  from notice n left join site on site.id = n.site_id`;

const like = (text: string): string => `%${text.replaceAll(/[\\%_]/g, (c) => `\\${c}`)}%`;

/** The newest first; those that a filter leaves. */
export async function noticesOf(
  tx: Tx,
  personId: number,
  view: NoticesView,
  limit: number,
): Promise<NoticeItem[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `${NOTICE} where n.person_id = :personId
       and (:before::int8 is null or n.id < :before)
       and (:unread::boolean is false or n.read_at is null)
       and (:kind::text is null or n.kind = :kind)
       and (:site::text is null or site.ref::text = :site)
       and (:words::text is null or n.headline ilike :words or n.body ilike :words or site.name ilike :words)
     order by n.id desc limit :limit`,
    {
      personId,
      limit,
      before: view.before ?? null,
      unread: view.show === 'unread',
      kind: view.kind === 'all' ? null : view.kind,
      site: view.site === '' ? null : view.site,
      words: view.q.trim() === '' ? null : like(view.q.trim()),
    },
  );
  return rows.map(toItem);
}

/** More than this is "99+" to anybody. */
const COUNT_MAX = 100;

/** What the shell of every page shows. Whoever calls has the person's number from a session. */
export async function noticesNow(tx: Tx, personId: number): Promise<NoticesNow> {
  const { rows } = await tx.raw<{
    rows: { unread: number; hazards: number; newest: NoticesNow['newest'] }[];
  }>(
    `with unread as (
       select n.id, n.ref, n.headline, n.href, n.hazard, n.over_at, n.site_id from notice n
       where n.person_id = :personId and n.read_at is null order by n.id desc limit :max)
     select count(*)::int as unread, count(*) filter (where hazard and over_at is null)::int as hazards,
            (select json_build_object('id', u.ref, 'headline', u.headline, 'href', u.href, 'hazard', u.hazard,
                    'siteName', (select name from site where site.id = u.site_id))
             from unread u order by u.id desc limit 1) as newest
     from unread`,
    { personId, max: COUNT_MAX },
  );
  return rows[0] ?? { unread: 0, hazards: 0, newest: null };
}

/** Marks these as read, or all up to a number. @returns how many were unread */
export async function markRead(
  tx: Tx,
  personId: number,
  which: { ids: readonly string[] } | { upTo: number },
  at: Date,
): Promise<number> {
  const unread = tx('notice').where({ person_id: personId }).whereNull('read_at');
  const count =
    'ids' in which
      ? await unread.whereIn('ref', [...which.ids]).update({ read_at: at })
      : await unread.where('id', '<=', which.upTo).update({ read_at: at });
  if (count > 0) await tellNoticed(tx, [personId]);
  return count;
}

/** Marks these as not read after all. */
export async function markUnread(tx: Tx, personId: number, ids: readonly string[]): Promise<void> {
  const count = await tx('notice')
    .where({ person_id: personId })
    .whereNotNull('read_at')
    .whereIn('ref', [...ids])
    .update({ read_at: null });
  if (count > 0) await tellNoticed(tx, [personId]);
}
