import type { WebSocket } from 'ws';
import type { LoggerMessage, Roster, ServerMessage } from '../../schemas/ingest';
import { ERROR_KINDS, isDatabaseAway, type ErrorKind } from '../errors';
import { log } from '../log';
import type { KnownLogger } from '../queries/ingest-loggers';
import type { RosterView } from '../queries/ingest-rows';
import type { Item } from './batch';
import { readHello } from './hello';
import { readEnvelope, readJson, readMessage, type Refused } from './read-message';

/** What a connection needs of the service around it. */
export interface SessionHost {
  /** The logger said hello: takes its lease, ends its other connection, gives its roster. */
  arrived: (
    session: Session,
    firmware: string,
  ) => Promise<{ message: Roster; view: RosterView; listen: boolean }>;
  /** An earlier version of its roster; undefined where there never was one. */
  rosterVersion: (logger: KnownLogger, version: number) => Promise<RosterView | undefined>;
  enqueue: (item: Item) => void;
  refused: (loggerId: number, field: string, reason: string) => void;
  closed: (session: Session) => void;
}

const HELLO_WITHIN_MS = 15_000;
const PING_EVERY_MS = 20_000;

/** One connection of a logger, from the upgrade to its end. Messages are taken in the order in which they came. */
export class Session {
  /** Wall-clock ms of the newest message. */
  spokeAt = Date.now();
  /** Wall-clock ms since when it may speak again after it was paused. */
  resumedAt = 0;
  private readonly views = new Map<number, RosterView>();
  private current: RosterView | undefined;
  private readonly backlog: { data: Buffer; isBinary: boolean }[] = [];
  private busy = false;
  private paused = false;
  private alive = true;
  private readonly helloTimer: NodeJS.Timeout;
  private readonly pingTimer: NodeJS.Timeout;

  constructor(
    readonly ws: WebSocket,
    readonly logger: KnownLogger,
    readonly address: string,
    private readonly host: SessionHost,
  ) {
    this.helloTimer = setTimeout(() => this.end('invalid', 'no hello came within 15 s'), HELLO_WITHIN_MS);
    this.pingTimer = setInterval(() => this.ping(), PING_EVERY_MS);
    ws.on('message', (data, isBinary) => this.take(data as Buffer, isBinary));
    ws.on('pong', () => {
      this.alive = true;
    });
    // a frame that is too large or no WebSocket frame at all: ws closes by itself with 1009 or 1002
    ws.on('error', (error) => this.host.refused(this.logger.id, 'message', error.message));
    ws.on('close', () => {
      clearTimeout(this.helloTimer);
      clearInterval(this.pingTimer);
      this.host.closed(this);
    });
  }

  get ready(): boolean {
    return this.current !== undefined;
  }

  send(message: ServerMessage): void {
    if (this.ws.readyState === this.ws.OPEN) this.ws.send(JSON.stringify(message));
  }

  setPaused(paused: boolean): void {
    this.paused = paused;
    if (paused) this.ws.pause();
    else {
      this.resumedAt = Date.now();
      if (!this.busy) this.ws.resume();
    }
  }

  /** Whether the logger has this version as its current one. */
  hasRoster(version: number): boolean {
    return this.current?.version === version;
  }

  /** A roster made new, because the as-built changed. */
  setRoster(message: Roster, view: RosterView): void {
    this.current = view;
    this.views.set(view.version, view);
    this.send(message);
  }

  end(kind: ErrorKind, reason: string): void {
    this.ws.close(ERROR_KINDS[kind].close, reason.slice(0, 120));
  }

  private ping(): void {
    if (!this.alive) {
      this.ws.terminate();
      return;
    }
    // a socket that we paused can't deliver its pong
    this.alive = this.paused;
    this.ws.ping();
  }

  private take(data: Buffer, isBinary: boolean): void {
    this.spokeAt = Date.now();
    this.alive = true;
    if (this.busy) this.backlog.push({ data, isBinary });
    else this.handle(data, isBinary);
  }

