import { mayUse, type Actor } from '../../domain/access/permissions';
import { rollCallStart } from '../../schemas/api/roll-call';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { checked } from '../http/endpoint';
import { explain } from '../http/problem';
import { startRollCall } from './start-roll-call';
import { stopRollCall } from './stop-roll-call';
import { rollCallFormWords } from '../../words/refusals-cases';

/** What was typed into the plain form and what was wrong with it. */
export interface TypedStart {
  personOnSite: string;
  fault: string;
  status: 'invalid' | 'conflict';
}

/**
 * Starts or stops a roll call by the form of a page that runs no script; null: done. What the caller can mend comes back
 * with what was typed.
 *
 * @throws AppError forbidden · not_found
 */
export async function rollCallByForm(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  form: unknown,
  address: string | null,
): Promise<TypedStart | null> {
  if (!mayUse(actor.role, 'roll_call.run'))
    throw new AppError('forbidden', { message: rollCallFormWords.whoStarts });
  const sent = (form ?? {}) as Record<string, unknown>;
  const personOnSite = typeof sent.personOnSite === 'string' ? sent.personOnSite : '';
  try {
    if (sent.action === 'stop') await stopRollCall(tx, actor, siteRef, address);
    else {
      const start = checked(rollCallStart, { personOnSite, onSite: sent.onSite === 'true' }, 'form');
      await startRollCall(tx, actor, siteRef, start, address);
    }
    return null;
  } catch (error) {
    const known = explain(error);
    if (known?.kind !== 'invalid' && known?.kind !== 'conflict') throw error;
    const fault = known.detail.fields?.map((f) => f.message).join(' ') || known.message;
    return { personOnSite, fault, status: known.kind };
  }
}
