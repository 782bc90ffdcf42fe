import type { Knex } from 'knex';
import type { OutputFinding } from '../../src/domain/output/low-output';
import { copyMade, instant } from '../history/copy';
import { dayText, isWeak } from './days';
import type { Seat } from './readings';

const DAY_S = 86_400;
const NIGHTS = 7;

const soundFinding: OutputFinding = {
  outcome: 'as_expected',
  words: 'Makes what its neighbours make.',
  method: 'siblings',
  days: [1, 2, 3, 4, 5].map((day) => ({ day, ratio: 1, z: 0.2, low: false })),
  threshold: { z: -3.5, ratio: 0.95, source: 'modified z-score of −3.5' },
  loss: null,
  lossKWh: null,
  lossMoney: null,
  signature: null,
  excluded: {} as OutputFinding['excluded'],
  confidence: 0.9,
};

/** What the last nights found of every string. */
function* nightRows(seats: readonly Seat[], localTodayS: number): Generator<string> {
  for (let back = NIGHTS; back >= 1; back--) {
    const dayS = localTodayS - back * DAY_S;
    const days = [5, 4, 3, 2, 1].map((n) => dayText(dayS - (n - 1) * DAY_S));
    // stored findings name their days by date
    const stored = (f: OutputFinding) =>
      JSON.stringify({ ...f, scope: 'string', days: f.days.map((d, i) => ({ ...d, day: days[i] })) });
    const sound = `as_expected\tsiblings\t1\t0.2\t0\t40000\t${stored(soundFinding)}`;
    const weak = `low\tsiblings\t0.86\t-6\t5600\t40000\t${stored({
      ...soundFinding,
      outcome: 'low',
      words: 'Makes 14 % less than its neighbours.',
      days: soundFinding.days.map((d) => ({ ...d, ratio: 0.86, z: -6, low: true })),
      loss: { share: 0.14, low: 0.12, high: 0.16 },
      lossKWh: { value: 28, low: 24, high: 32 },
      confidence: 0.85,
    })}`;
    for (const seat of seats) {
      yield `${seat.of.id}\t${seat.of.siteId}\t${dayText(dayS)}\t${instant(dayS + DAY_S)}\t${isWeak(seat) ? weak : sound}`;
    }
  }
}

/** What the last nights found of every string's output, with the causes of the weak ones; events as they gather. */
export async function writeFindings(
  tx: Knex.Transaction,
  seats: readonly Seat[],
  localTodayS: number,
  nowS: number,
): Promise<void> {
  const columns = [
    'string_id',
    'site_id',
    'day',
    'judged_at',
    'outcome',
    'method',
    'ratio',
    'z',
    'loss_wh',
    'expected_wh',
    'finding',
  ];
  await copyMade(tx, 'output_day', columns, nightRows(seats, localTodayS));
  await tx.raw(
    `insert into output_night (site_id, day, judged_at, strings, cant_tell, low)
     select site_id, day, max(judged_at), count(*), 0, count(*) filter (where outcome = 'low') from output_day group by 1, 2`,
  );
  const now = new Date(nowS * 1000);
  await tx.raw(
    `insert into cause (site_id, key, kind, headline, evidence, confidence, units, string_ids, since, opened_at, changed_at,
       loss_wh_day, loss_wh)
     select o.site_id, 'low_output:' || s.ref, 'low_output', s.name || ' makes 14 % less than its neighbours',
            'On 5 of the last 5 days.', 0.85,
            jsonb_build_array(jsonb_build_object('stringId', s.ref, 'stringName', s.name, 'position', null, 'serial', null,
              'since', :now::timestamptz - interval '10 days')), array[s.id], :now::timestamptz - interval '10 days',
            :now::timestamptz - interval '9 days', :now::timestamptz - interval '1 day', 5600, 56000
     from output_day o join string s on s.id = o.string_id where o.outcome = 'low' and o.day = :day order by s.id`,
    { now, day: dayText(localTodayS - DAY_S) },
  );
  // some weeks of what a sound site has: a unit that is stuck one morning, and comes back
  await tx.raw(
    `insert into event (at, organisation_id, site_id, string_id, kind, detail)
     select :now::timestamptz - make_interval(days => n, mins => s.id % 300), site.organisation_id, s.site_id, s.id,
            case n % 2 when 0 then 'units_stuck' else 'units_recovered' end,
            jsonb_build_object('positions', jsonb_build_array(1 + s.id % 20), 'serials', jsonb_build_array('FU-00000001'))
            || case n % 2 when 0 then '{}' else '{"from": "stuck"}'::jsonb end
     from string s join site on site.id = s.site_id, generate_series(1, 20) n where (s.id + n / 2) % 7 = 0 order by n desc`,
    { now },
  );
  await tx.raw(
    `update event set recorded_at = at where recorded_at > :now::timestamptz - interval '1 hour'`,
    { now },
  );
}
