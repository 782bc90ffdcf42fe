import { judgeOutput } from '../../src/domain/output/low-output';
import { planeReference } from '../../src/domain/output/plane-reference';
import { generator, samplePlane } from '../../src/domain/output/sample-plane';
import { asIngest } from '../../src/server/db/transaction';
import { markNight, writeOutputDays } from '../../src/server/queries/output-days';
import type { TestDatabase } from './database';

/** Ohm between the units of the string and its input. */
export const LOOP_OHM = 0.4;

/**
 * Three hours of reports of every string of a site, current rising and falling. Of one string units 5 and 9 are in
 * shutdown for the last hour, nothing was heard of it between 120 and 100 minutes ago, and its input measures what a
 * resistance leaves of the sum.
 */
export async function reportHours(
  db: TestDatabase,
  of: { siteId: number; string: number },
  now: Date,
): Promise<void> {
  await db.owner.query(
    `insert into string_frame (at, mask, string_id, voltage_sum, power_sum, voltage, voltage_in, current, temperature,
                               signal, via, state)
     select f.at, (1::int8 << s.slots::int) - 1, s.id, (select sum(v) from unnest(f.v) v),
            (select sum(v) from unnest(f.v) v) * f.ma / 10000, f.v, array_fill(4000::int2, array[s.slots::int]),
            array_fill(f.ma::int2, array[s.slots::int]), array_fill(400::int2, array[s.slots::int]),
            array_fill(-60::int2, array[s.slots::int]), array_fill(1::int2, array[s.slots::int]),
            (select array_agg((case when x < 0 then 2 else 1 end)::int2) from unnest(f.v) x)
     from string s
     cross join lateral (
       select at, (2000 + 6000 * abs(sin(extract(epoch from at) / 3600)))::int as ma,
              (select array_agg((case when s.id = $3 and p in (5, 9) and at > $2::timestamptz - interval '1 hour'
                                 then -50 else 3900 end)::int2 order by p) from generate_series(1, s.slots) p) as v
       from generate_series($2::timestamptz - interval '3 hours', $2::timestamptz, interval '1 minute') as at) f
     where s.site_id = $1 and not (s.id = $3 and f.at > $2::timestamptz - interval '120 minutes'
                                   and f.at < $2::timestamptz - interval '100 minutes')`,
    [of.siteId, now, of.string],
  );
  await db.owner.query(
    `insert into input_frame (at, input_id, voltage, current)
     select f.at, s.input_id, round(f.voltage_sum / 10.0 - $2::float8 * f.current[1] / 100.0), round(f.current[1] / 10.0)
     from string s join string_frame f on f.string_id = s.id where s.id = $1`,
    [of.string, LOOP_OHM],
  );
}

/** A night's judgement of some strings, made by the judgement itself over a made-up plane: the second misses two units. */
export async function judgeLow(siteId: number, stringIds: readonly number[], now: Date): Promise<void> {
  const plane = samplePlane(generator(5), {
    strings: 8,
    days: 5,
    faults: new Map([[1, { kind: 'units_missing', count: 2 }]]),
  });
  const reference = planeReference(plane);
  const days = Array.from({ length: 5 }, (_, d) =>
    new Date(now.getTime() - (6 - d) * 86_400_000).toISOString().slice(0, 10),
  );
  const rows = stringIds.map((stringId, i) => {
    const finding = judgeOutput(plane, reference, i);
    return {
      stringId,
      day: days[4] ?? '',
      outcome: finding.outcome,
      method: finding.method,
      ratio: finding.days.at(-1)?.ratio ?? null,
      z: finding.days.at(-1)?.z ?? null,
      lossWh: null,
      expectedWh: null,
      signature: finding.signature?.kind ?? null,
      finding: {
        ...finding,
        days: finding.days.map((d) => ({ ...d, day: days[d.day] ?? '' })),
        scope: 'string' as const,
      },
    };
  });
  const of = (outcome: string): number => rows.filter((r) => r.outcome === outcome).length;
  await asIngest(async (tx) => {
    await markNight(tx, {
      siteId,
      day: days[4] ?? '',
      at: now,
      strings: rows.length,
      cantTell: of('cant_tell'),
      low: of('low'),
    });
    await writeOutputDays(tx, siteId, rows, now);
  });
}
