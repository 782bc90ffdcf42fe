import type pg from 'pg';
import { groupedBy } from '../../domain/grouped-by';
import { VALUE_COLUMNS as COLUMNS, type ValueColumn as Column } from './frames';
import { copyFrames } from './copy-frames';
import { FRAMES_AS_ROWS, NEXT_PARAMETER, frameParameters, int4Array } from './frame-parameters';
import type { FrameRow } from './ingest-rows';

/**
 * Makes a batch of frames durable: frames, quarters to roll up again, and the newest frame of each string, in one
 * transaction. Rows in string order, so that writers never deadlock. It comes in two forms. Nearly every frame is new, and
 * of a string that was heard before: those are copied, and the newest of each string updates its state. Where one is there
 * already that form fails as a whole, and a statement that merges does it.
 *
 * A batch holds a (string, time) once, and an incomplete frame never beside another of its string: the newest frame
 * of a string is taken from the batch by its time alone. `server/ingest/batch.ts` sees to both.
 */

/** Not every type has these: where one side is NULL the other stands. */
const OPTIONAL = new Set<Column>(['voltage_in', 'power']);
const either = (column: Column, a: string, b: string, both: string) =>
  OPTIONAL.has(column)
    ? `case when ${a} is null then ${b} when ${b} is null then ${a} else ${both} end`
    : both;

const LIST = COLUMNS.join(', ');
const DIRTY_BEFORE = `$${NEXT_PARAMETER}::timestamptz`;
const QUARTER = `date_bin('15 min', at, '2000-01-01Z')`;
const voltageOf = (of: (c: Column) => string) => `frame_voltage(${of('voltage')}, ${of('voltage_in')})`;
const powerOf = (of: (c: Column) => string) =>
  `frame_power(${(['voltage', 'voltage_in', 'current', 'power', 'state'] as const).map(of).join(', ')})`;
const merged = (c: Column) => either(c, `f.${c}`, `excluded.${c}`, `merge_values(f.${c}, excluded.${c})`);

const INSERT_FRAMES = `insert into string_frame as f (at, mask, string_id, voltage_sum, power_sum, ${LIST})
  select at, mask, string_id, voltage_sum, power_sum, ${LIST} from x`;

const MARK_DIRTY = `insert into rollup_dirty (quarter, string_id)`;
const dirty = `dirty as (
  ${MARK_DIRTY}
  select distinct ${QUARTER}, string_id from written
  where at <= ${DIRTY_BEFORE} and ${QUARTER} + interval '15 min' <= ${DIRTY_BEFORE}
  order by 1, 2 on conflict do nothing)`;

/** When each slot of `of` was heard last. */
const SEEN = `case when whole then array_fill(extract(epoch from at)::int4, array[cardinality(state)])
    else (select array_agg(case when s is null then 0 else extract(epoch from at)::int4 end order by o)
          from unnest(state) with ordinality u(s, o)) end`;
const INSERT_NEWEST = `insert into string_state as l (string_id, site_id, at, mask, voltage_sum, power_sum, ${LIST}, seen)`;

/** What the newest state becomes where `n` comes to it, slot by slot; `whole` says that all slots of n reported. */
function newestFrom(n: string, whole: string, seen: string): string {
  const replaces = `${n}.at > l.at and ${whole}`;
  const newest = (c: Column) =>
    either(c, `l.${c}`, `${n}.${c}`, `newest_values(l.${c}, l.seen, ${n}.${c}, ${seen})`);
  return `at = greatest(l.at, ${n}.at),
  mask = case when ${n}.at > l.at then ${n}.mask when ${n}.at = l.at then l.mask | ${n}.mask else l.mask end,
  voltage_sum = case when ${replaces} then ${n}.voltage_sum else ${voltageOf(newest)} end,
  power_sum = case when ${replaces} then ${n}.power_sum else ${powerOf(newest)} end,
  ${COLUMNS.map((c) => `${c} = case when ${replaces} then ${n}.${c} else ${newest(c)} end`).join(',\n  ')},
  seen = case when ${replaces} then ${seen} else newest_seen(l.seen, ${seen}) end`;
}
const saysNews = (
  n: string,
  seen: string,
) => `(${n}.at > l.at or (${n}.at = l.at and (${n}.mask & ~l.mask) <> 0)
  or (${n}.at < l.at and exists (select from unnest(l.seen, ${seen}) u(a, b) where b > a)))`;

