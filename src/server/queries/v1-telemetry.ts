import type { Tx } from '../db/transaction';
import { anyString, framesOf, SPAN } from './frames';
import { SITE_VISIBLE } from './visible-site';

/** Readings of any span in pieces, by a cursor of the database: neither it nor we ever hold more than a piece. */

const PIECE_ROWS = 500;

/** Rows of a statement, a piece at a time, as long as its transaction stands. */
async function* inPieces<Row>(
  tx: Tx,
  sql: string,
  bindings: Record<string, unknown>,
): AsyncGenerator<Row[], void, void> {
  await tx.raw(`declare pieces no scroll cursor for ${sql}`, bindings as Record<string, string>);
  for (;;) {
    const { rows } = await tx.raw<{ rows: Row[] }>(`fetch ${PIECE_ROWS} from pieces`);
    if (rows.length > 0) yield rows;
    if (rows.length < PIECE_ROWS) break;
  }
  await tx.raw('close pieces');
}

export interface StreamString {
  number: number;
  id: string;
  name: string;
}
/** Strings of a site, or one string, as the actor sees them, by name; with the site's name. */
export async function stringsToStream(
  tx: Tx,
  which: { site?: string | undefined; string?: string | undefined },
): Promise<{ site: string; strings: StreamString[] } | undefined> {
  const { rows } = await tx.raw<{ rows: (StreamString & { site: string })[] }>(
    `select s.id as number, s.ref as id, s.name, site.name as site
     from site left join string s on s.site_id = site.id and (:string::uuid is null or s.ref = :string)
     where ${SITE_VISIBLE} and (:site::uuid is null or site.ref = :site)
       and (:string::uuid is null or s.ref = :string) order by s.name`,
    { site: which.site ?? null, string: which.string ?? null },
  );
  const [first] = rows;
  return first && { site: first.site, strings: rows.filter((r) => r.number !== null) };
}

/**
 * The span that readings can be of: from the oldest day that is kept, or that the organisation shows, to a day ahead.
 * @param kept which readings
 */
export async function keptSpan(
  tx: Tx,
  kept: 'string_frame' | 'string_quarter',
): Promise<{ from: Date; to: Date } | undefined> {
  const { rows } = await tx.raw<{ rows: { from: Date | null; to: Date }[] }>(
    `select greatest(
              (min(right(c.relname, 8)) || ' UTC')::timestamptz,
              case when :kept = 'string_frame' then
                (select now() - make_interval(days => o.hide_raw_after_days) from organisation o
                 where o.id = (select actor_organisation())) end) as "from",
            now() + interval '1 day' as "to"
     from pg_inherits i join pg_class c on c.oid = i.inhrelid
     where i.inhparent in (to_regclass(:kept), to_regclass(case when :kept = 'string_frame' then 'packed_frame' end))`,
    { kept },
  );
  const [span] = rows;
  return span?.from ? { from: span.from, to: span.to } : undefined;
}

export interface FrameRow {
  number: number;
  at: Date;
  voltageSum: number;
  powerSum: number;
  voltage: (number | null)[];
  voltageIn: (number | null)[] | null;
  current: (number | null)[];
  power: (number | null)[] | null;
  temperature: (number | null)[];
  signal: (number | null)[];
  state: (number | null)[];
}
interface Span {
  stringIds: readonly number[];
  from: Date;
  to: Date;
}
const bound = ({ stringIds, from, to }: Span) => ({ ids: [...stringIds], from, to });

/** Reports of strings by time, then string. cV, mA, dW, 0.1 °C, dBm, as stored. */
export const framesInPieces = (tx: Tx, span: Span): AsyncGenerator<FrameRow[], void, void> =>
  inPieces(
    tx,
    `select string_id as number, at, voltage_sum as "voltageSum", power_sum as "powerSum", voltage,
            voltage_in as "voltageIn", current, power, temperature, signal, state
     from ${framesOf({
       columns: [
         'voltage_sum',
         'power_sum',
         'voltage',
         'voltage_in',
         'current',
         'power',
         'temperature',
         'signal',
         'state',
       ],
       strings: anyString,
       ...SPAN,
     })} f order by at, string_id`,
    bound(span),
  );

export interface QuarterRow {
  number: number;
  at: Date;
  frames: number;
  voltageAvg: number;
  voltageMin: number;
  voltageMax: number;
  /** dW·min. */
  energy: number;
}
export const quartersInPieces = (tx: Tx, span: Span): AsyncGenerator<QuarterRow[], void, void> =>
  inPieces(
    tx,
    `select string_id as number, at, frames, voltage_avg as "voltageAvg", voltage_min as "voltageMin",
            voltage_max as "voltageMax", energy
     from string_quarter where string_id = any (:ids::int4[]) and at >= :from and at < :to order by at, string_id`,
    bound(span),
  );

export interface DayRow {
  number: number;
  day: string;
  frames: number;
  voltageAvg: number;
  voltageMax: number;
  /** Wh. */
  energy: number;
}
/** Days of strings by the site's local date. */
export const daysInPieces = (
  tx: Tx,
  span: { stringIds: readonly number[]; from: string; to: string },
): AsyncGenerator<DayRow[], void, void> =>
  inPieces(
    tx,
    `select string_id as number, to_char(day, 'YYYY-MM-DD') as day, frames, voltage_avg as "voltageAvg",
            voltage_max as "voltageMax", energy
     from string_day where string_id = any (:ids::int4[]) and day >= :from::text::date and day < :to::text::date
     order by string_day.day, string_id`,
    { ids: [...span.stringIds], from: span.from, to: span.to },
  );
