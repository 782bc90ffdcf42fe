import type { CaptureSnapshot } from '../schemas/api/capture';
import { PERSON_HEADER } from '../schemas/lists-and-limits';
import type { CheckRecord } from '../schemas/api/checks';
import type { ReadingRecord } from '../schemas/api/readings';
import { paths } from '../schemas/paths';
import { api } from './api';
import { CaptureMemory } from './capture-memory';
import {
  OPEN_LINK,
  backOff,
  leftOut,
  ofPerson,
  signedIn,
  wake,
  wakeLink,
  type Link,
  type Waiting,
} from './capture-queue';
import { withStored } from './capture-records';
import { sendRound } from './capture-sender';
import {
  CaptureStore,
  StoreError,
  explainStore,
  type Here,
  type Keeper,
  type KeptPhoto,
  type NewRecord,
} from './capture-store';
import { answerOf, sendRecord } from './capture-transport';

/** The phone's side of a site: what it keeps, what waits, and the sending of it. One for each open page. */

export interface PhoneState {
  /** False until what the phone keeps has been read. */
  ready: boolean;
  here: Here | null;
  /** As the server gave it, newest first heard; null: never seen on this phone. */
  snapshot: CaptureSnapshot | null;
  /** Everybody's records on this phone. */
  records: readonly Waiting[];
  link: Link;
  /** ISO 8601; null: the last try was answered. */
  unreachableSince: string | null;
  /** Ref of the record that is on its way. */
  sending: string | null;
  /** Of photos on their way: share sent. */
  progress: Readonly<Record<string, number>>;
  /** Whether records outlive the page. */
  lasting: boolean;
  /** Why the phone keeps nothing, or not this. */
  fault: StoreError | null;
}
export const EMPTY_PHONE: PhoneState = {
  ready: false,
  here: null,
  snapshot: null,
  records: [],
  link: OPEN_LINK,
  unreachableSince: null,
  sending: null,
  progress: {},
  lasting: true,
  fault: null,
};

const CHANNEL = 'wakeline-capture';
const LOCK = 'wakeline-capture-send';
/** When another page of this phone is sending. */
const LOOK_AGAIN_MS = 5000;
const FRESH_MS = 60_000;

/** Asks the browser not to clear what waits when the device runs short of room; it may say no. */
function askToLast(): void {
  const storage = (navigator as Partial<Pick<Navigator, 'storage'>>).storage;
  storage?.persist().catch(() => undefined); // without it everything works, with a little less certainty
}

export class CapturePhone {
  private state: PhoneState;
  private keeper: Keeper | null = null;
  private readonly hearers = new Set<() => void>();
  private channel: BroadcastChannel | null = null;
  private timer: ReturnType<typeof setTimeout> | undefined;
  private sendingNow = false;
  private wanted = false;
  private stopped = false;
  private readonly started: Promise<void>;

  constructor(
    private readonly site: string | null,
    initial: CaptureSnapshot | null,
  ) {
    this.state = {
      ...EMPTY_PHONE,
      snapshot: initial,
      here: initial && { person: initial.person.id, name: initial.person.name },
    };
    this.started = this.start(initial);
  }

  readonly subscribe = (hear: () => void): (() => void) => {
    this.hearers.add(hear);
    return () => this.hearers.delete(hear);
  };
  readonly current = (): PhoneState => this.state;

  stop(): void {
    this.stopped = true;
    clearTimeout(this.timer);
    window.removeEventListener('online', this.awake);
    document.removeEventListener('visibilitychange', this.looked);
    this.channel?.close();
    this.keeper?.close();
  }

