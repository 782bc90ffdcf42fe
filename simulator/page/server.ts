import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { z } from 'zod';
import type { Simulator } from '../engine';
import { fault } from '../faults/kinds';
import { PAGE_SCRIPT } from './script';
import { PAGE_STYLE } from './style';
import { sitePage, startPageHtml } from './html';

export interface Page {
  url: string;
  close: () => Promise<void>;
}

const BODY_MAX = 64 * 1024;

class Refusal extends Error {
  constructor(
    readonly status: number,
    message: string,
    readonly field?: string,
  ) {
    super(message);
  }
}

/** The plant's switches: a page of the simulator's own, on this computer only. */
export async function startPage(simulator: Simulator, port: number): Promise<Page> {
  const server = createServer((req, res) => {
    answer(simulator, req, res).catch((error: unknown) => {
      const refusal = error instanceof Refusal ? error : null;
      json(res, refusal?.status ?? 500, {
        title: refusal?.message ?? 'The simulator failed.',
        ...(refusal?.field ? { field: refusal.field } : {}),
      });
      if (!refusal) process.stderr.write(`${error instanceof Error ? (error.stack ?? '') : String(error)}\n`);
    });
  });
  await new Promise<void>((done, fail) => {
    server.once('error', fail);
    server.listen(port, '127.0.0.1', done);
  });
  const { port: bound } = server.address() as AddressInfo;
  return {
    url: `http://127.0.0.1:${bound}/`,
    close: () =>
      new Promise((done) => {
        server.close(() => done());
        server.closeAllConnections();
      }),
  };
}

function send(res: ServerResponse, status: number, type: string, body: string): void {
  res.writeHead(status, {
    'content-type': `${type}; charset=utf-8`,
    'cache-control': 'no-store',
    'x-content-type-options': 'nosniff',
    'x-frame-options': 'DENY',
    'content-security-policy':
      "default-src 'none'; style-src 'self'; script-src 'self'; connect-src 'self'; form-action 'none'",
  });
  res.end(body);
}

const json = (res: ServerResponse, status: number, value: unknown) =>
  send(res, status, 'application/json', JSON.stringify(value));

/** Only this page, or a program that is no browser, may work the switches. */
function checkOrigin(req: IncomingMessage): void {
  const host = req.headers.host ?? '';
  if (!/^(127\.0\.0\.1|localhost|\[::1\])(:\d+)?$/.test(host))
    throw new Refusal(403, 'This page answers on this computer only.');
  if (req.method === 'GET' || req.method === 'HEAD') return;
  const { origin } = req.headers;
  if (origin !== undefined && origin !== `http://${host}`)
    throw new Refusal(403, 'Another page may not work the plant’s switches.');
  const fetchSite = req.headers['sec-fetch-site'];
  if (fetchSite !== undefined && fetchSite !== 'same-origin' && fetchSite !== 'none')
    throw new Refusal(403, 'Another page may not work the plant’s switches.');
}

async function readBody(req: IncomingMessage): Promise<unknown> {
  if (!/^application\/json\b/i.test(req.headers['content-type'] ?? ''))
    throw new Refusal(415, 'Send JSON (content-type: application/json).');
  let text = '';
  for await (const chunk of req.setEncoding('utf8')) {
    text += String(chunk);
    if (text.length > BODY_MAX) throw new Refusal(413, `Send no more than ${BODY_MAX} characters.`);
  }
  try {
    return JSON.parse(text);
  } catch {
    throw new Refusal(400, 'The body is not JSON.');
  }
}

function parsed<T>(schema: z.ZodType<T>, value: unknown): T {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  const issue = result.error.issues[0];
  throw new Refusal(422, issue?.message ?? 'The body does not fit.', issue?.path.join('.') ?? '');
}

