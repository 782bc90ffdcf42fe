import type { IncomingMessage } from 'node:http';
import type { Duplex } from 'node:stream';
import { actorOfCookie } from '../auth/sessions';
import { AppError, isDatabaseAway } from '../errors';
import { sameOriginUpgrade } from '../http/origin';
import { log } from '../log';
import { refuseUpgrade } from './refuse-upgrade';
import { liveHub } from './service';

/** The upgrade of /live: same origin and a session, before the connection stands. */
export async function handleLiveUpgrade(req: IncomingMessage, socket: Duplex, head: Buffer): Promise<void> {
  const onError = () => socket.destroy();
  socket.on('error', onError);
  try {
    if (!sameOriginUpgrade(req.headers))
      throw new AppError('forbidden', { message: 'Live data is for pages of this site only.' });
    const hub = liveHub();
    if (!hub)
      throw new AppError('unavailable', { message: 'This process serves no pages.', retryAfterS: 10 });
    const cookie = req.headers.cookie ?? '';
    const found = await actorOfCookie(cookie);
    if (!found) throw new AppError('unauthenticated', { message: 'Sign in, then reload the page.' });
    if (socket.destroyed) return;
    socket.off('error', onError);
    hub.wss.handleUpgrade(req, socket, head, (ws) => hub.accept(ws, found.actor, cookie));
  } catch (error) {
    if (!(error instanceof AppError) && !isDatabaseAway(error)) log.error({ error }, 'an upgrade failed');
    refuseUpgrade(socket, error);
  }
}