  private refuse(refused: Refused): void {
    const { seq, field, reason, again } = refused;
    this.host.refused(this.logger.id, field, reason);
    this.send({ type: 'refused', seq, field, reason, again });
  }

  /** One message that can't be read must not end what all the others are served by. */
  private handle(data: Buffer, isBinary: boolean): void {
    try {
      this.read(data, isBinary);
    } catch (error) {
      log.error({ error, logger: this.logger.serial }, 'a message of a logger could not be read');
      this.refuse({ seq: null, field: 'message', reason: 'could not be read here', again: false });
    }
  }

  private read(data: Buffer, isBinary: boolean): void {
    const json = readJson(data, isBinary);
    if (!json.ok) {
      this.refuse(json.refused);
      if (json.refused.field === 'message' && json.refused.reason.startsWith('has '))
        this.end('too_large', 'message too large');
      return;
    }
    if (json.value.type === 'hello') {
      this.hello(json.value);
      return;
    }
    const message = readEnvelope(json.value);
    if (!message.ok) this.refuse(message.refused);
    else if (message.value.type !== 'hello') this.report(message.value);
  }

  private hello(value: Record<string, unknown>): void {
    const read = readHello(value, this.logger.serial, Math.floor(Date.now() / 1000));
    if (!read.ok) {
      const { field, reason, again, end } = read;
      this.refuse({ seq: null, field, reason, again });
      if (end) this.end(end.kind, end.reason);
      return;
    }
    const { firmware } = read;
    this.meanwhile(async () => {
      const { message, view, listen } = await this.host.arrived(this, firmware);
      clearTimeout(this.helloTimer);
      this.setRoster(message, view);
      if (listen) this.send({ type: 'listen', on: true });
    });
  }

  private report(message: Exclude<LoggerMessage, { type: 'hello' }>): void {
    const { seq } = message;
    const { current } = this;
    if (!current) {
      this.refuse({ seq, field: 'type', reason: 'say hello first', again: true });
      return;
    }
    const version = message.type === 'frames' ? message.roster : current.version;
    const view = this.views.get(version);
    if (view) {
      this.enqueue(message, view);
      return;
    }
    this.meanwhile(async () => {
      const earlier =
        version < current.version ? await this.host.rosterVersion(this.logger, version) : undefined;
      if (earlier) {
        this.views.set(version, earlier);
        this.enqueue(message, earlier);
      } else
        this.refuse({
          seq,
          field: 'roster',
          reason: `version ${version} was never given to this logger; the current one is ${current.version}`,
          again: false,
        });
    });
  }

  private enqueue(message: Exclude<LoggerMessage, { type: 'hello' }>, view: RosterView): void {
    const { seq } = message;
    const read = readMessage(message, view, this.logger, Math.floor(Date.now() / 1000));
    if (!read.ok) {
      this.refuse(read.refused);
      return;
    }
    const { work, readings, gateways } = read.value;
    this.host.enqueue({
      work,
      readings,
      gateways,
      siteId: this.logger.siteId,
      loggerId: this.logger.id,
      taken: 0,
      fault: null,
      written: () => this.send({ type: 'ack', seq }),
      refused: (reason) => this.refuse({ seq, field: 'message', reason, again: false }),
    });
  }

  /** Does what takes time; messages that come meanwhile wait their turn. */
  private meanwhile(work: () => Promise<void>): void {
    this.busy = true;
    this.ws.pause();
    work()
      .catch((error: unknown) => {
        if (!isDatabaseAway(error))
          log.error({ error, logger: this.logger.serial }, 'a logger could not be served');
        this.send({ type: 'wait', ms: 5000 });
        this.end('unavailable', 'the database does not answer; come back in a few seconds');
      })
      .finally(() => {
        this.busy = false;
        while (!this.busy) {
          const next = this.backlog.shift();
          if (!next) break;
          this.handle(next.data, next.isBinary);
        }
        if (!this.busy && !this.paused) this.ws.resume();
      });
  }
}
