import { AppError } from '../errors';
import { log } from '../log';
import { BYTE_ORDER_MARK, csvField, fileName } from '../reports/csv';
import type { RecordStream, StreamColumn } from './operation';

/** Records to bytes, no faster than they are taken; whoever leaves ends the reading. */

/** Streams of one process at a time, and of one token: each holds a connection to the database while it reads. */
const AT_ONCE = 4;
const OF_ONE = 2;
/** A reader who takes nothing for so long is gone. */
const STALL_MS = 60_000;
/** So often it is looked at whether who reads still may. */
const LOOK_MS = 5_000;

const running = new Map<number, number>();

/** Takes a place for a stream of a token. @returns what gives it back @throws AppError too_many · unavailable */
export function takePlace(tokenId: number): () => void {
  const own = running.get(tokenId) ?? 0;
  if (own >= OF_ONE)
    throw new AppError('too_many', {
      message: `This token has ${OF_ONE} streams open. Wait until one has ended.`,
      retryAfterS: 10,
    });
  if ([...running.values()].reduce((a, b) => a + b, 0) >= AT_ONCE)
    throw new AppError('unavailable', {
      message: 'As many streams are open as this server serves at once. Try again in a moment.',
      retryAfterS: 10,
    });
  running.set(tokenId, own + 1);
  let given = false;
  return () => {
    if (given) return;
    given = true;
    const left = (running.get(tokenId) ?? 1) - 1;
    if (left > 0) running.set(tokenId, left);
    else running.delete(tokenId);
  };
}

const csvLine = (columns: readonly StreamColumn[], record: unknown): string =>
  `${columns.map((c) => csvField(c.value(record as never))).join(',')}\r\n`;

/** The text of one piece. */
function textOf(stream: RecordStream, piece: readonly unknown[]): string {
  return stream.format === 'csv'
    ? piece.map((r) => csvLine(stream.columns, r)).join('')
    : piece.map((r) => `${JSON.stringify(r)}\n`).join('');
}
const headOf = (stream: RecordStream): string =>
  stream.format === 'csv'
    ? `${BYTE_ORDER_MARK}${stream.columns.map((c) => csvField(c.header)).join(',')}\r\n`
    : '';

export interface Reader {
  /** Resolves when what was written has been taken. */
  drained: () => Promise<void>;
  /** Whether who reads still may. */
  holds: () => Promise<boolean>;
  /** When all is over, however it ended. */
  ended: () => void;
}

class StreamEnded extends Error {}

async function inTime(work: Promise<void>): Promise<void> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(new StreamEnded('its reader takes nothing any more')), STALL_MS);
  });
  try {
    await Promise.race([work, late]);
  } finally {
    clearTimeout(timer);
  }
}

/** The body of a stream. It ends early, as an error of the connection, where its reader stalls or may no longer. */
export function bodyOf(stream: RecordStream, reader: Reader): ReadableStream<Uint8Array> {
  const encoder = new TextEncoder();
  let head = headOf(stream);
  let lookedMs = Date.now();
  let over = false;
  const finish = async (): Promise<void> => {
    if (over) return;
    over = true;
    try {
      await stream.pieces.return();
    } finally {
      reader.ended();
    }
  };
  /** Text to send next; undefined: all was sent. */
  const next = async (): Promise<string | undefined> => {
    for (;;) {
      await inTime(reader.drained());
      if (Date.now() - lookedMs > LOOK_MS) {
        if (!(await reader.holds())) throw new StreamEnded('who reads it may no longer');
        lookedMs = Date.now();
      }
      const { done, value } = await stream.pieces.next();
      const text = head + (done ? '' : textOf(stream, value));
      head = '';
      if (text) return text;
      if (done) return undefined;
      if (over) return undefined;
    }
  };
  return new ReadableStream<Uint8Array>(
    {
      pull: async (controller) => {
        try {
          const text = await next();
          if (over) return;
          if (text !== undefined) return controller.enqueue(encoder.encode(text));
          await finish();
          controller.close();
        } catch (error) {
          await finish();
          log.warn({ error: error instanceof Error ? error.message : error }, 'a stream broke off');
          controller.error(error);
        }
      },
      cancel: finish,
    },
    { highWaterMark: 1 },
  );
}

export const streamHeaders = (stream: {
  format: 'ndjson' | 'csv';
  name: string;
}): Record<string, string> => ({
  'content-type':
    stream.format === 'csv' ? 'text/csv; charset=utf-8; header=present' : 'application/x-ndjson',
  'content-disposition': `attachment; filename="${fileName(stream.name)}.${stream.format}"`,
  'cache-control': 'no-store',
});
