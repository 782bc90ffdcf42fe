import type { Actor } from '../../domain/access/permissions';
import { checkContext, standingOf } from '../../domain/commissioning/checks/context';
import { signOffState } from '../../domain/commissioning/checks/sign-off';
import type { SignOff, SignOffInput } from '../../schemas/api/checks';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { lockString } from '../queries/captured-site';
import { insertSignOff } from '../queries/checks';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { stringFacts } from '../queries/string-facts';
import { captureSnapshot } from './capture-snapshot';
import type { Recorded } from './record-check';
import { refTaken } from './recorded';
import { signOffRefusals } from '../../words/refusals-as-built';

/**
 * Signs the install checks of a string as they stand. What the person looked at must be what is there.
 * @throws AppError not_found · conflict (recorded anew since, something blocks, or the identifier is taken)
 */
export async function signOffString(
  tx: Tx,
  actor: Actor,
  stringRef: string,
  input: SignOffInput,
  call: { address: string | null; now: Date },
): Promise<Recorded<SignOff>> {
  const facts = found(await stringFacts(tx, stringRef), 'string');
  const string = found(await lockString(tx, facts.siteId, stringRef), 'string');
  const person = { id: facts.siteRef, name: '', role: actor.role };
  const sheet = await captureSnapshot(tx, facts.siteRef, person, call.now);
  const on = found(
    sheet.strings.find((s) => s.id === stringRef),
    signOffRefusals.stringWithSlots,
  );
  if (on.signOff?.ref === input.ref && on.signOff.fingerprint === input.fingerprint)
    return { record: { stringId: stringRef, ...on.signOff }, made: false };
  if (on.fingerprint !== input.fingerprint)
    throw new AppError('conflict', {
      message: signOffRefusals.recordedSince(string.name),
      fields: [{ field: 'body.fingerprint', message: signOffRefusals.notTheseRecords }],
    });
  const state = signOffState(on.checks.map(standingOf), checkContext(sheet, stringRef));
  if (!state.maySign)
    throw new AppError('conflict', {
      message: signOffRefusals.blocked(string.name, state.blocks.map((b) => b.words).join(' ')),
      fields: state.blocks.map((b) => ({ field: b.check, message: `${b.words} ${b.remedy}` })),
    });
  const written = await insertSignOff(tx, {
    ref: input.ref,
    siteId: facts.siteId,
    stringId: string.id,
    personId: actor.personId,
    fingerprint: on.fingerprint,
  });
  if (!written?.made) throw refTaken();
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: call.address,
    action: 'checks.sign_off',
    subject: `string ${stringRef}`,
    siteId: facts.siteId,
    stringId: string.id,
    after: { fingerprint: on.fingerprint, records: on.checks.map((c) => c.ref) },
  });
  await tellSiteChanged(tx, facts.siteId);
  return {
    record: {
      ref: written.row.ref,
      stringId: stringRef,
      person: written.row.person,
      at: written.row.at.toISOString(),
      fingerprint: written.row.fingerprint,
      stale: false,
    },
    made: true,
  };
}
