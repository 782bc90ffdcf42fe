import fc from 'fast-check';
import type pg from 'pg';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { connect } from '../../src/server/db/pools';
import { ensureDays, writeFrames } from '../../src/server/queries/ingest-frames';
import type { FrameRow } from '../../src/server/queries/ingest-rows';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';

/** Frames that come new, twice, in parts and out of order: a model without a database says what is kept of them. */

const SLOTS = 5;
const startS = Math.floor(Date.now() / 60_000) * 60 - 3600;

let db: TestDatabase;
let client: pg.Client;
let siteId: number;
let strings: number[];

beforeAll(async () => {
  db = await testDatabase();
  const site = (await testFleet(db, ['Weirside Clinic'])).site('Weirside Clinic');
  siteId = site.id;
  strings = [...site.strings.values()].slice(0, 3).map((s) => s.id);
  client = await connect('ingest');
  await ensureDays(client, new Date((startS - 86_400) * 1000), new Date());
});
afterAll(async () => {
  await client.end();
  await db.drop();
});

interface Came {
  string: number;
  minute: number;
  /** Which slots reported. */
  slots: boolean[];
  value: number;
  output: boolean;
}
const batch = fc.uniqueArray(
  fc.record<Came>({
    string: fc.nat(2),
    minute: fc.nat(4),
    slots: fc.array(fc.boolean(), { minLength: SLOTS, maxLength: SLOTS }),
    value: fc.integer({ min: -2000, max: 20_000 }),
    output: fc.boolean(),
  }),
  // an incomplete frame never shares a batch with another of its string: here one frame a string
  { selector: (c) => c.string, minLength: 1, maxLength: 3 },
);

function rowOf({ string, minute, slots, value, output }: Came): FrameRow {
  const values = slots.map((heard, i) => (heard ? value + i : null));
  return {
    stringId: strings[string]!,
    siteId,
    at: startS + 60 * minute,
    voltage: values,
    voltageIn: output ? null : values,
    current: values.map((v) => (v === null ? null : Math.abs(v))),
    power: output ? values : null,
    temperature: slots.map((heard, i) => (heard && i !== 2 ? Math.abs(value) % 900 : null)),
    signal: slots.map((heard) => (heard ? -60 : null)),
    via: slots.map((heard, i) => (heard ? i : null)),
    state: slots.map((heard) => (heard ? 1 : null)),
  };
}

type Values = (number | null)[];
const COLUMNS = {
  voltage: 'voltage',
  voltage_in: 'voltageIn',
  current: 'current',
  power: 'power',
  temperature: 'temperature',
  signal: 'signal',
  via: 'via',
  state: 'state',
} as const;
type Kept = Record<keyof typeof COLUMNS, Values | null>;
const columns = Object.keys(COLUMNS) as (keyof typeof COLUMNS)[];
const keptOf = (row: FrameRow): Kept =>
  Object.fromEntries(columns.map((c) => [c, row[COLUMNS[c]]])) as unknown as Kept;

/** Slot by slot `take(i)` says whether the second one's value goes; where one has no such column the other stands. */
const slotwise = (a: Kept, b: Kept, take: (i: number, x: number | null) => boolean): Kept =>
  Object.fromEntries(
    columns.map((c) => {
      const [x, y] = [a[c], b[c]];
      return [c, x && y ? x.map((v, i) => (take(i, v) ? y[i]! : v)) : (x ?? y)];
    }),
  ) as unknown as Kept;

