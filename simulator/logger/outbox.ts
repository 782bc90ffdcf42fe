import type { LoggerMessage } from '../../src/schemas/ingest';

export type Numbered = Exclude<LoggerMessage, { type: 'hello' }>;
/** A message before it has its number. */
export type Unnumbered = Numbered extends infer M ? (M extends Numbered ? Omit<M, 'seq'> : never) : never;

interface Waiting {
  message: Numbered;
  sent: boolean;
  tries: number;
}

/** How many messages may be on the way without an answer. */
const ON_THE_WAY = 32;
/** Some days of a large site's reports. */
const KEPT = 50_000;
const TRIES = 3;

/**
 * What a logger has said and Wakeline has not yet acknowledged, in order of time. Nothing leaves it but by an
 * acknowledgement, so that everything arrives at least once.
 */
export class Outbox {
  private readonly waiting: Waiting[] = [];
  private seq = 0;
  /** Messages given up: too many waiting, or refused for good. */
  dropped = 0;
  acknowledged = 0;
  lastRefusal: { field: string; reason: string } | null = null;

  get size(): number {
    return this.waiting.length;
  }

  push(message: Unnumbered): void {
    this.seq += 1;
    this.waiting.push({ message: { ...message, seq: this.seq }, sent: false, tries: 0 });
    if (this.waiting.length > KEPT) {
      this.waiting.shift();
      this.dropped += 1;
    }
  }

  /** The next messages to send; they count as sent. */
  take(): Numbered[] {
    const onTheWay = this.waiting.reduce((n, w) => n + (w.sent ? 1 : 0), 0);
    const next: Numbered[] = [];
    for (const w of this.waiting) {
      if (next.length + onTheWay >= ON_THE_WAY) break;
      if (w.sent) continue;
      w.sent = true;
      w.tries += 1;
      next.push(w.message);
    }
    return next;
  }

  acknowledge(seq: number): void {
    const index = this.waiting.findIndex((w) => w.message.seq === seq);
    if (index < 0) return;
    this.waiting.splice(index, 1);
    this.acknowledged += 1;
  }

  refuse(seq: number | null, field: string, reason: string, again: boolean): void {
    this.lastRefusal = { field, reason };
    const index = this.waiting.findIndex((w) => w.message.seq === seq);
    const w = this.waiting[index];
    if (!w) return;
    if (again && w.tries < TRIES) w.sent = false;
    else {
      this.waiting.splice(index, 1);
      this.dropped += 1;
    }
  }

  /** The connection is gone: what was on the way is sent again. */
  rewind(): void {
    for (const w of this.waiting) w.sent = false;
  }
}
