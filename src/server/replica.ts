import { config } from './config';
import { database } from './db/pools';
import { beginReading, type ActorSight, type Tx } from './db/transaction';
import { isDatabaseAway } from './errors';
import { log } from './log';
import { primaryPosition, replicaPosition } from './queries/replication';

/**
 * The streaming replica answers named readers of history and reports, as long as it is there and not too far behind;
 * otherwise the primary does. How far: where it has replayed all that the primary had written at the moment of asking,
 * not at all; else by the newest commit that it replayed, which is never too little.
 */
export interface ReplicaStatus {
  configured: boolean;
  /** `behind`: it answers, but too late to be read from. */
  state: 'serves' | 'behind' | 'away';
  /** Seconds; null where it can't be told. */
  lagS: number | null;
  lookedAt: Date | null;
}

const NONE: ReplicaStatus = { configured: false, state: 'away', lagS: null, lookedAt: null };
/** So long a look counts, ms. One that found nobody counts longer: each try may wait for a connection. */
const FRESH_MS = { there: 1000, away: 10_000 };

let last: ReplicaStatus | undefined;
let looking: Promise<ReplicaStatus> | undefined;

async function look(): Promise<ReplicaStatus> {
  const said = last?.state;
  const found = (state: ReplicaStatus['state'], lagS: number | null): ReplicaStatus => ({
    configured: true,
    state,
    lagS,
    lookedAt: new Date(),
  });
  let status: ReplicaStatus;
  let reason = 'it is no replica any more';
  try {
    const primary = await primaryPosition(database('web'));
    const replica = await replicaPosition(database('replica'), primary);
    if (!replica.inRecovery) status = found('away', null);
    else {
      const lagS = replica.caughtUp ? 0 : replica.lastCommitAgoS;
      reason = `it is ${lagS === null ? 'an unknown time' : `${lagS.toFixed(1)} s`} behind`;
      status = found(lagS !== null && lagS <= config().DATABASE_REPLICA_LAG_S ? 'serves' : 'behind', lagS);
    }
  } catch (error) {
    reason = error instanceof Error ? error.message : String(error);
    status = found('away', null);
  }
  if (status.state !== 'serves' && status.state !== said)
    log.warn({ reason }, 'the replica does not serve; the primary answers its readers');
  if (status.state === 'serves' && said !== undefined && said !== 'serves')
    log.info('the replica serves again');
  return status;
}

/** How the replica is; looks where the last look is too old. */
export async function replicaStatus(): Promise<ReplicaStatus> {
  if (!config().DATABASE_REPLICA_URL) return NONE;
  const ageMs = Date.now() - (last?.lookedAt?.getTime() ?? 0);
  if (last && ageMs < (last.state === 'away' ? FRESH_MS.away : FRESH_MS.there)) return last;
  looking ??= look().finally(() => {
    looking = undefined;
  });
  return (last = await looking);
}

/** A standby ends readers that hold up what it has to replay. */
const isReplicaFault = (error: unknown): boolean =>
  isDatabaseAway(error) || (error instanceof Error && error.message.includes('conflict with recovery'));

/** The replica failed a reader: whoever comes next looks first. */
function distrust(error: unknown): void {
  log.warn({ error: error instanceof Error ? error.message : String(error) }, 'the replica failed a reader');
  if (last) last = { ...last, lookedAt: null };
}

interface Reading {
  tx: Tx;
  from: 'primary' | 'replica';
}
const atPrimary = async (actor: ActorSight): Promise<Reading> => ({
  tx: await beginReading(actor, 'web'),
  from: 'primary',
});

/** Opens a reading transaction at the replica, where that serves. */
async function beginAsOnlooker(actor: ActorSight): Promise<Reading> {
  if ((await replicaStatus()).state === 'serves')
    try {
      return { tx: await beginReading(actor, 'replica'), from: 'replica' };
    } catch (error) {
      if (!isReplicaFault(error)) throw error;
      distrust(error);
    }
  return atPrimary(actor);
}

/** Rows of `read` in a transaction that ends with them, whoever stops first; from the primary where the replica fails at once. */
export async function* piecesAsOnlooker<Row>(
  actor: ActorSight,
  read: (tx: Tx) => AsyncGenerator<Row, void, void>,
): AsyncGenerator<Row, void, void> {
  let reading = await beginAsOnlooker(actor);
  for (;;) {
    let given = false;
    try {
      for await (const row of read(reading.tx)) {
        given = true;
        yield row;
      }
      return;
    } catch (error) {
      if (given || reading.from === 'primary' || !isReplicaFault(error)) throw error;
      distrust(error);
    } finally {
      await reading.tx.rollback().catch(() => undefined); // nothing was written; also ends the cursor
    }
    reading = await atPrimary(actor);
  }
}

/**
 * Runs `work`, which only reads, as the actor: at the replica where that serves, again at the primary where the replica
 * fails in the middle.
 * @param freshly true: what this person has just written must be seen, so the primary answers
 */
export async function asOnlooker<T>(
  actor: ActorSight,
  work: (tx: Tx) => Promise<T>,
  freshly = false,
): Promise<T> {
  const end = (tx: Tx): Promise<unknown> => tx.rollback().catch(() => undefined); // nothing was written
  const reading = freshly ? await atPrimary(actor) : await beginAsOnlooker(actor);
  try {
    return await work(reading.tx);
  } catch (error) {
    if (reading.from === 'primary' || !isReplicaFault(error)) throw error;
    distrust(error);
  } finally {
    await end(reading.tx);
  }
  const { tx } = await atPrimary(actor);
  try {
    return await work(tx);
  } finally {
    await end(tx);
  }
}
