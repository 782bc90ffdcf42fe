import type { Actor } from '../../domain/access/permissions';
import { faultOfAct, recordOf } from '../../domain/commissioning/shutdown-test-record';
import type { SentAct, StartTest } from '../../schemas/api/shutdown-test';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import {
  actsOf,
  addAct,
  closeDraft,
  knownActs,
  openDraft,
  signedTest,
  shutdownTestStanding,
  testHead,
  type TestHead,
} from '../queries/shutdown-tests';
import { zoneOf } from '../queries/shutdown-test-evidence';
import { visibleSite } from '../queries/visible-site';
import { testWriteRefusals } from '../../words/refusals-cases';

/** A phone's clock, corrected by the server's, may run ahead by so much, milliseconds. */
const AHEAD_MS = 120_000;

const audit = (
  tx: Tx,
  actor: Actor,
  head: TestHead,
  action: string,
  address: string | null,
  after?: object,
) =>
  addAuditEntry(tx, {
    organisationId: head.organisationId,
    personId: actor.personId,
    address,
    action,
    subject: `shutdown test ${head.ref}`,
    after,
  });

/**
 * Starts a test of a zone; Wakeline itself never switches anything.
 * @throws AppError not_found · conflict (the zone has one under way, naming who started it and where it is)
 */
export async function startShutdownTest(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  start: StartTest,
  address: string | null,
): Promise<{ id: string }> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const zone = found(await zoneOf(tx, site.id, start.zone), 'zone');
  const follows = start.follows ? found(await signedTest(tx, { ref: start.follows }), 'signed test') : null;
  const ref = await openDraft(tx, {
    siteId: site.id,
    zoneId: zone.id,
    personId: actor.personId,
    followsId: follows?.id ?? null,
  });
  if (ref === undefined) {
    const open = (await shutdownTestStanding(tx, site.id)).find((z) => z.zone.id === start.zone)?.draft;
    throw new AppError('conflict', {
      message: testWriteRefusals.underWay(zone.name, open ? open.startedBy : null),
      ...(open ? { fields: [{ field: 'open', message: open.ref }] } : {}),
    });
  }
  const head = found(await testHead(tx, ref), testWriteRefusals.test);
  await audit(tx, actor, head, 'shutdown_test.start', address, {
    zone: zone.name,
    follows: follows?.ref ?? null,
  });
  await tellSiteChanged(tx, site.id);
  return { id: ref };
}

/** The draft, locked, if it can still be written to. */
export async function openHead(tx: Tx, ref: string): Promise<TestHead> {
  const head = found(await testHead(tx, ref, true), testWriteRefusals.test);
  if (head.signedId !== null)
    throw new AppError('conflict', {
      message: testWriteRefusals.signedStays,
    });
  if (head.closedAt !== null)
    throw new AppError('conflict', {
      message: testWriteRefusals.ended(head.closedBy ?? '', head.closeReason ?? ''),
    });
  return head;
}

/**
 * Writes what people did, in the order given. Acts that are stored already are passed by, so that a phone may send
 * them again. All or nothing.
 * @throws AppError not_found · invalid (field `acts.N`) · conflict (signed or ended)
 */
export async function addActs(
  tx: Tx,
  actor: Actor,
  ref: string,
  sent: readonly SentAct[],
  now: Date,
): Promise<void> {
  const head = await openHead(tx, ref);
  const known = await knownActs(
    tx,
    sent.map((a) => a.id),
  );
  const acts = await actsOf(tx, head.draftId);
  let wrote = false;
  for (const [i, one] of sent.entries()) {
    if (known.has(one.id)) continue;
    if (Date.parse(one.at) > now.getTime() + AHEAD_MS)
      throw new AppError('invalid', {
        message: testWriteRefusals.entryAhead(i + 1),
        fields: [{ field: `acts.${i}.at`, message: testWriteRefusals.inTheFuture }],
      });
    const fault = faultOfAct(recordOf(acts), one.act);
    if (fault)
      throw new AppError('invalid', { message: fault, fields: [{ field: `acts.${i}`, message: fault }] });
    await addAct(tx, { draftId: head.draftId, siteId: head.siteId, personId: actor.personId }, one);
    acts.push({ id: one.id, at: one.at, recordedAt: now.toISOString(), person: '', act: one.act });
    wrote = true;
  }
  if (wrote) await tellSiteChanged(tx, head.siteId);
}

/**
 * Ends a test without a signature; what was written stays readable.
 * @throws AppError not_found · conflict
 */
export async function endShutdownTest(
  tx: Tx,
  actor: Actor,
  ref: string,
  reason: string,
  address: string | null,
): Promise<void> {
  const head = await openHead(tx, ref);
  await closeDraft(tx, head.draftId, actor.personId, reason);
  await audit(tx, actor, head, 'shutdown_test.end', address, { reason });
  await tellSiteChanged(tx, head.siteId);
}
