import { asSignIn, type Tx } from '../db/transaction';

/** Sessions as the person whom they belong to sees them. Known by the hash of their id. */

export async function describeSession(
  hash: string,
  from: { address: string | null; agent: string | null; kept: boolean },
): Promise<void> {
  await asSignIn((tx) =>
    tx('session')
      .where({ id: hash })
      .update({ address: from.address, agent: from.agent?.slice(0, 300) ?? null, kept: from.kept }),
  );
}

export interface SessionRow {
  hash: string;
  createdAt: Date;
  usedAt: Date;
  expiresAt: Date;
  address: string | null;
  agent: string | null;
  kept: boolean;
}

/** Sessions of a person that still hold, the last used first. */
export async function sessionsOf(tx: Tx, personId: number): Promise<SessionRow[]> {
  return tx('session')
    .where({ user_id: personId })
    .where('expires_at', '>', tx.fn.now())
    .orderBy('used_at', 'desc')
    .select({
      hash: 'id',
      createdAt: 'created_at',
      usedAt: 'used_at',
      expiresAt: 'expires_at',
      address: 'address',
      agent: 'agent',
      kept: 'kept',
    });
}

export interface SecondFactor {
  secret: string | null;
  confirmedAt: Date | null;
  usedStep: number | null;
  recoveryCodes: string[];
}

export async function secondFactorOf(tx: Tx, personId: number): Promise<SecondFactor | undefined> {
  return tx('person').where({ id: personId }).forUpdate().first<SecondFactor | undefined>({
    secret: 'totp_secret',
    confirmedAt: 'totp_confirmed_at',
    usedStep: 'totp_used_step',
    recoveryCodes: 'recovery_codes',
  });
}

export async function setSecondFactor(
  tx: Tx,
  personId: number,
  factor: Partial<SecondFactor>,
): Promise<void> {
  const row: Record<string, unknown> = {};
  if ('secret' in factor) row.totp_secret = factor.secret;
  if ('confirmedAt' in factor) row.totp_confirmed_at = factor.confirmedAt;
  if ('usedStep' in factor) row.totp_used_step = factor.usedStep;
  if ('recoveryCodes' in factor) row.recovery_codes = factor.recoveryCodes;
  await tx('person').where({ id: personId }).update(row);
}

/** Ends one session of a person by the beginning of its hash. */
export async function endSessionByKey(tx: Tx, personId: number, key: string): Promise<number> {
  if (!/^[0-9a-f]{24}$/.test(key)) return 0;
  return tx('session').where({ user_id: personId }).whereRaw('left(id, 24) = ?', [key]).delete();
}
