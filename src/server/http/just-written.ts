import { config } from '../config';

/**
 * A browser that has just written is answered by the primary until the replica surely has it: said by a cookie, so that
 * it holds whichever process answers next.
 */
const NAME = 'wakeline_wrote';
/** A look at the replica is a second old at most, and clocks are coarse. */
const SPARE_S = 2;

/** The cookie of an answer to a write; undefined where no replica could be behind. */
export function justWrittenCookie(): string | undefined {
  const { DATABASE_REPLICA_URL, DATABASE_REPLICA_LAG_S, COOKIE_SECURE } = config();
  if (!DATABASE_REPLICA_URL) return undefined;
  const secure = COOKIE_SECURE ? '; Secure' : '';
  return `${NAME}=1; Path=/; Max-Age=${DATABASE_REPLICA_LAG_S + SPARE_S}; HttpOnly; SameSite=Lax${secure}`;
}

export const hasJustWritten = (request: Request): boolean =>
  (request.headers.get('cookie') ?? '').split(';').some((c) => c.trim() === `${NAME}=1`);
