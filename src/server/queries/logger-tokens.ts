import type { Tx } from '../db/transaction';

/** Ends a logger's tokens and gives it a new one, by its hash. Says how many were ended. */
export async function replaceToken(
  tx: Tx,
  loggerId: number,
  hash: Buffer,
): Promise<{ ended: number; serial: string }> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `update ingest_token set ended_at = now() where logger_id = ? and (ended_at is null or ended_at > now()) returning id`,
    [loggerId],
  );
  await tx.raw('insert into ingest_token (logger_id, hash) values (?, ?)', [loggerId, hash]);
  const logger = await tx.raw<{ rows: { serial: string }[] }>('select serial from logger where id = ?', [
    loggerId,
  ]);
  return { ended: rows.length, serial: logger.rows[0]?.serial ?? '' };
}
