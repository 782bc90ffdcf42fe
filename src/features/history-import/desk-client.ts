import type { DeskAnswer, DeskOrder } from './read.worker';

type Waiting = {
  resolve: (answer: DeskAnswer) => void;
  reject: (error: Error) => void;
  onProgress: ((share: number) => void) | undefined;
};
type OrderWithoutId = DeskOrder extends infer O ? (O extends DeskOrder ? Omit<O, 'id'> : never) : never;

/** The page's side of the worker. */
export class DeskClient {
  private readonly worker = new Worker(new URL('./read.worker.ts', import.meta.url), { type: 'module' });
  private readonly waiting = new Map<number, Waiting>();
  private last = 0;

  constructor() {
    this.worker.addEventListener('message', ({ data: answer }: MessageEvent<DeskAnswer>) => {
      const asked = this.waiting.get(answer.id);
      if (!asked) return;
      if (answer.kind === 'progress') {
        asked.onProgress?.(answer.share);
        return;
      }
      this.waiting.delete(answer.id);
      if (answer.kind === 'fault') asked.reject(new Error(answer.message));
      else asked.resolve(answer);
    });
    this.worker.addEventListener('error', () => {
      for (const asked of this.waiting.values())
        asked.reject(
          new Error('The part of this page that reads files could not be loaded. Reload the page.'),
        );
      this.waiting.clear();
    });
  }

  /** @throws Error in words where the desk can't do it */
  async ask<K extends DeskAnswer['kind']>(
    order: OrderWithoutId,
    wanted: K,
    onProgress?: (share: number) => void,
  ): Promise<Extract<DeskAnswer, { kind: K }>> {
    const id = ++this.last;
    const answer = await new Promise<DeskAnswer>((resolve, reject) => {
      this.waiting.set(id, { resolve, reject, onProgress });
      this.worker.postMessage({ ...order, id });
    });
    if (answer.kind !== wanted) throw new Error('The file could not be read.');
    return answer as Extract<DeskAnswer, { kind: K }>;
  }

  close(): void {
    this.worker.terminate();
  }
}
