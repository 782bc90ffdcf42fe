import type { LoopFinding, LoopFit } from '../../domain/output/resistance';
import type { Tx } from '../db/transaction';

/** Resistances of strings' loops as they were fitted over time. */

export interface LoopFitRow {
  stringId: number;
  /** yyyy-mm-dd, the first and the last local day that it rests on. */
  fromDay: string;
  day: string;
  fit: LoopFit;
  finding: LoopFinding;
}

/**
 * Of each string of a site the oldest fit within 400 days that was usual and ended before `before`: its own past. Fits
 * of a string whose units have moved since are no past of what stands there now.
 */
export async function pastFits(
  tx: Tx,
  siteId: number,
  before: string,
): Promise<{ stringId: number; fit: LoopFit }[]> {
  const { rows } = await tx.raw<{ rows: (LoopFit & { stringId: number })[] }>(
    `select distinct on (l.string_id) l.string_id as "stringId", l.ohm::float8, l.low::float8, l.high::float8,
            l.shared_ohm::float8 as "sharedOhm", l.gain::float8, l.samples, l.highest_a::float8 as "highestA"
     from loop_fit l
     where l.site_id = :siteId and l.outcome = 'usual' and l.day < :before and l.day >= :before::date - 400
       and not exists (select from slot sl join placement p on p.slot_id = sl.id
                       where sl.string_id = l.string_id and p.placed_from > l.from_day + 1)
     order by l.string_id, l.day`,
    { siteId, before },
  );
  return rows.map(({ stringId, ...fit }) => ({ stringId, fit }));
}

export async function writeLoopFits(tx: Tx, siteId: number, rows: readonly LoopFitRow[]): Promise<void> {
  if (rows.length === 0) return;
  await tx.raw(
    `insert into loop_fit (string_id, site_id, day, from_day, ohm, low, high, shared_ohm, gain, samples, highest_a, outcome,
       finding)
     select string_id, :siteId, day, from_day, ohm, low, high, shared_ohm, gain, samples, highest_a, outcome, finding
     from json_to_recordset(:rows) x(string_id int4, day date, from_day date, ohm real, low real, high real,
       shared_ohm real, gain real, samples int4, highest_a real, outcome text, finding jsonb)
     where exists (select from string where id = string_id) order by string_id
     on conflict (string_id, day) do update set from_day = excluded.from_day, ohm = excluded.ohm, low = excluded.low,
       high = excluded.high, shared_ohm = excluded.shared_ohm, gain = excluded.gain, samples = excluded.samples,
       highest_a = excluded.highest_a, outcome = excluded.outcome, finding = excluded.finding`,
    {
      siteId,
      rows: JSON.stringify(
        rows.map(({ stringId, day, fromDay, fit, finding }) => ({
          string_id: stringId,
          day,
          from_day: fromDay,
          ohm: fit.ohm,
          low: fit.low,
          high: fit.high,
          shared_ohm: fit.sharedOhm,
          gain: fit.gain,
          samples: fit.samples,
          highest_a: fit.highestA,
          outcome: finding.outcome,
          finding,
        })),
      ),
    },
  );
}
