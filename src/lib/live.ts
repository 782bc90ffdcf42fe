import type { Change, ClientMessage, LiveMessage } from '../schemas/live';
import { paths } from '../schemas/paths';

/**
 * One socket to /live for the whole page, whatever number of topics: it reconnects by itself with jittered
 * back-off and comes back with each topic's cursor, so that nothing is missed.
 */

/** `since`: since when it is live, or since when it is not; null before the first connection. */
export interface LiveStatus {
  live: boolean;
  since: Date | null;
  /** The session has ended: it will not heal by itself, the person must sign in again. */
  signedOut: boolean;
}

export type ChangeKind = 'snapshot' | 'delta';
export interface Subscriber {
  onChange: (change: Change, kind: ChangeKind) => void;
  onStatus?: (status: LiveStatus) => void;
  /** The server does not give this topic to this person. */
  onRefused?: (reason: string) => void;
}

/** The part of a browser's WebSocket that the client uses; tests hand in their own. */
export interface Socket {
  readyState: number;
  onopen: (() => void) | null;
  onmessage: ((event: { data: unknown }) => void) | null;
  onclose: ((event: { code: number }) => void) | null;
  send(data: string): void;
  close(): void;
}

export interface LiveOptions {
  open: () => Socket;
  random?: () => number;
}

const OPEN = 1;
/** Nothing heard for so long (the server speaks every 5 s while it can read): not live; and then: the connection is dead. */
const NOT_LIVE_MS = 12_000;
const DEAD_MS = 38_000;
// the numbers of schemas/live.ts, repeated so that zod stays out of the browser's bundle; a test compares them
export const COME_BACK = 4001;
export const SIGNED_OUT = 4003;
export const BACK_OFF_MS = { first: 500, max: 30_000 };

/** Full jitter: anywhere between nothing and the doubled step. */
export const backOffMs = (attempt: number, random: number): number =>
  Math.round(random * Math.min(BACK_OFF_MS.max, BACK_OFF_MS.first * 2 ** Math.min(attempt, 10)));

interface Topic {
  subscribers: Set<Subscriber>;
  cursor: string | undefined;
}

export class LiveClient {
  private readonly topics = new Map<string, Topic>();
  private socket: Socket | null = null;
  private status: LiveStatus = { live: false, since: null, signedOut: false };
  private attempt = 0;
  private reconnect: ReturnType<typeof setTimeout> | undefined;
  private silence: ReturnType<typeof setTimeout> | undefined;

  constructor(private readonly options: LiveOptions) {}

  /** Listens to a topic until the returned function is called. */
  subscribe(topic: string, subscriber: Subscriber): () => void {
    let entry = this.topics.get(topic);
    if (!entry) this.topics.set(topic, (entry = { subscribers: new Set(), cursor: undefined }));
    entry.subscribers.add(subscriber);
    subscriber.onStatus?.(this.status);
    if (this.socket?.readyState === OPEN) this.send({ type: 'subscribe', topic });
    else this.connect();
    return () => {
      entry.subscribers.delete(subscriber);
      if (entry.subscribers.size > 0 || this.topics.get(topic) !== entry) return;
      this.topics.delete(topic);
      this.send({ type: 'unsubscribe', topic });
      if (this.topics.size === 0) this.stop();
    };
  }

  /** Tries at once instead of waiting for the back-off: when the network comes back, say. */
  connectNow(): void {
    if (this.topics.size === 0 || this.socket) return;
    this.attempt = 0;
    this.connect();
  }

  private connect(): void {
    if (this.socket || this.status.signedOut) return;
    clearTimeout(this.reconnect);
    const socket = this.options.open();
    this.socket = socket;
    this.listenForSilence();
    socket.onopen = () => {
      for (const [topic, { cursor }] of this.topics)
        this.send(cursor ? { type: 'subscribe', topic, cursor } : { type: 'subscribe', topic });
    };
    socket.onmessage = ({ data }) => {
      this.listenForSilence();
      // an open socket alone says nothing: the server may be unable to read
      this.attempt = 0;
      this.setStatus(true);
      if (typeof data === 'string') this.receive(JSON.parse(data) as LiveMessage);
    };
    socket.onclose = ({ code }) => this.closed(socket, code);
  }

  private closed(socket: Socket | null, code: number): void {
    if (this.socket !== socket) return;
    this.socket = null;
    clearTimeout(this.silence);
    this.setStatus(false, code === SIGNED_OUT);
    if (code === SIGNED_OUT || this.topics.size === 0) return;
    // asked to come back: the server is well, so the first try is soon
    const wait = backOffMs(code === COME_BACK ? 0 : this.attempt++, (this.options.random ?? Math.random)());
    this.reconnect = setTimeout(() => this.connect(), wait);
  }

  private receive(message: LiveMessage): void {
    const entry = this.topics.get(message.topic);
    if (!entry) return;
    if (message.type === 'refused') {
      for (const s of entry.subscribers) s.onRefused?.(message.reason);
      return;
    }
    entry.cursor = message.cursor;
    // a delta without content only says that the server is there
    if (message.type === 'delta' && Object.keys(message.change).length === 0) return;
    for (const s of [...entry.subscribers]) s.onChange(message.change, message.type);
  }

  private send(message: ClientMessage): void {
    if (this.socket?.readyState === OPEN) this.socket.send(JSON.stringify(message));
  }

  private listenForSilence(): void {
    clearTimeout(this.silence);
    this.silence = setTimeout(() => {
      this.setStatus(false);
      // much may still be on its way through a slow network
      this.silence = setTimeout(() => {
        this.socket?.close();
        // a dead network may never deliver the close
        this.closed(this.socket, 1006);
      }, DEAD_MS);
    }, NOT_LIVE_MS);
  }

  private setStatus(live: boolean, signedOut = false): void {
    if (this.status.since && this.status.live === live && this.status.signedOut === signedOut) return;
    const again = live && this.status.since;
    this.status = { live, since: new Date(), signedOut };
    for (const { subscribers } of this.topics.values())
      for (const s of subscribers) s.onStatus?.(this.status);
    // for whoever waits for the network, the server is as good as that
    if (again) dispatchEvent(new Event('online'));
  }

  private stop(): void {
    clearTimeout(this.reconnect);
    clearTimeout(this.silence);
    const socket = this.socket;
    this.socket = null;
    socket?.close();
  }
}

let ofThisPage: LiveClient | undefined;

/** The one client that all islands of a page share. Browser only. */
export function liveClient(): LiveClient {
  if (ofThisPage) return ofThisPage;
  const client = new LiveClient({
    open: () => {
      const address = new URL(paths.live(), window.location.href);
      address.protocol = address.protocol === 'https:' ? 'wss:' : 'ws:';
      return new WebSocket(address) as Socket;
    },
  });
  window.addEventListener('online', () => client.connectNow());
  document.addEventListener('visibilitychange', () => {
    if (document.visibilityState === 'visible') client.connectNow();
  });
  return (ofThisPage = client);
}
