import type pg from 'pg';
import { config } from '../config';
import { connect, database } from '../db/pools';
import { takeBatch, type Item } from '../ingest/batch';
import { ROLLED_UP_AFTER_S } from '../ingest/write-batch';
import { VALUE_COLUMNS } from '../queries/frames';
import { maskOf, sumsOf } from '../queries/frame-parameters';
import { writeFrames } from '../queries/ingest-frames';
import type { FrameRow } from '../queries/ingest-rows';
import { NONE } from '../queries/packed-values';
import {
  gather,
  inTransaction,
  lockPackedFrames,
  packDay,
  packedDays,
  replacePacked,
  type FrameInDay,
} from '../queries/packing';
import {
  dropLateFrames,
  ensureDaysAhead,
  forgetLateFrames,
  lateFrames,
  markDirty,
  type LateFrame,
} from '../queries/rollup';

const DAY_MS = 86_400_000;
/** Many at once: a packed string is unpacked and packed once for all of its late frames among them. */
const LATE_A_TIME = 10_000;
/** Packed strings that are in memory at a time, with their whole day. */
const STRINGS_A_TIME = 20;

const dayOf = (at: Date): string => at.toISOString().slice(0, 10);

/**
 * Brings in frames that came when their day had no place for them: into the packed rows of a packed day, else into a
 * partition that is made for them. Their quarters are marked to be redone, and only then are the parked ones
 * forgotten. Frames of a day that is just being packed wait for the next run.
 */
export async function mergeLateFrames(now: Date): Promise<number> {
  const db = database('ingest');
  const oldest = new Date(now.getTime() - config().RAW_KEPT_DAYS * DAY_MS);
  const client = await connect('ingest');
  let merged = 0;
  try {
    for (;;) {
      const { packed, closed } = await packedDays(client);
      const late = await lateFrames(db, oldest, [...closed], LATE_A_TIME);
      if (late.length === 0) return merged;
      const byDay = new Map<string, LateFrame[]>();
      for (const l of late) byDay.set(dayOf(l.at), [...(byDay.get(dayOf(l.at)) ?? []), l]);
      for (const [day, frames] of byDay)
        if (packed.has(day)) for (const part of byStrings(frames)) await mergeIntoPacked(client, day, part);
        else await mergeIntoSingle(client, new Date(day), frames, now);
      merged += late.length;
    }
  } finally {
    await client.end();
  }
}

// written by this server in this shape
const rowOf = (late: LateFrame): FrameRow => late.frame as FrameRow;

const itemOf = (late: LateFrame): Item => ({
  work: { kind: 'frames', rows: [rowOf(late)] },
  readings: 0,
  siteId: rowOf(late).siteId,
  loggerId: 0,
  gateways: new Map(),
  taken: 0,
  fault: null,
  written: () => undefined,
  refused: () => undefined,
});

/** The frames of some strings after the other, each string's in the order that they came in. */
function* byStrings(late: readonly LateFrame[]): Generator<LateFrame[]> {
  const strings = [...new Set(late.map((l) => rowOf(l).stringId))];
  for (let i = 0; i < strings.length; i += STRINGS_A_TIME) {
    const some = new Set(strings.slice(i, i + STRINGS_A_TIME));
    yield late.filter((l) => some.has(rowOf(l).stringId));
  }
}

async function mergeIntoSingle(
  client: pg.ClientBase,
  day: Date,
  late: readonly LateFrame[],
  now: Date,
): Promise<void> {
  const db = database('ingest');
  await ensureDaysAhead(db, day, day);
  const queue = late.map(itemOf);
  while (queue.length > 0)
    await writeFrames(client, takeBatch(queue).frames, new Date(now.getTime() - ROLLED_UP_AFTER_S * 1000));
  await dropLateFrames(
    db,
    late.map((l) => l.id),
  );
}

/** All of it in one transaction: what is merged, what is to be redone, what is forgotten. */
async function mergeIntoPacked(
  client: pg.ClientBase,
  day: string,
  late: readonly LateFrame[],
): Promise<void> {
  const strings = [...new Set(late.map((l) => rowOf(l).stringId))].sort((a, b) => a - b);
  await inTransaction(client, async () => {
    const frames = new Map(
      (await lockPackedFrames(client, day, strings)).map((f) => [`${f.stringId} ${f.micros}`, f]),
    );
    const changed = new Set<number>();
    const quarters: { at: Date; stringId: number }[] = [];
    for (const l of late) {
      const came = inDay(rowOf(l), day);
      const key = `${came.stringId} ${came.micros}`;
      const there = frames.get(key);
      if (there && (came.mask & ~there.mask) === 0n) continue;
      frames.set(key, there ? mergeFrames(there, came) : came);
      changed.add(came.stringId);
      quarters.push({ at: l.at, stringId: came.stringId });
    }
    const again = [...frames.values()]
      .filter((f) => changed.has(f.stringId))
      .sort((a, b) => a.stringId - b.stringId || Number(a.micros - b.micros));
    await replacePacked(client, day, [...changed], gather(again).map(packDay));
    await markDirty(client, quarters);
    await forgetLateFrames(
      client,
      late.map((l) => l.id),
    );
  });
}

const column = (values: readonly (number | null)[] | null): Int32Array | null =>
  values && Int32Array.from(values, (v) => v ?? NONE);
const plain = (values: Int32Array | null): (number | null)[] | null =>
  values && Array.from(values, (v) => (v === NONE ? null : v));

function inDay(row: FrameRow, day: string): FrameInDay {
  const sums = sumsOf(row);
  return {
    stringId: row.stringId,
    micros: BigInt(row.at * 1000 - Date.parse(day)) * 1000n,
    mask: BigInt(maskOf(row.state)),
    voltageSum: sums.voltage,
    powerSum: sums.power,
    values: {
      voltage: column(row.voltage),
      voltage_in: column(row.voltageIn),
      current: column(row.current),
      power: column(row.power),
      temperature: column(row.temperature),
      signal: column(row.signal),
      via: column(row.via),
      state: column(row.state),
    },
  };
}

/** As the database merges a frame into one that is there: only what was not known comes from the later one. */
function mergeFrames(there: FrameInDay, came: FrameInDay): FrameInDay {
  const values = {} as FrameInDay['values'];
  for (const c of VALUE_COLUMNS) {
    const [a, b] = [there.values[c], came.values[c]];
    values[c] =
      a === null || b === null
        ? (a ?? b)
        : Int32Array.from({ length: Math.max(a.length, b.length) }, (_, i) => {
            const known = a[i] ?? NONE;
            return known === NONE ? (b[i] ?? NONE) : known;
          });
  }
  const sums = sumsOf({
    voltage: plain(values.voltage) ?? [],
    voltageIn: plain(values.voltage_in),
    current: plain(values.current) ?? [],
    power: plain(values.power),
    state: plain(values.state) ?? [],
  });
  return {
    ...there,
    mask: there.mask | came.mask,
    voltageSum: sums.voltage,
    powerSum: sums.power,
    values,
  };
}
