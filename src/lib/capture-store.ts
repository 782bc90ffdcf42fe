import { openDB, type DBSchema, type IDBPDatabase, type IDBPTransaction } from 'idb';
import { phoneStoreSaid } from '../words/browser';
import type { Waiting } from './capture-queue';

/** What the phone keeps: records that wait, bytes of photos, snapshots of sites, and who is signed in here. */

/** Who used this phone last and has not signed out, as far as the phone's page needs it. */
export interface Here {
  person: string;
  name: string;
}
export interface KeptPhoto {
  ref: string;
  type: string;
  bytes: ArrayBuffer;
}
interface KeptSnapshot {
  person: string;
  site: string;
  /** Of the shape that this build reads: what another build kept is left alone. */
  shape: number;
  snapshot: unknown;
}
interface Schema extends DBSchema {
  waiting: { key: number; value: Waiting; indexes: { ref: string } };
  photo: { key: string; value: KeptPhoto };
  snapshot: { key: [string, string]; value: KeptSnapshot };
  here: { key: 'here'; value: Here };
}
const NAME = 'wakeline-capture';
const VERSION = 1;
/** Goes up when a snapshot's shape changes so that older code could not read it. */
const SHAPE = 1;

/** Why something could not be kept on the phone, in words for its person. */
export class StoreError extends Error {
  constructor(
    readonly reason: 'full' | 'not_allowed' | 'newer' | 'failed',
    message: string,
    options?: ErrorOptions,
  ) {
    super(message, options);
    this.name = 'StoreError';
  }
}

/** What a failure of IndexedDB means. */
export function explainStore(error: unknown): StoreError {
  if (error instanceof StoreError) return error;
  const name = error instanceof Error ? error.name : '';
  if (name === 'QuotaExceededError') return new StoreError('full', phoneStoreSaid.full, { cause: error });
  if (name === 'VersionError') return new StoreError('newer', phoneStoreSaid.newer, { cause: error });
  if (name === 'InvalidStateError' || name === 'SecurityError' || name === 'UnknownError')
    return new StoreError('not_allowed', phoneStoreSaid.notAllowed, { cause: error });
  return new StoreError('failed', phoneStoreSaid.failed(name), {
    cause: error,
  });
}

export type NewRecord = Omit<Waiting, 'number' | 'state' | 'tries' | 'notBefore' | 'problem' | 'current'>;

/** What the phone's page asks of whatever keeps its records. */
export interface Keeper {
  /** Whether records outlive the page. */
  readonly lasting: boolean;
  all(): Promise<Waiting[]>;
  add(records: readonly NewRecord[], photos?: ReadonlyMap<string, KeptPhoto>): Promise<Waiting[]>;
  change(changed: readonly Waiting[], removed?: readonly string[]): Promise<void>;
  photo(ref: string): Promise<KeptPhoto | null>;
  snapshot(person: string, site: string): Promise<unknown>;
  snapshots(person: string): Promise<unknown[]>;
  keepSnapshot(person: string, site: string, snapshot: unknown): Promise<void>;
  here(): Promise<Here | null>;
  setHere(here: Here): Promise<void>;
  close(): void;
}

export class CaptureStore implements Keeper {
  readonly lasting = true;

  private constructor(private readonly db: IDBPDatabase<Schema>) {}

  /** @throws StoreError where the browser keeps nothing */
  static async open(): Promise<CaptureStore> {
    if (typeof indexedDB === 'undefined')
      throw explainStore(new DOMException('no IndexedDB', 'InvalidStateError'));
    try {
      const db = await openDB<Schema>(NAME, VERSION, {
        upgrade(fresh) {
          const waiting = fresh.createObjectStore('waiting', { keyPath: 'number', autoIncrement: true });
          waiting.createIndex('ref', 'ref', { unique: true });
          fresh.createObjectStore('photo', { keyPath: 'ref' });
          fresh.createObjectStore('snapshot', { keyPath: ['person', 'site'] });
          fresh.createObjectStore('here');
        },
        // a page of a newer build wants the store: let it, ours opens again when it is loaded again
        blocking: (_current, _blocked, event) => (event.target as IDBDatabase).close(),
      });
      return new CaptureStore(db);
    } catch (error) {
      throw explainStore(error);
    }
  }

