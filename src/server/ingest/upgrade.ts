import type { IncomingMessage } from 'node:http';
import type { Duplex } from 'node:stream';
import { config } from '../config';
import { AppError, isDatabaseAway } from '../errors';
import { log } from '../log';
import { refuseUpgrade } from '../live/refuse-upgrade';
import { admit } from './admit';
import { ingest } from './service';
import { Session } from './session';

export function addressOf(req: IncomingMessage): string {
  const forwarded = config().TRUST_PROXY ? req.headers['x-forwarded-for'] : undefined;
  const first = (Array.isArray(forwarded) ? forwarded[0] : forwarded)?.split(',')[0]?.trim();
  return first || (req.socket.remoteAddress ?? 'unknown');
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
    const logger = await admit(req.headers.authorization, service, address);
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
