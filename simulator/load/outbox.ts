import type { Sending } from '../logger/connection';

/** A message that can be made again as often as it has to be sent. */
export interface LoadMessage {
  type: 'frames' | 'inputs' | 'inverters' | 'weather' | 'command';
  /** The logger's time that it is of, epoch s. */
  atS: number;
  /** Unit-readings in it. */
  readings: number;
  /** Of frames: roster indices of the strings. */
  strings?: number[];
  text: (seq: number) => string;
}

export interface LoadOutboxHooks {
  /** The next thing to report, in order of time; null: nothing is due. */
  next: () => LoadMessage | null;
  sent: (message: LoadMessage, again: boolean) => void;
  acknowledged: (message: LoadMessage, seq: number, tookMs: number) => void;
  refused: (message: LoadMessage | null, field: string, reason: string, again: boolean) => void;
}

interface Entry {
  seq: number;
  message: LoadMessage;
  sentMs: number;
}

/**
 * What a logger has on the way. Nothing waits here as text: a report is made when it is sent, so that hours of an
 * outage cost no memory.
 */
export class LoadOutbox implements Sending {
  private seq = 0;
  private readonly onTheWay = new Map<number, Entry>();
  private again: Entry[] = [];

  constructor(
    private readonly window: number,
    private readonly hooks: LoadOutboxHooks,
  ) {}

  get unanswered(): number {
    return this.onTheWay.size + this.again.length;
  }

  take(): string[] {
    const texts: string[] = [];
    while (this.onTheWay.size < this.window) {
      const before = this.again.shift();
      const message = before?.message ?? this.hooks.next();
      if (!message) break;
      const seq = before?.seq ?? ++this.seq;
      this.onTheWay.set(seq, { seq, message, sentMs: performance.now() });
      this.hooks.sent(message, before !== undefined);
      texts.push(message.text(seq));
    }
    return texts;
  }

  acknowledge(seq: number): void {
    const entry = this.onTheWay.get(seq);
    if (!entry) return;
    this.onTheWay.delete(seq);
    this.hooks.acknowledged(entry.message, seq, performance.now() - entry.sentMs);
  }

  refuse(seq: number | null, field: string, reason: string, again: boolean): void {
    const entry = seq === null ? undefined : this.onTheWay.get(seq);
    this.hooks.refused(entry?.message ?? null, field, reason, again);
    if (!entry) return;
    this.onTheWay.delete(entry.seq);
    if (again) this.again.push(entry);
  }

  rewind(): void {
    this.again = [...this.onTheWay.values(), ...this.again];
    this.onTheWay.clear();
  }
}
