import { z } from 'zod';
import { sentAct, type SentAct } from '../../schemas/api/shutdown-test';

/** What waits in this browser, per test and person: it belongs to whoever did it. */

export interface Refused extends SentAct {
  why: string;
}
export interface Kept {
  queue: SentAct[];
  refused: Refused[];
}
const kept = z.object({
  queue: z.array(sentAct),
  refused: z.array(sentAct.extend({ why: z.string() })),
});
const NOTHING: Kept = { queue: [], refused: [] };
const keyOf = (test: string, person: string) => `wakeline.shutdown-test.${test}.${person}`;

/** Storage may be full or forbidden: then the acts live as long as the page does. */
function storage(): Storage | null {
  try {
    return window.localStorage;
  } catch {
    return null;
  }
}

function readKept(key: string): Kept {
  const text = storage()?.getItem(key);
  if (!text) return NOTHING;
  try {
    return kept.safeParse(JSON.parse(text)).data ?? NOTHING;
  } catch {
    return NOTHING; // not ours
  }
}

/** What waits of one test and person: kept in the browser, shared by what shows it. */
export class KeptActs {
  private now: Kept | null = null;
  private readonly told = new Set<() => void>();
  private readonly key: string;

  constructor(test: string, person: string) {
    this.key = keyOf(test, person);
  }

  readonly get = (): Kept => (this.now ??= readKept(this.key));
  readonly none = (): Kept => NOTHING;
  readonly subscribe = (tell: () => void): (() => void) => {
    this.told.add(tell);
    return () => this.told.delete(tell);
  };

  change(some: (before: Kept) => Partial<Kept>): void {
    const before = this.get();
    this.now = { ...before, ...some(before) };
    const store = storage();
    if (this.now.queue.length + this.now.refused.length === 0) store?.removeItem(this.key);
    else
      try {
        store?.setItem(this.key, JSON.stringify(this.now));
      } catch {
        // full: the queue in memory goes on
      }
    for (const tell of this.told) tell();
  }
}

/** Text typed into a form of this test and not saved yet. */
export function typedText(name: string): string | null {
  return storage()?.getItem(`wakeline.typed.${name}`) ?? null;
}
export function readTyped<T>(text: string | null, shape: z.ZodType<T>): T | null {
  if (!text) return null;
  try {
    return shape.safeParse(JSON.parse(text)).data ?? null;
  } catch {
    return null; // not ours
  }
}
export function writeTyped(name: string, typed: unknown): void {
  try {
    if (typed === null) storage()?.removeItem(`wakeline.typed.${name}`);
    else storage()?.setItem(`wakeline.typed.${name}`, JSON.stringify(typed));
  } catch {
    // full: what is typed lives as long as the page
  }
}
