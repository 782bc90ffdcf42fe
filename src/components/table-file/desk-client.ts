import { tableDesk } from '../../words/table-file';

interface Numbered {
  id: number;
  kind: string;
}
/** What every worker says besides its own answers. */
export type DeskWord = { id: number } & (
  { kind: 'progress'; share: number } | { kind: 'fault'; message: string }
);
/** An order as it is given; its number is added on the way. */
export type Unnumbered<T> = T extends Numbered ? Omit<T, 'id'> : never;

interface Waiting<Answer> {
  resolve: (answer: Answer) => void;
  reject: (error: Error) => void;
  onProgress: ((share: number) => void) | undefined;
}

/** The page's side of a worker that reads files: each order has a number, and its answers carry it. */
export class DeskClient<Order extends Numbered, Answer extends Numbered> {
  private readonly waiting = new Map<number, Waiting<Answer>>();
  private last = 0;

  constructor(private readonly worker: Worker) {
    worker.addEventListener('message', ({ data }: MessageEvent<Answer | DeskWord>) => {
      const asked = this.waiting.get(data.id);
      if (!asked) return;
      if (isWord(data)) {
        if (data.kind === 'progress') {
          asked.onProgress?.(data.share);
          return;
        }
        asked.reject(new Error(data.message));
      } else asked.resolve(data);
      this.waiting.delete(data.id);
    });
    worker.addEventListener('error', () => {
      for (const asked of this.waiting.values()) asked.reject(new Error(tableDesk.notLoaded));
      this.waiting.clear();
    });
  }

  /** @throws Error in words where the desk can't do it */
  async ask<K extends Answer['kind']>(
    order: Unnumbered<Order>,
    wanted: K,
    onProgress?: (share: number) => void,
  ): Promise<Extract<Answer, { kind: K }>> {
    const id = ++this.last;
    const answer = await new Promise<Answer>((resolve, reject) => {
      this.waiting.set(id, { resolve, reject, onProgress });
      this.worker.postMessage({ ...order, id });
    });
    if (answer.kind !== wanted) throw new Error(tableDesk.notRead);
    return answer as Extract<Answer, { kind: K }>;
  }

  close(): void {
    this.worker.terminate();
  }
}

const isWord = <A extends Numbered>(answer: A | DeskWord): answer is DeskWord =>
  answer.kind === 'progress' || answer.kind === 'fault';

/** The worker's side: does what is ordered, one after the other, and says what came of it. */
export function answerOrders<Order extends Numbered, Answer extends Numbered>(
  work: (order: Order, onProgress: (share: number) => void) => Unnumbered<Answer>,
): void {
  const say = (message: object) => self.postMessage(message);
  self.addEventListener('message', ({ data: order }: MessageEvent<Order>) => {
    const { id } = order;
    try {
      say({ ...work(order, (share) => say({ id, kind: 'progress', share })), id });
    } catch (error) {
      say({ id, kind: 'fault', message: error instanceof Error ? error.message : String(error) });
    }
  });
}
