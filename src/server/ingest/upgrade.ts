import { createHash } from 'node:crypto';
import type { IncomingMessage } from 'node:http';
import type { Duplex } from 'node:stream';
import { RateLimiterMemory } from 'rate-limiter-flexible';
import { config } from '../config';
import { database } from '../db/pools';
import { AppError, isDatabaseAway } from '../errors';
import { log } from '../log';
import { refuseUpgrade } from '../live/refuse-upgrade';
import { loggerOfToken, type KnownLogger } from '../queries/ingest-loggers';
import { ingest, type Ingest } from './service';
import { Session } from './session';

/** Wrong tokens: 30 from one address in a minute, then it has to wait. */
const wrongTokens = new RateLimiterMemory({ points: 30, duration: 60 });

export function addressOf(req: IncomingMessage): string {
  const forwarded = config().TRUST_PROXY ? req.headers['x-forwarded-for'] : undefined;
  const first = (Array.isArray(forwarded) ? forwarded[0] : forwarded)?.split(',')[0]?.trim();
  return first || (req.socket.remoteAddress ?? 'unknown');
}

async function wrongToken(service: Ingest, address: string): Promise<never> {
  service.refusals.unknownTokens++;
  log.warn({ address }, 'a logger came with a token that nobody knows');
  await wrongTokens.consume(address).catch(() => {
    throw new AppError('too_many', { message: 'Too many wrong tokens. Wait a minute.', retryAfterS: 60 });
  });
  throw new AppError('unauthenticated', {
    message: 'The token is not known. Send "Authorization: Bearer TOKEN" with the token of this logger.',
  });
}

async function admit(req: IncomingMessage, service: Ingest, address: string): Promise<KnownLogger> {
  const token = /^Bearer ([\x21-\x7e]{8,512})$/.exec(req.headers.authorization ?? '')?.[1];
  const blocked = await wrongTokens.get(address);
  if (blocked && blocked.remainingPoints <= 0)
    throw new AppError('too_many', { message: 'Too many wrong tokens. Wait a minute.', retryAfterS: 60 });
  if (!token) return wrongToken(service, address);
  const logger = await loggerOfToken(database('ingest'), createHash('sha256').update(token).digest());
  if (!logger) return wrongToken(service, address);
  if (!logger.ended) return logger;
  service.refused(logger.id, 'token', 'it was ended; give the logger a new one');
  throw new AppError('unauthenticated', { message: 'This token was ended. Give the logger a new one.' });
}

/** The upgrade of /ingest/v1: who may speak is settled before the connection stands. */
export async function handleIngestUpgrade(req: IncomingMessage, socket: Duplex, head: Buffer): Promise<void> {
  const onError = () => socket.destroy();
  socket.on('error', onError);
  try {
    const service = ingest();
    if (!service)
      throw new AppError('unavailable', { message: 'This process takes no readings.', retryAfterS: 10 });
    const address = addressOf(req);
    const logger = await admit(req, service, address);
    if (socket.destroyed) return;
    socket.off('error', onError);
    service.wss.handleUpgrade(req, socket, head, (ws) => {
      service.accept(new Session(ws, logger, address, service));
    });
  } catch (error) {
    if (!(error instanceof AppError) && !isDatabaseAway(error)) log.error({ error }, 'an upgrade failed');
    refuseUpgrade(socket, error);
  }
}
