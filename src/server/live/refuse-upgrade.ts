import type { Duplex } from 'node:stream';
import { STATUS_CODES } from 'node:http';
import { AppError, ERROR_KINDS, isDatabaseAway } from '../errors';
import { currentRequest } from '../request';
import { upgradeFailures } from '../../words/refusals';

/** Answers an upgrade with a plain HTTP refusal that says why, and closes the connection. */
export function refuseUpgrade(socket: Duplex, error: unknown): void {
  const known =
    error instanceof AppError
      ? error
      : isDatabaseAway(error)
        ? new AppError('unavailable', { message: upgradeFailures.databaseAway, retryAfterS: 10 })
        : undefined;
  const status = known ? ERROR_KINDS[known.kind].status : 500;
  const body = JSON.stringify({
    type: `urn:wakeline:problem:${known?.kind ?? 'internal'}`,
    title: known ? ERROR_KINDS[known.kind].title : upgradeFailures.failedHere,
    status,
    detail: known?.message ?? upgradeFailures.tryAgain,
    requestId: currentRequest()?.requestId,
  });
  const lines = [
    `HTTP/1.1 ${status} ${STATUS_CODES[status] ?? ''}`,
    'Connection: close',
    'Content-Type: application/problem+json',
    `Content-Length: ${Buffer.byteLength(body)}`,
  ];
  if (known?.detail.retryAfterS) lines.push(`Retry-After: ${known.detail.retryAfterS}`);
  if (status === 401) lines.push('WWW-Authenticate: Bearer');
  socket.end(`${lines.join('\r\n')}\r\n\r\n${body}`);
}
