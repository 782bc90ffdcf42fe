import type { Actor } from '../../domain/access/permissions';
import { AppError } from '../errors';
import { holderOf, type TokenHolder } from '../queries/api-tokens';
import { takeWrongToken } from './limits';
import { API_TOKEN_PATTERN, tokenHash } from './secret-link';
import { bearerRefusals } from '../../words/refusals';

const refused = (message: string): AppError => new AppError('unauthenticated', { message });
const minuteOf = (at: Date): string => `${at.toISOString().slice(0, 16).replace('T', ' ')} UTC`;

/**
 * The token of an Authorization header with whose it is. An end, an expiry or a deactivated person count at once.
 * @throws AppError unauthenticated (what is wrong with it and what to do) · too_many (wrong ones from this address)
 */
export async function holderOfBearer(
  authorization: string | null,
  address: string,
  at: Date,
): Promise<TokenHolder> {
  if (authorization === null) throw refused(bearerRefusals.sendToken);
  const token = /^Bearer +(\S+)$/i.exec(authorization.trim())?.[1];
  const holder =
    token && API_TOKEN_PATTERN.test(token) ? await holderOf(tokenHash(token), address) : undefined;
  if (!holder) {
    await takeWrongToken(address);
    throw refused(bearerRefusals.unknownToken);
  }
  if (holder.endedAt) throw refused(bearerRefusals.tokenEnded(minuteOf(holder.endedAt)));
  if (holder.expiresAt <= at) throw refused(bearerRefusals.tokenRanOut(minuteOf(holder.expiresAt)));
  if (!holder.active) throw refused(bearerRefusals.personGone);
  return holder;
}

/** What a token's person may see, held to the sites that the token names. */
export function actorOfToken(holder: TokenHolder): Actor {
  const { sites, role, personSites } = holder;
  const own = role === 'customer' ? personSites : 'all';
  return {
    personId: holder.personId,
    organisationId: holder.organisationId,
    role,
    sites: sites === null ? own : own === 'all' ? sites : own.filter((id) => sites.includes(id)),
  };
}
