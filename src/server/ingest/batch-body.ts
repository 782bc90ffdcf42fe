import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { ReadableStream } from 'node:stream/web';
import { createGunzip } from 'node:zlib';
import { MESSAGE_MAX_BYTES } from '../../schemas/ingest';
import {
  BATCH_MAX_BYTES,
  BATCH_MESSAGES_MAX,
  BATCH_UNPACKED_MAX_BYTES,
} from '../../schemas/lists-and-limits';
import { AppError } from '../errors';
import { readJson, type Reading } from './read-message';

const tooLarge = (what: string, most: number): AppError =>
  new AppError('too_large', { message: `${what} has more than ${most} bytes. Send less at once.` });
const invalid = (field: string, message: string): AppError =>
  new AppError('invalid', { message, fields: [{ field, message }] });

/** Passes chunks on as long as they come to no more than `most` bytes altogether. */
async function* upTo(chunks: AsyncIterable<Buffer>, what: string, most: number): AsyncGenerator<Buffer> {
  let bytes = 0;
  for await (const chunk of chunks) {
    bytes += chunk.length;
    if (bytes > most) throw tooLarge(what, most);
    yield chunk;
  }
}

/** A zip bomb is stopped at the bound, for what was unpacked is counted as it comes. */
async function unpacked(request: Request, packed: boolean): Promise<Buffer> {
  const chunks: Buffer[] = [];
  const sent = Readable.fromWeb(request.body as ReadableStream<Uint8Array>);
  const gather = async (parts: AsyncIterable<Buffer>): Promise<void> => {
    for await (const chunk of upTo(parts, 'The batch', BATCH_UNPACKED_MAX_BYTES)) chunks.push(chunk);
  };
  const limited = (parts: AsyncIterable<Buffer>) => upTo(parts, 'The body', BATCH_MAX_BYTES);
  if (packed) await pipeline(sent, limited, createGunzip(), gather);
  else await pipeline(sent, limited, gather);
  return Buffer.concat(chunks);
}

/**
 * The body of a batch, unpacked. Nothing more of it is read once it grows past its bounds, whatever its headers say.
 * @throws AppError too_large · invalid
 */
export async function readBatchBody(request: Request): Promise<Buffer> {
  const encoding = (request.headers.get('content-encoding') ?? 'identity').trim().toLowerCase();
  if (encoding !== 'identity' && encoding !== 'gzip')
    throw invalid('content-encoding', `"${encoding}" is not read here; send gzip, or nothing packed`);
  if (Number(request.headers.get('content-length') ?? 0) > BATCH_MAX_BYTES)
    throw tooLarge('The body', BATCH_MAX_BYTES);
  if (!request.body) throw invalid('body', 'There is no body. Send messages as JSON or NDJSON.');
  try {
    return await unpacked(request, encoding === 'gzip');
  } catch (error) {
    if (error instanceof AppError) throw error;
    const code = error instanceof Error && 'code' in error ? String(error.code) : '';
    if (code.startsWith('Z_'))
      throw invalid('body', 'The body is not gzip. Pack it anew, and send it again.');
    if (
      /PREMATURE_CLOSE|ECONNRESET|ABORT|UND_ERR/.test(code) ||
      (error instanceof Error && error.name === 'AbortError')
    )
      throw invalid('body', 'The upload broke off. Send the batch again; what came twice is kept once.');
    throw error;
  }
}

export const NDJSON_TYPES = ['application/x-ndjson', 'application/ndjson', 'application/jsonl'];
type Message = Reading<Record<string, unknown>>;

const manyMessages = (): AppError =>
  new AppError('too_large', {
    message: `There are more than ${BATCH_MESSAGES_MAX} messages. Send them in several batches.`,
  });

/** Messages of NDJSON one by one, so that no more than one is parsed at a time; blank lines are none. */
function* linesOf(body: Buffer): Generator<Message> {
  let count = 0;
  for (let from = 0; from < body.length;) {
    const found = body.indexOf(10, from);
    const end = found === -1 ? body.length : found;
    const line = body.subarray(from, end > from && body[end - 1] === 13 ? end - 1 : end);
    from = end + 1;
    if (line.length === 0) continue;
    if (++count > BATCH_MESSAGES_MAX) throw manyMessages();
    yield readJson(line, false);
  }
}

function* valuesOf(body: Buffer): Generator<Message> {
  if (body.length > MESSAGE_MAX_BYTES)
    throw new AppError('too_large', {
      message: `A JSON body may have ${MESSAGE_MAX_BYTES} bytes. Send less at once, or NDJSON: one message a line.`,
    });
  let value: unknown;
  try {
    value = JSON.parse(body.toString('utf8'));
  } catch (error) {
    throw invalid('body', `is not JSON: ${error instanceof Error ? error.message : 'not readable'}`);
  }
  const list: unknown[] = Array.isArray(value) ? value : [value];
  if (list.length > BATCH_MESSAGES_MAX) throw manyMessages();
  for (const item of list)
    yield typeof item === 'object' && item !== null && !Array.isArray(item)
      ? { ok: true, value: item as Record<string, unknown> }
      : {
          ok: false,
          refused: { seq: null, field: 'message', reason: 'must be one JSON object', again: false },
        };
}

/**
 * The messages of a batch, by the content type that it came with.
 * @throws AppError invalid · too_large, also while they are taken one by one
 */
export function messagesOf(body: Buffer, contentType: string | null): Generator<Message> {
  const type = (contentType ?? '').split(';')[0]?.trim().toLowerCase() ?? '';
  if (NDJSON_TYPES.includes(type)) return linesOf(body);
  if (type === 'application/json') return valuesOf(body);
  throw invalid('content-type', `is "${type || 'none'}"; send application/json or application/x-ndjson`);
}
