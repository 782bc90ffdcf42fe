import { config } from '../config';
import { database } from '../db/pools';
import { dropDaysBefore, dropQuartersBefore, ensureDaysAhead } from '../queries/rollup';

const DAY_MS = 86_400_000;

/** Partitions from yesterday to three days ahead; readings and quarters past their time go. */
export async function keepDays(now: Date): Promise<number> {
  const db = database('ingest');
  const { RAW_KEPT_DAYS, QUARTERS_KEPT_DAYS } = config();
  const day = (n: number) => new Date(now.getTime() + n * DAY_MS);
  await ensureDaysAhead(db, day(-1), day(3));
  return (
    (await dropDaysBefore(db, day(-RAW_KEPT_DAYS))) + (await dropQuartersBefore(db, day(-QUARTERS_KEPT_DAYS)))
  );
}
