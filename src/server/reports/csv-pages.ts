import type { APIContext } from 'astro';
import type { Actor } from '../../domain/access/permissions';
import { actorOfCookie } from '../auth/sessions';
import { asActor, type Tx } from '../db/transaction';
import { bodyOf, streamHeaders } from '../v1/stream';
import type { Column } from './csv';

/** Tables without an end as downloads: page by page, as fast as they are taken. */

export interface RowsPage<Row, Next> {
  rows: readonly Row[];
  /** Where the next page begins; null: this is the last. */
  next: Next | null;
}

/** Rows in a page: enough that asking costs little beside sending. */
export const ROWS_A_PAGE = 1000;

/** A page of rows that were asked for with one more than it holds. */
export function pageBy<Row, Next>(rows: readonly Row[], nextOf: (last: Row) => Next): RowsPage<Row, Next> {
  const shown = rows.slice(0, ROWS_A_PAGE);
  const last = shown.at(-1);
  return { rows: shown, next: rows.length > ROWS_A_PAGE && last !== undefined ? nextOf(last) : null };
}

/** Pages one after the other; each is asked for when the one before was taken. */
export async function* pagesFrom<Row, Next>(
  first: RowsPage<Row, Next>,
  read: (next: Next) => Promise<RowsPage<Row, Next>>,
): AsyncGenerator<readonly Row[], void, void> {
  let page = first;
  for (;;) {
    yield page.rows;
    if (page.next === null) return;
    page = await read(page.next);
  }
}

/**
 * All rows as a download. The first page comes of the transaction of the request, which also says whether the actor may;
 * each further one has its own, so that a slow reader holds no connection and memory stays as it is. It breaks off where
 * the session ends.
 * @param name without ending
 */
export async function csvPages<Row, Next>(
  { tx, actor, context }: { tx: Tx; actor: Actor; context: APIContext },
  name: string,
  read: (tx: Tx, next: Next | undefined) => Promise<RowsPage<Row, Next>>,
  columns: readonly Column<Row>[],
): Promise<Response> {
  const pieces = pagesFrom(await read(tx, undefined), (next) => asActor(actor, (own) => read(own, next)));
  const stream = { format: 'csv' as const, name, columns, pieces };
  const cookies = context.request.headers.get('cookie') ?? undefined;
  const body = bodyOf(stream, {
    drained: context.locals.drained ?? (() => Promise.resolve()),
    holds: async () => (await actorOfCookie(cookies))?.actor.personId === actor.personId,
    ended: () => undefined,
  });
  return new Response(body, { headers: { ...streamHeaders(stream), 'x-content-type-options': 'nosniff' } });
}
