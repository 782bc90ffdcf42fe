/** The browser's way to the API: JSON in and out, problem documents (RFC 9457) as a typed error. */
import { apiSaid } from '../words/browser';

export interface FieldProblem {
  field: string;
  message: string;
}

/** What the API answered instead of data. `status` 0: no answer at all (network gone, server away). */
export class ApiError extends Error {
  constructor(
    readonly status: number,
    readonly title: string,
    message: string,
    readonly fields: readonly FieldProblem[] = [],
    readonly requestId: string | null = null,
    /** Seconds until another try makes sense, where the server says so. */
    readonly retryAfterS: number | null = null,
    /** What stands on the server instead, where two people changed the same thing. */
    readonly current: unknown = null,
  ) {
    super(message);
    this.name = 'ApiError';
  }

  /** What is wrong with one field, if anything. */
  fault(field: string): string | undefined {
    return this.fields.find((f) => f.field === field || f.field === `body.${field}`)?.message;
  }
}

export type QueryValue = string | number | boolean | null | undefined;

/** Adds what is set of `query` to a path; empty values are left out. */
export function withQuery(path: string, query: Record<string, QueryValue>): string {
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries(query))
    if (value !== undefined && value !== null && value !== '') search.set(key, String(value));
  const text = search.toString();
  return text ? `${path}?${text}` : path;
}

export interface Call {
  method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';
  /** Sent as JSON. */
  body?: unknown;
  query?: Record<string, QueryValue>;
  headers?: Record<string, string>;
  signal?: AbortSignal;
  /** Goes out though the page is left at this moment. */
  keepalive?: boolean;
}

const isRecord = (value: unknown): value is Record<string, unknown> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

function fieldsOf(value: unknown): FieldProblem[] {
  if (!Array.isArray(value)) return [];
  return value.flatMap((f: unknown) =>
    isRecord(f) && typeof f.field === 'string' && typeof f.message === 'string'
      ? [{ field: f.field, message: f.message }]
      : [],
  );
}

/** The error that an answer stands for. */
export async function errorOf(response: Response): Promise<ApiError> {
  const retryAfter = Number(response.headers.get('retry-after'));
  const retryAfterS = retryAfter > 0 ? retryAfter : null;
  const body: unknown = await response.json().catch(() => null);
  if (!isRecord(body))
    return new ApiError(
      response.status,
      apiSaid.notAsExpected,
      apiSaid.noExplanation(response.status),
      [],
      null,
      retryAfterS,
    );
  return new ApiError(
    response.status,
    typeof body.title === 'string' ? body.title : apiSaid.failed,
    typeof body.detail === 'string' ? body.detail : apiSaid.answered(response.status),
    fieldsOf(body.fields),
    typeof body.requestId === 'string' ? body.requestId : null,
    retryAfterS,
    body.current ?? null,
  );
}

/**
 * Calls the API and gives its JSON (undefined where it answers with none).
 * @throws ApiError for every answer that is not a success, and where there is no answer
 */
export async function api<T>(path: string, call: Call = {}): Promise<T> {
  const headers: Record<string, string> = { ...call.headers, accept: 'application/json' };
  if (call.body !== undefined) headers['content-type'] = 'application/json';
  let response: Response;
  try {
    response = await fetch(call.query ? withQuery(path, call.query) : path, {
      method: call.method ?? 'GET',
      headers,
      credentials: 'same-origin',
      body: call.body === undefined ? undefined : JSON.stringify(call.body),
      signal: call.signal,
      keepalive: call.keepalive,
    });
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw new ApiError(0, apiSaid.outOfReach, apiSaid.noAnswer);
  }
  if (!response.ok) throw await errorOf(response);
  if (response.status === 204) return undefined as T;
  return (await response.json()) as T;
}
