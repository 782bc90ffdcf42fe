import type { Batch, Item } from './batch';
import { Lane } from './lane';
import type { Written } from './write-batch';

/** Readings that may wait before sockets are paused, and how far they must fall before sockets go on. */
export const PAUSE_ABOVE = 60_000;
export const RESUME_BELOW = 30_000;
const LANES = 2;

export interface QueueHooks {
  written: (batch: Batch, written: Written) => Promise<void> | void;
  /** Sockets are to stop or to go on. */
  pressure: (paused: boolean) => void;
  away: () => void;
}

/** The bounded queue between sockets and database: lanes by site, one count over all. */
export class Queue {
  readonly lanes: Lane[];
  waitingReadings = 0;
  paused = false;
  /** Times that sockets had to be paused. */
  pauses = 0;

  constructor(private readonly hooks: QueueHooks) {
    this.lanes = Array.from(
      { length: LANES },
      () =>
        new Lane({
          written: hooks.written,
          away: hooks.away,
          relieved: (readings) => this.relieve(readings),
        }),
    );
  }

  add(item: Item): void {
    this.waitingReadings += item.readings;
    this.lanes[item.siteId % LANES]!.add(item);
    if (this.paused || this.waitingReadings <= PAUSE_ABOVE) return;
    this.paused = true;
    this.pauses++;
    this.hooks.pressure(true);
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
