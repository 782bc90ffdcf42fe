import type pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import type { Fault } from '../../simulator/faults/kinds';
import { checklistOf } from '../../src/domain/cases/checklists';
import { judgeOutput } from '../../src/domain/output/low-output';
import type { Membership } from '../../src/domain/output/membership';
import { planeReference } from '../../src/domain/output/plane-reference';
import { fitLoop } from '../../src/domain/output/resistance';
import { lastingWeakUnits } from '../../src/domain/output/weak-days';
import { enoughToTell, weakUnits, type WeakUnit } from '../../src/domain/output/weak-unit';
import { asIngest } from '../../src/server/db/transaction';
import { judgeNight } from '../../src/server/jobs/output-night';
import { checkClosedCases } from '../../src/server/services/check-closed-cases';
import { membershipAt } from '../../src/server/services/membership';
import { membershipsOf, samplesOf } from '../bench/diagnosis/current-scores';
import {
  outputRun,
  STEPS_A_DAY,
  type OutputFault,
  type OutputRun,
} from '../bench/diagnosis/output-scenarios';
import { unitDays } from '../bench/diagnosis/output-scores';
import { planeOf, planeUntil, reportsOf, type Reports } from '../bench/diagnosis/output-series';
import { testDatabase, type TestDatabase } from '../support/database';
import { analystOf, caseOf, closeCase, openCauses, readCase } from '../support/live-plant';
import { ingestClient, seedDrawn, writeReports } from '../support/pipeline';

/**
 * A labelled run of the bench (tests/bench/diagnosis) through frames, roll-ups and the night's job, held against the
 * pure functions on the same reports.
 */
const FAULTY_DAYS = 6;
/** After them all is mended. */
const DAYS = 11;
/** Nights that are judged: one too early to say, one between, the last with faults. */
const NIGHTS = [1, 4, FAULTY_DAYS - 1];
const MENDED_NIGHTS = [7, 8, 9, 10];
const RUN = 8;
// two months ago at the time of this test's making; local midnight is UTC midnight, as the place is at Greenwich
const FIRST_MS = Date.UTC(2026, 9, 1);
const dayName = (d: number): string => new Date(FIRST_MS + d * 86_400_000).toISOString().slice(0, 10);
const night = (d: number): Date => new Date(FIRST_MS + (d + 1) * 86_400_000 - 3_600_000);

/**
 * In ln of odds. Both sides hold currents in whole mA, as the wire carries them; the accuracy of a unit's type is stored
 * in single precision, some 10⁻⁸ off.
 */
const ODDS_TOLERANCE = 1e-4;

type LabelledFault = OutputFault | Extract<Fault, { kind: 'string_isolated' }>;

/** Twelve strings under one sky, with one of each fault of the output from the first day on. */
function labelled(): { run: OutputRun; faults: Map<string, LabelledFault> } {
  const drawn = outputRun(RUN);
  const name = (k: number): string => drawn.drawn.plan.strings[k]!.name;
  const each: LabelledFault[] = [
    { kind: 'soiling', string: name(0), share: 0.18 },
    { kind: 'bypass_diode', string: name(1), position: 4, groups: 1 },
    { kind: 'connector', string: name(2), ohm: 0.6 },
    { kind: 'wrong_string', string: name(3), position: 2, otherString: name(4), otherPosition: 5 },
    {
      kind: 'shade',
      string: name(5),
      positions: [1, 2, 3, 4, 5, 6, 7, 8],
      fromHour: 8,
      toHour: 11.5,
      share: 0.8,
    },
    { kind: 'string_isolated', string: name(6) },
  ];
  const faults = new Map(each.map((fault) => [fault.string, fault]));
  const run: OutputRun = {
    ...drawn,
    days: DAYS,
    onsetDay: 0,
    faults: [...faults.values()].map((fault) => ({
      fault,
      fromS: drawn.drawn.fromS - 86_400,
      toS: drawn.drawn.fromS + FAULTY_DAYS * 86_400 - 3600, // in the dark before the first sound day
    })),
    ofString: new Map(), // what the bench scores by: nothing is scored here
    swaps: [],
    snow: [],
    cutOff: null,
    lost: 0.01,
    inverterLagS: 0,
  };
  return { run, faults };
}

