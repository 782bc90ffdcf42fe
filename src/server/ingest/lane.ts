import { setTimeout as sleep } from 'node:timers/promises';
import type pg from 'pg';
import { connect } from '../db/pools';
import { isDatabaseAway } from '../errors';
import { log } from '../log';
import { meters } from '../observe/meters';
import type { FrameRow } from '../queries/ingest-rows';
import { takeBatch, type Batch, type Item, type Work } from './batch';
import { Days, GatewaysHeard, writeBatch, type Written } from './write-batch';

export interface LaneHooks {
  /** After COMMIT and the acknowledgements. What it gives is waited for before the next batch. */
  written: (batch: Batch, written: Written) => Promise<void> | void;
  /** What was written was judged too, or could not be: nothing of these waits any more. */
  followed: (items: readonly Item[]) => void;
  /** Readings left the queue. */
  relieved: (readings: number) => void;
  /** The database does not answer; called at every try, and every few seconds while one takes long. */
  away: () => void;
}

const RETRY_MS = { first: 200, max: 3000 };
const DAYS_FRESH_S = 60;
/** A batch that is not committed by then means that the database is slow. */
const SLOW_AFTER_MS = 5000;
/** No partition takes the row; its partition is closed, or gone. */
const NO_PARTITION = new Set(['23514', '42P01']);

/** Data that the database will never take (classes 22 and 23); whatever else it says, later may be different. */
const isItsFault = (error: unknown): boolean => /^2[23]/.test(codeOf(error));

const codeOf = (error: unknown): string =>
  error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : '';

/**
 * Writes what waits, one batch after the other on a connection of its own. Sites are spread over lanes by number, so
 * no two batches in flight touch one row. While the database is away the queue keeps everything and nothing is
 * acknowledged; a batch that failed is written again as a whole, which changes nothing that was committed.
 */
export class Lane {
  private readonly queue: Item[] = [];
  private running: Promise<void> | undefined;
  private client: pg.Client | undefined;
  private readonly days = new Days();
  private readonly gateways = new GatewaysHeard();
  private daysAtS = 0;
  private stopping = false;
  private cut = new AbortController();

  constructor(private readonly hooks: LaneHooks) {}

  get waiting(): number {
    return this.queue.length;
  }

  add(item: Item): void {
    if (this.stopping) return;
    item.addedAtMs = performance.now();
    this.queue.push(item);
    this.running ??= this.run().finally(() => {
      this.running = undefined;
    });
  }

  /** Finishes what waits, unless the database is away: then loggers keep it, for nothing was acknowledged. */
  async stop(): Promise<void> {
    this.stopping = true;
    this.cut.abort();
    await this.running;
    await this.client?.end();
    this.client = undefined;
  }

  private async run(): Promise<void> {
    let following: Promise<void> = Promise.resolve();
    while (this.queue.length > 0) {
      const batch = takeBatch(this.queue);
      const written = await this.writeUntilDone(batch);
      if (!written) break;
      let readings = 0;
      for (const item of batch.finished) {
        readings += item.readings;
        if (item.fault === null) item.written();
        else item.refused(item.fault);
        meters().ack.observe((performance.now() - (item.addedAtMs ?? 0)) / 1000);
      }
      this.hooks.relieved(readings);
      // judging and telling go on while the next batch is written, but in the order of the batches
      await following;
      following = this.follow(batch, written);
      // what came while the last batch was followed up is taken before this ends
      if (this.queue.length === 0) await following;
    }
    await following;
  }

  private async follow(batch: Batch, written: Written): Promise<void> {
    const committedAtMs = performance.now();
    try {
      await this.hooks.written(batch, written);
      meters().judged.observe((performance.now() - committedAtMs) / 1000);
    } catch (error) {
      log.error({ error }, 'what follows a written batch failed');
    } finally {
      this.hooks.followed(batch.finished);
    }
  }

