import type { OutputFinding } from '../../domain/output/low-output';
import type { SignatureKind } from '../../domain/output/signature';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** A finding as it is kept: its days by their local dates. */
export type KeptOutputFinding = Omit<OutputFinding, 'days'> & {
  days: { day: string; ratio: number; z: number | null; low: boolean }[];
  /** `input`: the figures are those of the input that it shares. */
  scope: 'string' | 'input';
};

export interface OutputDay {
  /** yyyy-mm-dd, local. */
  day: string;
  outcome: OutputFinding['outcome'];
  method: OutputFinding['method'];
  /** Of what was expected that day; null: the day doesn't count. */
  ratio: number | null;
  z: number | null;
  /** Wh missing that day; null: nothing worth naming. */
  lossWh: number | null;
  expectedWh: number | null;
  signature: SignatureKind | null;
  finding: KeptOutputFinding;
}
export type OutputDayRow = OutputDay & { stringId: number };

const DAY = `to_char(o.day, 'YYYY-MM-DD') as day, o.outcome, o.method, o.ratio, o.z, o.loss_wh as "lossWh",
  o.expected_wh as "expectedWh", o.signature, o.finding`;

/** The judged days of one string, oldest first, both included. The caller has checked that it may be seen. */
export async function outputDaysOf(
  tx: Tx,
  stringId: number,
  span: { from: string; to: string },
): Promise<OutputDay[]> {
  const { rows } = await tx.raw<{ rows: OutputDay[] }>(
    `select ${DAY} from output_day o where o.string_id = :stringId and o.day between :from and :to order by o.day`,
    { stringId, ...span },
  );
  return rows;
}

export interface JudgedString extends OutputDay {
  siteRef: string;
  siteName: string;
  timeZone: string;
  stringRef: string;
  stringName: string;
  plane: string;
  /** The cause that says so, where it is open: reference, since when, Wh since then and a day. */
  cause: {
    ref: string;
    since: string;
    lossWh: number;
    lossWhDay: number | null;
    openCase: string | null;
  } | null;
}

/**
 * Strings that the actor sees (or of one site) that make less than they should, as their newest judged day since
 * `judgedSince` (yyyy-mm-dd) found them. Only low days are gone through, by an index that has no others.
 */
export async function lowOutputStrings(
  tx: Tx,
  which: { siteId?: number; judgedSince: string },
): Promise<JudgedString[]> {
  const { rows } = await tx.raw<{ rows: JudgedString[] }>(
    `with low as materialized (
       select o.string_id, max(o.day) as day
       from site join output_day o on o.site_id = site.id
       where ${SITE_VISIBLE} and o.outcome = 'low' and o.day >= :judgedSince
         ${which.siteId === undefined ? '' : 'and site.id = :siteId'}
       group by o.string_id)
     select ${DAY}, site.ref as "siteRef", site.name as "siteName", site.time_zone as "timeZone", s.ref as "stringRef",
            s.name as "stringName", plane.name as plane,
            case when c.ref is not null then json_build_object('ref', c.ref, 'since', c.since, 'lossWh', c.loss_wh,
              'lossWhDay', c.loss_wh_day, 'openCase',
              (select f.ref from case_file f where f.cause_id = c.id and f.closed_at is null limit 1)) end as cause
     from low
     join output_day o on o.string_id = low.string_id and o.day = low.day
     join string s on s.id = low.string_id join site on site.id = s.site_id join plane on plane.id = s.plane_id
     left join cause c on c.site_id = s.site_id and c.kind = 'low_output' and c.closed_at is null
       and c.string_ids @> array[s.id]
     where not exists (select from output_day later where later.string_id = low.string_id and later.day > low.day)
     order by site.name, s.id`,
    { judgedSince: which.judgedSince, siteId: which.siteId ?? 0 },
  );
  return rows;
}

/** What the nights of the actor's sites came to: each site's newest since `judgedSince` (yyyy-mm-dd). */
export interface NightCounts {
  judged: number;
  /** Of how many of them nothing could be told. */
  cantTell: number;
  /** Operating sites, by name, of which no night was judged. */
  unjudgedSites: string[];
}
export async function nightCounts(tx: Tx, judgedSince: string): Promise<NightCounts> {
  const { rows } = await tx.raw<{ rows: NightCounts[] }>(
    `select coalesce(sum(n.strings), 0)::int as judged, coalesce(sum(n.cant_tell), 0)::int as "cantTell",
            coalesce(array_agg(site.name order by site.name) filter (where n.strings is null and site.stage = 'operating'), '{}')
              as "unjudgedSites"
     from site left join lateral (
       select strings, cant_tell from output_night
       where site_id = site.id and day >= :judgedSince order by day desc limit 1) n on true
     where ${SITE_VISIBLE}`,
    { judgedSince },
  );
  const [counts] = rows;
  if (!counts) throw new Error('A sum without groups has one row.');
  return counts;
}

