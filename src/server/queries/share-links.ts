import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Links that show a site without signing in. The token's hash never leaves this file. */

export interface ShareLinkRow {
  id: number;
  ref: string;
  siteId: number;
  label: string;
  kiosk: boolean;
  framedBy: string | null;
  madeBy: string;
  createdAt: Date;
  expiresAt: Date | null;
  endedAt: Date | null;
  lastUsedAt: Date | null;
}
const COLUMNS = `l.id, l.ref, l.site_id as "siteId", l.label, l.kiosk, l.framed_by as "framedBy", p.name as "madeBy", l.created_at as "createdAt",
  l.expires_at as "expiresAt", l.ended_at as "endedAt", l.last_used_at as "lastUsedAt"`;

/** The links of a site that was found as the actor: those that work first, the newest first among them. */
export async function shareLinksOf(tx: Tx, siteId: number): Promise<ShareLinkRow[]> {
  const { rows } = await tx.raw<{ rows: ShareLinkRow[] }>(
    `select ${COLUMNS} from share_link l join person p on p.id = l.created_by
     where l.site_id = ? order by l.ended_at is not null, l.id desc`,
    [siteId],
  );
  return rows;
}

/** The instant after a day of the site's calendar. */
export async function endOfDay(tx: Tx, timeZone: string, day: string): Promise<Date> {
  const { rows } = await tx.raw<{ rows: { at: Date }[] }>(
    `select (cast(? as date) + interval '1 day') at time zone ? as at`,
    [day, timeZone],
  );
  const [row] = rows;
  if (!row) throw new Error('The database gave no end for a day.');
  return row.at;
}

export async function addShareLink(
  tx: Tx,
  link: {
    siteId: number;
    label: string;
    kiosk: boolean;
    framedBy: string | null;
    hash: Buffer;
    createdBy: number;
    at: Date;
    expiresAt: Date | null;
  },
): Promise<ShareLinkRow> {
  const { rows } = await tx.raw<{ rows: ShareLinkRow[] }>(
    `with l as (
       insert into share_link (site_id, label, kiosk, framed_by, token_hash, created_by, created_at, expires_at)
       values (:siteId, :label, :kiosk, :framedBy, :hash, :createdBy, :at, :expiresAt) returning *)
     select ${COLUMNS} from l join person p on p.id = l.created_by`,
    link,
  );
  const [row] = rows;
  if (!row) throw new Error('The database kept no link.');
  return row;
}

/** Ends a link of a visible site, once. Undefined: there is none that could be ended. */
export async function endShareLink(tx: Tx, ref: string, at: Date): Promise<ShareLinkRow | undefined> {
  const { rows } = await tx.raw<{ rows: ShareLinkRow[] }>(
    `with l as (
       update share_link set ended_at = :at from site
       where share_link.ref = :ref and share_link.ended_at is null
         and site.id = share_link.site_id and ${SITE_VISIBLE}
       returning share_link.*)
     select ${COLUMNS} from l join person p on p.id = l.created_by`,
    { ref, at },
  );
  return rows[0];
}

export interface OpenShareLink {
  id: number;
  siteId: number;
  organisationId: number;
  kiosk: boolean;
  framedBy: string | null;
}

/**
 * The link of a token that works at an instant, on a sign-in connection, which sees no site: the organisation is its
 * maker's. Notes its use, at most every minute.
 */
export async function openShareLink(tx: Tx, hash: Buffer, at: Date): Promise<OpenShareLink | undefined> {
  const { rows } = await tx.raw<{ rows: OpenShareLink[] }>(
    `with l as (
       select id, site_id, kiosk, framed_by, created_by from share_link
       where token_hash = :hash and ended_at is null and (expires_at is null or expires_at > :at)),
     used as (
       update share_link set last_used_at = :at
       where id = (select id from l) and (last_used_at is null or last_used_at < cast(:at as timestamptz) - interval '1 minute'))
     select l.id, l.site_id as "siteId", l.kiosk, l.framed_by as "framedBy", p.organisation_id as "organisationId"
     from l join person p on p.id = l.created_by`,
    { hash, at },
  );
  return rows[0];
}

/** The public identifier of a site by its number, if the actor may see it. */
export async function siteRefOf(tx: Tx, siteId: number): Promise<string | undefined> {
  const { rows } = await tx.raw<{ rows: { ref: string }[] }>(
    `select site.ref from site where site.id = :siteId and ${SITE_VISIBLE}`,
    { siteId },
  );
  return rows[0]?.ref;
}
