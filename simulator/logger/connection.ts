import WebSocket from 'ws';
import { PROTOCOL, serverMessage, type Roster } from '../../src/schemas/ingest';
import { Outbox } from './outbox';

export interface ConnectionOptions {
  url: string;
  token: string;
  serial: string;
  firmware: string;
  /** Epoch seconds of the logger's own clock. */
  clock: () => number;
  onRoster: (roster: Roster) => void;
  onListen: (on: boolean) => void;
}

const FIRST_RETRY_MS = 500;
const LAST_RETRY_MS = 15_000;

/** A logger's line to Wakeline: one WebSocket at a time, made again when it breaks. */
export class Connection {
  readonly outbox = new Outbox();
  private ws: WebSocket | null = null;
  private retryMs = FIRST_RETRY_MS;
  private timer: NodeJS.Timeout | null = null;
  private waitUntilMs = 0;
  private ready = false;
  private stopped = false;
  private cutOff = false;
  /** Why the last attempt failed, for the plant's page. */
  fault: string | null = null;

  constructor(private readonly options: ConnectionOptions) {}

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
    for (const message of this.outbox.take()) ws.send(JSON.stringify(message));
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
        break;
      case 'listen':
        this.options.onListen(message.on);
        break;
    }
    this.flush();
  }
}
