import WebSocket from 'ws';
import { PROTOCOL, serverMessage, type Roster } from '../../src/schemas/ingest';
import { Outbox, type Numbered } from './outbox';

/** What a connection asks of the reports that it carries: an `Outbox`, or one that has its messages as text. */
export interface Sending {
  /** The next messages to send; they count as sent. */
  take(): (Numbered | string)[];
  acknowledge(seq: number): void;
  refuse(seq: number | null, field: string, reason: string, again: boolean): void;
  /** The connection is gone: what was on the way is sent again. */
  rewind(): void;
}

export interface ConnectionOptions {
  url: string;
  token: string;
  serial: string;
  firmware: string;
  /** Epoch seconds of the logger's own clock. */
  clock: () => number;
  onRoster: (roster: Roster) => void;
  onListen: (on: boolean) => void;
  /** Wakeline asks for so many ms without a message. */
  onWait?: (ms: number) => void;
}

const FIRST_RETRY_MS = 500;
const LAST_RETRY_MS = 15_000;

/** A logger's line to Wakeline: one WebSocket at a time, made again when it breaks. */
export class Connection<Out extends Sending = Outbox> {
  private ws: WebSocket | null = null;
  private retryMs = FIRST_RETRY_MS;
  private timer: NodeJS.Timeout | null = null;
  private waitUntilMs = 0;
  private ready = false;
  private stopped = false;
  private cutOff = false;
  /** Why the last attempt failed, for the plant's page. */
  fault: string | null = null;

  constructor(
    private readonly options: ConnectionOptions,
    readonly outbox: Out,
  ) {}

  /** Said hello, and has its roster. */
  get connected(): boolean {
    return this.ready;
  }

  start(): void {
    this.connect();
  }

  /** The way to Wakeline is cut, or mended. */
  cut(off: boolean): void {
    if (off === this.cutOff) return;
    this.cutOff = off;
    if (off) this.ws?.terminate();
    else {
      this.retryMs = FIRST_RETRY_MS;
      this.connect();
    }
  }

  /** Stops and goes on reading what Wakeline says: a slow reader. */
  deaf(on: boolean): void {
    if (on) this.ws?.pause();
    else this.ws?.resume();
  }

  /** Gone in the middle of a message, without a word; it comes back by itself. */
  vanish(begun: string): void {
    if (this.ws?.readyState === WebSocket.OPEN) this.ws.send(begun, { fin: false });
    this.ws?.terminate();
  }

  stop(): void {
    this.stopped = true;
    if (this.timer) clearTimeout(this.timer);
    this.ws?.close(1000);
  }

  /** Sends what waits, as far as Wakeline lets it. */
  flush(): void {
    const { ws } = this;
    if (!this.ready || ws?.readyState !== WebSocket.OPEN) return;
    const wait = this.waitUntilMs - Date.now();
    if (wait > 0) {
      this.timer ??= setTimeout(() => {
        this.timer = null;
        this.flush();
      }, wait);
      return;
    }
    for (const message of this.outbox.take())
      ws.send(typeof message === 'string' ? message : JSON.stringify(message));
  }

  private connect(): void {
    if (this.stopped || this.cutOff || this.ws) return;
    const { url, token, serial, firmware, clock } = this.options;
    const ws = new WebSocket(url, {
      headers: { authorization: `Bearer ${token}` },
      perMessageDeflate: false,
      handshakeTimeout: 10_000,
    });
    this.ws = ws;
    ws.on('open', () => {
      ws.send(
        JSON.stringify({ type: 'hello', protocol: PROTOCOL, logger: serial, firmware, clock: clock() }),
      );
    });
    ws.on('message', (data: Buffer) => this.take(data));
    ws.on('error', (error) => {
      this.fault = error.message;
    });
    ws.on('close', (_code, reason) => {
      if (reason.length > 0) this.fault = reason.toString();
      this.ws = null;
      this.ready = false;
      this.outbox.rewind();
      if (this.stopped || this.cutOff) return;
      // Loggers that were cut off together must not all come back in one instant.
      const delay = this.retryMs * (0.75 + 0.5 * Math.random());
      this.retryMs = Math.min(LAST_RETRY_MS, this.retryMs * 2);
      setTimeout(() => this.connect(), delay).unref();
    });
  }

  private take(data: Buffer): void {
    const message = serverMessage.parse(JSON.parse(data.toString('utf8')));
    switch (message.type) {
      case 'roster':
        this.ready = true;
        this.fault = null;
        this.retryMs = FIRST_RETRY_MS;
        this.options.onRoster(message);
        break;
      case 'ack':
        this.outbox.acknowledge(message.seq);
        break;
      case 'refused':
        this.outbox.refuse(message.seq, message.field, message.reason, message.again);
        if (message.seq === null) this.fault = `${message.field}: ${message.reason}`;
        break;
      case 'wait':
        this.waitUntilMs = Date.now() + message.ms;
        this.options.onWait?.(message.ms);
        break;
      case 'listen':
        this.options.onListen(message.on);
        break;
    }
    this.flush();
  }
}
