import type { APIContext } from 'astro';
import type { Actor } from '../../domain/access/permissions';
import { AppError } from '../errors';
import type { Caller } from '../services/my-account';
import { callerRefusals } from '../../words/refusals';

/** Who calls, with the session and the place they call from. @throws AppError unauthenticated */
export function callerOf(context: APIContext, actor: Actor): Caller {
  const { viewer, sessionId } = context.locals;
  if (!viewer) throw new AppError('unauthenticated', { message: callerRefusals.signIn });
  return { actor, viewer, sessionId, address: context.clientAddress };
}
