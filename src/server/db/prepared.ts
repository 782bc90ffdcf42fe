/**
 * Statements that come again on a connection are prepared there: PostgreSQL then need not plan them each time, which for a
 * page's statements, with row-level security in them, takes longer than running them. It goes on planning by the values
 * where that is the cheaper way (`plan_cache_mode` auto).
 */

/** Shorter ones are planned in no time. */
const AT_LEAST_CHARACTERS = 150;
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

  /** After an error: a statement that it makes useless gets another name. */
  failed(text: string, error: unknown): void {
    if (error instanceof Error && 'code' in error && OUTDATED.has(String(error.code)))
      this.names.delete(text);
  }
}

type Answer = (error: Error | null, result?: unknown) => void;
interface Statement {
  text: string;
  values?: readonly unknown[];
  name?: string;
}
/** As much of a connection as knex uses. */
export interface Querying {
  query(statement: Statement, answer: Answer): unknown;
}

/** From here on, what comes again on this connection is prepared on it. */
export function prepareRepeated(connection: Querying): void {
  const prepared = new Prepared();
  const query = connection.query.bind(connection);
  connection.query = (statement, answer) => {
    // knex hands over plain statements, cursors and texts without values
    const name =
      typeof answer === 'function' && Object.getPrototypeOf(statement) === Object.prototype
        ? prepared.nameOf(statement.text)
        : undefined;
    if (name === undefined) return query(statement, answer);
    return query({ ...statement, name }, (error, result) => {
      if (error) prepared.failed(statement.text, error);
      answer(error, result);
    });
  };
}
