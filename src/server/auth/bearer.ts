import type { Actor } from '../../domain/access/permissions';
import { AppError } from '../errors';
import { holderOf, type TokenHolder } from '../queries/api-tokens';
import { takeWrongToken } from './limits';
import { API_TOKEN_PATTERN, tokenHash } from './secret-link';

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
  if (authorization === null)
    throw refused('Send a token: Authorization: Bearer TOKEN. Tokens are made on the account page.');
  const token = /^Bearer +(\S+)$/i.exec(authorization.trim())?.[1];
  const holder =
    token && API_TOKEN_PATTERN.test(token) ? await holderOf(tokenHash(token), address) : undefined;
  if (!holder) {
    await takeWrongToken(address);
    throw refused('Nobody knows this token. Check that all of it was sent, as Authorization: Bearer TOKEN.');
  }
  if (holder.endedAt) throw refused(`This token was ended at ${minuteOf(holder.endedAt)}. Make a new one.`);
  if (holder.expiresAt <= at)
    throw refused(`This token ran out at ${minuteOf(holder.expiresAt)}. Make a new one on the account page.`);
  if (!holder.active) throw refused('The person whose token this is can’t sign in any more.');
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
