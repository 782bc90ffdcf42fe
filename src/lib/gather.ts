/**
 * Hands things on: the first at once, and while they keep coming all of `everyMs` together. So a page that hears fifty
 * changes a second draws itself five times, and a single change shows without delay.
 */
export class Gather<T> {
  private waiting: T[] = [];
  private timer: ReturnType<typeof setTimeout> | undefined;

  constructor(
    private readonly handOn: (things: readonly T[]) => void,
    private readonly everyMs: number,
  ) {}

  push(thing: T): void {
    this.waiting.push(thing);
    if (this.timer === undefined) this.flush();
  }

  /** What still waits is dropped. */
  stop(): void {
    clearTimeout(this.timer);
    this.timer = undefined;
    this.waiting = [];
  }

  private flush(): void {
    const things = this.waiting;
    this.waiting = [];
    this.timer = setTimeout(() => {
      this.timer = undefined;
      if (this.waiting.length > 0) this.flush();
    }, this.everyMs);
    this.handOn(things);
  }
}
