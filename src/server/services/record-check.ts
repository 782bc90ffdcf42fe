import type { Actor } from '../../domain/access/permissions';
import { figureFaults } from '../../domain/commissioning/checks/figures';
import { checkDefinition } from '../../domain/commissioning/checks/list';
import type { CheckInput, CheckRecord } from '../../schemas/api/checks';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { lockString } from '../queries/captured-site';
import { checkByRef, checkOut, insertCheck, latestChecks, type KeptCheck } from '../queries/checks';
import { connectorTypes } from '../queries/equipment';
import { tellSiteChanged } from '../queries/live-notices';
import { visibleSite } from '../queries/visible-site';
import { canonicalJson } from '../reports/fingerprint';
import { clockFault, recordedMeanwhile, refTaken, refuseFaults } from './recorded';
import { recordCheckRefusals } from '../../words/refusals-as-built';

export interface Recorded<T> {
  record: T;
  /** False: it was here already. */
  made: boolean;
}

/**
 * Records one install check of a string. The same identifier with the same content is stored once; a record that
 * somebody else made meanwhile comes back with the refusal.
 * @throws AppError not_found · invalid (field and remedy) · conflict (`current` where somebody was first)
 */
export async function recordCheck(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  input: CheckInput,
  now: Date,
): Promise<Recorded<CheckRecord>> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const string = found(await lockString(tx, site.id, input.stringId), recordCheckRefusals.stringHere);
  const known = await checkByRef(tx, input.ref);
  if (known) {
    if (!sameCheck(known, input, actor)) throw refTaken();
    return { record: checkOut(known), made: false };
  }
  await refuseBad(tx, input, now);
  const [current] = (await latestChecks(tx, site.id, string.id)).filter((c) => c.check === input.check);
  if ((current?.ref ?? null) !== input.supersedes)
    throw recordedMeanwhile(
      recordCheckRefusals.checkOf(checkDefinition(input.check).name, string.name),
      current ? checkOut(current) : null,
    );
  const made = await insertCheck(tx, {
    siteId: site.id,
    stringId: string.id,
    personId: actor.personId,
    input,
  });
  if (!made) throw refTaken();
  await tellSiteChanged(tx, site.id);
  return { record: checkOut(made), made: true };
}

async function refuseBad(tx: Tx, input: CheckInput, now: Date): Promise<void> {
  const clock = clockFault(input.at, now);
  const takesConnectors = checkDefinition(input.check).figures.some((f) => f.kind === 'connector');
  const connectors = takesConnectors
    ? new Set((await connectorTypes(tx)).map((c) => c.id))
    : new Set<string>();
  refuseFaults([
    ...(clock ? [clock] : []),
    ...(input.result === 'not_applicable' && input.reason === ''
      ? [{ field: 'body.reason', message: recordCheckRefusals.sayWhy }]
      : []),
    ...figureFaults(input.check, input.result, input.figures, (id) => connectors.has(id)).map((f) => ({
      field: `body.figures.${f.figure}`,
      message: f.message,
    })),
  ]);
}

const content = (r: Omit<CheckInput, 'ref'>): string =>
  canonicalJson([r.stringId, r.check, r.result, r.reason, r.note, r.figures, new Date(r.at).toISOString()]);
/** What it takes the place of may differ: after a conflict the same record is sent again in place of another. */
const sameCheck = (kept: KeptCheck, input: CheckInput, actor: Actor): boolean =>
  kept.personId === actor.personId && content(kept) === content(input);
