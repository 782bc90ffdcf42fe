/**
 * Changes that come by /live while a page is being read once more. The answer may be older than they are, and an
 * answer of a unit comes once: they are put on top of it.
 */
export class Meanwhile<C> {
  private kept: C[] = [];
  private readings = 0;

  heed(change: C): void {
    if (this.readings > 0) this.kept.push(change);
  }

  /** Reads, then patches what came meanwhile; `patch` may get a change that the answer knows already. */
  async read<T>(read: () => Promise<T>, patch: (page: T, change: C) => T): Promise<T> {
    if (this.readings === 0) this.kept = [];
    this.readings++;
    const from = this.kept.length;
    try {
      const page = await read();
      return this.kept.slice(from).reduce(patch, page);
    } finally {
      this.readings--;
    }
  }
}
