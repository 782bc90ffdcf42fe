import { AppError } from '../errors';
import { bodyRefusals } from '../../words/refusals';

export const BODY_MAX_BYTES = 256 * 1024;

/** The body as text, cut off where it grows past the limit whatever its length header says. */
async function limitedText(request: Request, limit: number): Promise<string> {
  const tooLarge = () => new AppError('too_large', { message: bodyRefusals.tooLarge(limit) });
  if (Number(request.headers.get('content-length') ?? 0) > limit) throw tooLarge();
  if (!request.body) return '';
  const chunks: Uint8Array[] = [];
  let size = 0;
  const reader = request.body.getReader();
  for (;;) {
    const { done, value } = await reader.read();
    if (done) break;
    size += value.byteLength;
    if (size > limit) {
      await reader.cancel();
      throw tooLarge();
    }
    chunks.push(value);
  }
  return Buffer.concat(chunks).toString('utf8');
}

/** A JSON or form body as an object. */
export async function readBody(request: Request, limit = BODY_MAX_BYTES): Promise<unknown> {
  const type = (request.headers.get('content-type') ?? '').split(';')[0]?.trim();
  const text = await limitedText(request, limit);
  if (type === 'application/x-www-form-urlencoded') return Object.fromEntries(new URLSearchParams(text));
  if (type !== 'application/json')
    throw new AppError('invalid', {
      message: bodyRefusals.contentType(type ?? ''),
      fields: [{ field: 'content-type', message: bodyRefusals.sendJson }],
    });
  try {
    return JSON.parse(text) as unknown;
  } catch (error) {
    const reason = error instanceof Error ? error.message : bodyRefusals.unreadable;
    throw new AppError('invalid', {
      message: bodyRefusals.noJson(reason),
      fields: [{ field: 'body', message: reason }],
    });
  }
}
