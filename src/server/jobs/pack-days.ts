import type pg from 'pg';
import { config } from '../config';
import { connect } from '../db/pools';
import { VALUE_COLUMNS } from '../queries/frames';
import {
  allowLongCounts,
  beginPacking,
  daysToPack,
  finishPacking,
  framesToPack,
  packDay,
  putAside,
  stringsToPack,
  type PackedDay,
  type StringDay,
} from '../queries/packing';
import { unpackValues } from '../queries/packed-values';

const DAY_MS = 86_400_000;
/** Strings that are read and written at a time: some tens of thousands of frames in memory. */
const STRINGS_A_TIME = 20;

/**
 * Packs every day that is older than the setting says. A day is closed first, so that later frames wait for the merge
 * job; its strings are packed in short transactions into a table that nobody reads yet; then the two are swapped in
 * one. Killed anywhere it goes on with the next string.
 */
export async function packDays(now: Date): Promise<{ days: number; frames: number }> {
  const done = { days: 0, frames: 0 };
  const client = await connect('ingest');
  try {
    await allowLongCounts(client);
    const before = new Date(now.getTime() - config().PACKED_AFTER_DAYS * DAY_MS).toISOString().slice(0, 10);
    for (const day of await daysToPack(client, before)) {
      if (!(await beginPacking(client, day))) continue;
      for (;;) {
        const strings = await stringsToPack(client, day, STRINGS_A_TIME);
        if (strings.length === 0) break;
        await packStrings(client, day, strings);
      }
      done.frames += await finishPacking(client, day);
      done.days++;
    }
  } finally {
    await client.end();
  }
  return done;
}

async function packStrings(client: pg.ClientBase, day: string, stringIds: readonly number[]): Promise<void> {
  const strings = await framesToPack(client, day, stringIds);
  const packed = strings.map((s) => {
    const p = packDay(s);
    compare(day, s, p);
    return p;
  });
  await putAside(client, day, packed);
}

/** The frames are given up after this: what was packed of them is read back first. */
function compare(day: string, single: StringDay, packed: PackedDay): void {
  for (const c of VALUE_COLUMNS) {
    const [values, of] = [single.values[c], packed.values[c]];
    const back = of && unpackValues(of, single.slots, single.mask);
    if (values === null ? back !== null : !back || !values.every((v, i) => v === back[i]))
      throw new Error(`${day}, string ${single.stringId}: ${c} does not come back from its packed form`);
  }
}
