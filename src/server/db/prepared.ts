/**
 * Statements that come again on a connection are prepared there: PostgreSQL then need not plan them each time, which for a
 * page's statements, with row-level security in them, takes longer than running them. It goes on planning by the values
 * where that is the cheaper way (`plan_cache_mode` auto).
 */

/** Shorter ones begin and end transactions. */
const AT_LEAST_CHARACTERS = 30;
/** How often a statement must have come before; one that is made of what somebody typed seldom comes again. */
const AFTER_TIMES = 3;
/** Each takes memory of the server, some ten kB. */
const MOST_A_CONNECTION = 120;
const MOST_SEEN = 1000;

/** A plan is of no use any more: what it gives has other types by now, or the server has forgotten it. */
const OUTDATED = new Set(['0A000', '26000']);

/** What is prepared on one connection. */
export class Prepared {
  private readonly seen = new Map<string, number>();
  private readonly names = new Map<string, string>();
  private made = 0;

  /** The name under which to run a statement; undefined: without one. */
  nameOf(text: string): string | undefined {
    if (text.length < AT_LEAST_CHARACTERS) return undefined;
    const known = this.names.get(text);
    if (known !== undefined || this.names.size >= MOST_A_CONNECTION) return known;
    const times = (this.seen.get(text) ?? 0) + 1;
    if (times <= AFTER_TIMES) {
      if (this.seen.size >= MOST_SEEN) this.seen.clear();
      this.seen.set(text, times);
      return undefined;
    }
    this.seen.delete(text);
    const name = `w${++this.made}`;
    this.names.set(text, name);
    return name;
  }

  /** After an error: a statement that it makes useless gets another name. True: it does. */
  failed(text: string, error: unknown): boolean {
    const outdated = error instanceof Error && 'code' in error && OUTDATED.has(String(error.code));
    if (outdated) this.names.delete(text);
    return outdated;
  }
}

type Answer = (error: Error | null, result?: unknown) => void;
interface Statement {
  text: string;
  values?: readonly unknown[];
  name?: string;
}
/** As much of a connection as knex and a pool use. */
export interface Querying {
  query(statement: Statement, answer: Answer): unknown;
  query(text: string, values: readonly unknown[], answer: Answer): unknown;
}

/** What is asked, where it is a plain statement with an answer to come: no cursor, no text without values. */
function plain(asked: readonly unknown[]): [Statement, Answer] | undefined {
  const [first, second, third] = asked;
  if (typeof first === 'string')
    return Array.isArray(second) && typeof third === 'function'
      ? [{ text: first, values: second }, third as Answer]
      : undefined;
  return typeof second === 'function' && Object.getPrototypeOf(first) === Object.prototype
    ? [first as Statement, second as Answer]
    : undefined;
}

/** From here on, what comes again on this connection is prepared on it. */
export function prepareRepeated(connection: Querying): void {
  const prepared = new Prepared();
  const query = connection.query.bind(connection) as (...asked: unknown[]) => unknown;
  connection.query = (...asked: unknown[]) => {
    const known = plain(asked);
    const name = known && prepared.nameOf(known[0].text);
    if (!known || name === undefined) return query(...asked);
    const [statement, answer] = known;
    return query({ ...statement, name }, (error: Error | null, result?: unknown) => {
      // outside a transaction it can be asked again at once; within one this fails too, and the first word counts
      if (error && prepared.failed(statement.text, error))
        query(statement, (again: Error | null, found?: unknown) =>
          again ? answer(error) : answer(null, found),
        );
      else answer(error, result);
    });
  };
}
