import { answerOrders } from '../../components/table-file/desk-client';
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
  | { kind: 'file'; facts: HistoryFacts }
  | { kind: 'checked'; checked: CheckedHistory }
  | { kind: 'body'; body: Blob }
);

const desk = new HistoryDesk();

answerOrders<DeskOrder, DeskAnswer>((order, onProgress) => {
  if (order.kind === 'take')
    return { kind: 'file', facts: desk.take(order.content, order.known, order.timeZone, onProgress) };
  if (order.kind === 'split')
    return { kind: 'file', facts: desk.split(order.separator, order.hasHeader, onProgress) };
  if (order.kind === 'check')
    return { kind: 'checked', checked: desk.check(order.layout, order.nowS, onProgress) };
  return { kind: 'body', body: desk.body(order.order) };
});
