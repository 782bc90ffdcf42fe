import type { z } from 'zod';
import type { Actor } from '../../domain/access/permissions';
import type { ChangedSavedView, SavedView, newSavedView } from '../../schemas/api/saved-views';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { addSavedView, changeSavedView, dropSavedView } from '../queries/saved-views';
import { savedViewRefusals } from '../../words/refusals-cases';

const taken = (name: string): AppError =>
  new AppError('conflict', {
    message: savedViewRefusals.nameTaken(name),
    fields: [{ field: 'name', message: savedViewRefusals.nameTakenShort }],
  });
/** Alike for what does not exist and what another person made: only its maker changes a view. */
const none = (): AppError => new AppError('not_found', { message: savedViewRefusals.notYours });

/** @throws AppError conflict */
export async function keepView(
  tx: Tx,
  actor: Actor,
  view: z.output<typeof newSavedView>,
): Promise<SavedView> {
  const kept = await addSavedView(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    ...view,
  });
  if (!kept) throw taken(view.name);
  return kept;
}

/** @throws AppError not_found, conflict */
export async function changeView(
  tx: Tx,
  actor: Actor,
  ref: string,
  change: ChangedSavedView,
): Promise<SavedView> {
  const changed = await changeSavedView(tx, actor.personId, ref, {
    name: change.name ?? null,
    query: change.query ?? null,
    shared: change.shared ?? null,
  });
  if (changed === undefined) throw none();
  if (changed === 'taken') throw taken(change.name ?? '');
  return changed;
}

/** @throws AppError not_found */
export async function dropView(tx: Tx, actor: Actor, ref: string): Promise<void> {
  if (!(await dropSavedView(tx, actor.personId, ref))) throw none();
}