/** Writes the night's judgement of a site's strings; a night judged again replaces what it said. */
export async function writeOutputDays(
  tx: Tx,
  siteId: number,
  rows: readonly OutputDayRow[],
  at: Date,
): Promise<void> {
  if (rows.length === 0) return;
  await tx.raw(
    `insert into output_day (string_id, site_id, day, outcome, method, ratio, z, loss_wh, expected_wh, signature, finding,
       judged_at)
     select string_id, :siteId, day, outcome, method, ratio, z, loss_wh, expected_wh, signature, finding, :at
     from json_to_recordset(:rows) x(string_id int4, day date, outcome text, method text, ratio real, z real,
       loss_wh float8, expected_wh float8, signature text, finding jsonb)
     where exists (select from string where id = string_id) order by string_id
     on conflict (string_id, day) do update set outcome = excluded.outcome, method = excluded.method,
       ratio = excluded.ratio, z = excluded.z, loss_wh = excluded.loss_wh, expected_wh = excluded.expected_wh,
       signature = excluded.signature, finding = excluded.finding, judged_at = excluded.judged_at`,
    {
      siteId,
      at,
      rows: JSON.stringify(
        rows.map((r) => ({
          string_id: r.stringId,
          day: r.day,
          outcome: r.outcome,
          method: r.method,
          ratio: r.ratio,
          z: r.z,
          loss_wh: r.lossWh,
          expected_wh: r.expectedWh,
          signature: r.signature,
          finding: r.finding,
        })),
      ),
    },
  );
}

/** A night is judged: written once, with what it came to. False: it was already. */
export async function markNight(
  tx: Tx,
  night: { siteId: number; day: string; at: Date; strings: number; cantTell: number; low: number },
): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `insert into output_night (site_id, day, judged_at, strings, cant_tell, low)
     values (:siteId, :day, :at, :strings, :cantTell, :low) on conflict do nothing returning 1`,
    night,
  );
  return rows.length > 0;
}

export interface NightSite {
  id: number;
  timeZone: string;
  latitude: number;
  longitude: number;
  altitude: number;
  /** The newest night that was judged, yyyy-mm-dd. */
  judged: string | null;
  /** Yesterday and today where the site is: local dates and where they begin and end, epoch s. */
  days: { day: string; fromS: number; toS: number }[];
}

/** Operating sites, their days at this instant, and how far their nights are judged. */
export async function nightSites(tx: Tx, at: Date): Promise<NightSite[]> {
  const { rows } = await tx.raw<{ rows: NightSite[] }>(
    `select s.id, s.time_zone as "timeZone", s.latitude, s.longitude, s.altitude,
            (select to_char(max(n.day), 'YYYY-MM-DD') from output_night n where n.site_id = s.id) as judged,
            (select json_agg(json_build_object('day', to_char(d.day, 'YYYY-MM-DD'),
               'fromS', extract(epoch from d.day::timestamp at time zone s.time_zone)::float8,
               'toS', extract(epoch from (d.day + 1)::timestamp at time zone s.time_zone)::float8) order by d.day)
             from (select (:at::timestamptz at time zone s.time_zone)::date - back as day
                   from generate_series(0, 1) back) d) as days
     from site s where s.stage = 'operating' and exists (select from string where site_id = s.id) order by s.id`,
    { at },
  );
  return rows;
}

/**
 * What each string made of the model's output on its sound days before `before`: the median ratio of at least three
 * days judged by the model as expected. Strings without so many are left out.
 */
export async function ownBaselines(
  tx: Tx,
  siteId: number,
  before: string,
): Promise<{ stringId: number; ratio: number }[]> {
  const { rows } = await tx.raw<{ rows: { stringId: number; ratio: number }[] }>(
    `select string_id as "stringId", percentile_cont(0.5) within group (order by ratio::float8) as ratio
     from output_day where site_id = :siteId and day < :before and day >= :before::date - 90 and method = 'model'
       and outcome = 'as_expected' and ratio is not null
     group by string_id having count(*) >= 3`,
    { siteId, before },
  );
  return rows;
}
