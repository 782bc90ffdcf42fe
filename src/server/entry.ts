// The adapter's server entry: bundled by the build together with the pages, so that everything that the server
// needs is in one module graph, once.
import {
  createServer,
  type IncomingMessage,
  type RequestListener,
  type Server,
  type ServerResponse,
} from 'node:http';
import { createExports as nodeExports } from '@astrojs/node/server.js';
import type { SSRManifest } from 'astro';
import sirv from 'sirv';
import { paths } from '../schemas/paths';
import { config } from './config';
import { ERROR_KINDS } from './errors';
import { drainedOf } from './http/drained';
import { answerHeaders, commonHeaders } from './http/headers';
import { log } from './log';
import { countRequest } from './observe/meters';
import { answerProbe } from './observe/probes';
import { currentRequest, inRequest, requestIdOf, type CurrentRequest } from './request';
import { refuseUpgrade, routeUpgrade, startRoles, stopRoles } from './roles';
import { certificateFiles, secureServer } from './tls';
import { requestRefusals } from '../words/refusals';

type Handler = (
  req: IncomingMessage,
  res: ServerResponse,
  next?: undefined,
  locals?: { drained: () => Promise<void> },
) => Promise<void>;

export interface StartOptions {
  /** The folder `dist/client`. The one baked into the build would be wrong after the build was moved. */
  client: string;
  port?: number;
  host?: string;
}
export interface Running {
  server: Server;
  scheme: 'http' | 'https';
  /** Reads the certificate's files again; null where the site speaks plain HTTP. */
  reloadCertificate: (() => void) | null;
  /** Ends in order: no new requests, loggers, browsers, jobs, database. */
  stop(): Promise<void>;
}

/** No endpoint reads more, photos included; what reads less says so itself (http/body.ts, files/spool.ts). */
const REQUEST_MAX_BYTES = 32 * 1024 * 1024;
const METHODS = ['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS'];

/** An answer without Astro: a problem document for the API, a line of text for a browser. */
function answer(req: IncomingMessage, res: ServerResponse, status: number, message: string): void {
  const api = req.url?.startsWith('/api/');
  const requestId = currentRequest()?.requestId ?? '';
  res.writeHead(status, {
    ...answerHeaders(config(), { isPage: false, development: false }),
    'content-type': api ? 'application/problem+json' : 'text/plain; charset=utf-8',
    'cache-control': 'no-store',
    'x-request-id': requestId,
    connection: 'close',
  });
  const problem = { type: 'about:blank', title: message, status, fields: [], requestId };
  res.end(api ? JSON.stringify(problem) : `${message}\n`);
}

/** What is refused before Astro sees it: it would answer these with a fault of its own. */
function refuseEarly(req: IncomingMessage, res: ServerResponse): boolean {
  const { host } = req.headers;
  if (!req.url?.startsWith('/') || !host || !URL.canParse(req.url, `http://${host}`)) {
    answer(req, res, 400, requestRefusals.addressUnreadable);
    return true;
  }
  try {
    decodeURI(req.url);
  } catch {
    answer(req, res, 400, requestRefusals.badEscape);
    return true;
  }
  if (req.url.includes('%00')) {
    answer(req, res, 400, requestRefusals.noText);
    return true;
  }
  if (!METHODS.includes(req.method ?? '')) {
    res.setHeader('allow', METHODS.join(', '));
    answer(req, res, ERROR_KINDS.not_allowed.status, requestRefusals.noSuchMethod(METHODS.join(', ')));
    return true;
  }
  if (Number(req.headers['content-length'] ?? 0) > REQUEST_MAX_BYTES) {
    answer(req, res, ERROR_KINDS.too_large.status, requestRefusals.tooLarge(REQUEST_MAX_BYTES));
    return true;
  }
  return false;
}

function dropForwarded(req: IncomingMessage): void {
  for (const name of Object.keys(req.headers))
    if (name.startsWith('x-forwarded-') || name === 'forwarded') delete req.headers[name];
}

