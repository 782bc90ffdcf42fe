import type pg from 'pg';
import { VALUE_COLUMNS as COLUMNS, type ValueColumn as Column } from './frames';
import type { FrameRow } from './ingest-rows';

/**
 * The one statement that makes a batch of frames durable: frames (merged where new slots come), quarters to roll up
 * again, and the newest frame of each string. Autocommit; rows in string order, so that writers never deadlock.
 *
 * A batch holds a (string, time) once, and an incomplete frame never beside another of its string: the newest frame
 * of a string is taken from the batch by its time alone. `server/ingest/batch.ts` sees to both.
 */
const FULL = (of: string) => `~((-1)::int8 << cardinality(${of}.state))`;
/** Not every type has these: where one side is NULL the other stands. */
const OPTIONAL = new Set<Column>(['voltage_in', 'power']);
const either = (column: Column, a: string, b: string, both: string) =>
  OPTIONAL.has(column)
    ? `case when ${a} is null then ${b} when ${b} is null then ${a} else ${both} end`
    : both;

const merged = (c: Column) => either(c, `f.${c}`, `excluded.${c}`, `merge_values(f.${c}, excluded.${c})`);
const newest = (c: Column) =>
  either(c, `l.${c}`, `excluded.${c}`, `newest_values(l.${c}, l.seen, excluded.${c}, excluded.seen)`);
const voltageOf = (of: (c: Column) => string) => `frame_voltage(${of('voltage')}, ${of('voltage_in')})`;
const powerOf = (of: (c: Column) => string) =>
  `frame_power(${(['voltage', 'voltage_in', 'current', 'power', 'state'] as const).map(of).join(', ')})`;
const REPLACES = `excluded.at > l.at and excluded.mask = ${FULL('excluded')}`;
const LIST = COLUMNS.join(', ');

export const WRITE_FRAMES = `
with x as materialized (
  select to_timestamp(at) at, mask, string_id, site_id, voltage_sum, power_sum, ${COLUMNS.map((c) => `${c}::int2[] ${c}`).join(', ')}
  from unnest($1::int4[], $2::int8[], $3::int4[], $4::int4[], $5::int4[], $6::int4[],
    ${COLUMNS.map((_, i) => `$${i + 7}::text[]`).join(', ')})
    x(at, mask, string_id, site_id, voltage_sum, power_sum, ${LIST})),
written as (
  insert into string_frame as f (at, mask, string_id, voltage_sum, power_sum, ${LIST})
  select at, mask, string_id, voltage_sum, power_sum, ${LIST} from x order by string_id, at
  on conflict (string_id, at) do update set mask = f.mask | excluded.mask,
    voltage_sum = ${voltageOf(merged)}, power_sum = ${powerOf(merged)},
    ${COLUMNS.map((c) => `${c} = ${merged(c)}`).join(',\n    ')}
  where (excluded.mask & ~f.mask) <> 0
  returning f.string_id, f.at),
dirty as (
  insert into rollup_dirty (quarter, string_id)
  select distinct date_bin('15 min', at, '2000-01-01Z'), string_id from written
  where date_bin('15 min', at, '2000-01-01Z') + interval '15 min' <= $15::timestamptz
  order by 1, 2 on conflict do nothing)
insert into string_state as l (string_id, site_id, at, mask, voltage_sum, power_sum, ${LIST}, seen)
select distinct on (string_id) string_id, site_id, at, mask, voltage_sum, power_sum, ${LIST},
  case when mask = ${FULL('x')} then array_fill(extract(epoch from at)::int4, array[cardinality(state)])
    else (select array_agg(case when s is null then 0 else extract(epoch from at)::int4 end order by o)
          from unnest(state) with ordinality u(s, o)) end
from x order by string_id, at desc
on conflict (string_id) do update set
  at = greatest(l.at, excluded.at),
  mask = case when excluded.at > l.at then excluded.mask when excluded.at = l.at then l.mask | excluded.mask else l.mask end,
  voltage_sum = case when ${REPLACES} then excluded.voltage_sum else ${voltageOf(newest)} end,
  power_sum = case when ${REPLACES} then excluded.power_sum else ${powerOf(newest)} end,
  ${COLUMNS.map((c) => `${c} = case when ${REPLACES} then excluded.${c} else ${newest(c)} end`).join(',\n  ')},
  seen = case when ${REPLACES} then excluded.seen else newest_seen(l.seen, excluded.seen) end
where excluded.at > l.at or (excluded.at = l.at and (excluded.mask & ~l.mask) <> 0)
  or (excluded.at < l.at and exists (select from unnest(l.seen, excluded.seen) u(a, b) where b > a))`;

/** An array as a literal within an array: JSON differs from it by the brackets alone, and nothing writes JSON faster. */
const literal = (values: readonly (number | null)[]): string => `"{${JSON.stringify(values).slice(1, -1)}}"`;

/** Bit (position − 1) set: that unit reported. As text: 63 bits do not fit a double. */
export function maskOf(state: readonly (number | null)[]): string {
  let low = 0;
  let high = 0;
  for (let i = 0; i < state.length; i++) {
    if (state[i] === null) continue;
    if (i < 32) low += 2 ** i;
    else high += 2 ** (i - 32);
  }
  return high < 2 ** 20 ? String(high * 2 ** 32 + low) : String(BigInt(high) * 4_294_967_296n + BigInt(low));
}

/** cV and dW over the units of a frame, as the database's frame_voltage and frame_power reckon them. */
export function sumsOf(row: Pick<FrameRow, 'voltage' | 'voltageIn' | 'current' | 'power' | 'state'>): {
  voltage: number;
  power: number;
} {
  let voltage = 0;
  let scaled = 0;
  const { voltageIn, power } = row;
  for (let i = 0; i < row.state.length; i++) {
    const out = row.voltage[i] ?? null;
    const into = voltageIn === null ? null : (voltageIn[i] ?? null);
    const current = row.current[i] ?? 0;
    voltage += out ?? into ?? 0;
    const reported = power === null ? null : (power[i] ?? null);
    if (reported !== null) scaled += reported * 10_000;
    else if (out !== null) scaled += out * current;
    else if (into !== null && row.state[i] === 1) scaled += into * current;
  }
  return { voltage, power: Math.round(scaled / 10_000) };
}

/** @param dirtyBefore quarters that end at or before this are rolled up already: they are made dirty */
export async function writeFrames(
  client: pg.ClientBase,
  rows: readonly FrameRow[],
  dirtyBefore: Date,
): Promise<void> {
  const at: number[] = [];
  const mask: string[] = [];
  const strings: number[] = [];
  const sites: number[] = [];
  const voltageSum: number[] = [];
  const powerSum: number[] = [];
  const arrays = COLUMNS.map(() => new Array<string>(rows.length));
  rows.forEach((row, i) => {
    const sums = sumsOf(row);
    at.push(row.at);
    mask.push(maskOf(row.state));
    strings.push(row.stringId);
    sites.push(row.siteId);
    voltageSum.push(sums.voltage);
    powerSum.push(sums.power);
    const values = [
      row.voltage,
      row.voltageIn,
      row.current,
      row.power,
      row.temperature,
      row.signal,
      row.via,
      row.state,
    ];
    for (let k = 0; k < values.length; k++) {
      const column = values[k];
      arrays[k]![i] = column ? literal(column) : 'NULL';
    }
  });
  const text = [at, mask, strings, sites, voltageSum, powerSum, ...arrays].map((a) => `{${a.join(',')}}`);
  await client.query({ name: 'write_frames', text: WRITE_FRAMES, values: [...text, dirtyBefore] });
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