  /** Keeps records on the phone and starts to send them. @throws StoreError when they could not be kept */
  async add(records: readonly NewRecord[], photos?: ReadonlyMap<string, KeptPhoto>): Promise<void> {
    await this.kept((keeper) => keeper.add(records, photos));
    askToLast();
    void this.send();
  }
  /** Writes a decision on records that wanted one. @throws StoreError */
  async change(changed: readonly Waiting[], removed: readonly string[] = []): Promise<void> {
    await this.kept((keeper) => keeper.change(changed, removed));
    void this.send();
  }
  /** Leaves a record out; `instead`: the one that stands on the server. @throws StoreError */
  async leaveOut(ref: string, instead: string | null = null): Promise<void> {
    const { changed, removed } = leftOut(this.state.records, ref, instead);
    await this.change(changed, removed);
    if (instead) await this.refresh();
  }
  photo(ref: string): Promise<KeptPhoto | null> {
    return this.keeper?.photo(ref) ?? Promise.resolve(null);
  }
  async snapshots(): Promise<CaptureSnapshot[]> {
    await this.started;
    const { here } = this.state;
    return here && this.keeper ? ((await this.keeper.snapshots(here.person)) as CaptureSnapshot[]) : [];
  }

  /** Tries at once, whatever the back-off says. */
  async sendNow(): Promise<void> {
    const { here } = this.state;
    this.set({ link: wakeLink(this.state.link.state === 'signed_out' ? signedIn() : this.state.link) });
    const resting = here ? ofPerson(this.state.records, here.person).filter((r) => r.notBefore > 0) : [];
    if (resting.length > 0) await this.kept((keeper) => keeper.change(resting.map(wake)));
    await this.refresh();
    await this.send();
  }

  /** Asks the server for the site as it is now. */
  async refresh(): Promise<boolean> {
    const { here } = this.state;
    if (!this.site || !here) return false;
    try {
      const snapshot = await api<CaptureSnapshot>(paths.api.captureSnapshot(this.site), {
        headers: { [PERSON_HEADER]: here.person },
        signal: AbortSignal.timeout(20_000),
      });
      this.set({ snapshot, link: signedIn(), unreachableSince: null });
      await this.keepSnapshot(snapshot);
      return true;
    } catch (error) {
      const answer = answerOf(error);
      if (answer.kind === 'signed_out' || answer.kind === 'other_person')
        this.set({ link: { ...OPEN_LINK, state: answer.kind } });
      else if (answer.kind === 'unreachable') this.lost();
      else if (answer.kind === 'busy') this.comeBack(Date.now() + (answer.retryAfterS ?? 30) * 1000);
      return false;
    }
  }

  private async start(initial: CaptureSnapshot | null): Promise<void> {
    let fault: StoreError | null = null;
    try {
      this.keeper = await CaptureStore.open();
    } catch (error) {
      fault = explainStore(error);
      this.keeper = new CaptureMemory();
    }
    if (this.stopped) {
      this.keeper.close();
      return;
    }
    const { keeper } = this;
    this.set({ fault, lasting: keeper.lasting });
    try {
      if (initial) {
        await keeper.setHere({ person: initial.person.id, name: initial.person.name });
        await this.keepSnapshot(initial);
      } else {
        const here = await keeper.here();
        const snapshot = here && this.site ? await keeper.snapshot(here.person, this.site) : null;
        this.set({ here, snapshot: snapshot as CaptureSnapshot | null });
      }
      this.set({ records: await keeper.all() });
    } catch (error) {
      this.set({ fault: explainStore(error) });
    }
    this.set({ ready: true });
    if (typeof BroadcastChannel !== 'undefined') {
      this.channel = new BroadcastChannel(CHANNEL);
      this.channel.onmessage = () => void this.reread();
    }
    window.addEventListener('online', this.awake);
    document.addEventListener('visibilitychange', this.looked);
    if (initial || (await this.refresh())) await this.send();
    else this.lost();
  }

  private readonly awake = (): void => void this.sendNow();
  private readonly looked = (): void => {
    if (document.visibilityState !== 'visible') return;
    const age = Date.now() - Date.parse(this.state.snapshot?.at ?? '');
    if (!(age < FRESH_MS) || this.state.link.state !== 'open') void this.sendNow();
  };

  private lost(): void {
    const { link, unreachableSince } = this.state;
    if (link.state === 'signed_out' || link.state === 'other_person') return;
    const notBefore = Date.now() + backOff(link.tries, Math.random());
    this.set({
      unreachableSince: unreachableSince ?? new Date().toISOString(),
      link: { state: 'unreachable', tries: link.tries + 1, notBefore },
    });
    this.comeBack(notBefore);
  }

