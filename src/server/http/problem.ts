import { AppError, ERROR_KINDS, isDatabaseAway, type ErrorKind } from '../errors';
import { log } from '../log';

/** Any thrown thing as a kind and a detail; what is not ours to explain becomes undefined. */
export function explain(error: unknown): AppError | undefined {
  if (error instanceof AppError) return error;
  if (isDatabaseAway(error))
    return new AppError('unavailable', {
      message: 'The database does not answer. Readings already acknowledged are kept; try again in a minute.',
      retryAfterS: 10,
    });
  return undefined;
}

/** An RFC 9457 problem document. Above 499 the reason stays inside, in the log under the request id. */
export function problem(error: unknown, requestId: string): Response {
  const known = explain(error);
  if (!known || ERROR_KINDS[known.kind].status > 499) log.error({ error }, 'a request failed');
  const kind: ErrorKind | 'internal' = known?.kind ?? 'internal';
  const status = known ? ERROR_KINDS[known.kind].status : 500;
  const body = {
    type: `urn:wakeline:problem:${kind}`,
    title: known ? ERROR_KINDS[known.kind].title : 'Something failed on our side',
    status,
    detail: known?.message ?? `Try again; if it stays, report it with the number ${requestId}.`,
    fields: known?.detail.fields ?? [],
    ...(known?.detail.current === undefined ? {} : { current: known.detail.current }),
    requestId,
  };
  const headers: Record<string, string> = {
    'content-type': 'application/problem+json',
    'cache-control': 'no-store',
  };
  if (known?.detail.retryAfterS) headers['retry-after'] = String(known.detail.retryAfterS);
  return new Response(JSON.stringify(body), { status, headers });
}
