import type { IncomingMessage } from 'node:http';
import type { Duplex } from 'node:stream';
import { actorOfCookie } from '../auth/sessions';
import { AppError, isDatabaseAway } from '../errors';
import { sameOriginUpgrade } from '../http/origin';
import { log } from '../log';
import { refuseUpgrade } from './refuse-upgrade';
import { liveHub } from './service';
import { liveUpgradeRefusals } from '../../words/refusals';

/** The upgrade of /live: same origin and a session, before the connection stands. */
export async function handleLiveUpgrade(req: IncomingMessage, socket: Duplex, head: Buffer): Promise<void> {
  const onError = () => socket.destroy();
  socket.on('error', onError);
  try {
    if (!sameOriginUpgrade(req.headers))
      throw new AppError('forbidden', { message: liveUpgradeRefusals.ownPagesOnly });
    const hub = liveHub();
    if (!hub)
      throw new AppError('unavailable', { message: liveUpgradeRefusals.noPagesHere, retryAfterS: 10 });
    const cookie = req.headers.cookie ?? '';
    const found = await actorOfCookie(cookie);
    if (!found) throw new AppError('unauthenticated', { message: liveUpgradeRefusals.signIn });
    if (socket.destroyed) return;
    socket.off('error', onError);
    hub.wss.handleUpgrade(req, socket, head, (ws) => hub.accept(ws, found.actor, cookie));
  } catch (error) {
    if (!(error instanceof AppError) && !isDatabaseAway(error)) log.error({ error }, 'an upgrade failed');
    refuseUpgrade(socket, error);
  }
}