const UPDATE_NEWEST = `on conflict (string_id) do update set ${newestFrom('excluded', 'excluded.mask = ~((-1)::int8 << cardinality(excluded.state))', 'excluded.seen')}
where ${saysNews('excluded', 'excluded.seen')}`;

/**
 * Beside COPY, for one day (its first instant and the one after it): the newest frame of each string, and the quarters to
 * roll up again. Parameters: strings, their sites and times (epoch s), one a string; quarters (epoch s) and their strings.
 * Frames are found where they were copied to: handed over again, their values would cost as much as the copying. What
 * leads is what was handed over, whatever the tables' statistics say while they fill.
 */
const writeNewest = (from: string, to: string): string => `
with dirty as (${MARK_DIRTY}
  select to_timestamp(quarter), string_id from unnest($4::int4[], $5::int4[]) d(quarter, string_id)
  order by 1, 2 on conflict do nothing)
${INSERT_NEWEST}
select string_id, site_id, at, mask, voltage_sum, power_sum, ${LIST}, ${SEEN}
from (
  select f.*, k.site_id, f.mask = ~((-1)::int8 << cardinality(f.state)) whole
  from unnest($1::int4[], $2::int4[], $3::int4[]) k(string_id, site_id, epoch)
  cross join lateral (select * from string_frame
    where string_id = k.string_id and at = to_timestamp(k.epoch) and at >= '${from}' and at < '${to}' offset 0) f
  offset 0) x
${UPDATE_NEWEST}`;

const WRITE_MERGING = `
with ${FRAMES_AS_ROWS},
written as (
  ${INSERT_FRAMES}
  on conflict (string_id, at) do update set mask = f.mask | excluded.mask,
    voltage_sum = ${voltageOf(merged)}, power_sum = ${powerOf(merged)},
    ${COLUMNS.map((c) => `${c} = ${merged(c)}`).join(',\n    ')}
  where (excluded.mask & ~f.mask) <> 0
  returning f.string_id, f.at),
${dirty}
${INSERT_NEWEST}
select string_id, site_id, at, mask, voltage_sum, power_sum, ${LIST}, ${SEEN} from x where newest
${UPDATE_NEWEST}`;

const ALREADY_THERE = '23505';
/** Where frames come twice, more of them follow: a logger sends again what it is not sure of. */
const BATCHES_MERGED = 20;
const merging = new WeakMap<pg.ClientBase, number>();

const QUARTER_S = 900;
const DAY_S = 86_400;
/** Days since the epoch as text. */
const instant = (day: number): string => new Date(day * DAY_S * 1000).toISOString();
const dayName = (day: number): string => instant(day).slice(0, 10).replaceAll('-', '');

/** What a connection has prepared by day, under names that do not come again. */
const DAYS_PREPARED = 6;
const prepared = new WeakMap<pg.ClientBase, { names: Map<number, string>; made: number }>();

/** The name of a day's statement; those of days past are given up. */
async function statementOf(client: pg.ClientBase, day: number): Promise<string> {
  const of = prepared.get(client) ?? { names: new Map<number, string>(), made: 0 };
  prepared.set(client, of);
  const known = of.names.get(day);
  if (known !== undefined) return known;
  const [oldest] = of.names;
  if (oldest && of.names.size >= DAYS_PREPARED) {
    of.names.delete(oldest[0]);
    await client.query(`deallocate ${oldest[1]}`);
  }
  const name = `write_newest_${++of.made}`;
  of.names.set(day, name);
  return name;
}

/**
 * Makes a batch durable. Outside a transaction: the form for new frames may fail and be followed by the other.
 *
 * @param dirtyBefore quarters that end at or before this are rolled up already: they are made dirty
 */
