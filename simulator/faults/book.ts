import type { Fault } from './kinds';

/** A fault in the plant: from when, and until when where it has been cleared. Epoch seconds. */
export interface FaultEntry {
  id: string;
  fault: Fault;
  fromS: number;
  toS: number | null;
}

/** What is wrong at a site, and what was. */
export class FaultBook {
  private readonly entries: FaultEntry[] = [];
  private made = 0;
  private known: { atS: number; faults: Fault[] } | null = null;

  add(fault: Fault, fromS: number, toS: number | null = null, id?: string): FaultEntry {
    this.made += 1;
    const entry = { id: id ?? `F${this.made}`, fault, fromS, toS };
    this.entries.push(entry);
    this.known = null;
    return entry;
  }

  /** Ends a fault; false when there is none of that id in force. */
  clear(id: string, atS: number): boolean {
    const entry = this.entries.find((e) => e.id === id && e.toS === null);
    if (!entry) return false;
    entry.toS = atS;
    this.known = null;
    return true;
  }

  inForce(atS: number): FaultEntry[] {
    return this.entries.filter((e) => e.fromS <= atS && (e.toS === null || atS < e.toS));
  }

  /** The faults in force; the same array as before while nothing has changed. */
  at(atS: number): Fault[] {
    if (this.known?.atS === atS) return this.known.faults;
    const faults = this.inForce(atS).map((e) => e.fault);
    const before = this.known?.faults;
    const same = before?.length === faults.length && before.every((f, i) => f === faults[i]);
    this.known = { atS, faults: same ? before : faults };
    return this.known.faults;
  }

  /** Puts other entries in the place of all. */
  replace(entries: readonly FaultEntry[]): void {
    this.entries.splice(0, this.entries.length, ...entries.map((e) => ({ ...e })));
    this.made = entries.reduce(
      (most, e) => Math.max(most, Number(/^F(\d+)$/.exec(e.id)?.[1] ?? 0)),
      this.made,
    );
    this.known = null;
  }

  /** Everything, for keeping between starts. */
  all(): readonly FaultEntry[] {
    return this.entries;
  }
}

/** Those of one kind. */
export const ofKind = <K extends Fault['kind']>(faults: readonly Fault[], kind: K) =>
  faults.filter((f): f is Extract<Fault, { kind: K }> => f.kind === kind);
