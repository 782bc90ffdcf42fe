import { timingSafeEqual } from 'node:crypto';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { setTimeout as sleep } from 'node:timers/promises';
import knexFactory from 'knex';
import pg from 'pg';
import { paths } from '../../schemas/paths';
import { config, type Config } from '../config';
import { database } from '../db/pools';
import { commonHeaders } from '../http/headers';
import { ingest } from '../ingest/service';
import { worksJobs } from '../jobs/worker';
import { liveHub } from '../live/service';
import { thisProcess } from '../process';
import { migrationsDone } from '../queries/process-samples';
import { setLevels } from './figures';
import { meters } from './meters';
import { migrationsKnown } from './migrations-known';

/**
 * What a supervisor, a proxy and a collector of figures ask each process, whatever its roles: before the router, without
 * a session, and never through the pages.
 */

const DATABASE_WITHIN_MS = 2000;
const NO_ANSWER = `database: no answer within ${DATABASE_WITHIN_MS / 1000} s`;
/** SQLSTATE: a lock's limit, a statement's. */
const GAVE_UP: ReadonlySet<string> = new Set(['55P03', '57014']);
/** SQLSTATE: connection lost; the server stops, starts, takes no connections. */
const GOES_AWAY = /^(08|57P)/;
/** Whoever asks more often gets the same answer: nobody can load the database by asking. */
const READY_FRESH_MS = 1000;
const PROXY_HEADERS = ['forwarded', 'x-forwarded-for', 'x-forwarded-host', 'x-real-ip', 'via'];
const LOOPBACK = /^(127\.\d+\.\d+\.\d+|::1|::ffff:127\.\d+\.\d+\.\d+)$/;

/** Why this process should be given no work; empty: nothing stands against it. */
export async function notReady(): Promise<string[]> {
  const { WAKELINE_ROLES: roles } = config();
  const reasons: string[] = [];
  const taking = ingest();
  const hub = liveHub();
  if (roles.includes('ingest') && !taking) reasons.push('ingest: does not run');
  else if (taking && !taking.figures().listening) reasons.push('ingest: hears no notices of the database');
  if (roles.includes('web') && !hub) reasons.push('web: live updates do not run');
  else if (hub && !hub.hears) reasons.push('web: hears no notices of the database');
  if (roles.includes('worker') && !worksJobs()) reasons.push('worker: does no jobs');
  return [...(await databaseReasons()), ...reasons];
}

/**
 * What an error says of the database: one that gave up waiting (limits of ours that are longer than the probe's, told
 * first where this process comes late to its clock) is there, as is one that answers with an error.
 */
export function databaseReason(error: unknown): string {
  if (error instanceof knexFactory.KnexTimeoutError) return NO_ANSWER;
  if (!(error instanceof pg.DatabaseError) || GOES_AWAY.test(error.code ?? ''))
    return 'database: not reachable';
  return GAVE_UP.has(error.code ?? '') ? NO_ANSWER : `database: answers with error ${error.code}`;
}

async function databaseReasons(): Promise<string[]> {
  const cut = new AbortController();
  try {
    const late = sleep(DATABASE_WITHIN_MS, null, { signal: cut.signal });
    late.catch(() => undefined); // cut short when the answer came in time
    const done = await Promise.race([migrationsDone(database('ingest')), late]);
    if (done === null) return [NO_ANSWER];
    const has = new Set(done);
    const missing = migrationsKnown().filter((name) => !has.has(name));
    return missing.length === 0
      ? []
      : [`database: ${missing.length} migrations are missing, the first is ${missing[0]}`];
  } catch (error) {
    return [databaseReason(error)];
  } finally {
    cut.abort();
  }
}

let ready: { atMs: number; reasons: Promise<string[]> } | undefined;
function readyNow(): Promise<string[]> {
  const nowMs = performance.now();
  if (!ready || nowMs - ready.atMs > READY_FRESH_MS) ready = { atMs: nowMs, reasons: notReady() };
  return ready.reasons;
}

/** Whether the figures are for this asker: null yes, else the status to refuse with. */
export function refusesMetrics(
  req: Pick<IncomingMessage, 'headers' | 'socket'>,
  { METRICS_TOKEN: token }: Pick<Config, 'METRICS_TOKEN'>,
): 401 | 403 | null {
  if (token !== undefined) {
    const given = Buffer.from(/^Bearer +(\S+)$/i.exec(req.headers.authorization?.trim() ?? '')?.[1] ?? '');
    const wanted = Buffer.from(token);
    return given.length === wanted.length && timingSafeEqual(given, wanted) ? null : 401;
  }
  // a proxy on this machine asks from loopback for whoever asks it
  if (PROXY_HEADERS.some((name) => req.headers[name] !== undefined)) return 403;
  return LOOPBACK.test(req.socket.remoteAddress ?? '') ? null : 403;
}

function send(res: ServerResponse, status: number, type: string, text: string): void {
  res.writeHead(status, {
    ...commonHeaders(config()),
    'content-type': type,
    'cache-control': 'no-store',
    ...(status === 401 ? { 'www-authenticate': 'Bearer' } : {}),
  });
  res.end(text);
}
const sendJson = (res: ServerResponse, status: number, value: unknown): void =>
  send(res, status, 'application/json', `${JSON.stringify(value)}\n`);

async function metrics(req: IncomingMessage, res: ServerResponse): Promise<void> {
  const refused = refusesMetrics(req, config());
  if (refused === 401)
    return send(
      res,
      401,
      'text/plain; charset=utf-8',
      'Send the token of METRICS_TOKEN as a bearer token.\n',
    );
  if (refused === 403)
    return send(
      res,
      403,
      'text/plain; charset=utf-8',
      'Figures are for this machine alone. Set METRICS_TOKEN to read them from elsewhere.\n',
    );
  setLevels();
  const { registry } = meters();
  send(res, 200, registry.contentType, await registry.metrics());
}

const PROBES: Record<string, (req: IncomingMessage, res: ServerResponse) => Promise<void> | void> = {
  [paths.probes.alive()]: (_req, res) => {
    const { id, pid, startedAt } = thisProcess();
    sendJson(res, 200, { alive: true, process: id, pid, startedAt: startedAt.toISOString() });
  },
  [paths.probes.ready()]: async (_req, res) => {
    const reasons = await readyNow();
    sendJson(res, reasons.length === 0 ? 200 : 503, { ready: reasons.length === 0, reasons });
  },
  [paths.probes.metrics()]: metrics,
};

/** @returns the answer being given, or undefined where the address is none of these */
export function answerProbe(req: IncomingMessage, res: ServerResponse): Promise<void> | undefined {
  const path = req.url?.split('?', 1)[0] ?? '';
  const probe = Object.hasOwn(PROBES, path) ? PROBES[path] : undefined;
  if (!probe) return undefined;
  if (req.method !== 'GET' && req.method !== 'HEAD') {
    res.writeHead(405, { ...commonHeaders(config()), allow: 'GET, HEAD' }).end();
    return Promise.resolve();
  }
  return Promise.resolve(probe(req, res));
}
