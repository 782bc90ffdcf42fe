import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { holdKey, keepReply, keptReply } from '../queries/api-tokens';
import { fingerprintOf } from '../reports/fingerprint';
import type { Answered } from './operation';

/** A key counts so long. */
export const KEY_HOURS = 24;
const KEY = /^[\x21-\x7e]{1,255}$/;

/** The key of a request, with or without the quotes of a structured field; null: it has none. @throws AppError invalid */
export function keyOf(header: string | null): string | null {
  if (header === null) return null;
  const key = /^"(.*)"$/.exec(header)?.[1] ?? header;
  if (KEY.test(key)) return key;
  const message = 'Give 1 to 255 printable characters without blanks: a UUID does well.';
  throw new AppError('invalid', { message, fields: [{ field: 'Idempotency-Key', message }] });
}

/**
 * Does a write once for a key: the same request again gets the reply of the first. Reply and change are of one
 * transaction, so neither is ever there without the other. What was refused left nothing: it may be mended and sent again.
 * @throws AppError conflict (the first one is still at work) · invalid (the key was used for another request)
 */
export async function once(
  tx: Tx,
  asked: { tokenId: number; key: string | null; request: unknown; at: Date },
  write: () => Promise<Answered>,
): Promise<Answered & { replayed: boolean }> {
  const { tokenId, key, at } = asked;
  if (key === null) return { ...(await write()), replayed: false };
  if (!(await holdKey(tx, tokenId, key)))
    throw new AppError('conflict', {
      message: 'A request with this Idempotency-Key is at work. Wait a moment, then send the same again.',
      retryAfterS: 1,
    });
  const since = new Date(at.getTime() - KEY_HOURS * 3_600_000);
  const fingerprint = fingerprintOf(asked.request);
  const kept = await keptReply(tx, tokenId, key, since);
  if (kept && kept.fingerprint !== fingerprint) {
    const message = 'This key was used for another request. Take a new key for a new request.';
    throw new AppError('invalid', { message, fields: [{ field: 'Idempotency-Key', message }] });
  }
  if (kept) return { status: kept.status, body: kept.body, replayed: true };
  const done = await write();
  await keepReply(tx, tokenId, key, { fingerprint, ...done }, at, since);
  return { ...done, replayed: false };
}
