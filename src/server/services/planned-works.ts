import type { Actor } from '../../domain/access/permissions';
import type { NewPlannedWork, PlannedWorksPage } from '../../schemas/api/planned-works';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import {
  addPlannedWork,
  addPlannedWorkEvent,
  endPlannedWork,
  instantsAt,
  localNow,
  lockPlannedWork,
  plannedWorks,
  stringsOfSite,
} from '../queries/planned-works';
import { visibleSite } from '../queries/visible-site';
import { plannedWorkRefusals } from '../../words/refusals-cases';

/** Longer than this is no visit: a forgotten one would hide what happens. */
const LONGEST_DAYS = 31;
const DAY_MS = 86_400_000;

/** @throws AppError not_found */
export async function plannedWorksPage(tx: Tx, siteRef: string, at: Date): Promise<PlannedWorksPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return {
    at: at.toISOString(),
    site: { id: site.ref, name: site.name, timeZone: site.timeZone },
    works: await plannedWorks(tx, site.id, at),
    strings: (await stringsOfSite(tx, site.id)).map(({ id, name }) => ({ id, name })),
    localNow: await localNow(tx, site.id, at),
  };
}

interface By {
  actor: Actor;
  person: string;
  address: string | null;
}

/**
 * Writes down that work is planned: what happens meanwhile at these strings is no alarm, unless it is a hazard.
 * @throws AppError not_found, or invalid naming the field
 */
export async function planWork(
  tx: Tx,
  by: By,
  siteRef: string,
  work: NewPlannedWork,
  at: Date,
): Promise<void> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const times = await instantsAt(tx, site.id, work);
  const refuse = (field: string, message: string): never => {
    throw new AppError('invalid', { message, fields: [{ field, message }] });
  };
  if (!times) return refuse('from', plannedWorkRefusals.giveDateAndTime);
  if (times.to <= times.from) refuse('to', plannedWorkRefusals.endAfterBeginning);
  if (times.to <= at) refuse('to', plannedWorkRefusals.overAlready);
  if (times.to.getTime() - times.from.getTime() > LONGEST_DAYS * DAY_MS)
    refuse('to', plannedWorkRefusals.tooLong(LONGEST_DAYS));
  const strings = await stringsOfSite(tx, site.id);
  const chosen = work.strings?.map((ref) => strings.find((s) => s.id === ref));
  if (chosen?.some((s) => s === undefined)) refuse('strings', plannedWorkRefusals.stringGone);
  const fresh = await addPlannedWork(tx, {
    ref: work.ref,
    siteId: site.id,
    stringIds: chosen ? chosen.flatMap((s) => (s ? [s.number] : [])) : null,
    ...times,
    reason: work.reason,
    personId: by.actor.personId,
  });
  if (!fresh) return;
  const detail = {
    work: work.ref,
    reason: work.reason,
    startsAt: times.from.toISOString(),
    endsAt: times.to.toISOString(),
    strings: chosen ? chosen.flatMap((s) => (s ? [s.name] : [])) : null,
    person: by.person,
  };
  await addPlannedWorkEvent(tx, site.id, at, detail);
  await addAuditEntry(tx, {
    organisationId: by.actor.organisationId,
    personId: by.actor.personId,
    address: by.address,
    action: 'planned_work.add',
    subject: `site ${site.ref}`,
    after: detail,
  });
  await tellSiteChanged(tx, site.id);
}

/** Ends works before their time, or takes back what has not begun. Who comes second finds them ended: nothing happens. */
export async function endWork(tx: Tx, by: By, ref: string, at: Date): Promise<void> {
  const work = found(await lockPlannedWork(tx, ref), 'planned work');
  if (work.endsAt <= at) return;
  await endPlannedWork(tx, ref, at, by.actor.personId);
  const detail = {
    work: ref,
    reason: (work.startsAt > at ? plannedWorkRefusals.takenBack : plannedWorkRefusals.endedEarly)(
      work.reason,
    ),
    startsAt: work.startsAt.toISOString(),
    endsAt: at.toISOString(),
    person: by.person,
  };
  await addPlannedWorkEvent(tx, work.siteId, at, detail);
  await addAuditEntry(tx, {
    organisationId: by.actor.organisationId,
    personId: by.actor.personId,
    address: by.address,
    action: 'planned_work.end',
    subject: `site ${work.siteRef}`,
    before: { endsAt: work.endsAt.toISOString() },
    after: detail,
  });
  await tellSiteChanged(tx, work.siteId);
}
