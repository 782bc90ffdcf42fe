import { poolsNow } from './pools';

/** Of Knex's pool what is asked of it here. */
interface Tarn {
  numUsed(): number;
  numFree(): number;
  numPendingAcquires(): number;
}
export interface PoolUse {
  pool: string;
  used: number;
  idle: number;
  /** Askers that wait for a connection. */
  waiting: number;
}

/** How the pools of this process are used. */
export function poolUse(): PoolUse[] {
  const { knex, signIn } = poolsNow();
  const use = Object.entries(knex).map(([pool, { client }]): PoolUse => {
    const tarn = (client as { pool?: Tarn }).pool;
    return {
      pool,
      used: tarn?.numUsed() ?? 0,
      idle: tarn?.numFree() ?? 0,
      waiting: tarn?.numPendingAcquires() ?? 0,
    };
  });
  if (signIn)
    use.push({
      pool: 'lucia',
      used: signIn.totalCount - signIn.idleCount,
      idle: signIn.idleCount,
      waiting: signIn.waitingCount,
    });
  return use;
}
