import type { KnownNames } from '../../domain/commissioning/import/table';
import type { DeskAnswer, DeskOrder } from './check.worker';
import type { CheckedFile, CheckOrder, FileFacts } from './desk';
import type { Separator } from '../../components/table-file/separators';

type Waiting = {
  resolve: (answer: DeskAnswer) => void;
  reject: (error: Error) => void;
  onProgress?: (share: number) => void;
};
type OrderWithoutId = DeskOrder extends infer O ? (O extends DeskOrder ? Omit<O, 'id'> : never) : never;

/** The page's side of the worker. A newer order of the same kind makes an older one's answer worthless to its asker. */
export class DeskClient {
  private readonly worker = new Worker(new URL('./check.worker.ts', import.meta.url), { type: 'module' });
  private readonly waiting = new Map<number, Waiting>();
  private last = 0;

  constructor() {
    this.worker.addEventListener('message', (event: MessageEvent<DeskAnswer>) => {
      const answer = event.data;
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

  private ask(order: OrderWithoutId, onProgress?: (share: number) => void): Promise<DeskAnswer> {
    const id = ++this.last;
    return new Promise((resolve, reject) => {
      this.waiting.set(id, { resolve, reject, ...(onProgress ? { onProgress } : {}) });
      this.worker.postMessage({ ...order, id });
    });
  }

  private async file(order: OrderWithoutId, onProgress?: (share: number) => void): Promise<FileFacts> {
    const answer = await this.ask(order, onProgress);
    if (answer.kind !== 'file') throw new Error('The file could not be read.');
    return answer.facts;
  }
  take(content: Uint8Array | string, onProgress?: (share: number) => void): Promise<FileFacts> {
    return this.file({ kind: 'take', content }, onProgress);
  }
  split(separator: Separator, hasHeader?: boolean): Promise<FileFacts> {
    return this.file({ kind: 'split', separator, ...(hasHeader === undefined ? {} : { hasHeader }) });
  }
  async check(
    order: CheckOrder,
    names: KnownNames,
    onProgress?: (share: number) => void,
  ): Promise<CheckedFile> {
    const answer = await this.ask({ kind: 'check', order, names }, onProgress);
    if (answer.kind !== 'checked') throw new Error('The file could not be checked.');
    return answer.checked;
  }
  close(): void {
    this.worker.terminate();
  }
}