  close(): void {
    this.db.close();
  }

  async all(): Promise<Waiting[]> {
    return this.run(() => this.db.getAll('waiting'));
  }

  /** Keeps records, with the bytes of those that are photos: all of them or none. Returns them numbered. */
  async add(
    records: readonly NewRecord[],
    photos: ReadonlyMap<string, KeptPhoto> = new Map(),
  ): Promise<Waiting[]> {
    return this.write(['waiting', 'photo'], async (tx) => {
      const made: Waiting[] = [];
      for (const record of records) {
        const whole = {
          ...record,
          state: 'waiting',
          tries: 0,
          notBefore: 0,
          problem: null,
          current: null,
        } as const;
        const photo = photos.get(record.ref);
        if (photo) await tx.objectStore('photo').put(photo);
        const number = await tx.objectStore('waiting').add(whole as unknown as Waiting);
        made.push({ ...whole, number });
      }
      return made;
    });
  }

  /** Writes changes and removals in one go; a photo's bytes go with its record. */
  async change(changed: readonly Waiting[], removed: readonly string[] = []): Promise<void> {
    await this.write(['waiting', 'photo'], async (tx) => {
      const waiting = tx.objectStore('waiting');
      for (const record of changed)
        // what another page has removed in the meantime stays removed
        if ((await waiting.index('ref').getKey(record.ref)) !== undefined) await waiting.put(record);
      for (const ref of removed) {
        const key = await waiting.index('ref').getKey(ref);
        if (key !== undefined) await waiting.delete(key);
        await tx.objectStore('photo').delete(ref);
      }
    });
  }

  async photo(ref: string): Promise<KeptPhoto | null> {
    return (await this.run(() => this.db.get('photo', ref))) ?? null;
  }

  async snapshot(person: string, site: string): Promise<unknown> {
    const kept = await this.run(() => this.db.get('snapshot', [person, site]));
    return kept?.shape === SHAPE ? kept.snapshot : null;
  }
  async snapshots(person: string): Promise<unknown[]> {
    const all = await this.run(() => this.db.getAll('snapshot'));
    return all.filter((kept) => kept.person === person && kept.shape === SHAPE).map((kept) => kept.snapshot);
  }
  async keepSnapshot(person: string, site: string, snapshot: unknown): Promise<void> {
    await this.write(['snapshot'], (tx) =>
      tx.objectStore('snapshot').put({ person, site, shape: SHAPE, snapshot }),
    );
  }

  async here(): Promise<Here | null> {
    return (await this.run(() => this.db.get('here', 'here'))) ?? null;
  }
  async setHere(here: Here): Promise<void> {
    await this.write(['here'], (tx) => tx.objectStore('here').put(here, 'here'));
  }
  /** Somebody signs out: what was kept for them to read goes, what they recorded stays until it is sent. */
  async signOut(): Promise<void> {
    await this.write(['here', 'snapshot'], async (tx) => {
      const here = await tx.objectStore('here').get('here');
      await tx.objectStore('here').delete('here');
      if (!here) return;
      for (const key of await tx.objectStore('snapshot').getAllKeys())
        if (key[0] === here.person) await tx.objectStore('snapshot').delete(key);
    });
  }

  private async run<T>(read: () => Promise<T>): Promise<T> {
    try {
      return await read();
    } catch (error) {
      throw explainStore(error);
    }
  }

  private async write<T, Names extends ('waiting' | 'photo' | 'snapshot' | 'here')[]>(
    names: Names,
    work: (tx: IDBPTransaction<Schema, Names, 'readwrite'>) => Promise<T>,
  ): Promise<T> {
    return this.run(async () => {
      const tx = this.db.transaction(names, 'readwrite', { durability: 'strict' });
      try {
        const [result] = await Promise.all([work(tx), tx.done]);
        return result;
      } catch (error) {
        await tx.done.catch(() => undefined); // said by the first failure
        throw error;
      }
    });
  }
}
