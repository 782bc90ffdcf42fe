import type { LoggerTokenView, LoggerView } from '../../schemas/api/loggers';
import type { Tx } from '../db/transaction';
import { BY_HTTPS } from './ingest-loggers';

export interface TokenToMake {
  loggerId: number;
  hash: Buffer;
  name: string;
  personId: number;
  /** Those before may still be used for so long. */
  overlapS: number;
}

/**
 * Gives a logger a new token, by its hash; those before end when the overlap is over, or when they would have anyway.
 * Says how many of them are still in force at this moment, and when the overlap ends.
 */
export async function addToken(
  tx: Tx,
  { loggerId, hash, name, personId, overlapS }: TokenToMake,
): Promise<{ ending: number; endsAt: Date; serial: string }> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `update ingest_token set ended_at = now() + make_interval(secs => :overlapS), ended_by = :personId
     where logger_id = :loggerId and (ended_at is null or ended_at > now() + make_interval(secs => :overlapS))
     returning id`,
    { loggerId, personId, overlapS },
  );
  await tx.raw('insert into ingest_token (logger_id, hash, name, made_by) values (?, ?, ?, ?)', [
    loggerId,
    hash,
    name,
    personId,
  ]);
  const logger = await tx.raw<{ rows: { serial: string; endsAt: Date }[] }>(
    `select serial, now() + make_interval(secs => ?) as "endsAt" from logger where id = ?`,
    [overlapS, loggerId],
  );
  const found = logger.rows[0];
  if (!found) throw new Error('a logger that was found is gone');
  return { ending: rows.length, endsAt: found.endsAt, serial: found.serial };
}

/** Ends a token now. Undefined: the logger has none of this identifier; `ended` says that it had ended before. */
export async function endTokenNow(
  tx: Tx,
  loggerId: number,
  tokenRef: string,
  personId: number,
): Promise<{ ended: boolean; name: string; serial: string } | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number; ended: boolean; name: string; serial: string }[] }>(
    `select t.id, coalesce(t.ended_at <= now(), false) as ended, t.name, l.serial
     from ingest_token t join logger l on l.id = t.logger_id where t.logger_id = ? and t.ref = ?`,
    [loggerId, tokenRef],
  );
  const found = rows[0];
  if (found && !found.ended)
    await tx.raw('update ingest_token set ended_at = now(), ended_by = ? where id = ?', [personId, found.id]);
  return found;
}

const iso = (at: Date | null): string | null => at && at.toISOString();

/** The loggers of a site that the actor sees, with their tokens and what was refused. */
export async function loggersOfSite(tx: Tx, siteId: number): Promise<LoggerView[]> {
  type Row = Omit<LoggerView, 'lastSpokeAt' | 'refusals' | 'wrongTokens' | 'tokens'> & {
    number: number;
    lastSpokeAt: Date | null;
  };
  const { rows: loggers } = await tx.raw<{ rows: Row[] }>(
    `select l.id as number, l.ref as id, l.serial, l.firmware, coalesce(l.leased_until > now(), false) as connected,
            coalesce(l.leased_by = ?, false) as "byHttps", l.last_spoke_at as "lastSpokeAt",
            l.last_address as "lastAddress", l.refused_count::int as refused
     from logger l where l.site_id = ? order by l.serial`,
    [BY_HTTPS, siteId],
  );
  const ids = [loggers.map((l) => l.number)];
  const { rows: tokens } = await tx.raw<{ rows: TokenRow[] }>(
    `select t.logger_id as logger, t.ref as id, t.name, t.created_at as "madeAt", maker.name as "madeBy",
            t.last_used_at as "lastUsedAt", t.last_address as "lastAddress", t.ended_at as "endsAt",
            ender.name as "endedBy", case when t.ended_at is null then 'in_force'
              when t.ended_at > now() then 'ending' else 'ended' end as state
     from ingest_token t left join person maker on maker.id = t.made_by left join person ender on ender.id = t.ended_by
     where t.logger_id = any (?::int4[]) order by t.ended_at desc nulls first, t.id desc`,
    ids,
  );
  const { rows: refusals } = await tx.raw<{ rows: RefusalRow[] }>(
    `select logger_id as logger, field, reason, count::int, first_at as "firstAt", last_at as "lastAt"
     from logger_refusal where logger_id = any (?::int4[]) order by last_at desc, kind`,
    ids,
  );
  const { rows: wrong } = await tx.raw<{ rows: (Counted & { address: string })[] }>(
    `select address, count::int, first_at as "firstAt", last_at as "lastAt" from wrong_token
     where address in (select last_address from logger where id = any (?::int4[]))`,
    ids,
  );
  return loggers.map(({ number, lastSpokeAt, ...logger }) => {
    const attempts = wrong.find((w) => w.address === logger.lastAddress);
    return {
      ...logger,
      lastSpokeAt: iso(lastSpokeAt),
      refusals: refusals
        .filter((r) => r.logger === number)
        .map(({ field, reason, ...counted }) => ({ field, reason, ...counts(counted) })),
      wrongTokens: attempts ? counts(attempts) : null,
      tokens: tokens
        .filter((t) => t.logger === number)
        .map(({ logger: _logger, ...t }) => ({
          ...t,
          madeAt: t.madeAt.toISOString(),
          lastUsedAt: iso(t.lastUsedAt),
          endsAt: iso(t.endsAt),
        })),
    };
  });
}

interface Counted {
  count: number;
  firstAt: Date;
  lastAt: Date;
}
type RefusalRow = Counted & { logger: number; field: string; reason: string };
type TokenRow = Omit<LoggerTokenView, 'madeAt' | 'lastUsedAt' | 'endsAt'> & {
  logger: number;
  madeAt: Date;
  lastUsedAt: Date | null;
  endsAt: Date | null;
};
const counts = ({ count, firstAt, lastAt }: Counted) => ({
  count,
  firstAt: firstAt.toISOString(),
  lastAt: lastAt.toISOString(),
});
