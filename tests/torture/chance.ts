/** Chance by a seed, so that a run can be had again. (A 32-bit generator of the xorshift family, from memory.) */
export class Chance {
  private state: number;
  constructor(seed: number) {
    this.state = seed >>> 0 || 1;
  }

  /** 0 … 1. */
  next(): number {
    let x = this.state;
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    this.state = x >>> 0;
    return this.state / 2 ** 32;
  }

  between(low: number, high: number): number {
    return low + this.next() * (high - low);
  }

  one<T>(of: readonly T[]): T {
    const found = of[Math.floor(this.next() * of.length)];
    if (found === undefined) throw new Error('nothing to choose from');
    return found;
  }

  shuffled<T>(of: readonly T[]): T[] {
    const list = [...of];
    for (let i = list.length - 1; i > 0; i--) {
      const k = Math.floor(this.next() * (i + 1));
      [list[i], list[k]] = [list[k]!, list[i]!];
    }
    return list;
  }
}
