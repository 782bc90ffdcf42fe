import { AppError, ERROR_KINDS, isDatabaseAway, isUnkeepable, type ErrorKind } from '../errors';
import { log } from '../log';
import { problemWords } from '../../words/refusals';

/** Any thrown thing as a kind and a detail; what is not ours to explain becomes undefined. */
export function explain(error: unknown): AppError | undefined {
  if (error instanceof AppError) return error;
  if (isUnkeepable(error)) return new AppError('invalid', { message: problemWords.unkeepable });
  if (isDatabaseAway(error))
    return new AppError('unavailable', {
      message: problemWords.databaseAway,
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
    title: known ? ERROR_KINDS[known.kind].title : problemWords.failedHere,
    status,
    detail: known?.message ?? problemWords.tryAgain(requestId),
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
