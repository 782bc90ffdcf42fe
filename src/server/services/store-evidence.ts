import { createHash } from 'node:crypto';
import type { Actor } from '../../domain/access/permissions';
import type { AttachmentItem } from '../../schemas/api/attachments';
import { asActor, type Tx } from '../db/transaction';
import { found } from '../errors';
import { attachmentByRef, attachmentOut, insertAttachment } from '../queries/attachments';
import { pairOrganisation } from '../queries/connector-pairs';
import { addAuditEntry } from '../queries/people';
import type { Recorded } from './record-check';
import { refTaken } from './recorded';
import { readReceived, type ReceivedFile } from './store-attachment';

const SUBJECT = 'connector_pair';

/**
 * Takes the body of a request as the document that a pair of connectors rests on: a PDF, or a picture of one. No
 * transaction is open meanwhile.
 * @throws AppError not_found · too_large · invalid
 */
export async function receiveEvidence(
  actor: Actor,
  pairRef: string,
  request: Request,
  name: string,
): Promise<ReceivedFile> {
  await asActor(actor, async (tx) => found(await pairOrganisation(tx, pairRef), 'pair'));
  return readReceived(request, { name, subject: SUBJECT, keepPlace: 'no' });
}

/**
 * Keeps the document with its pair. The same identifier with the same file is kept once.
 * @throws AppError not_found · conflict
 */
export async function storeEvidence(
  tx: Tx,
  actor: Actor,
  pairRef: string,
  query: { ref: string; name: string },
  file: ReceivedFile,
  now: Date,
): Promise<Recorded<AttachmentItem>> {
  const organisationId = found(await pairOrganisation(tx, pairRef), 'pair');
  const sha256 = createHash('sha256').update(file.data).digest();
  const made = await insertAttachment(tx, {
    ref: query.ref,
    organisationId,
    siteId: null,
    stringId: null,
    subject: SUBJECT,
    subjectRef: pairRef,
    name: query.name,
    note: '',
    placeKept: false,
    personId: actor.personId,
    at: now.toISOString(),
    sha256,
    ...file,
  });
  const stored = await attachmentByRef(tx, query.ref);
  if (!stored || (!made && !(stored.subjectRef === pairRef && stored.sha256.equals(sha256))))
    throw refTaken();
  if (made)
    await addAuditEntry(tx, {
      organisationId,
      personId: actor.personId,
      action: 'connector_pair.file',
      subject: `connector_pair ${pairRef}`,
      after: { file: query.name, sha256: sha256.toString('hex') },
    });
  return { record: attachmentOut(stored), made };
}
