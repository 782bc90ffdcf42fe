import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import { mayUse, type Actor } from '../../domain/access/permissions';
import type { AttachmentItem, AttachmentQuery } from '../../schemas/api/attachments';
import { PHOTO_MAX_BYTES } from '../../schemas/lists-and-limits';
import { asActor, type Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { readPhoto } from '../files/photo';
import { sniff } from '../files/sniff';
import { spooled } from '../files/spool';
import { attachmentByRef, attachmentOut, insertAttachment } from '../queries/attachments';
import { lockString } from '../queries/captured-site';
import { tellSiteChanged } from '../queries/live-notices';
import { visibleSite } from '../queries/visible-site';
import type { Recorded } from './record-check';
import { clockFault, refTaken, refuseFaults } from './recorded';
import { attachmentRefusals } from '../../words/refusals-as-built';

/** A file that came in, as it will be kept. */
export interface ReceivedFile {
  mediaType: string;
  data: Buffer;
  width: number | null;
  height: number | null;
  thumbnail: Buffer | null;
}

const refused = (message: string): AppError =>
  new AppError('invalid', { message, fields: [{ field: 'body', message }] });

/**
 * Takes the body of a request as a photo, or as a document where evidence is sent. No transaction is open meanwhile:
 * a phone may take minutes. Nothing is read for a site that the actor may not see.
 * @throws AppError not_found · too_large · invalid (what it is instead, and what to do)
 */
export async function receiveFile(
  actor: Actor,
  siteRef: string,
  request: Request,
  query: AttachmentQuery,
): Promise<ReceivedFile> {
  await asActor(actor, async (tx) => found(await visibleSite(tx, siteRef), 'site'));
  return readReceived(request, query);
}

/**
 * The body as a photo, or as a document where it is evidence for a pair of connectors.
 * @throws AppError too_large · invalid (what it is instead, and what to do)
 */
export function readReceived(
  request: Request,
  query: Pick<AttachmentQuery, 'name' | 'subject' | 'keepPlace'>,
): Promise<ReceivedFile> {
  return spooled(request, PHOTO_MAX_BYTES, async (file) => {
    const { kind, fault } = sniff(file.head);
    if (kind === null) throw refused(`${query.name}: ${fault}`);
    if (kind !== 'pdf')
      return { mediaType: 'image/jpeg', ...(await readPhoto(file.path, query.keepPlace === 'yes')) };
    if (query.subject !== 'connector_pair') throw refused(attachmentRefusals.pdf(query.name));
    return {
      mediaType: 'application/pdf',
      data: await readFile(file.path),
      width: null,
      height: null,
      thumbnail: null,
    };
  });
}

/**
 * Keeps a file with what it belongs to; that may arrive later. The same identifier with the same file is kept once.
 * @throws AppError not_found · forbidden (evidence is a manager's) · invalid · conflict
 */
export async function storeAttachment(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  query: AttachmentQuery,
  file: ReceivedFile,
  now: Date,
): Promise<Recorded<AttachmentItem>> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  if (query.subject === 'connector_pair' && !mayUse(actor.role, 'connector_evidence.record'))
    throw new AppError('forbidden', {
      message: attachmentRefusals.roleRecordsNone(actor.role),
    });
  const string =
    query.string === undefined
      ? null
      : found(await lockString(tx, site.id, query.string), attachmentRefusals.stringHere);
  const clock = clockFault(query.at, now);
  refuseFaults(clock ? [{ ...clock, field: 'query.at' }] : []);
  const sha256 = createHash('sha256').update(file.data).digest();
  const made = await insertAttachment(tx, {
    ref: query.ref,
    organisationId: site.organisationId,
    siteId: site.id,
    stringId: string?.id ?? null,
    subject: query.subject,
    subjectRef: query.subjectRef ?? null,
    name: query.name,
    note: query.note,
    placeKept: query.keepPlace === 'yes' && file.mediaType === 'image/jpeg',
    personId: actor.personId,
    at: query.at,
    sha256,
    ...file,
  });
  const stored = await attachmentByRef(tx, query.ref);
  if (
    !stored ||
    (!made &&
      !(
        stored.siteId === site.id &&
        stored.personId === actor.personId &&
        stored.subject === query.subject &&
        stored.subjectRef === (query.subjectRef ?? null) &&
        stored.sha256.equals(sha256)
      ))
  )
    throw refTaken();
  if (made) await tellSiteChanged(tx, site.id);
  return { record: attachmentOut(stored), made };
}
