import { config } from '../config';
import { database } from '../db/pools';
import { isDatabaseAway } from '../errors';
import { log } from '../log';
import { thisProcess } from '../process';
import { addSample } from '../queries/process-samples';
import { takeFigures } from './figures';
import { meters } from './meters';

export const SAMPLE_EVERY_MS = 60_000;

/** Once a minute writes down what this process measured of itself, for the status page. */
class Sampler {
  private timer: NodeJS.Timeout | undefined;
  private sampledAtMs = performance.now();
  private turn: Promise<void> = Promise.resolve();

  start(): void {
    meters(); // the loop's delay counts from now on
    this.timer = setInterval(() => {
      this.turn = this.turn.then(() => this.sample(new Date()));
    }, SAMPLE_EVERY_MS);
  }

  async stop(): Promise<void> {
    clearInterval(this.timer);
    await this.turn;
  }

  /** A minute that can't be written down is lost, no more. */
  async sample(at: Date): Promise<void> {
    const nowMs = performance.now();
    const spanS = Math.max(0.001, (nowMs - this.sampledAtMs) / 1000);
    this.sampledAtMs = nowMs;
    try {
      const figures = await takeFigures(spanS);
      const { id, host, pid, startedAt } = thisProcess();
      const roles = config().WAKELINE_ROLES;
      await addSample(database('ingest'), { id, host, pid, roles, startedAt }, { at, spanS, figures });
    } catch (error) {
      if (!isDatabaseAway(error))
        log.error({ error }, 'what this process measured could not be written down');
    }
  }
}

// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.sampler');
const shared = globalThis as unknown as Record<symbol, Sampler | undefined>;

export function startSampler(): Promise<void> {
  if (!shared[KEY]) {
    shared[KEY] = new Sampler();
    shared[KEY].start();
  }
  return Promise.resolve();
}

export async function stopSampler(): Promise<void> {
  const sampler = shared[KEY];
  shared[KEY] = undefined;
  await sampler?.stop();
}

/** A sample out of turn. */
export const sampleNow = async (at: Date): Promise<void> => shared[KEY]?.sample(at);
