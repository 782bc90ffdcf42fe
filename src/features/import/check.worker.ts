import type { Separator } from '../../components/table-file/separators';
import type { KnownNames } from '../../domain/commissioning/import/table';
import { Desk, type CheckedFile, type CheckOrder, type FileFacts } from './desk';

/** The desk in a thread of its own: one order at a time, each answered by its number. */
export type DeskOrder = { id: number } & (
  | { kind: 'take'; content: Uint8Array | string }
  | { kind: 'split'; separator: Separator; hasHeader?: boolean }
  | { kind: 'check'; order: CheckOrder; names: KnownNames }
);
export type DeskAnswer = { id: number } & (
  | { kind: 'progress'; share: number }
  | { kind: 'file'; facts: FileFacts }
  | { kind: 'checked'; checked: CheckedFile }
  | { kind: 'fault'; message: string }
);

const desk = new Desk();
const answer = (message: DeskAnswer) => self.postMessage(message);

self.addEventListener('message', (event: MessageEvent<DeskOrder>) => {
  const order = event.data;
  const { id } = order;
  const onProgress = (share: number) => answer({ id, kind: 'progress', share });
  try {
    if (order.kind === 'take') answer({ id, kind: 'file', facts: desk.take(order.content, onProgress) });
    else if (order.kind === 'split')
      answer({ id, kind: 'file', facts: desk.split(order.separator, order.hasHeader, onProgress) });
    else
      answer({
        id,
        kind: 'checked',
        checked: desk.check(order.order, order.names, onProgress),
      });
  } catch (error) {
    answer({ id, kind: 'fault', message: error instanceof Error ? error.message : String(error) });
  }
});
