import type { Actor } from '../../domain/access/permissions';
import { openRound } from '../../domain/commissioning/shutdown-test-record';
import type { SignedTest, SignTest } from '../../schemas/api/shutdown-test';
import { confirmPassword } from '../auth/confirm-password';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { closeDraft, insertSigned, standingTests } from '../queries/shutdown-tests';
import { fingerprintOf } from '../reports/fingerprint';
import { readDraft, type Draft } from './shutdown-test-page';
import { openHead } from './shutdown-test-write';
import { testSignRefusals } from '../../words/refusals-cases';

/**
 * Signs a test: what the page showed, with the person's name and the time, fingerprinted and never changed again.
 * Results of strings that were not tested again are carried from the test in force.
 * @throws AppError not_found · invalid (password) · too_many · conflict (signed, ended, or changed since it was shown)
 */
export async function signShutdownTest(
  tx: Tx,
  actor: Actor,
  signer: { name: string; address: string | null },
  ref: string,
  given: SignTest,
  now: Date,
): Promise<{ fingerprint: string }> {
  const head = await openHead(tx, ref);
  const draft = await readDraft(tx, head, now);
  const { record } = draft.content;
  const fault = notReady(draft);
  if (fault) throw new AppError('conflict', { message: fault });
  if (fingerprintOf(draft.content) !== given.fingerprint)
    throw new AppError('conflict', {
      message: testSignRefusals.cameInMeanwhile,
    });
  await confirmPassword(actor.personId, given.password);
  const signed: SignedTest = {
    ...draft.content,
    signature: { name: signer.name, role: actor.role, at: now.toISOString() },
  };
  const fingerprint = fingerprintOf(signed);
  const strings = signed.verdict.strings.flatMap((v) => {
    const dbId = draft.zone.strings.find((s) => s.part.id === v.string)?.dbId;
    if (dbId === undefined) return [];
    const carried = v.carriedFrom && draft.inForce.find((r) => r.string === v.string);
    return [
      {
        stringId: dbId,
        result: v.result,
        carriedFrom: carried ? (carried.carriedFrom?.id ?? carried.testId) : null,
      },
    ];
  });
  const covered = new Set(strings.map((s) => s.stringId));
  const whole = draft.zone.strings.every((s) => covered.has(s.dbId));
  const supersedes = (await standingTests(tx, head.zoneId))
    .filter((t) => (t.signed ? t.stringIds.every((s) => covered.has(s)) : whole))
    .map((t) => t.id);
  const began = record.rounds.find((r) => r.watchStarted)?.watchStarted?.at ?? signed.signature.at;
  await insertSigned(tx, {
    head,
    personId: actor.personId,
    personName: signer.name,
    at: began,
    result: signed.verdict.result,
    fingerprint,
    detail: signed,
    supersedes,
    strings,
  });
  await closeDraft(tx, head.draftId, actor.personId, 'signed');
  await addAuditEntry(tx, {
    organisationId: head.organisationId,
    personId: actor.personId,
    address: signer.address,
    action: 'shutdown_test.sign',
    subject: `shutdown test ${head.ref}`,
    after: { result: signed.verdict.result, fingerprint, strings: strings.length },
  });
  await tellSiteChanged(tx, head.siteId);
  return { fingerprint };
}

/** What must be done before a signature; null: nothing. */
function notReady({ content: { record } }: Draft): string | null {
  if (record.plan === null) return testSignRefusals.sayWhoAndWhat;
  if (record.caution === null) return testSignRefusals.acceptCaution;
  if (!record.rounds.some((r) => r.ended !== null)) return testSignRefusals.noRound;
  const open = openRound(record);
  if (open !== undefined) return testSignRefusals.roundUnderWay(open + 1);
  if (record.rounds.some((r) => r.readings.some((x) => x.struck === null)) && record.provedAfter === null)
    return testSignRefusals.proveAgain;
  return null;
}
