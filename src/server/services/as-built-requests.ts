import type { z } from 'zod';
import type { Actor } from '../../domain/access/permissions';
import { countUp } from '../../domain/commissioning/as-built/count-up';
import type { AsBuilt, PartAdded, partAdd, PartValues, placementsBody } from '../../schemas/api/as-built';
import { namedOptions } from '../../schemas/as-built-values';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { asBuiltParts } from '../queries/as-built';
import { visibleSite } from '../queries/visible-site';
import { addPart } from './edit-as-built';
import { addStrings, setSlotFacts } from './edit-as-built-strings';
import { makeLoggerToken, newToken } from './logger-token';
import { placeUnits, type Placed } from './place-units';
import { asBuiltRequestRefusals } from '../../words/refusals-as-built';

/** What the as-built's forms ask for, put together from the services. */

/** @throws AppError not_found */
export async function asBuiltPage(tx: Tx, siteRef: string, at: Date): Promise<AsBuilt> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return { at: at.toISOString(), ...found(await asBuiltParts(tx, site.id), 'site') };
}

/**
 * Adds a part, or several strings alike. A new logger gets its token with it.
 * @throws AppError as addPart and addStrings do, with fields `values.KEY`
 */
export async function addFromForm(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  add: z.output<typeof partAdd>,
  address: string | null,
): Promise<PartAdded> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const how = { reason: add.reason, source: 'forms', address };
  if (add.kind === 'string') {
    const names = countUp(String(add.values.name ?? '').trim(), add.alike);
    const inputs = add.inTurn ? await inputsFrom(tx, site.id, add.values.input, add.alike) : [];
    const made = await addStrings(
      tx,
      actor,
      site.id,
      names.map((name, n) => ({ ...add.values, name, ...(inputs[n] !== undefined && { input: inputs[n] }) })),
      how,
      () => 'values.',
    );
    return { ids: made.map((m) => m.ref), token: null };
  }
  const { kind, values } = add;
  const made = await addPart(tx, actor, site.id, { kind, values }, how);
  if (kind !== 'logger') return { ids: [made.ref], token: null };
  const token = newToken();
  await makeLoggerToken(tx, actor, site.id, made.ref, how, { token });
  return { ids: [made.ref], token };
}

/** So many inputs of the site from one on, in the order of the lists. */
async function inputsFrom(
  tx: Tx,
  siteId: number,
  first: PartValues[string] | undefined,
  count: number,
): Promise<string[]> {
  const all = namedOptions(found(await asBuiltParts(tx, siteId), 'site'), 'input').map((i) => i.id);
  const from = all.indexOf(String(first ?? ''));
  if (from < 0) return []; // the check of the string says so
  const inputs = all.slice(from, from + count);
  if (inputs.length < count) {
    const message = asBuiltRequestRefusals.tooFewInputs(inputs.length, count);
    throw new AppError('invalid', { message, fields: [{ field: 'values.input', message }] });
  }
  return inputs;
}

/**
 * Units into slots and what is written down of the slots, in one transaction.
 * @throws AppError as placeUnits and setSlotFacts do
 */
export async function saveSlots(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  body: z.output<typeof placementsBody>,
  at: Date,
  address: string | null,
): Promise<Placed> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const { reason, source } = body;
  const placed = await placeUnits(tx, actor, site.id, body.changes, {
    at: body.at === undefined ? at : new Date(body.at),
    reason,
    source,
    move: body.move,
    retype: body.retype,
    address,
  });
  await setSlotFacts(tx, actor, site.id, body.slots, { reason, source, address });
  return placed;
}