  /** Undefined: told to stop while the database was away. */
  private async writeUntilDone(batch: Batch): Promise<Written | undefined> {
    let waitMs = RETRY_MS.first;
    let tries = 0;
    for (;;) {
      try {
        return await this.write(batch);
      } catch (error) {
        const partition = NO_PARTITION.has(codeOf(error)) && tries++ < 2;
        if (partition) {
          this.daysAtS = 0;
          continue;
        }
        if (isItsFault(error)) return this.writeOneByOne(batch);
        const reason = error instanceof Error ? error.message : String(error);
        log[isDatabaseAway(error) ? 'warn' : 'error']({ error: reason }, 'readings wait for the database');
      }
      this.hooks.away();
      await this.dropClient();
      // stop() cuts the wait short; that is no failure
      await sleep(waitMs, undefined, { signal: this.cut.signal }).catch(() => undefined);
      if (this.stopping) return undefined;
      waitMs = Math.min(RETRY_MS.max, waitMs * 2);
    }
  }

  private async write(batch: Batch): Promise<Written> {
    const nowS = Math.floor(Date.now() / 1000);
    // its few statements are the same all day: planned once, and not by the numbers of one batch
    this.client ??= await connect('ingest', { plan_cache_mode: 'force_generic_plan' });
    if (nowS - this.daysAtS > DAYS_FRESH_S) {
      await this.days.refresh(this.client, nowS);
      this.daysAtS = nowS;
    }
    const startedAtMs = performance.now();
    // a database that stands still says nothing: loggers are told to wait all the same
    const slow = setInterval(() => this.hooks.away(), SLOW_AFTER_MS);
    try {
      return await writeBatch(this.client, batch, this.days, this.gateways, nowS);
    } finally {
      clearInterval(slow);
      meters().commit.observe((performance.now() - startedAtMs) / 1000);
    }
  }

  private async dropClient(): Promise<void> {
    const { client } = this;
    this.client = undefined;
    // the connection is broken already: whatever its end says is of no use
    await client?.end().catch(() => undefined);
  }

  /** The database refuses the batch as a whole: finds the rows that it refuses, and writes the others. */
  private async writeOneByOne(batch: Batch): Promise<Written | undefined> {
    const all: Written = { sites: new Set(), strings: new Set(), contexts: new Set() };
    for (const part of parts(batch)) {
      try {
        const written = await this.write(part);
        for (const key of ['sites', 'strings', 'contexts'] as const)
          for (const id of written[key]) all[key].add(id);
      } catch (error) {
        if (!isItsFault(error)) return this.writeUntilDone(batch);
        const reason = error instanceof Error ? error.message : String(error);
        log.error({ error }, 'the database refuses a reading');
        for (const item of [...batch.finished, ...this.queue])
          if (holds(item.work, part)) item.fault = reason;
        const refused = new Set<FrameRow>(part.frames);
        batch.frames = batch.frames.filter((f) => !refused.has(f));
      }
    }
    return all;
  }
}

const emptyLike = (batch: Batch): Batch => ({
  ...batch,
  frames: [],
  inputs: [],
  inverters: [],
  weather: [],
  heard: [],
  commands: [],
  traces: [],
  gateways: [],
  finished: [],
});

function* parts(batch: Batch): Generator<Batch> {
  const empty = emptyLike(batch);
  for (const row of batch.gateways) yield { ...empty, gateways: [row] };
  for (const row of batch.frames) yield { ...empty, frames: [row] };
  for (const row of batch.inputs) yield { ...empty, inputs: [row] };
  for (const row of batch.inverters) yield { ...empty, inverters: [row] };
  for (const row of batch.weather) yield { ...empty, weather: [row] };
  for (const row of batch.heard) yield { ...empty, heard: [row] };
  for (const row of batch.commands) yield { ...empty, commands: [row] };
  for (const row of batch.traces) yield { ...empty, traces: [row] };
}

function holds(work: Work, part: Batch): boolean {
  const rows: readonly unknown[] = work.rows;
  const sought: readonly unknown[] = [
    ...part.frames,
    ...part.inputs,
    ...part.inverters,
    ...part.weather,
    ...part.heard,
    ...part.commands,
    ...part.traces,
  ];
  return sought.some((row) => rows.includes(row));
}
