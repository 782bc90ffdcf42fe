import { errorTitles } from '../words/refusals';
/** What can go wrong in a use case, and the one table of what each kind means outside. */

export const ERROR_KINDS = {
  invalid: { status: 422, close: 4422, title: errorTitles.invalid },
  unauthenticated: { status: 401, close: 4401, title: errorTitles.unauthenticated },
  forbidden: { status: 403, close: 4403, title: errorTitles.forbidden },
  not_found: { status: 404, close: 4404, title: errorTitles.notFound },
  not_allowed: { status: 405, close: 4405, title: errorTitles.notAllowed },
  conflict: { status: 409, close: 4409, title: errorTitles.conflict },
  too_large: { status: 413, close: 1009, title: errorTitles.tooLarge },
  too_many: { status: 429, close: 4429, title: errorTitles.tooMany },
  unavailable: { status: 503, close: 1013, title: errorTitles.unavailable },
} as const;
export type ErrorKind = keyof typeof ERROR_KINDS;

export interface FieldFault {
  field: string;
  message: string;
}

export interface ErrorDetail {
  /** What was wrong, where, what to do. */
  message?: string;
  fields?: FieldFault[];
  /** Seconds until another try makes sense. */
  retryAfterS?: number;
  /** What stands instead, where somebody else was first: whoever asked can then show both. */
  current?: unknown;
}

export class AppError extends Error {
  constructor(
    readonly kind: ErrorKind,
    readonly detail: ErrorDetail = {},
  ) {
    super(detail.message ?? ERROR_KINDS[kind].title);
    this.name = 'AppError';
  }
}

/**
 * PostgreSQL out of reach, shutting down, out of connections, room or memory, or not done in the time that was given:
 * worth a later try, and no fault of the request.
 */
const AWAY = new Set([
  'ECONNREFUSED',
  'ECONNRESET',
  'EPIPE',
  'ETIMEDOUT',
  'EHOSTUNREACH',
  'ENETUNREACH',
  '57P01',
  '57P02',
  '57P03',
  '53100',
  '53200',
  '53300',
  '55P03',
  '57014',
  '08006',
  '08001',
  '08003',
]);
export function isDatabaseAway(error: unknown): boolean {
  if (!(error instanceof Error)) return false;
  const code = (error as { code?: unknown }).code;
  return (
    (typeof code === 'string' && AWAY.has(code)) ||
    /Connection terminated|is not queryable|Timeout acquiring a connection|timeout exceeded when trying to connect|^timeout expired$/.test(
      error.message,
    ) ||
    // a pooler has one code for all that befalls it
    (code === '08P01' && /query_wait_timeout|login fail|connect|crash|shut|closed/.test(error.message))
  );
}

/** What a query found, or `not_found`: the same answer for what is not there and for what is somebody else's. */
export function found<T>(value: T | null | undefined, what: string): T {
  if (value === undefined || value === null)
    throw new AppError('not_found', { message: errorTitles.noSuch(what) });
  return value;
}

/** Text that PostgreSQL can't keep: a NUL, or what its encoding has no place for. */
export const isUnkeepable = (error: unknown): boolean =>
  error instanceof Error && 'code' in error && (error.code === '22021' || error.code === '22P05');
