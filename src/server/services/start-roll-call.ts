import type { Actor } from '../../domain/access/permissions';
import type { RollCallRun, RollCallStart } from '../../schemas/api/roll-call';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { addAuditEntry } from '../queries/people';
import { addRollCallEvent, announceRollCall, latestRollCall, openRollCall } from '../queries/roll-call';
import { visibleSite } from '../queries/visible-site';
import { startRollCallRefusals } from '../../words/refusals-cases';

/**
 * Opens the roll call of a site: the loggers are asked to listen, nothing else. A unit that is heard begins to
 * follow the command in force, so the start carries the name of a person who is on site.
 *
 * @throws AppError not_found · conflict (one runs already, naming who runs it). A logger that
 * is not connected starts listening when it comes back
 */
export async function startRollCall(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  start: RollCallStart,
  address: string | null,
): Promise<RollCallRun> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const run = await openRollCall(tx, {
    siteId: site.id,
    personId: actor.personId,
    personOnSite: start.personOnSite,
  });
  if (!run) {
    const open = await latestRollCall(tx, site.id);
    throw new AppError('conflict', {
      message: open
        ? startRollCallRefusals.running(site.name, open.startedBy, open.personOnSite)
        : startRollCallRefusals.startedMeanwhile(site.name),
    });
  }
  await addRollCallEvent(tx, {
    organisationId: site.organisationId,
    siteId: site.id,
    kind: 'roll_call_started',
    at: run.startedAt,
    detail: { person: run.startedBy, personOnSite: run.personOnSite },
  });
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    action: 'roll_call.start',
    subject: `site ${site.ref}`,
    after: { rollCall: run.id, personOnSite: run.personOnSite, confirmedOnSite: start.onSite },
  });
  await announceRollCall(tx, site.id);
  return run;
}
