import type { Waiting } from './capture-queue';
import type { Here, KeptPhoto, NewRecord, Keeper } from './capture-store';

/** In the place of the phone's store where the browser keeps nothing: lives as long as the page does. */
export class CaptureMemory implements Keeper {
  readonly lasting = false;
  private records: Waiting[] = [];
  private photos = new Map<string, KeptPhoto>();
  private who: Here | null = null;
  private made = 0;

  all(): Promise<Waiting[]> {
    return Promise.resolve([...this.records]);
  }
  add(records: readonly NewRecord[], photos: ReadonlyMap<string, KeptPhoto> = new Map()): Promise<Waiting[]> {
    const numbered = records.map((record): Waiting => ({
      ...record,
      number: ++this.made,
      state: 'waiting',
      tries: 0,
      notBefore: 0,
      problem: null,
      current: null,
    }));
    this.records.push(...numbered);
    for (const photo of photos.values()) this.photos.set(photo.ref, photo);
    return Promise.resolve(numbered);
  }
  change(changed: readonly Waiting[], removed: readonly string[] = []): Promise<void> {
    this.records = this.records
      .map((record) => changed.find((c) => c.ref === record.ref) ?? record)
      .filter((record) => !removed.includes(record.ref));
    for (const ref of removed) this.photos.delete(ref);
    return Promise.resolve();
  }
  photo(ref: string): Promise<KeptPhoto | null> {
    return Promise.resolve(this.photos.get(ref) ?? null);
  }
  snapshot(): Promise<unknown> {
    return Promise.resolve(null);
  }
  snapshots(): Promise<unknown[]> {
    return Promise.resolve([]);
  }
  keepSnapshot(): Promise<void> {
    return Promise.resolve();
  }
  here(): Promise<Here | null> {
    return Promise.resolve(this.who);
  }
  setHere(here: Here): Promise<void> {
    this.who = here;
    return Promise.resolve();
  }
  close(): void {
    this.records = [];
  }
}
