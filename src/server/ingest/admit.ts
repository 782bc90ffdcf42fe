import { createHash } from 'node:crypto';
import { RateLimiterMemory } from 'rate-limiter-flexible';
import { database } from '../db/pools';
import { AppError } from '../errors';
import { log } from '../log';
import { loggerOfToken, type KnownLogger } from '../queries/ingest-loggers';
import type { Ingest } from './service';

/**
 * Wrong tokens: 30 different ones from one address in a minute, then it has to wait. The same one again is no guess: it
 * waits by itself after 30 times, and holds up nobody else behind the same address.
 */
const wrongTokens = new RateLimiterMemory({ points: 30, duration: 60 });
const sameTokens = new RateLimiterMemory({ points: 30, duration: 60 });
const spent = async (limiter: RateLimiterMemory, key: string): Promise<boolean> =>
  ((await limiter.get(key))?.remainingPoints ?? 1) <= 0;
const wait = (): AppError =>
  new AppError('too_many', { message: 'Too many wrong tokens. Wait a minute.', retryAfterS: 60 });

async function wrongToken(service: Ingest, address: string, same: string): Promise<never> {
  service.refusals.unknownToken(address);
  log.warn({ address }, 'a logger came with a token that nobody knows');
  const isNew = (await sameTokens.get(same)) === null;
  const counted = [sameTokens.consume(same), ...(isNew ? [wrongTokens.consume(address)] : [])];
  await Promise.all(counted).catch(() => {
    throw wait();
  });
  throw new AppError('unauthenticated', {
    message: 'The token is not known. Send "Authorization: Bearer TOKEN" with the token of this logger.',
  });
}

/**
 * The logger that speaks, by the token in its Authorization header.
 * @throws AppError unauthenticated · too_many (wrong tokens from this address)
 */
export async function admit(
  authorization: string | null | undefined,
  service: Ingest,
  address: string,
): Promise<KnownLogger> {
  const token = /^Bearer ([\x21-\x7e]{8,512})$/.exec(authorization ?? '')?.[1];
  const hash = createHash('sha256')
    .update(token ?? '')
    .digest();
  const same = `${address} ${hash.toString('hex')}`;
  if ((await spent(wrongTokens, address)) || (await spent(sameTokens, same))) throw wait();
  const logger = token === undefined ? undefined : await loggerOfToken(database('ingest'), hash);
  if (!logger) return wrongToken(service, address, same);
  if (!logger.ended) return logger;
  service.refused(logger.id, 'token', 'it was ended; give the logger a new one');
  throw new AppError('unauthenticated', { message: 'This token was ended. Give the logger a new one.' });
}
