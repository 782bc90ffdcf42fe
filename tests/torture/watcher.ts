import { WebSocket } from 'ws';
import { liveMessage } from '../../src/schemas/live';
import { paths } from '../../src/schemas/paths';

/** A browser's connection to /live that comes back with its cursors, and notes each event that it is told. */
export class Watcher {
  /** Event id → how often it was told. */
  readonly told = new Map<string, number>();
  /** Where each topic's first snapshot stood: events of this transaction and later ones are due. */
  readonly began = new Map<string, string>();
  private readonly cursors = new Map<string, string>();
  private ws: WebSocket | undefined;
  private timer: NodeJS.Timeout | undefined;
  private over = false;
  connections = 0;

  constructor(
    private readonly url: () => string,
    private readonly cookie: string,
    readonly siteRefs: readonly string[],
  ) {}

  start(): void {
    if (this.over) return;
    const ws = new WebSocket(`${this.url()}${paths.live()}`, { headers: { cookie: this.cookie } });
    this.ws = ws;
    this.connections++;
    ws.on('open', () => {
      for (const ref of this.siteRefs) {
        const topic = `site:${ref}`;
        const cursor = this.cursors.get(topic);
        ws.send(JSON.stringify({ type: 'subscribe', topic, ...(cursor !== undefined && { cursor }) }));
      }
    });
    ws.on('message', (data) => this.take(String(data)));
    ws.on('error', () => ws.terminate());
    ws.on('close', () => {
      clearTimeout(this.timer);
      if (!this.over) this.timer = setTimeout(() => this.start(), 300 + Math.random() * 700);
    });
  }

  private take(text: string): void {
    const message = liveMessage.parse(JSON.parse(text));
    if (message.type === 'refused') throw new Error(`refused: ${message.topic} ${message.reason}`);
    const first = !this.began.has(message.topic);
    if (first) this.began.set(message.topic, message.cursor);
    this.cursors.set(message.topic, message.cursor);
    // a snapshot shows what was before: only what came since is to be told once
    if (message.type === 'snapshot') return;
    for (const { id } of message.change.events ?? [])
      this.told.set(String(id), (this.told.get(String(id)) ?? 0) + 1);
  }

  get connected(): boolean {
    return this.ws?.readyState === WebSocket.OPEN;
  }

  /** The lowest cursor of its topics; null: it was not told of each. */
  standsAt(): bigint | null {
    if (this.cursors.size < this.siteRefs.length) return null;
    return [...this.cursors.values()].map(BigInt).reduce((a, b) => (a < b ? a : b));
  }

  stop(): void {
    this.over = true;
    clearTimeout(this.timer);
    this.ws?.terminate();
  }
}