it('is what a model says, whichever way frames come', async () => {
  await fc.assert(
    fc.asyncProperty(fc.array(batch, { minLength: 1, maxLength: 10 }), async (batches) => {
      await db.owner.query('truncate string_frame, string_state');
      const frames = new Map<string, Kept>();
      const newest = new Map<number, { kept: Kept; seen: number[]; atS: number }>();
      for (const came of batches) {
        const rows = came.map(rowOf);
        await writeFrames(client, rows, new Date(0));
        for (const row of rows) {
          const key = `${row.stringId} ${row.at}`;
          const kept = keptOf(row);
          const there = frames.get(key);
          const added = row.state.some((s, i) => s !== null && (there?.state?.[i] ?? null) === null);
          frames.set(key, there && added ? slotwise(there, kept, (_, v) => v === null) : (there ?? kept));
          const seen = row.state.map((s) => (s === null ? 0 : row.at));
          const known = newest.get(row.stringId);
          if (!known) newest.set(row.stringId, { kept, seen, atS: row.at });
          else {
            const later = seen.map((s, i) => s > known.seen[i]!);
            const replaces = row.at > known.atS && !row.state.includes(null);
            if (replaces || row.at > known.atS || later.includes(true))
              newest.set(row.stringId, {
                kept: replaces ? kept : slotwise(known.kept, kept, (i) => later[i]!),
                seen: seen.map((s, i) => Math.max(s, known.seen[i]!)),
                atS: Math.max(row.at, known.atS),
              });
          }
        }
      }
      const list = columns.join(', ');
      const { rows: got } = await db.owner.query<Kept & { key: string }>(
        `select string_id || ' ' || extract(epoch from at)::int4 as key, ${list} from string_frame`,
      );
      expect(Object.fromEntries(got.map(({ key, ...kept }) => [key, kept]))).toEqual(
        Object.fromEntries(frames),
      );
      const { rows: states } = await db.owner.query<Kept & { id: number; seen: number[]; atS: number }>(
        `select string_id as id, seen, extract(epoch from at)::int4 as "atS", ${list} from string_state`,
      );
      expect(
        Object.fromEntries(states.map(({ id, seen, atS, ...kept }) => [id, { kept, seen, atS }])),
      ).toEqual(Object.fromEntries(newest));
    }),
    { numRuns: 40 },
  );
});

it('is written day after day on one connection, which keeps no statement of days past', async () => {
  const DAYS = 9;
  await db.owner.query('truncate string_frame, string_state, rollup_dirty');
  await ensureDays(client, new Date((startS - DAYS * 86_400) * 1000), new Date());
  const frame = (day: number, minute: number): FrameRow => ({
    ...rowOf({
      string: day % 3,
      minute,
      slots: Array(SLOTS).fill(true) as boolean[],
      value: day,
      output: true,
    }),
    at: startS - (DAYS - day) * 86_400 + 60 * minute,
  });
  const day = (n: number): FrameRow[] => [frame(n, 0), frame(n, 1)];
  const before = new Date((startS + 3600) * 1000);
  // two days in one batch, then each by itself, and an old one at last
  await writeFrames(client, [...day(1), ...day(4)], before);
  for (const n of [2, 3, 5, 6, 7, 8]) await writeFrames(client, day(n), before);
  await writeFrames(client, day(0), before);
  const { rows } = await db.owner.query<{ id: number; atS: number; voltage: Values; frames: number }>(
    `select string_id as id, extract(epoch from at)::int4 as "atS", voltage,
       (select count(*)::int4 from string_frame f where f.string_id = s.string_id) as frames
     from string_state s order by string_id`,
  );
  expect(rows).toEqual(
    [6, 7, 8].map((n) => ({
      id: strings[n % 3],
      atS: frame(n, 1).at,
      voltage: [n, n + 1, n + 2, n + 3, n + 4],
      frames: 6,
    })),
  );
  const { rows: dirty } = await db.owner.query<{ n: number }>('select count(*)::int4 as n from rollup_dirty');
  expect(dirty[0]?.n).toBeGreaterThanOrEqual(DAYS);
  const { rows: kept } = await client.query<{ n: number }>(
    `select count(*)::int4 as n from pg_prepared_statements where name like 'write_newest%'`,
  );
  expect(kept[0]?.n).toBeLessThanOrEqual(6);
});
