import { createHash } from 'node:crypto';
import { RateLimiterMemory } from 'rate-limiter-flexible';
import { database } from '../db/pools';
import { AppError } from '../errors';
import { log } from '../log';
import { loggerOfToken, type KnownLogger } from '../queries/ingest-loggers';
import type { Ingest } from './service';

/** Wrong tokens: 30 from one address in a minute, then it has to wait. */
const wrongTokens = new RateLimiterMemory({ points: 30, duration: 60 });
const wait = (): AppError =>
  new AppError('too_many', { message: 'Too many wrong tokens. Wait a minute.', retryAfterS: 60 });

async function wrongToken(service: Ingest, address: string): Promise<never> {
  service.refusals.unknownToken(address);
  log.warn({ address }, 'a logger came with a token that nobody knows');
  await wrongTokens.consume(address).catch(() => {
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
  const blocked = await wrongTokens.get(address);
  if (blocked && blocked.remainingPoints <= 0) throw wait();
  if (!token) return wrongToken(service, address);
  const logger = await loggerOfToken(database('ingest'), createHash('sha256').update(token).digest());
  if (!logger) return wrongToken(service, address);
  if (!logger.ended) return logger;
  service.refused(logger.id, 'token', 'it was ended; give the logger a new one');
  throw new AppError('unauthenticated', { message: 'This token was ended. Give the logger a new one.' });
}
