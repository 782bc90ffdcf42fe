import type { Actor } from '../../domain/access/permissions';
import type { RollCallRun } from '../../schemas/api/roll-call';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { addAuditEntry } from '../queries/people';
import { addRollCallEvent, announceRollCall, closeRollCall } from '../queries/roll-call';
import { visibleSite } from '../queries/visible-site';
import { stopRollCallRefusals } from '../../words/refusals-cases';

/**
 * Ends the open roll call of a site; what was heard stays heard.
 * @throws AppError not_found · conflict (none is open)
 */
export async function stopRollCall(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  address: string | null,
): Promise<RollCallRun> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const run = await closeRollCall(tx, { siteId: site.id, personId: actor.personId });
  if (!run?.stoppedAt)
    throw new AppError('conflict', {
      message: stopRollCallRefusals.stopped(site.name),
    });
  await addRollCallEvent(tx, {
    organisationId: site.organisationId,
    siteId: site.id,
    kind: 'roll_call_stopped',
    at: run.stoppedAt,
    detail: { person: run.stoppedBy },
  });
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    action: 'roll_call.stop',
    subject: `site ${site.ref}`,
    before: { rollCall: run.id, stoppedAt: null },
    after: { rollCall: run.id, stoppedAt: run.stoppedAt },
  });
  await announceRollCall(tx, site.id);
  return run;
}