let db: TestDatabase;
let client: pg.Client;
let site: SeededSite;
let reports: Reports;
const { run, faults } = labelled();
const faulty = (kind: LabelledFault['kind']): string =>
  [...faults].find(([, f]) => f.kind === kind)?.[0] ?? '';

beforeAll(async () => {
  db = await testDatabase();
  [site] = (await seedDrawn(db, [run.drawn.plan], FIRST_MS / 1000)) as [SeededSite];
  await db.owner.query(
    `update site set stage = 'operating', time_zone = 'UTC', longitude = 0, report_interval_s = 300`,
  );
  await db.owner.query(`update placement set placed_from = $1`, [new Date(FIRST_MS - 30 * 86_400_000)]);
  client = await ingestClient(db);
  reports = reportsOf(run, RUN);
  await writeReports(client, site, reports, FIRST_MS / 1000, DAYS * STEPS_A_DAY);
}, 300_000);
afterAll(async () => {
  await client.end();
  await db.drop();
});

const causes = async () =>
  (
    await db.owner.query<{ kind: string; headline: string; strings: string[]; open: boolean; loss: number }>(
      `select kind, headline, closed_at is null as open, loss_wh as loss,
              array(select distinct u ->> 'stringName' from jsonb_array_elements(units) u) as strings
       from cause where site_id = $1 order by id`,
      [site.id],
    )
  ).rows;

