import { answerOrders } from '../../components/table-file/desk-client';
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
  { kind: 'file'; facts: FileFacts } | { kind: 'checked'; checked: CheckedFile }
);

const desk = new Desk();

answerOrders<DeskOrder, DeskAnswer>((order, onProgress) => {
  if (order.kind === 'take') return { kind: 'file', facts: desk.take(order.content, onProgress) };
  if (order.kind === 'split')
    return { kind: 'file', facts: desk.split(order.separator, order.hasHeader, onProgress) };
  return { kind: 'checked', checked: desk.check(order.order, order.names, onProgress) };
});
