import type { Actor } from '../../domain/access/permissions';
import { mentionedIn } from '../../domain/cases/mentions';
import type { CaseCommentBody, CasePage } from '../../schemas/api/cases';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { addCaseEntry, addCaseEvent, lockCase, staffOf, updateCase } from '../queries/cases-write';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { casePage } from './cases';
import { personAmong } from './open-case';

/** So much of a comment goes with the event; the whole stands in the case. */
const BODY_TOLD = 400;

/**
 * Writes a comment; whoever its text names with @ is told. The same identifier twice is written once.
 * @throws AppError not_found · invalid
 */
export async function commentCase(
  tx: Tx,
  actor: Actor,
  ref: string,
  body: CaseCommentBody,
  at: Date,
  address: string | null,
): Promise<CasePage> {
  const kept = found(await lockCase(tx, ref), 'case');
  const staff = await staffOf(tx);
  const named = body.mentions.map((m) => personAmong(staff, m, 'mentions'));
  // a name that was taken out of the text again is no mention
  const mentioned = mentionedIn(body.body, named.length > 0 ? named : staff);
  const made = await addCaseEntry(tx, {
    ref: body.ref,
    caseId: kept.id,
    siteId: kept.siteId,
    at,
    personId: actor.personId,
    kind: 'comment',
    body: body.body,
    mentions: mentioned.map((p) => p.id),
  });
  if (made) {
    await updateCase(tx, kept.id, {}, at, false);
    const person = staff.find((p) => p.id === actor.personId)?.name ?? '';
    const others = mentioned.filter((p) => p.id !== actor.personId);
    if (others.length > 0)
      await addCaseEvent(tx, {
        organisationId: kept.organisationId,
        siteId: kept.siteId,
        stringIds: kept.stringIds,
        at,
        kind: 'case_mentioned',
        detail: {
          case: kept.ref,
          number: kept.number,
          title: kept.title,
          person,
          personId: actor.personId,
          mentions: others.map((p) => p.id),
          body: body.body.slice(0, BODY_TOLD),
        },
      });
    await addAuditEntry(tx, {
      organisationId: actor.organisationId,
      personId: actor.personId,
      address,
      action: 'case.commented',
      subject: `case ${kept.ref}`,
      siteId: kept.siteId,
      after: { comment: body.body, mentioned: mentioned.map((p) => p.name) },
    });
    await tellSiteChanged(tx, kept.siteId);
  }
  return casePage(tx, actor, ref, at);
}
