import { isDatabaseAway } from '../errors';
import { log } from '../log';

const AFTER_FAILURE_MS = 1000;

/**
 * Work that is asked for often and done one at a time: `gatherMs` after it was asked for, and `everyMs` after it
 * began last at the earliest. Asked for while it runs, it runs once more.
 */
export class Repeated {
  private timer: NodeJS.Timeout | undefined;
  private running: Promise<void> | undefined;
  private again = false;
  private stopped = false;
  private beganAt = 0;

  constructor(
    private readonly gatherMs: number,
    private readonly everyMs: number,
    private readonly work: () => Promise<void>,
  ) {}

  soon(): void {
    if (this.running) this.again = true;
    else this.schedule(Math.max(this.gatherMs, this.beganAt + this.everyMs - Date.now()));
  }

  /** For how long it has been running by now; 0: it rests. */
  get runningMs(): number {
    return this.running ? Date.now() - this.beganAt : 0;
  }

  async stop(): Promise<void> {
    this.stopped = true;
    clearTimeout(this.timer);
    await this.running;
  }

  private schedule(waitMs: number): void {
    if (this.stopped) return;
    this.timer ??= setTimeout(() => {
      this.timer = undefined;
      this.running = this.run();
    }, waitMs);
  }

  private async run(): Promise<void> {
    this.beganAt = Date.now();
    let waitMs = 0;
    try {
      await this.work();
    } catch (error) {
      if (!isDatabaseAway(error)) log.error({ error }, 'live changes could not be read');
      this.again = true;
      waitMs = AFTER_FAILURE_MS;
    }
    this.running = undefined;
    if (!this.again) return;
    this.again = false;
    this.schedule(Math.max(waitMs, this.gatherMs, this.beganAt + this.everyMs - Date.now()));
  }
}
