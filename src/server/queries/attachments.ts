import type { AttachmentItem } from '../../schemas/api/attachments';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

interface Row extends Omit<AttachmentItem, 'at' | 'recordedAt'> {
  at: Date;
  recordedAt: Date;
  siteId: number | null;
  personId: number | null;
  sha256: Buffer;
}
export type KeptAttachment = AttachmentItem & Pick<Row, 'siteId' | 'personId' | 'sha256'>;

const SELECT = `select a.ref, a.subject, a.subject_ref as "subjectRef", k.check_name as "check", st.ref as "stringId", a.name,
    a.media_type as "mediaType", a.byte_size as "byteSize", a.width, a.height, a.note, a.place_kept as "placeKept",
    coalesce(p.name, '') as person, a.at, a.recorded_at as "recordedAt", a.site_id as "siteId",
    a.person_id as "personId", a.sha256
  from attachment a left join string st on st.id = a.string_id left join person p on p.id = a.person_id
  left join install_check k on a.subject = 'install_check' and k.ref = a.subject_ref`;
/** The organisation's wall, and the site's where the file belongs to one. */
const VISIBLE = `a.organisation_id = (select actor_organisation())
  and (a.site_id is null or exists (select from site where site.id = a.site_id and ${SITE_VISIBLE}))`;

const kept = (row: Row): KeptAttachment => ({
  ...row,
  at: row.at.toISOString(),
  recordedAt: row.recordedAt.toISOString(),
});
/** A file as it is told outside. */
export const attachmentOut = ({
  siteId: _site,
  personId: _person,
  sha256: _sha,
  ...item
}: KeptAttachment): AttachmentItem => item;

/** The files of a site, newest first. */
export async function attachmentsOfSite(tx: Tx, siteId: number): Promise<KeptAttachment[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `${SELECT} where a.site_id = ? and ${VISIBLE} order by a.at desc, a.id desc`,
    [siteId],
  );
  return rows.map(kept);
}

export async function attachmentByRef(tx: Tx, ref: string): Promise<KeptAttachment | undefined> {
  const { rows } = await tx.raw<{ rows: Row[] }>(`${SELECT} where a.ref = ? and ${VISIBLE}`, [ref]);
  return rows[0] && kept(rows[0]);
}

/** Whether the files of a ref are there; the bytes of a variant, the whole where there is no small one. */
export async function attachmentBytes(
  tx: Tx,
  ref: string,
  variant: 'full' | 'thumbnail',
): Promise<{ name: string; mediaType: string; data: Buffer } | undefined> {
  const { rows } = await tx.raw<{ rows: { name: string; mediaType: string; data: Buffer }[] }>(
    `select a.name, d.media_type as "mediaType", d.data
     from attachment a join attachment_data d on d.attachment_id = a.id
     where a.ref = :ref and d.variant in (:variant, 'full') and ${VISIBLE}
     order by d.variant = :variant desc limit 1`,
    { ref, variant },
  );
  return rows[0];
}

export interface NewAttachment {
  ref: string;
  organisationId: number;
  /** null: it belongs to the organisation, as evidence for a pair of connectors does. */
  siteId: number | null;
  stringId: number | null;
  subject: string;
  subjectRef: string | null;
  name: string;
  note: string;
  placeKept: boolean;
  personId: number;
  at: string;
  mediaType: string;
  data: Buffer;
  sha256: Buffer;
  width: number | null;
  height: number | null;
  thumbnail: Buffer | null;
}

/** Writes a file with its small picture; false where its identifier is taken, also by what the actor can't see. */
export async function insertAttachment(tx: Tx, file: NewAttachment): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into attachment (ref, organisation_id, site_id, string_id, subject, subject_ref, name, media_type, byte_size,
       sha256, width, height, note, place_kept, person_id, at)
     values (:ref, :organisationId, :siteId, :stringId, :subject, :subjectRef, :name, :mediaType, :byteSize, :sha256,
       :width, :height, :note, :placeKept, :personId, :at)
     on conflict (ref) do nothing returning id`,
    {
      ref: file.ref,
      organisationId: file.organisationId,
      siteId: file.siteId,
      stringId: file.stringId,
      subject: file.subject,
      subjectRef: file.subjectRef,
      name: file.name,
      mediaType: file.mediaType,
      byteSize: file.data.length,
      sha256: file.sha256,
      width: file.width,
      height: file.height,
      note: file.note,
      placeKept: file.placeKept,
      personId: file.personId,
      at: file.at,
    },
  );
  const id = rows[0]?.id;
  if (id === undefined) return false;
  await tx('attachment_data').insert([
    { attachment_id: id, variant: 'full', media_type: file.mediaType, data: file.data },
    ...(file.thumbnail
      ? [{ attachment_id: id, variant: 'thumbnail', media_type: 'image/jpeg', data: file.thumbnail }]
      : []),
  ]);
  return true;
}
