import type { Separator } from '../../components/table-file/separators';
import type { KnownSubjects, Layout } from '../../domain/history-import/layout';
import { HistoryDesk, type CheckedHistory, type HistoryFacts, type OrderToSend } from './desk';

/** The desk in a thread of its own: one order at a time, each answered by its number. */
export type DeskOrder = { id: number } & (
  | { kind: 'take'; content: Uint8Array | string; known: KnownSubjects; timeZone: string }
  | { kind: 'split'; separator: Separator; hasHeader: boolean }
  | { kind: 'check'; layout: Layout; nowS: number }
  | { kind: 'body'; order: OrderToSend }
);
export type DeskAnswer = { id: number } & (
  | { kind: 'progress'; share: number }
  | { kind: 'file'; facts: HistoryFacts }
  | { kind: 'checked'; checked: CheckedHistory }
  | { kind: 'body'; body: Blob }
  | { kind: 'fault'; message: string }
);

const desk = new HistoryDesk();
const answer = (message: DeskAnswer) => self.postMessage(message);

self.addEventListener('message', ({ data: order }: MessageEvent<DeskOrder>) => {
  const { id } = order;
  const onProgress = (share: number) => answer({ id, kind: 'progress', share });
  try {
    if (order.kind === 'take')
      answer({
        id,
        kind: 'file',
        facts: desk.take(order.content, order.known, order.timeZone, onProgress),
      });
    else if (order.kind === 'split')
      answer({ id, kind: 'file', facts: desk.split(order.separator, order.hasHeader, onProgress) });
    else if (order.kind === 'check')
      answer({ id, kind: 'checked', checked: desk.check(order.layout, order.nowS, onProgress) });
    else answer({ id, kind: 'body', body: desk.body(order.order) });
  } catch (error) {
    answer({ id, kind: 'fault', message: error instanceof Error ? error.message : String(error) });
  }
});
