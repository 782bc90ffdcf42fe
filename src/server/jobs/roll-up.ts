import type { Tx } from '../db/transaction';
import { asIngest } from '../db/transaction';
import { database } from '../db/pools';
import {
  allSites,
  localDays,
  QUARTER_MS,
  quarterOf,
  rollDay,
  rollSiteQuarter,
  rollStringQuarter,
  rollupWatermark,
  setRollupWatermark,
  takeDirty,
} from '../queries/rollup';

/** A quarter is rolled up this long after it closed, ms: most of what belongs to it has come by then. */
export const CLOSED_AFTER_MS = 120_000;
/** After a long absence the rest waits for the next run. */
const QUARTERS_A_RUN = 200;
const DIRTY_A_RUN = 20_000;
const DIRTY_A_TRANSACTION = 200;

type Days = Map<string, { siteId: number; day: string }>;

async function addDays(tx: Tx, days: Days, quarter: Date, siteIds: readonly number[]): Promise<void> {
  for (const d of await localDays(tx, quarter, siteIds)) days.set(`${d.siteId} ${d.day}`, d);
}

/**
 * Rolls up the quarters that closed since the last run, then the local days that they lie in. The watermark moves
 * only when both are done; a run that dies is repeated, and repeating changes nothing. Transactions stay short: a
 * long one would hold up the readers of events.
 */
export async function rollUpClosed(now: Date): Promise<number> {
  const db = database('ingest');
  const closed = quarterOf(new Date(now.getTime() - CLOSED_AFTER_MS));
  const from = await rollupWatermark(db);
  if (!from || from >= closed) return 0;
  const sites = await allSites(db);
  const days: Days = new Map();
  let quarter = from;
  let done = 0;
  for (; quarter < closed && done < QUARTERS_A_RUN; done++) {
    for (const siteId of sites)
      await asIngest(async (tx) => {
        await rollStringQuarter(tx, quarter, { siteId });
        await rollSiteQuarter(tx, quarter, [siteId]);
        await addDays(tx, days, quarter, [siteId]);
      });
    quarter = new Date(quarter.getTime() + QUARTER_MS);
  }
  for (const { siteId, day } of days.values()) await asIngest((tx) => rollDay(tx, siteId, day));
  await setRollupWatermark(db, quarter);
  return done;
}

/** Redoes quarters that late frames made wrong, and their days, each handful in one transaction. */
export async function rollUpDirty(): Promise<number> {
  let done = 0;
  while (done < DIRTY_A_RUN) {
    const taken = await asIngest(async (tx) => {
      const dirty = await takeDirty(tx, DIRTY_A_TRANSACTION);
      const byQuarter = new Map<number, { strings: Set<number>; sites: Set<number> }>();
      for (const { quarter, stringId, siteId } of dirty) {
        const entry = byQuarter.get(quarter.getTime()) ?? {
          strings: new Set<number>(),
          sites: new Set<number>(),
        };
        byQuarter.set(quarter.getTime(), entry);
        entry.strings.add(stringId);
        entry.sites.add(siteId);
      }
      const days: Days = new Map();
      for (const [ms, { strings, sites }] of byQuarter) {
        const quarter = new Date(ms);
        await rollStringQuarter(tx, quarter, { stringIds: [...strings] });
        await rollSiteQuarter(tx, quarter, [...sites]);
        await addDays(tx, days, quarter, [...sites]);
      }
      for (const { siteId, day } of days.values()) await rollDay(tx, siteId, day);
      return dirty.length;
    });
    done += taken;
    if (taken < DIRTY_A_TRANSACTION) break;
  }
  return done;
}
