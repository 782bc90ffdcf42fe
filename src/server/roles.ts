import type { IncomingMessage } from 'node:http';
import type { Duplex } from 'node:stream';
import { paths } from '../schemas/paths';
import { config, type ProcessRole } from './config';
import { closePools } from './db/pools';
import { startIngest, stopIngest } from './ingest/service';
import { handleIngestUpgrade } from './ingest/upgrade';
import { startWorker, stopWorker } from './jobs/worker';
import { startLive, stopLive } from './live/service';
import { handleLiveUpgrade } from './live/upgrade';
import { log } from './log';
import { startSampler, stopSampler } from './observe/sampler';
import { inRequest, requestIdOf } from './request';

/** What this process does besides serving pages, by its roles: started in this order, stopped in the reverse. */
const SERVICES: readonly { role: ProcessRole; start: () => Promise<void>; stop: () => Promise<void> }[] = [
  { role: 'web', start: startLive, stop: stopLive },
  { role: 'worker', start: startWorker, stop: stopWorker },
  { role: 'ingest', start: startIngest, stop: stopIngest },
];

export async function startRoles(): Promise<void> {
  const { WAKELINE_ROLES: roles } = config();
  for (const { role, start } of SERVICES) if (roles.includes(role)) await start();
  await startSampler();
}

/** Loggers are let go first: what they sent is committed and acknowledged, or they keep it. */
export async function stopRoles(): Promise<void> {
  const { WAKELINE_ROLES: roles } = config();
  await stopSampler();
  for (const { role, stop } of [...SERVICES].reverse())
    if (roles.includes(role))
      await stop().catch((error: unknown) => log.error({ error, role }, 'a part did not stop in order'));
  await closePools();
}

/** Ends a socket that asked for an upgrade we do not give. */
export function refuseUpgrade(socket: Duplex, line: string): void {
  socket.end(`HTTP/1.1 ${line}\r\nConnection: close\r\nContent-Length: 0\r\n\r\n`);
}

/** The path of a request target, or undefined where it is none. */
const pathOf = (target: string | undefined): string | undefined =>
  target?.startsWith('/') && URL.canParse(target, 'http://localhost')
    ? new URL(target, 'http://localhost').pathname
    : undefined;

/** @returns false where the path is none of ours */
export function routeUpgrade(req: IncomingMessage, socket: Duplex, head: Buffer): boolean {
  const { WAKELINE_ROLES: roles } = config();
  const path = pathOf(req.url);
  const handle =
    path === paths.ingest() && roles.includes('ingest')
      ? handleIngestUpgrade
      : path === paths.live() && roles.includes('web')
        ? handleLiveUpgrade
        : undefined;
  if (!handle) return false;
  const drop = (): void => void socket.destroy();
  socket.on('error', drop);
  const requestId = requestIdOf(req.headers['x-request-id'], config().TRUST_PROXY);
  void inRequest({ requestId }, () =>
    Promise.resolve(handle(req, socket, head)).catch((error: unknown) => {
      log.error({ error, path }, 'an upgrade failed');
      if (socket.writable) refuseUpgrade(socket, '503 Service Unavailable');
      else socket.destroy();
    }),
  );
  return true;
}
