import type { z } from 'zod';
import type { Actor, Permission } from '../../domain/access/permissions';
import type { TokenScope } from '../../domain/access/scopes';
import type { Tx } from '../db/transaction';
import type { TokenHolder } from '../queries/api-tokens';

interface Common {
  /** Its name in the document; stable. */
  id: string;
  /** Under /api/v1, with {names} of path parameters. */
  path: `/${string}`;
  group: string;
  summary: string;
  description: string;
  /** null: any token will do. */
  scope: TokenScope | null;
  permission: Permission;
  /** `$site` and the like stand for what the reader sees: curl.ts. */
  example: { path?: Record<string, string>; query?: Record<string, string>; body?: Record<string, unknown> };
}

export interface V1Call {
  actor: Actor;
  holder: TokenHolder;
  at: Date;
  address: string | null;
}
type Of<T extends z.ZodType | undefined> = T extends z.ZodType ? z.infer<T> : undefined;
export interface Asked<
  P extends z.ZodType | undefined,
  Q extends z.ZodType | undefined,
  B extends z.ZodType | undefined,
> extends V1Call {
  tx: Tx;
  params: Of<P>;
  query: Of<Q>;
  body: Of<B>;
}

/** One that answers with JSON: reads, or writes through a service. */
export interface JsonOperation extends Common {
  kind: 'json';
  method: 'GET' | 'POST';
  params: z.ZodType | undefined;
  query: z.ZodType | undefined;
  body: z.ZodType | undefined;
  answer: z.ZodType;
  /** Statuses of success, with what each says. */
  statuses: Record<number, string>;
  run: (call: V1Call & { tx: Tx; params: unknown; query: unknown; body: unknown }) => Promise<Answered>;
}
export interface Answered {
  status: number;
  body: unknown;
}

/** Records of a stream, in pieces; each is read when the piece before has been sent. */
export interface RecordStream {
  format: 'ndjson' | 'csv';
  /** File name without its ending. */
  name: string;
  columns: readonly StreamColumn[];
  pieces: AsyncGenerator<readonly unknown[], void, void>;
}
export interface StreamColumn {
  header: string;
  value: (record: never) => string | number | boolean | Date | null | undefined;
}
/** One that answers with records, one a line, of any number. */
export interface StreamOperation extends Common {
  kind: 'stream';
  method: 'GET';
  params: undefined;
  query: z.ZodType;
  body: undefined;
  /** What one line of NDJSON is. */
  record: z.ZodType;
  open: (call: V1Call & { query: unknown }) => Promise<RecordStream>;
}
export type Operation = JsonOperation | StreamOperation;

interface ReadSpec<
  P extends z.ZodType | undefined,
  Q extends z.ZodType | undefined,
  A extends z.ZodType,
> extends Common {
  params?: P;
  query?: Q;
  answer: A;
  run: (call: Asked<P, Q, undefined>) => Promise<z.input<A>>;
}
interface WriteSpec<
  P extends z.ZodType | undefined,
  B extends z.ZodType,
  A extends z.ZodType,
> extends Common {
  params?: P;
  body: B;
  answer: A;
  statuses: Record<number, string>;
  run: (call: Asked<P, undefined, B>) => Promise<{ status: number; body: z.input<A> }>;
}

/** A GET that answers with JSON. */
export const reading = <
  A extends z.ZodType,
  P extends z.ZodType | undefined = undefined,
  Q extends z.ZodType | undefined = undefined,
>(
  spec: ReadSpec<P, Q, A>,
): JsonOperation => ({
  kind: 'json',
  method: 'GET',
  ...spec,
  params: spec.params,
  query: spec.query,
  body: undefined,
  statuses: { 200: 'As asked for' },
  // the door has checked what comes in by the same schemas
  run: async (call) => ({ status: 200, body: await spec.run(call as Asked<P, Q, undefined>) }),
});

/** A POST through a service; may carry an Idempotency-Key. */
export const writing = <
  B extends z.ZodType,
  A extends z.ZodType,
  P extends z.ZodType | undefined = undefined,
>(
  spec: WriteSpec<P, B, A>,
): JsonOperation => ({
  kind: 'json',
  method: 'POST',
  ...spec,
  params: spec.params,
  query: undefined,
  body: spec.body,
  run: (call) => spec.run(call as Asked<P, undefined, B>),
});

/** A GET that streams records as NDJSON or CSV. */
export const streaming = <Q extends z.ZodType>(
  spec: Common & {
    query: Q;
    record: z.ZodType;
    open: (call: V1Call & { query: z.infer<Q> }) => Promise<RecordStream>;
  },
): StreamOperation => ({
  kind: 'stream',
  method: 'GET',
  ...spec,
  params: undefined,
  body: undefined,
  open: (call) => spec.open(call as V1Call & { query: z.infer<Q> }),
});
