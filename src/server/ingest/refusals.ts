import { database } from '../db/pools';
import { log } from '../log';
import { countRefusals, type Refusal } from '../queries/ingest-loggers';

/** Refused messages, counted in memory and added to their logger about once a second, where people can see them. */
export class Refusals {
  private waiting = new Map<number, Refusal>();
  private timer: NodeJS.Timeout | undefined;
  private writing: Promise<void> = Promise.resolve();
  /** Upgrades with a token that nobody knows: there is no logger to count them at. */
  unknownTokens = 0;

  add(loggerId: number, field: string, reason: string): void {
    const before = this.waiting.get(loggerId);
    this.waiting.set(loggerId, { loggerId, count: (before?.count ?? 0) + 1, at: new Date(), field, reason });
    this.timer ??= setTimeout(() => {
      this.timer = undefined;
      this.writing = this.writing.then(() => this.flush());
    }, 500);
  }

  async flush(): Promise<void> {
    clearTimeout(this.timer);
    this.timer = undefined;
    const { waiting } = this;
    if (waiting.size === 0) return;
    this.waiting = new Map();
    try {
      await countRefusals(database('ingest'), [...waiting.values()]);
    } catch (error) {
      log.warn(
        { error: error instanceof Error ? error.message : String(error) },
        'refusals wait to be counted',
      );
      for (const [id, refusal] of waiting) {
        const newer = this.waiting.get(id);
        this.waiting.set(id, newer ? { ...newer, count: newer.count + refusal.count } : refusal);
      }
      this.timer ??= setTimeout(() => void this.flush(), 3000);
    }
  }

  /** Counts what it can; without a database the rest is lost with the process. */
  async stop(): Promise<void> {
    await this.writing;
    await this.flush();
    clearTimeout(this.timer);
  }
}
