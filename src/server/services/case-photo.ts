import type { z } from 'zod';
import type { Actor } from '../../domain/access/permissions';
import type { casePhotoQuery, CasePage } from '../../schemas/api/cases';
import { asActor, type Tx } from '../db/transaction';
import { found } from '../errors';
import { addCaseEntry, lockCase, updateCase } from '../queries/cases-write';
import { caseWithFigures } from '../queries/cases';
import { addAuditEntry } from '../queries/people';
import { casePage } from './cases';
import { readReceived, storeAttachment, type ReceivedFile } from './store-attachment';

export type CasePhotoQuery = z.infer<typeof casePhotoQuery>;

/**
 * Takes the body of a request as a photo of a case, without a transaction open meanwhile.
 * @throws AppError not_found · too_large · invalid
 */
export async function receiveCasePhoto(
  actor: Actor,
  ref: string,
  request: Request,
  query: CasePhotoQuery,
  at: Date,
): Promise<ReceivedFile> {
  await asActor(actor, async (tx) => found(await caseWithFigures(tx, ref, at), 'case'));
  return readReceived(request, { name: query.name, subject: 'case', keepPlace: 'no' });
}

/** Keeps a photo with its case; the same identifier twice is kept once. @throws AppError as `storeAttachment` */
export async function addCasePhoto(
  tx: Tx,
  actor: Actor,
  ref: string,
  query: CasePhotoQuery,
  file: ReceivedFile,
  at: Date,
  address: string | null,
): Promise<CasePage> {
  const kept = found(await lockCase(tx, ref), 'case');
  const { item } = found(await caseWithFigures(tx, ref, at), 'case');
  const { record, made } = await storeAttachment(
    tx,
    actor,
    item.siteId,
    { ...query, subject: 'case', subjectRef: ref, keepPlace: 'no' },
    file,
    at,
  );
  if (made) {
    await updateCase(tx, kept.id, {}, at, false);
    await addCaseEntry(tx, {
      caseId: kept.id,
      siteId: kept.siteId,
      at,
      personId: actor.personId,
      kind: 'photo',
      detail: { photo: record.ref, name: record.name },
    });
    await addAuditEntry(tx, {
      organisationId: actor.organisationId,
      personId: actor.personId,
      address,
      action: 'case.photo',
      subject: `case ${ref}`,
      siteId: kept.siteId,
      after: { photo: record.ref, name: record.name },
    });
  }
  return casePage(tx, actor, ref, at);
}
