import { setTimeout as sleep } from 'node:timers/promises';
import type pg from 'pg';
import { connect } from '../db/pools';
import { log } from '../log';

/** `lost` resolves when the connection is gone. */
interface Connection {
  lost: Promise<void>;
}
const WAIT_MS = { first: 250, max: 5000 };

/**
 * One connection that LISTENs and comes back by itself. Notices sent while it was away are lost, so `onReturn` is
 * called after every connection: whoever listens reads everything again then.
 */
export class Listener {
  private client: pg.Client | undefined;
  private stopped = false;
  private hears = false;
  private loop: Promise<void> | undefined;
  private wake = new AbortController();

  constructor(
    private readonly channels: readonly string[],
    private readonly onNotice: (channel: string, payload: string) => void,
    private readonly onReturn: () => void,
  ) {}

  /** Whether notices are heard now. */
  get listening(): boolean {
    return this.hears;
  }

  /** Resolves once it listens, or at once when the database is away: it goes on trying. */
  async start(): Promise<void> {
    this.stopped = false;
    this.wake = new AbortController();
    const first = await this.open();
    this.loop = this.keep(first);
  }

  async stop(): Promise<void> {
    this.stopped = true;
    this.wake.abort();
    await this.client?.end();
    await this.loop;
  }

  /** Connects; null when there is no database to connect to. */
  private async open(): Promise<Connection | null> {
    let client: pg.Client | undefined;
    try {
      const opened = await connect('ingest');
      client = opened;
      this.client = opened;
      const lost = new Promise<void>((resolve) =>
        opened.once('end', () => {
          this.hears = false;
          resolve();
        }),
      );
      client.on('notification', (n) => this.onNotice(n.channel, n.payload ?? ''));
      for (const channel of this.channels) await client.query(`listen ${channel}`);
      if (this.stopped) await client.end();
      else {
        this.hears = true;
        this.onReturn();
      }
      return { lost };
    } catch (error) {
      log.warn(
        { error: error instanceof Error ? error.message : String(error) },
        'cannot listen for notices',
      );
      // one that connected and could not listen would stay open beside the next
      await client?.end().catch(() => undefined);
      return null;
    }
  }

  private async keep(first: Connection | null): Promise<void> {
    let connection = first;
    let waitMs = WAIT_MS.first;
    for (;;) {
      await connection?.lost;
      waitMs = connection ? WAIT_MS.first : Math.min(WAIT_MS.max, waitMs * 2);
      // stop() cuts the wait short; that is no failure
      await sleep(waitMs * (0.5 + Math.random()), undefined, { signal: this.wake.signal }).catch(
        () => undefined,
      );
      if (this.stopped) return;
      connection = await this.open();
    }
  }
}
