import { database } from '../db/pools';
import { log } from '../log';
import { meters, refusalClass } from '../observe/meters';
import { countRefusals, countWrongTokens, type Refusal, type WrongTokens } from '../queries/ingest-refusals';

/** Kinds that one logger, and addresses that all together may add between two writings; more are counted as one. */
const KINDS_AT_ONCE = 50;
const ADDRESSES_AT_ONCE = 500;
const OTHER = 'other';

/** Whatever a logger sent, as one short line that a database takes. */
const line = (text: string, most: number): string =>
  // eslint-disable-next-line no-control-regex -- a field's name is whatever the logger made of it
  text.replace(/[\u0000-\u001f\u007f]+/g, ' ').slice(0, most);

/** What is counted together: field and reason without figures and without what the logger wrote. */
export const kindOf = (field: string, reason: string): string =>
  line(
    `${field.replace(/\d+/g, 'n')}: ${reason.replace(/"[^"]*"/g, '"…"').replace(/-?\d[\d.]*/g, 'n')}`,
    200,
  );

/** Refused messages, counted in memory and added to their logger about once a second, where people can see them. */
export class Refusals {
  private waiting = new Map<string, Refusal>();
  private kinds = new Map<number, number>();
  private addresses = new Map<string, WrongTokens>();
  private timer: NodeJS.Timeout | undefined;
  private writing: Promise<void> = Promise.resolve();
  /** Upgrades with a token that nobody knows: there is no logger to count them at. */
  unknownTokens = 0;

  add(loggerId: number, field: string, reason: string): void {
    meters().refused.add(1, { reason: refusalClass(field, reason) });
    const wanted = kindOf(field, reason);
    const known = this.waiting.has(`${loggerId} ${wanted}`);
    const many = !known && (this.kinds.get(loggerId) ?? 0) >= KINDS_AT_ONCE;
    this.put({
      loggerId,
      kind: many ? OTHER : wanted,
      field: line(field, 80),
      reason: line(reason, 300),
      count: 1,
      at: new Date(),
    });
    this.soon(500);
  }

  /** A token that nobody knows came from there. */
  unknownToken(address: string): void {
    this.unknownTokens++;
    meters().unknownTokens.add();
    const where = line(address, 64);
    const key = this.addresses.has(where) || this.addresses.size < ADDRESSES_AT_ONCE ? where : OTHER;
    this.addresses.set(key, {
      address: key,
      count: (this.addresses.get(key)?.count ?? 0) + 1,
      at: new Date(),
    });
    this.soon(500);
  }

  async flush(): Promise<void> {
    clearTimeout(this.timer);
    this.timer = undefined;
    await this.write();
  }

  /** Counts what it can; without a database the rest is lost with the process. */
  async stop(): Promise<void> {
    await this.writing;
    await this.flush();
    clearTimeout(this.timer);
  }

  private soon(ms: number): void {
    this.timer ??= setTimeout(() => {
      this.timer = undefined;
      this.writing = this.writing.then(() => this.write());
    }, ms);
  }

  private put(refusal: Refusal): void {
    const key = `${refusal.loggerId} ${refusal.kind}`;
    const before = this.waiting.get(key);
    if (!before) this.kinds.set(refusal.loggerId, (this.kinds.get(refusal.loggerId) ?? 0) + 1);
    this.waiting.set(key, { ...refusal, count: refusal.count + (before?.count ?? 0) });
  }

  private async write(): Promise<void> {
    const { waiting, addresses } = this;
    if (waiting.size + addresses.size === 0) return;
    this.waiting = new Map();
    this.kinds = new Map();
    this.addresses = new Map();
    try {
      if (waiting.size > 0) await countRefusals(database('ingest'), [...waiting.values()]);
      waiting.clear();
      if (addresses.size > 0) await countWrongTokens(database('ingest'), [...addresses.values()]);
    } catch (error) {
      log.warn(
        { error: error instanceof Error ? error.message : String(error) },
        'refusals wait to be counted',
      );
      this.keep(waiting, addresses);
      this.soon(3000);
    }
  }

  /** What could not be written joins what came meanwhile, whose words are newer. */
  private keep(waiting: ReadonlyMap<string, Refusal>, addresses: ReadonlyMap<string, WrongTokens>): void {
    for (const [key, older] of waiting) {
      const newer = this.waiting.get(key);
      if (newer) this.waiting.set(key, { ...newer, count: newer.count + older.count });
      else this.put(older);
    }
    for (const [key, older] of addresses) {
      const newer = this.addresses.get(key);
      this.addresses.set(key, newer ? { ...newer, count: newer.count + older.count } : older);
    }
  }
}
