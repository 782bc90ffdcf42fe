import { createWriteStream } from 'node:fs';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { ReadableStream } from 'node:stream/web';
import { AppError } from '../errors';
import { SNIFF_BYTES } from './sniff';
import { uploadRefusals } from '../../words/refusals';

/** A body on disk: however large it is, no more than a chunk of it lies in memory. */
export interface Spooled {
  path: string;
  bytes: number;
  head: Buffer;
}

const megabytes = (bytes: number): number => Math.round(bytes / (1024 * 1024));
const SMALLER = uploadRefusals.takeSmaller;
const tooLarge = (limit: number, remedy: string): AppError =>
  new AppError('too_large', {
    message: uploadRefusals.tooLarge(megabytes(limit), remedy),
    fields: [{ field: 'body', message: uploadRefusals.atMost(megabytes(limit)) }],
  });

/**
 * Writes a body to a file of its own, which stays until `remove` is called. Cut off where it grows past `limit`,
 * whatever its length header says; `remedy` says what would do.
 * @throws AppError too_large · invalid (nothing came, or it broke off)
 */
export async function spool(
  request: Request,
  limit: number,
  remedy = SMALLER,
): Promise<Spooled & { remove: () => Promise<void> }> {
  if (Number(request.headers.get('content-length') ?? 0) > limit) throw tooLarge(limit, remedy);
  if (!request.body)
    throw new AppError('invalid', {
      message: uploadRefusals.noFile,
      fields: [{ field: 'body', message: uploadRefusals.sendAsBody }],
    });
  const folder = await mkdtemp(path.join(tmpdir(), 'wakeline-file-'));
  const remove = () => rm(folder, { recursive: true, force: true });
  const file = path.join(folder, 'body');
  let bytes = 0;
  let head = Buffer.alloc(0);
  const counted = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      bytes += chunk.length;
      if (bytes > limit) return done(tooLarge(limit, remedy));
      if (head.length < SNIFF_BYTES)
        head = Buffer.concat([head, chunk.subarray(0, SNIFF_BYTES - head.length)]);
      done(null, chunk);
    },
  });
  try {
    await pipeline(
      Readable.fromWeb(request.body as ReadableStream<Uint8Array>),
      counted,
      createWriteStream(file, { mode: 0o600 }),
    );
  } catch (error) {
    await remove();
    if (error instanceof AppError || !brokeOff(error)) throw error;
    throw new AppError('invalid', {
      message: uploadRefusals.brokeOffSendAgain,
      fields: [{ field: 'body', message: uploadRefusals.brokeOff }],
    });
  }
  return { path: file, bytes, head, remove };
}

/** As `spool`, for work that is done when `use` is: the file is taken away then. */
export async function spooled<T>(
  request: Request,
  limit: number,
  use: (file: Spooled) => Promise<T>,
): Promise<T> {
  const file = await spool(request, limit);
  try {
    return await use(file);
  } finally {
    await file.remove();
  }
}

/** The sender went away; a full disk is another matter. */
const brokeOff = (error: unknown): boolean =>
  error instanceof Error &&
  (error.name === 'AbortError' ||
    ['ERR_STREAM_PREMATURE_CLOSE', 'ECONNRESET', 'UND_ERR_SOCKET', 'ABORT_ERR'].includes(
      (error as { code?: string }).code ?? '',
    ));
