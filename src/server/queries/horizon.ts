import type { Tx } from '../db/transaction';

/**
 * How far events may be read by cursor. Cursors are transaction numbers, and writers commit out of order: only numbers
 * below the oldest running transaction of our own database are given out, so that none of its events is missed. Those
 * of other databases in the cluster write no events of ours and hold nothing up.
 */

/**
 * The number below which no event can appear any more, of the snapshot of the statement that it stands in. As a
 * subquery, so that a statement asks once and not for each row.
 */
export const EVENT_HORIZON = '(select event_horizon())';

/**
 * The number below which no event can appear any more. `held`: transactions above it are still running, so what was
 * committed after them is not to be read yet. Statements that come later see all that is below.
 */
export async function horizon(tx: Tx): Promise<{ below: string; held: boolean }> {
  const { rows } = await tx.raw<{ rows: { below: string; held: boolean }[] }>(
    `select h::text as below, h <> pg_snapshot_xmax(pg_current_snapshot()) as held from event_horizon() h`,
  );
  return rows[0]!;
}
