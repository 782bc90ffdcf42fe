import type pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import { judgeOutput } from '../../src/domain/output/low-output';
import { planeReference } from '../../src/domain/output/plane-reference';
import { judgeNight } from '../../src/server/jobs/output-night';
import {
  outputRun,
  STEPS_A_DAY,
  type OutputFault,
  type OutputRun,
} from '../bench/diagnosis/output-scenarios';
import { planeOf, planeUntil, reportsOf, type Reports } from '../bench/diagnosis/output-series';
import { testDatabase, type TestDatabase } from '../support/database';
import { ingestClient, seedDrawn, writeReports } from '../support/pipeline';

/**
 * A labelled run of the bench (tests/bench/diagnosis) through frames, roll-ups and the night's job, held against the
 * pure functions on the same reports.
 */
const DAYS = 6;
/** Nights that are judged: one too early to say, one between, the last. */
const NIGHTS = [1, 4, DAYS - 1];
const RUN = 8;
// two months ago at the time of this test's making; local midnight is UTC midnight, as the place is at Greenwich
const FIRST_MS = Date.UTC(2026, 9, 1);
const dayName = (d: number): string => new Date(FIRST_MS + d * 86_400_000).toISOString().slice(0, 10);
const night = (d: number): Date => new Date(FIRST_MS + (d + 1) * 86_400_000 - 3_600_000);

/** Twelve strings under one sky, with one of each fault of the output from the first day on. */
function labelled(): { run: OutputRun; faults: Map<string, OutputFault> } {
  const drawn = outputRun(RUN);
  const names = drawn.drawn.plan.strings.map((s) => s.name);
  const [dirty, bypassed, connector, swapped, other] = names as [string, string, string, string, string];
  const faults = new Map<string, OutputFault>([
    [dirty, { kind: 'soiling', string: dirty, share: 0.18 }],
    [bypassed, { kind: 'bypass_diode', string: bypassed, position: 4, groups: 1 }],
    [connector, { kind: 'connector', string: connector, ohm: 0.6 }],
    [swapped, { kind: 'wrong_string', string: swapped, position: 2, otherString: other, otherPosition: 5 }],
  ]);
  const run: OutputRun = {
    ...drawn,
    days: DAYS,
    onsetDay: 0,
    faults: [...faults.values()].map((fault) => ({ fault, fromS: drawn.drawn.fromS - 86_400, toS: null })),
    ofString: faults,
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
const faulty = (kind: OutputFault['kind']): string => [...faults].find(([, f]) => f.kind === kind)?.[0] ?? '';

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
}, 120_000);
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

describe('a labelled plant through the pipeline', () => {
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
        else expect(Math.abs((row.ratio ?? NaN) - ratio)).toBeLessThan(0.03);
      }
    }
  });

  it('finds each fault where it is, and nothing else', async () => {
    const found = (await causes()).map((c) => `${c.kind} ${c.strings.sort().join('+')}`).sort();
    const swap = faults.get(faulty('wrong_string')) as Extract<OutputFault, { kind: 'wrong_string' }>;
    expect(found).toEqual(
      [
        `low_output ${faulty('soiling')}`,
        `weak_unit ${faulty('bypass_diode')}`,
        `loop_resistance ${faulty('connector')}`,
        `wrong_string ${[swap.string, swap.otherString].sort().join('+')}`,
      ].sort(),
    );
  });

  it('a night judged twice, by two workers at once or again later, changes nothing', async () => {
    const events = async () =>
      (await db.owner.query<{ n: number }>(`select count(*)::int as n from event where kind like 'cause%'`))
        .rows[0]?.n;
    const before = [await causes(), await events()];
    await Promise.all([
      judgeNight(site.id, dayName(DAYS - 1), night(DAYS - 1)),
      judgeNight(site.id, dayName(DAYS - 1), night(DAYS)),
    ]);
    expect([await causes(), await events()]).toEqual(before);
  });

  it('the loss of the low string is what its sound twin made more, each day once', async () => {
    const [low] = (await causes()).filter((c) => c.kind === 'low_output');
    const k = run.drawn.plan.strings.findIndex((s) => s.name === faulty('soiling'));
    const r = reports.strings[k]!;
    const truly = r.twinWh.reduce((sum, wh, d) => sum + wh - r.gaveWh[d]!, 0);
    expect(low!.loss).toBeGreaterThan(0.5 * truly);
    expect(low!.loss).toBeLessThan(1.3 * truly);
  });
});
