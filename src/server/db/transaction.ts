import type { Knex } from 'knex';
import type { Actor } from '../../domain/access/permissions';
import { database } from './pools';

export type Tx = Knex.Transaction;

/** From here on the transaction sees what the actor may see. */
async function showTo(tx: Tx, actor: Pick<Actor, 'organisationId' | 'sites'>): Promise<void> {
  await tx.raw(`select set_config('wakeline.organisation', ?, true), set_config('wakeline.sites', ?, true)`, [
    String(actor.organisationId),
    actor.sites === 'all' ? '*' : actor.sites.join(','),
  ]);
}

/** Runs `work` as the actor: row-level security sees the organisation and the sites for this transaction only. */
export function asActor<T>(
  actor: Pick<Actor, 'organisationId' | 'sites'>,
  work: (tx: Tx) => Promise<T>,
): Promise<T> {
  return database('web').transaction(async (tx) => {
    await showTo(tx, actor);
    return work(tx);
  });
}

/** Opens the same transaction for whoever ends it themselves: what is read piece by piece while a stream runs. */
export async function beginAsActor(actor: Pick<Actor, 'organisationId' | 'sites'>): Promise<Tx> {
  const tx = await database('web').transaction();
  try {
    await showTo(tx, actor);
  } catch (error) {
    await tx.rollback();
    throw error;
  }
  return tx;
}

/** In a sign-in transaction: from here on it writes for this organisation (its letters, its audit), and for no site. */
export async function actFor(tx: Tx, organisationId: number): Promise<void> {
  await tx.raw(
    `select set_config('wakeline.organisation', ?, true), set_config('wakeline.sites', '', true)`,
    [String(organisationId)],
  );
}

/** Runs `work` for ingest, judgement and jobs, which serve every organisation. */
export function asIngest<T>(work: (tx: Tx) => Promise<T>): Promise<T> {
  return database('ingest').transaction(work);
}

/** Runs `work` on the connections that may look up a person before anybody is signed in. */
export function asSignIn<T>(work: (tx: Tx) => Promise<T>): Promise<T> {
  return database('sign_in').transaction(work);
}