describe('a labelled plant through the pipeline', { timeout: 300_000 }, () => {
  it('is judged as by the pure functions, night after night', async () => {
    const plane = planeOf(run, reports);
    for (const d of NIGHTS) {
      await judgeNight(site.id, dayName(d), night(d));
      const until = planeUntil(plane, d, null);
      const reference = planeReference(until);
      const { rows } = await db.owner.query<{
        name: string;
        outcome: string;
        method: string;
        signature: string | null;
        ratio: number | null;
      }>(
        `select s.name, o.outcome, o.method, o.signature, o.ratio from output_day o join string s on s.id = o.string_id
         where o.day = $1 order by s.id`,
        [dayName(d)],
      );
      expect(rows).toHaveLength(run.drawn.plan.strings.length);
      for (const row of rows) {
        const k = run.drawn.plan.strings.findIndex((s) => s.name === row.name);
        const pure = judgeOutput(until, reference, k);
        const where = `${row.name} on day ${d}`;
        expect([where, row.outcome]).toEqual([where, pure.outcome]);
        expect([where, row.method]).toEqual([where, pure.method]);
        expect([where, row.signature]).toEqual([where, pure.signature?.kind ?? null]);
        const ratio = reference.ratio[k]![d]!;
        if (Number.isNaN(ratio)) expect(row.ratio).toBeNull();
        // a report without one of its units is none to the bench; a quarter here still has the others
        else expect([where, Math.abs((row.ratio ?? NaN) - ratio) < 0.03]).toEqual([where, true]);
      }
    }
  });

  it('finds each fault where it is, and nothing else', async () => {
    const found = (await causes()).map((c) => `${c.kind} ${c.strings.sort().join('+')}`).sort();
    const swap = faults.get(faulty('wrong_string')) as Extract<OutputFault, { kind: 'wrong_string' }>;
    expect(found).toEqual(
      [
        `low_output ${faulty('soiling')}`,
        `low_output ${faulty('shade')}`,
        `low_output ${faulty('string_isolated')}`,
        `weak_unit ${faulty('bypass_diode')}`,
        `loop_resistance ${faulty('connector')}`,
        `wrong_string ${[swap.string, swap.otherString].sort().join('+')}`,
      ].sort(),
    );
  });

  it('says of shade that it comes back with the sun, and of a string whose switch is open what else it could be', async () => {
    const { rows } = await db.owner.query<{ name: string; signature: string; ratio: number; words: string }>(
      `select s.name, o.signature, o.ratio, o.finding ->> 'words' as words from output_day o join string s on s.id = o.string_id
       where o.day = $1 and o.outcome = 'low'`,
      [dayName(FAULTY_DAYS - 1)],
    );
    const of = (kind: LabelledFault['kind']) => rows.find((r) => r.name === faulty(kind));
    expect(of('shade')?.signature).toBe('shade');
    expect(of('string_isolated')).toMatchObject({ signature: 'current_low' });
    expect(of('string_isolated')?.words).toContain('it carries no current at all');
    const cause = await db.owner.query<{ alternatives: string[] }>(
      `select alternatives from cause where kind = 'low_output' and shared_part ->> 'name' = $1`,
      [faulty('string_isolated')],
    );
    expect(cause.rows[0]?.alternatives).toContain('its load-break device is open');
  });

  it('tells weak units as the pure function does on the same reports, figure by figure', async () => {
    const { rows } = await db.owner.query<{ string: string; finding: WeakUnit }>(
      `select units -> 0 ->> 'stringName' as string, figures -> 'finding' as finding from cause where kind = 'weak_unit'`,
    );
    const days = [4, 3, 2, 1].map((back) => FAULTY_DAYS - back);
    const pure = run.drawn.plan.strings.flatMap((s, k) => {
      const day = unitDays(run, reports, k);
      const weak = days.map((d) => (enoughToTell(day(d)) ? weakUnits(day(d)) : null));
      return lastingWeakUnits(weak).map((finding) => ({ string: s.name, finding }));
    });
    const label = ({ string, finding }: (typeof rows)[number]) => [
      string,
      finding.unit,
      finding.kind,
      finding.count,
    ];
    expect(rows.map(label)).toEqual(pure.map(label));
    rows.forEach(({ finding }, i) => {
      expect(finding.ratio).toBeCloseTo(pure[i]!.finding.ratio, 2);
      expect(Math.abs(finding.share - pure[i]!.finding.share)).toBeLessThan(0.06);
      expect(finding.threshold.ratio).toBeCloseTo(pure[i]!.finding.threshold.ratio, 2);
    });
  });

  it('tells of every unit whose current it carries, and with what odds, as the pure function does', async () => {
    const d = FAULTY_DAYS - 1;
    const { units } = await asIngest((tx) =>
      membershipAt(tx, site.id, 24, new Date(FIRST_MS + (d + 1) * 86_400_000)),
    );
    const pure = new Map(membershipsOf(run, reports, d).map((m) => [`${m.string}:${m.unit + 1}`, m]));
    expect(units).toHaveLength(pure.size);
    const said = (m: Pick<Membership, 'outcome' | 'otherString' | 'undecidedWith' | 'words'> | undefined) =>
      m && [m.outcome, m.otherString, m.undecidedWith, m.words];
    for (const u of units) {
      const where = `${u.string}:${u.position}`;
      expect([where, said(u)]).toEqual([where, said(pure.get(where))]);
      const apart = Math.abs(u.logOdds - pure.get(where)!.logOdds);
      expect([where, apart < ODDS_TOLERANCE]).toEqual([where, true]);
    }
    const isolated = units.filter((u) => u.string === faulty('string_isolated'));
    expect(isolated.every((u) => u.outcome === 'cant_tell' && u.logOdds === 0)).toBe(true);
    expect(units.filter((u) => u.logOdds !== 0).length).toBeGreaterThan(units.length / 2);
  });

  it('a night judged twice, by two workers at once or again later, changes nothing', async () => {
    const events = async () =>
      (await db.owner.query<{ n: number }>(`select count(*)::int as n from event where kind like 'cause%'`))
        .rows[0]?.n;
    const before = [await causes(), await events()];
    await Promise.all([
      judgeNight(site.id, dayName(FAULTY_DAYS - 1), night(FAULTY_DAYS - 1)),
      judgeNight(site.id, dayName(FAULTY_DAYS - 1), night(FAULTY_DAYS)),
    ]);
    expect([await causes(), await events()]).toEqual(before);
  });

  it('says of each string what it truly made of what its sound twin did, shade and dirt too', async () => {
    const { rows } = await db.owner.query<{ name: string; ratio: number; d: number }>(
      `select s.name, o.ratio, o.day - $1::date as d from output_day o join string s on s.id = o.string_id`,
      [dayName(0)],
    );
    const apart = rows.flatMap(({ name, ratio, d }) => {
      const r = reports.strings[run.drawn.plan.strings.findIndex((s) => s.name === name)]!;
      const truly = r.gaveWh[d]! / r.twinWh[d]!;
      return Math.abs(ratio - truly) < 0.02 ? [] : [`${name} on day ${d}: ${ratio} of ${truly}`];
    });
    expect(rows).toHaveLength(NIGHTS.length * run.drawn.plan.strings.length);
    expect(apart).toEqual([]);
  });

  it('the loss of the low string is what its sound twin made more, each day once', async () => {
    const low = (await causes()).find((c) => c.strings.includes(faulty('soiling')));
    const k = run.drawn.plan.strings.findIndex((s) => s.name === faulty('soiling'));
    const r = reports.strings[k]!;
    const truly = r.twinWh.reduce((sum, wh, d) => sum + (d < FAULTY_DAYS ? wh - r.gaveWh[d]! : 0), 0);
    expect(low!.loss).toBeGreaterThan(0.5 * truly);
    expect(low!.loss).toBeLessThan(1.3 * truly);
  });

  it('fits each loop as the pure function does on the same reports', async () => {
    const { rows } = await db.owner.query<{ name: string; ohm: number; from: number; to: number }>(
      `select s.name, l.ohm, l.from_day - $2::date as from, l.day - $2::date as to
       from loop_fit l join string s on s.id = l.string_id where l.day = $1`,
      [dayName(FAULTY_DAYS - 1), dayName(0)],
    );
    expect(rows.map((r) => r.name)).not.toContain(faulty('string_isolated'));
    expect(rows).toHaveLength(run.drawn.plan.strings.length - 1);
    for (const { name, ohm, from, to } of rows) {
      const k = run.drawn.plan.strings.findIndex((s) => s.name === name);
      const pure = fitLoop(samplesOf(run, reports, k, from, to, 1));
      if (typeof pure === 'string') throw new Error(`${name}: ${pure}`);
      // mA, cV and dV as they are stored
      expect([name, Math.abs(ohm - pure.ohm) < 0.03]).toEqual([name, true]);
    }
  });

  it('each cause becomes a case; mended, it ends, the case is closed, and the nights after show that it held', async () => {
    const analyst = await analystOf(db);
    const open = await openCauses(db);
    expect(open.map((c) => c.kind)).toEqual([
      'loop_resistance',
      'low_output',
      'low_output',
      'low_output',
      'weak_unit',
      'wrong_string',
    ]);
    const asked: Record<string, string[]> = {
      loop_resistance: ['same_meter'],
      low_output: ['soiling', 'shade', 'fuses'],
      weak_unit: ['module_damage'],
      wrong_string: ['isolate_one'],
    };
    const opened = night(FAULTY_DAYS - 1);
    const cases = new Map<string, string>();
    for (const cause of open) {
      const ref = await caseOf(analyst, site.ref, cause, opened);
      const { kind } = await readCase(analyst, ref, opened);
      expect(kind).toBe(cause.kind);
      const keys = checklistOf(kind).map((item) => item.key);
      // dirt, shade, a switch that is open: one list for all that makes a string low
      expect(keys).toEqual(expect.arrayContaining(asked[kind] ?? []));
      await closeCase(analyst, ref, 'Cleaned, mated anew, put where the drawing has them.', opened);
      cases.set(cause.headline, ref);
    }
    for (const d of MENDED_NIGHTS) await judgeNight(site.id, dayName(d), night(d));
    expect(await openCauses(db)).toEqual([]);
    const ended = await db.owner.query<{ kind: string; n: number }>(
      `select detail ->> 'kind' as kind, count(*)::int as n from event where kind = 'cause_closed' group by 1 order by 1`,
    );
    expect(ended.rows).toEqual(
      ['loop_resistance', 'low_output', 'weak_unit', 'wrong_string'].map((kind) => ({
        kind,
        n: kind === 'low_output' ? 3 : 1,
      })),
    );
    await checkClosedCases(night(DAYS - 1));
    for (const [headline, ref] of cases) {
      const { outcome, state } = await readCase(analyst, ref, night(DAYS - 1));
      expect([headline, outcome, state]).toEqual([headline, 'held', 'done']);
    }
    // what it had cost by then stays, and grows no more
    const losses = async () => (await causes()).map((c) => c.loss);
    const before = await losses();
    await judgeNight(site.id, dayName(DAYS - 1), night(DAYS));
    expect(await losses()).toEqual(before);
  });
});
