import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { WebSocket } from 'ws';
import type { UnitType } from '../../src/domain/equipment/unit-type';
import type { Frame, Roster, ServerMessage } from '../../src/schemas/ingest';
import { paths } from '../../src/schemas/paths';
import { handleIngestUpgrade } from '../../src/server/ingest/upgrade';
import { handleLiveUpgrade } from '../../src/server/live/upgrade';

/** The two WebSockets of the server on a port of their own, and a logger that speaks to one of them. */

export interface Sockets {
  /** ws://… without a path. */
  url: string;
  close(): Promise<void>;
}

export async function openSockets(): Promise<Sockets> {
  const server: Server = createServer();
  server.on('upgrade', (req, socket, head) => {
    const path = new URL(req.url ?? '/', 'http://here').pathname;
    if (path === paths.ingest()) void handleIngestUpgrade(req, socket, head);
    else if (path === paths.live()) void handleLiveUpgrade(req, socket, head);
    else socket.destroy();
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const { port } = server.address() as AddressInfo;
  return {
    url: `ws://127.0.0.1:${port}`,
    close: () =>
      new Promise((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

export const nowS = (): number => Math.floor(Date.now() / 1000);

/** Messages of a socket as they come, to be waited for one by one. */
export class Inbox<M extends { type: string }> {
  readonly all: M[] = [];
  private readonly waiting: { test: (m: M) => boolean; resolve: (m: M) => void }[] = [];
  private read = new Set<M>();

  constructor(readonly ws: WebSocket) {
    ws.on('message', (data) => {
      const message = JSON.parse(String(data)) as M;
      this.all.push(message);
      const i = this.waiting.findIndex((w) => w.test(message));
      if (i >= 0) {
        this.read.add(message);
        this.waiting.splice(i, 1)[0]?.resolve(message);
      }
    });
  }

  /** The next message of this type that was not waited for before. */
  next<T extends M['type']>(
    type: T,
    also: (m: Extract<M, { type: T }>) => boolean = () => true,
    withinMs = 30_000,
  ): Promise<Extract<M, { type: T }>> {
    type Wanted = Extract<M, { type: T }>;
    const test = (m: M) => m.type === type && also(m as Wanted);
    const old = this.all.find((m) => !this.read.has(m) && test(m));
    if (old) {
      this.read.add(old);
      return Promise.resolve(old as Wanted);
    }
    return new Promise((resolve, reject) => {
      const timer = setTimeout(
        () =>
          reject(new Error(`no "${type}" came in ${withinMs} ms; last: ${JSON.stringify(this.all.at(-1))}`)),
        withinMs,
      );
      this.waiting.push({
        test,
        resolve: (m) => {
          clearTimeout(timer);
          resolve(m as Wanted);
        },
      });
    });
  }
}

export const closed = (ws: WebSocket): Promise<{ code: number; reason: string }> =>
  new Promise((resolve) => ws.once('close', (code, reason) => resolve({ code, reason: String(reason) })));

export class TestLogger {
  readonly inbox: Inbox<ServerMessage>;
  readonly closed: Promise<{ code: number; reason: string }>;
  seq = 0;
  roster!: Roster;

  private constructor(readonly ws: WebSocket) {
    this.inbox = new Inbox(ws);
    this.closed = closed(ws);
  }

  /** Opens the connection; throws with the HTTP status where it is refused. */
  static async connect(sockets: Sockets, token: string): Promise<TestLogger> {
    const ws = new WebSocket(`${sockets.url}${paths.ingest()}`, {
      headers: { authorization: `Bearer ${token}` },
    });
    const logger = new TestLogger(ws);
    await new Promise<void>((resolve, reject) => {
      ws.once('open', resolve);
      ws.once('unexpected-response', (_req, res) => reject(new Error(`HTTP ${res.statusCode}`)));
      ws.once('error', reject);
    });
    return logger;
  }

  /** Connects, says hello and waits for the roster. */
  static async arrive(sockets: Sockets, token: string, serial: string): Promise<TestLogger> {
    const logger = await TestLogger.connect(sockets, token);
    logger.hello(serial);
    logger.roster = await logger.inbox.next('roster');
    return logger;
  }

  hello(serial: string, more: object = {}): void {
    this.send({ type: 'hello', protocol: 1, logger: serial, firmware: 'test 1', clock: nowS(), ...more });
  }

  send(message: object): void {
    this.ws.send(JSON.stringify(message));
  }

  /** Sends a report under the next number, and gives the number. */
  report(message: object): number {
    this.seq += 1;
    this.send({ ...message, seq: this.seq });
    return this.seq;
  }

  /** Sends a report and waits until it is durable. */
  async durable(message: object): Promise<void> {
    const seq = this.report(message);
    await this.inbox.next('ack', (m) => m.seq === seq);
  }

  /** Sends a report and waits for its refusal. */
  async refused(message: object): Promise<Extract<ServerMessage, { type: 'refused' }>> {
    const seq = this.report(message);
    return this.inbox.next('refused', (m) => m.seq === seq);
  }

  frames(
    list: readonly { at: number; string: number; frame: Frame }[],
    roster = this.roster.version,
  ): object {
    return {
      type: 'frames',
      roster,
      at: list.map((f) => f.at),
      string: list.map((f) => f.string),
      frames: list.map((f) => f.frame),
    };
  }

  async end(): Promise<void> {
    this.ws.close();
    await this.closed;
  }
}

/** A frame of `n` units that all claim the same, with the fields that the type reports. */
export function frameOf(
  n: number,
  measures: UnitType['measures'],
  claims: number | (number | null)[] = 1,
  more: Partial<Frame> = {},
): Frame {
  const state = typeof claims === 'number' ? new Array<number>(n).fill(claims) : claims;
  const of = (value: number) => state.map((s) => (s === null ? null : value));
  const out = state.map((s) => (s === null ? null : s === 1 ? 3800 : 60));
  return {
    ...(measures !== 'input' && { voltageOut: out }),
    ...(measures !== 'output' && { voltageIn: of(3850) }),
    current: of(5000),
    temperature: of(412),
    signal: of(-71),
    via: of(1),
    state,
    ...more,
  };
}

/** Waits until something is so, for things that are only told by looking. */
export async function until<T>(
  look: () => Promise<T | undefined | false | null>,
  what: string,
  withinMs = 30_000,
): Promise<T> {
  const end = Date.now() + withinMs;
  for (;;) {
    const found = await look();
    if (found) return found;
    if (Date.now() > end) throw new Error(`it did not happen in ${withinMs} ms: ${what}`);
    await new Promise((resolve) => setTimeout(resolve, 40));
  }
}
