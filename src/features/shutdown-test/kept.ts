import type { SentAct } from '../../schemas/api/shutdown-test';

/** What waits in this browser, per test and person: it belongs to whoever did it. */

export interface Refused extends SentAct {
  why: string;
}
export interface Kept {
  queue: SentAct[];
  refused: Refused[];
}
const NOTHING: Kept = { queue: [], refused: [] };
const keyOf = (test: string, person: string) => `wakeline.shutdown-test.${test}.${person}`;

const isRecord = (x: unknown): x is Record<string, unknown> => typeof x === 'object' && x !== null;
/** As this page writes it. The server checks each act by its schema; here that would cost every visitor its weight. */
const isAct = (x: unknown): boolean =>
  isRecord(x) &&
  typeof x.id === 'string' &&
  typeof x.at === 'string' &&
  isRecord(x.act) &&
  typeof x.act.kind === 'string';
const isKept = (x: unknown): x is Kept =>
  isRecord(x) &&
  Array.isArray(x.queue) &&
  x.queue.every(isAct) &&
  Array.isArray(x.refused) &&
  x.refused.every((act) => isAct(act) && typeof (act as Partial<Refused>).why === 'string');

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
    const found: unknown = JSON.parse(text);
    return isKept(found) ? found : NOTHING;
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
/** What was typed, where it has the fields of `blank`, each of the same type. */
export function readTyped<T extends object>(text: string | null, blank: T): T | null {
  if (!text) return null;
  try {
    const found: unknown = JSON.parse(text);
    const kindOf = (x: unknown): string => (Array.isArray(x) ? 'array' : typeof x);
    const same =
      isRecord(found) && Object.entries(blank).every(([key, value]) => kindOf(found[key]) === kindOf(value));
    return same ? (found as T) : null;
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
