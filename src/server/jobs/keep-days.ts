import { connect, database } from '../db/pools';
import { takeBatch, type Item } from '../ingest/batch';
import { RAW_KEPT_DAYS, ROLLED_UP_AFTER_S } from '../ingest/write-batch';
import { writeFrames } from '../queries/ingest-frames';
import type { FrameRow } from '../queries/ingest-rows';
import { dropDaysBefore, dropLateFrames, ensureDaysAhead, lateFrames } from '../queries/rollup';

const DAY_MS = 86_400_000;
const LATE_A_TIME = 1000;

/** Partitions from yesterday to three days ahead; those past the retention go. */
export async function keepDays(now: Date): Promise<number> {
  const db = database('ingest');
  const day = (n: number) => new Date(now.getTime() + n * DAY_MS);
  await ensureDaysAhead(db, day(-1), day(3));
  return dropDaysBefore(db, day(-RAW_KEPT_DAYS));
}

const itemOf = (frame: FrameRow): Item => ({
  work: { kind: 'frames', rows: [frame] },
  readings: 0,
  siteId: frame.siteId,
  loggerId: 0,
  gateways: new Map(),
  taken: 0,
  fault: null,
  written: () => undefined,
  refused: () => undefined,
});

/**
 * Brings in frames that came when their day had no partition: makes the partition, merges them, which marks their
 * quarters to be redone, and only then forgets the parked ones.
 */
export async function mergeLateFrames(now: Date): Promise<number> {
  const db = database('ingest');
  const oldest = new Date(now.getTime() - RAW_KEPT_DAYS * DAY_MS);
  let merged = 0;
  for (;;) {
    const late = await lateFrames(db, oldest, LATE_A_TIME);
    if (late.length === 0) return merged;
    for (const day of new Set(late.map((l) => l.at.toISOString().slice(0, 10))))
      await ensureDaysAhead(db, new Date(day), new Date(day));
    const client = await connect('ingest');
    try {
      // written by this server in this shape
      const queue = late.map((l) => itemOf(l.frame as FrameRow));
      while (queue.length > 0)
        await writeFrames(
          client,
          takeBatch(queue).frames.sort((a, b) => a.stringId - b.stringId || a.at - b.at),
          new Date(now.getTime() - ROLLED_UP_AFTER_S * 1000),
        );
    } finally {
      await client.end();
    }
    await dropLateFrames(
      db,
      late.map((l) => l.id),
    );
    merged += late.length;
  }
}