  /** One round of sending; a second wish while one runs is a round after it. Pages of one phone take turns. */
  private async send(): Promise<void> {
    if (this.sendingNow) {
      this.wanted = true;
      return;
    }
    this.sendingNow = true;
    try {
      do {
        this.wanted = false;
        await this.turn();
      } while (this.wanted && !this.stopped);
    } catch (error) {
      this.set({ fault: explainStore(error) });
    } finally {
      this.sendingNow = false;
    }
  }

  private async turn(): Promise<void> {
    const locks = (navigator as Partial<Pick<Navigator, 'locks'>>).locks;
    if (!locks) return this.round();
    await locks.request(LOCK, { ifAvailable: true }, async (lock) => {
      if (lock) await this.round();
      else this.comeBack(Date.now() + LOOK_AGAIN_MS);
    });
  }

  private async round(): Promise<void> {
    const { keeper } = this;
    const { here } = this.state;
    if (!keeper || !here || this.stopped) return;
    let stored = 0;
    const { link, again } = await sendRound(
      {
        kept: keeper,
        person: here.person,
        now: Date.now,
        random: Math.random,
        send: (record) =>
          sendRecord(record, {
            photo: (ref) => keeper.photo(ref),
            stored: async (sent, answer) => {
              stored++;
              await this.takeOver(sent, answer);
            },
            progress: (ref, share) => this.set({ progress: { ...this.state.progress, [ref]: share } }),
          }),
        heard: (now, sending) => {
          this.set({
            link: now,
            sending: sending?.ref ?? null,
            unreachableSince:
              now.state === 'unreachable'
                ? (this.state.unreachableSince ?? new Date().toISOString())
                : this.state.unreachableSince,
          });
          if (!sending) void this.reread();
        },
      },
      this.state.link,
    );
    this.set({ link, sending: null, progress: {} });
    if (stored > 0) this.tellOthers();
    await this.reread();
    if (stored > 0) await this.refresh();
    if (again !== null) this.comeBack(again);
  }

  /** What the server has stored stands in the snapshot from now on, also if the network goes before the next one. */
  private async takeOver(sent: Waiting, answer: unknown): Promise<void> {
    const { snapshot } = this.state;
    if (!snapshot || snapshot.site.id !== sent.site || sent.kind === 'photo' || !answer) return;
    const next = withStored(snapshot, sent.kind, answer as ReadingRecord | CheckRecord);
    this.set({ snapshot: next });
    await this.keepSnapshot(next);
  }

  private async keepSnapshot(snapshot: CaptureSnapshot): Promise<void> {
    try {
      await this.keeper?.keepSnapshot(snapshot.person.id, snapshot.site.id, snapshot);
    } catch (error) {
      this.set({ fault: explainStore(error) }); // it is shown all the same
    }
  }

  private async kept<T>(write: (keeper: Keeper) => Promise<T>): Promise<T> {
    await this.started;
    const { keeper } = this;
    if (!keeper) throw explainStore(new DOMException('no keeper', 'InvalidStateError'));
    try {
      const result = await write(keeper);
      if (keeper.lasting && this.state.fault) this.set({ fault: null });
      await this.reread();
      this.tellOthers();
      return result;
    } catch (error) {
      const fault = explainStore(error);
      this.set({ fault });
      throw fault;
    }
  }

  private async reread(): Promise<void> {
    if (this.keeper && !this.stopped) this.set({ records: await this.keeper.all() });
  }
  private tellOthers(): void {
    this.channel?.postMessage('changed');
  }
  private comeBack(at: number): void {
    clearTimeout(this.timer);
    if (this.stopped) return;
    this.timer = setTimeout(
      () => {
        if (this.state.unreachableSince !== null)
          void this.refresh().then((reached) => reached && void this.send());
        else void this.send();
      },
      Math.max(250, at - Date.now()),
    );
  }
  private set(some: Partial<PhoneState>): void {
    if (this.stopped) return;
    this.state = { ...this.state, ...some };
    for (const hear of this.hearers) hear();
  }
}
