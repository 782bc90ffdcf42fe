import type { Knex } from 'knex';
import type { Actor } from '../../domain/access/permissions';
import { database, settingsOf, type Purpose } from './pools';

export type Tx = Knex.Transaction;

/** Settings for the rest of the transaction. */
async function set(tx: Tx, settings: readonly (readonly [name: string, value: string])[]): Promise<void> {
  if (settings.length === 0) return;
  await tx.raw(
    `select ${settings.map(() => 'set_config(?, ?, true)').join(', ')}`,
    settings.flatMap(([name, value]) => [name, value]),
  );
}

/** What row-level security asks of an actor. */
export type ActorSight = Pick<Actor, 'organisationId' | 'sites'>;

/** From here on the transaction sees what the actor may see. */
const showTo = (tx: Tx, actor: ActorSight, purpose: Purpose): Promise<void> =>
  set(tx, [
    ...settingsOf(purpose),
    ['wakeline.organisation', String(actor.organisationId)],
    ['wakeline.sites', actor.sites === 'all' ? '*' : actor.sites.join(',')],
  ]);

/** Runs `work` as the actor: row-level security sees the organisation and the sites for this transaction only. */
export function asActor<T>(actor: ActorSight, work: (tx: Tx) => Promise<T>): Promise<T> {
  return database('web').transaction(async (tx) => {
    await showTo(tx, actor, 'web');
    return work(tx);
  });
}

/** Opens a transaction that only reads, at the primary or at its replica, for whoever ends it themselves. */
export async function beginReading(actor: ActorSight, purpose: 'web' | 'replica'): Promise<Tx> {
  const tx = await database(purpose).transaction({ readOnly: true });
  try {
    await showTo(tx, actor, purpose);
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
  return database('ingest').transaction(async (tx) => {
    await set(tx, settingsOf('ingest'));
    return work(tx);
  });
}

/** Runs `work` on the connections that may look up a person before anybody is signed in. */
export function asSignIn<T>(work: (tx: Tx) => Promise<T>): Promise<T> {
  return database('sign_in').transaction(work);
}