async function answer(simulator: Simulator, req: IncomingMessage, res: ServerResponse): Promise<void> {
  checkOrigin(req);
  const parts = new URL(req.url ?? '/', 'http://localhost').pathname.split('/').filter(Boolean).map(decode);
  const [first, second, third, fourth, fifth] = parts;
  if (req.method === 'GET') {
    if (parts.length === 0) return send(res, 200, 'text/html', startPageHtml(simulator));
    if (first === 'style.css' && parts.length === 1) return send(res, 200, 'text/css', PAGE_STYLE);
    if (first === 'script.js' && parts.length === 1) return send(res, 200, 'text/javascript', PAGE_SCRIPT);
    if (first === 'sites' && parts.length === 2)
      return send(res, 200, 'text/html', sitePage(simulator, known(simulator, second)));
    if (first === 'api' && second === 'sites' && parts.length === 2)
      return json(res, 200, {
        sites: simulator.runs.map((r) => ({ key: r.plan.key, name: r.plan.name, place: r.plan.place })),
      });
    if (first === 'api' && second === 'truth' && parts.length === 3)
      return json(res, 200, simulator.truth(known(simulator, third)));
  }
  if (first === 'api' && second === 'sites' && third !== undefined) {
    const site = known(simulator, third);
    if (req.method === 'POST' && fourth === 'initiators' && parts.length === 5) {
      const { open } = parsed(z.strictObject({ open: z.boolean() }), await readBody(req));
      if (!simulator.setInitiator(site, fifth ?? '', open))
        throw new Refusal(404, `${site} has no initiator "${fifth ?? ''}".`);
      return json(res, 200, { initiator: fifth, open });
    }
    if (req.method === 'POST' && fourth === 'faults' && parts.length === 4)
      return json(res, 201, { id: inject(simulator, site, await readBody(req)) });
    if (req.method === 'DELETE' && fourth === 'faults' && parts.length === 5) {
      if (!simulator.clear(site, fifth ?? ''))
        throw new Refusal(404, `No fault "${fifth ?? ''}" is in force.`);
      return json(res, 200, { cleared: fifth });
    }
  }
  throw new Refusal(404, 'There is nothing here.');
}

function decode(part: string): string {
  try {
    return decodeURIComponent(part);
  } catch {
    throw new Refusal(400, 'The address is not readable.');
  }
}

function known(simulator: Simulator, name: string | undefined): string {
  const run = simulator.site(name ?? '');
  if (!run) throw new Refusal(404, `There is no site "${name ?? ''}".`);
  return run.plan.key;
}

/** A fault whose places are there; which of them is not is said. */
function inject(simulator: Simulator, key: string, body: unknown): string {
  const wanted = parsed(fault, body);
  const plant = simulator.site(key)?.plant;
  if (!plant) throw new Refusal(404, 'There is no such site.');
  const string = (name: string, field: string) => {
    const found = plant.byName.get(name);
    if (!found) throw new Refusal(422, `There is no string "${name}".`, field);
    return found;
  };
  if ('string' in wanted) {
    const s = string(wanted.string, 'string');
    if ('position' in wanted && wanted.position > s.size)
      throw new Refusal(422, `${wanted.string} has ${s.size} positions.`, 'position');
  }
  if ('otherString' in wanted && wanted.otherPosition > string(wanted.otherString, 'otherString').size)
    throw new Refusal(422, `${wanted.otherString} has fewer positions.`, 'otherPosition');
  if ('strings' in wanted) for (const name of wanted.strings) string(name, 'strings');
  const has = (field: string, name: string, names: readonly string[]) => {
    if (!names.includes(name)) throw new Refusal(422, `The site has no ${field} "${name}".`, field);
  };
  const { plan } = plant;
  if ('transmitter' in wanted)
    has(
      'transmitter',
      wanted.transmitter,
      plan.transmitters.map((t) => t.name),
    );
  if ('zone' in wanted)
    has(
      'zone',
      wanted.zone,
      plan.zones.map((z) => z.name),
    );
  if ('inverter' in wanted)
    has(
      'inverter',
      wanted.inverter,
      plan.inverters.map((i) => i.name),
    );
  if ('logger' in wanted)
    has(
      'logger',
      wanted.logger,
      plan.loggers.map((l) => l.serial),
    );
  return simulator.inject(key, wanted);
}