export async function writeFrames(
  client: pg.ClientBase,
  given: readonly FrameRow[],
  dirtyBefore: Date,
): Promise<void> {
  const rows = [...given].sort((a, b) => a.stringId - b.stringId || a.at - b.at);
  const left = merging.get(client) ?? 0;
  if (left === 0)
    try {
      await writeNew(client, rows, dirtyBefore);
      return;
    } catch (error) {
      if (!(error instanceof Error && 'code' in error && error.code === ALREADY_THERE)) throw error;
    }
  merging.set(client, left === 0 ? BATCHES_MERGED : left - 1);
  await client.query({
    name: 'merge_frames',
    text: WRITE_MERGING,
    values: [...frameParameters(rows), dirtyBefore],
  });
}

/** Frames by string and time, none of them there yet. */
async function writeNew(client: pg.ClientBase, rows: readonly FrameRow[], dirtyBefore: Date): Promise<void> {
  const days = groupedBy(rows, (row) => Math.floor(row.at / DAY_S));
  await client.query('begin');
  try {
    for (const [day, ofDay] of days) {
      await copyFrames(client, dayName(day), ofDay);
      const newest = ofDay.filter((row, i) => ofDay[i + 1]?.stringId !== row.stringId);
      await client.query({
        name: await statementOf(client, day),
        text: writeNewest(instant(day), instant(day + 1)),
        values: [
          newest.map((r) => r.stringId),
          newest.map((r) => r.siteId),
          newest.map((r) => r.at),
          ...dirtyQuarters(ofDay, dirtyBefore),
        ].map(int4Array),
      });
    }
    await client.query('commit');
  } catch (error) {
    // where the connection is gone the server rolls back by itself
    await client.query('rollback').catch(() => undefined);
    throw error;
  }
}

/** The quarters (epoch s) and strings of frames that are rolled up already, by string and time. */
function dirtyQuarters(rows: readonly FrameRow[], dirtyBefore: Date): [number[], number[]] {
  const beforeS = dirtyBefore.getTime() / 1000;
  const quarters: number[] = [];
  const strings: number[] = [];
  for (const { at, stringId } of rows) {
    const quarter = Math.floor(at / QUARTER_S) * QUARTER_S;
    if (quarter + QUARTER_S > beforeS) continue;
    if (quarters.at(-1) === quarter && strings.at(-1) === stringId) continue;
    quarters.push(quarter);
    strings.push(stringId);
  }
  return [quarters, strings];
}

/** Frames of days that have no partition, kept until the merge job has made one. */
export async function parkFrames(client: pg.ClientBase, rows: readonly FrameRow[]): Promise<void> {
  await client.query(
    `insert into late_frame (string_id, at, frame)
     select x.string_id, to_timestamp(x.at), x.frame
     from unnest($1::int4[], $2::int4[], $3::jsonb[]) x(string_id, at, frame) order by x.string_id, x.at`,
    [rows.map((r) => r.stringId), rows.map((r) => r.at), rows.map((r) => JSON.stringify(r))],
  );
}

/** The UTC days (YYYYMMDD) that take frames, a day that is being packed does not, and those that take other reports. */
export async function partitionDays(
  client: pg.ClientBase,
): Promise<{ frames: Set<string>; reports: Set<string> }> {
  const { rows } = await client.query<{ day: string; frames: boolean }>(
    `select right(c.relname, 8) as day, i.inhparent = 'string_frame'::regclass as frames
     from pg_inherits i join pg_class c on c.oid = i.inhrelid
     where i.inhparent = 'input_frame'::regclass
       or (i.inhparent = 'string_frame'::regclass and to_regclass('packed_frame_' || right(c.relname, 8)) is null)`,
  );
  const days = (frames: boolean) => new Set(rows.filter((r) => r.frames === frames).map((r) => r.day));
  return { frames: days(true), reports: days(false) };
}

export async function ensureDays(client: pg.ClientBase, from: Date, to: Date): Promise<void> {
  await client.query('select ensure_days($1::date, $2::date)', [
    from.toISOString().slice(0, 10),
    to.toISOString().slice(0, 10),
  ]);
}
