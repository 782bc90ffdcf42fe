/** Counts what a judgement said against what was so, and prints it. */

/** Right and wrong findings of one judgement, what they were looked for in, and how long they took. */
export class Tally {
  found = 0;
  missed = 0;
  falseAlarms = 0;
  /** Unit-days or string-days looked at. */
  lookedAt = 0;
  /** Until each finding that was right. */
  readonly delays: number[] = [];

  hit(delay: number): void {
    this.found++;
    this.delays.push(delay);
  }

  add(other: Tally): void {
    this.found += other.found;
    this.missed += other.missed;
    this.falseAlarms += other.falseAlarms;
    this.lookedAt += other.lookedAt;
    this.delays.push(...other.delays);
  }

  /** Share of the findings that are right; NaN without findings. */
  get precision(): number {
    return this.found / (this.found + this.falseAlarms);
  }

  /** Share of the faults that were found; NaN without faults. */
  get recall(): number {
    return this.found / (this.found + this.missed);
  }

  /** False alarms a thousand unit-days (or whatever `lookedAt` counts). */
  get falsePerThousand(): number {
    return (1000 * this.falseAlarms) / this.lookedAt;
  }
}

/** Yes and no. */
export class Share {
  yes = 0;
  all = 0;

  count(is: boolean): void {
    this.all++;
    if (is) this.yes++;
  }

  get value(): number {
    return this.yes / this.all;
  }
}

/** Middle value; NaN of none. */
export function middle(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const k = sorted.length / 2;
  return sorted.length === 0 ? NaN : (sorted[Math.ceil(k) - 1]! + sorted[Math.floor(k)]!) / 2;
}

/** One figure as `name value unit`; one that can't be said for want of cases becomes a remark. */
export function figure(name: string, value: number, unit: string, digits = 4): string {
  const full = `diagnosis.${name}`;
  return Number.isFinite(value)
    ? `${full} ${value.toFixed(digits)} ${unit}`
    : `# ${full}: no cases in this run`;
}

/** A remark where an aim isn't met. */
export function aim(name: string, value: number, least: number, why: string): string[] {
  return value >= least ? [] : [`# diagnosis.${name}: aim is ${least}. ${why}`];
}