/** Counts the answer and writes it down. Routes, not addresses: these may carry secrets. */
function noteAnswer(req: IncomingMessage, res: ServerResponse, request: CurrentRequest): void {
  const startedAtMs = performance.now();
  res.once('close', () => {
    const seconds = (performance.now() - startedAtMs) / 1000;
    const route = request.route ?? 'file';
    countRequest(route, req.method, res.statusCode, seconds);
    const ms = Math.round(seconds * 1000);
    inRequest(request, () =>
      log.info({ method: req.method, route, status: res.statusCode, ms }, 'a request was answered'),
    );
  });
}

/** A rejection that nobody handles leaves the process in a state nobody thought of: say so and end. */
function endOnUnhandled(): void {
  const end = (error: unknown): void => {
    log.fatal({ error }, 'an unhandled failure: the process ends');
    process.exit(70);
  };
  process.prependListener('unhandledRejection', end);
  process.prependListener('uncaughtException', end);
}

const listening = (server: Server, port: number, host: string): Promise<void> =>
  new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, host, () => {
      server.off('error', reject);
      resolve();
    });
  });

async function startServer(handler: Handler, options: StartOptions): Promise<Running> {
  const settings = config();
  const isWeb = settings.WAKELINE_ROLES.includes('web');
  const takesReadings = settings.WAKELINE_ROLES.includes('ingest');
  endOnUnhandled();
  const common = Object.entries(commonHeaders(settings));
  const assets = sirv(options.client, {
    gzip: true, // .gz and .br written by the build
    brotli: true,
    dotfiles: false,
    setHeaders: (res, path) => {
      for (const [name, value] of common) res.setHeader(name, value);
      if (path.startsWith('/_astro/')) res.setHeader('Cache-Control', 'public, max-age=31536000, immutable');
    },
  });
  const take: RequestListener = (req, res) => {
    if (!settings.TRUST_PROXY) dropForwarded(req); // Astro believes them from anybody
    if (refuseEarly(req, res)) return;
    const forLoggers = takesReadings && req.url?.startsWith(paths.api.v1Ingest());
    if (!isWeb && !forLoggers) return answer(req, res, 404, requestRefusals.noPagesHere);
    assets(req, res, () => void handler(req, res, undefined, { drained: drainedOf(res) })); // without `next`: unknown paths get the 404 page
  };
  const listener: RequestListener = (req, res) => {
    const probe = answerProbe(req, res);
    if (probe) {
      probe.catch((error: unknown) => {
        log.error({ error }, 'a probe failed');
        res.destroy();
      });
      return;
    }
    const request: CurrentRequest = {
      requestId: requestIdOf(req.headers['x-request-id'], settings.TRUST_PROXY),
    };
    noteAnswer(req, res, request);
    inRequest(request, () => take(req, res));
  };
  const files = certificateFiles(settings);
  const secure = files && secureServer(files, listener);
  const server: Server = secure?.server ?? createServer(listener);
  server.requestTimeout = 60_000;
  server.on('upgrade', (req, socket, head) => {
    if (!settings.TRUST_PROXY) dropForwarded(req);
    if (!routeUpgrade(req, socket, head)) refuseUpgrade(socket, '404 Not Found');
  });
  await startRoles();
  try {
    await listening(server, options.port ?? settings.PORT, options.host ?? settings.HOST);
  } catch (error) {
    await stopRoles();
    throw error;
  }
  return {
    server,
    scheme: secure ? 'https' : 'http',
    reloadCertificate: secure && secure.reload,
    stop: async () => {
      secure?.forget();
      const closed = new Promise<void>((resolve) => server.close(() => resolve()));
      server.closeIdleConnections();
      const force = setTimeout(() => server.closeAllConnections(), 3000);
      await stopRoles(); // closes the sockets, for which server.close() waits
      await closed;
      clearTimeout(force);
    },
  };
}

export function createExports(manifest: SSRManifest, options: Parameters<typeof nodeExports>[1]) {
  const base = nodeExports(manifest, options);
  const handler = base.handler as Handler;
  return { ...base, handler, startServer: (start: StartOptions) => startServer(handler, start) };
}
