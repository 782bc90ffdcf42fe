import type { Batch, Item } from './batch';
import { meters } from '../observe/meters';
import { Lane } from './lane';
import type { Written } from './write-batch';

/**
 * Readings that may wait before sockets are paused, and how far they must fall before sockets go on: enough for each lane
 * to write one batch while its next one is read, a few ten MB.
 */
export const PAUSE_ABOVE = 120_000;
export const RESUME_BELOW = 80_000;
const LANES = 3;

export interface QueueHooks {
  written: (batch: Batch, written: Written) => Promise<void> | void;
  followed: (items: readonly Item[]) => void;
  /** Sockets are to stop or to go on. */
  pressure: (paused: boolean) => void;
  away: () => void;
}

/** The bounded queue between sockets and database: lanes by site, one count over all. */
export class Queue {
  readonly lanes: Lane[];
  waitingReadings = 0;
  paused = false;
  /** The most readings that waited at once since the last look. */
  private peak = 0;
  /** Times that sockets had to be paused. */
  pauses = 0;

  constructor(private readonly hooks: QueueHooks) {
    this.lanes = Array.from(
      { length: LANES },
      () =>
        new Lane({
          written: hooks.written,
          followed: hooks.followed,
          away: hooks.away,
          relieved: (readings) => this.relieve(readings),
        }),
    );
  }

  add(item: Item): void {
    this.waitingReadings += item.readings;
    this.peak = Math.max(this.peak, this.waitingReadings);
    this.lanes[item.siteId % LANES]!.add(item);
    if (this.paused || this.waitingReadings <= PAUSE_ABOVE) return;
    this.paused = true;
    this.pauses++;
    meters().pauses.add();
    this.hooks.pressure(true);
  }

  takePeak(): number {
    const { peak } = this;
    this.peak = this.waitingReadings;
    return peak;
  }

  async stop(): Promise<void> {
    await Promise.all(this.lanes.map((lane) => lane.stop()));
  }

  private relieve(readings: number): void {
    this.waitingReadings -= readings;
    if (!this.paused || this.waitingReadings >= RESUME_BELOW) return;
    this.paused = false;
    this.hooks.pressure(false);
  }
}
