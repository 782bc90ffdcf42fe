import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Fault } from '../../simulator/faults/kinds';
import { ON_KEEP_ALIVE } from '../../simulator/scenarios/catalogue';
import type { Actor } from '../../src/domain/access/permissions';
import type { CaseKind } from '../../src/domain/cases/cases';
import { checklistOf } from '../../src/domain/cases/checklists';
import { database } from '../../src/server/db/pools';
import { asActor } from '../../src/server/db/transaction';
import { nightsDue } from '../../src/server/jobs/nights-due';
import { judgeNight } from '../../src/server/jobs/output-night';
import { tellGathered } from '../../src/server/jobs/tell';
import { siteFiguresCsv } from '../../src/server/reports/figures/csv';
import { monthReportPdf } from '../../src/server/reports/figures/month-report';
import { siteWords } from '../../src/server/reports/figures/words';
import { setRollupWatermark } from '../../src/server/queries/rollup';
import { checkClosedCases } from '../../src/server/services/check-closed-cases';
import { siteFigures } from '../../src/server/services/figures';
import { Draw, drawPlant } from '../bench/diagnosis/plants';
import { testDatabase, type TestDatabase } from '../support/database';
import { pdfPages } from '../support/pdf';
import { tellAll } from '../support/happenings';
import {
  analystOf,
  caseOf,
  causeLines,
  closeCase,
  LivePlant,
  newestEvent,
  openCauses,
  readCase,
  type OpenCause,
} from '../support/live-plant';

/**
 * The simulator's plant at noon, minute by minute: each fault is found and explained, a case is opened from the cause,
 * the fault is mended, readings recover, the case is closed, and the next day shows whether it held.
 */
const drawn = drawPlant(
  {
    n: 7,
    unitType: ON_KEEP_ALIVE,
    strings: 6,
    units: [10, 12],
    perInput: 1,
    reportIntervalS: 60,
    twoZones: true,
    gateways: 2,
    obstacle: false,
    days: 2,
  },
  new Draw(7),
);
const { plan } = drawn;

let db: TestDatabase;
let live: LivePlant;
let analyst: Actor;
/** Cases that were closed and wait to be looked at again, by what was wrong. */
const closed = new Map<string, string>();
/** Cases of what is mended, closed in the evening: another scenario may strike the same units that day. */
const mended = new Map<string, string>();

beforeAll(async () => {
  db = await testDatabase();
  live = new LivePlant(db, drawn);
  await live.start();
  analyst = await analystOf(db);
});
afterAll(async () => {
  await live.stop();
  await db.drop();
});

const open = (): Promise<OpenCause[]> => openCauses(db);
const told = (sinceId: number): Promise<string[]> => causeLines(db, sinceId);
const lastEvent = (): Promise<number> => newestEvent(db);

/** Letters written so far: "Mara: One thing to do". */
const letters = async (): Promise<string[]> =>
  (
    await db.owner.query<{ line: string }>(
      `select to_name || ': ' || subject as line from message order by 1`,
    )
  ).rows.map((r) => r.line);

const stringOf = (letter: string, nth: number) =>
  plan.strings.filter((s) => s.name.startsWith(letter))[nth - 1]!;
const zoneOf = (letter: string): string => stringOf(letter, 1).zone;

/** What each kind of case has to ask before anybody is called. */
const ASKED: Partial<Record<CaseKind, string>> = {
  stuck: 'keep_alive',
  silent: 'gateway_power',
  unconfirmed: 'meter',
  not_shutting_down: 'cross_talk',
};

/** Opens a case from each cause, with the checklist of its kind and the figures of this minute. */
async function openCases(causes: readonly OpenCause[]): Promise<Map<OpenCause, string>> {
  const cases = new Map<OpenCause, string>();
  for (const cause of causes) {
    const ref = await caseOf(analyst, live.site.ref, cause, live.date());
    const page = await readCase(analyst, ref, live.date());
    expect(page.kind).toBe(cause.kind);
    expect(checklistOf(page.kind).map((item) => item.key)).toContain(ASKED[page.kind]);
    expect(page.parts).toHaveLength(cause.units);
    expect(page.before?.light.is).toBe('light');
    cases.set(cause, ref);
  }
  return cases;
}

/** Lets faults be for some minutes, opens cases, mends what is wrong and waits until nothing is open. */
async function scenario(name: string, faults: readonly Fault[], forMinutes: number, mendedFor: number) {
  expect(await open()).toEqual([]);
  const before = await lastEvent();
  const entries = faults.map((fault) => live.plant.faults.add(fault, live.atS + 30));
  await live.minutes(forMinutes);
  const found = await open();
  const cases = await openCases(found);
  for (const entry of entries) live.plant.faults.clear(entry.id, live.atS + 30);
  await live.minutes(mendedFor);
  expect(await open()).toEqual([]);
  for (const [cause, ref] of cases) mended.set(`${name}: ${cause.kind}`, ref);
  return { found, told: await told(before) };
}

describe('the plant’s faults, from its reports to causes, cases and their end', { timeout: 300_000 }, () => {
  const first = stringOf('A', 1).name;
  const second = stringOf('A', 2).name;

  it('a unit stuck in shutdown, and one whose radio is dead', async () => {
    const mute = stringOf('B', 2).name;
    const { found, told: events } = await scenario(
      'units',
      [
        { kind: 'stuck', string: first, position: 3, at: 'now' },
        { kind: 'unit_mute', string: mute, position: 4 },
      ],
      16,
      12,
    );
    expect(found.map((c) => [c.kind, c.units, c.headline])).toEqual([
      ['silent', 1, `Unit 4 of ${mute} is silent`],
      ['stuck', 1, `Unit 3 of ${first} is stuck in shutdown`],
    ]);
    expect(events.sort()).toEqual(['closed silent', 'closed stuck', 'opened silent', 'opened stuck']);
  });

  it('a string that lost the keep-alive', async () => {
    const transmitter = stringOf('A', 2).transmitters[0]!;
    const { found } = await scenario(
      'string',
      [{ kind: 'transmitter_unheard', transmitter, strings: [second] }],
      18,
      14,
    );
    expect(found).toMatchObject([{ kind: 'stuck', part: `string ${second}` }]);
    expect(found[0]?.units).toBe(stringOf('A', 2).slots.length);
  });

  it('a dead transmitter: one cause, not one for each of its strings', async () => {
    const transmitter = stringOf('B', 1).transmitters[0]!;
    const { found } = await scenario('transmitter', [{ kind: 'transmitter_off', transmitter }], 18, 14);
    expect(found).toHaveLength(1);
    expect(found[0]?.kind).toBe('stuck');
    expect([`transmitter ${transmitter}`, `zone ${zoneOf('B')}`]).toContain(found[0]?.part);
  });

  it('a silent gateway: its units together, and the gateway by name', async () => {
    const before = await lastEvent();
    const { found } = await scenario(
      'gateway',
      [{ kind: 'gateway_out', logger: plan.loggers[0]!.serial, gateway: 2, keeps: false }],
      14,
      12,
    );
    expect(found).toMatchObject([{ kind: 'silent' }]);
    expect(found[0]?.part).toMatch(/^gateway .*2/);
    const gateway = await db.owner.query<{ kind: string }>(
      `select kind from event where kind like 'gateway%' and id > $1 order by id`,
      [before],
    );
    expect(gateway.rows.map((r) => r.kind)).toEqual(['gateway_silent', 'gateway_back']);
  });

  it('a logger that is cut off: all that it reports on together', async () => {
    live.uplink = false;
    await live.minutes(14);
    const found = await open();
    expect(found).toHaveLength(1);
    expect(found[0]).toMatchObject({ kind: 'silent', part: `logger ${plan.loggers[0]!.serial}` });
    const cases = await openCases(found);
    live.uplink = true;
    await live.minutes(10);
    expect(await open()).toEqual([]);
    for (const ref of cases.values()) mended.set('logger: silent', ref);
  });

  it('in shutdown: a unit that goes on passing, a string that hears a neighbour, a silent unit; over when mended', async () => {
    const before = await lastEvent();
    const neighbour = stringOf('B', 1).transmitters[0]!;
    const faults: Fault[] = [
      { kind: 'not_shutting_down', string: first, position: 5, claims: 'passing' },
      { kind: 'cross_talk', transmitter: neighbour, strings: [second] },
      { kind: 'unit_mute', string: stringOf('A', 3).name, position: 2 },
    ];
    const entries = faults.map((fault) => live.plant.faults.add(fault, live.atS));
    await live.press(zoneOf('A'), true);
    await live.minutes(8);
    const found = await open();
    expect(found.map((c) => [c.kind, c.units]).sort()).toEqual([
      ['not_shutting_down', 1],
      ['not_shutting_down', stringOf('A', 2).slots.length],
      ['unconfirmed', 1],
    ]);
    expect(found.find((c) => c.units > 1)?.part).toBe(`transmitter ${neighbour}`);
    const cases = await openCases(found);
    for (const entry of entries) live.plant.faults.clear(entry.id, live.atS);
    await live.press(zoneOf('A'), false);
    await live.minutes(12);
    expect(await open()).toEqual([]);
    for (const [cause, ref] of cases) {
      await closeCase(analyst, ref, 'Mended.', live.date());
      closed.set(`shutdown: ${cause.kind} ${cause.units}`, ref);
    }
    expect((await told(before)).filter((e) => /^(opened|closed) not_shutting_down$/.test(e)).sort()).toEqual([
      'closed not_shutting_down',
      'closed not_shutting_down',
      'opened not_shutting_down',
      'opened not_shutting_down',
    ]);
    // shutdown is tried once more: what was mended follows, which is what these cases are looked at for
    await live.press(zoneOf('A'), true);
    await live.minutes(6);
    expect(await open()).toEqual([]);
    await live.press(zoneOf('A'), false);
    await live.minutes(12);
    expect(await open()).toEqual([]);
  });

  it('a lost keep-alive of a whole zone is a command, no fault of its units', async () => {
    const entry = live.plant.faults.add(
      { kind: 'command_lost', zone: zoneOf('B'), how: 'keep_alive_lost' },
      live.atS,
    );
    await live.command(zoneOf('B'), 'keep_alive_lost');
    await live.minutes(8);
    expect(await open()).toEqual([]);
    live.plant.faults.clear(entry.id, live.atS);
    await live.command(zoneOf('B'), 'released');
    await live.minutes(8);
    expect(await open()).toEqual([]);
  });

  it('the next day: what is well again held; what came again is opened again, once', async () => {
    for (const [name, ref] of mended) {
      await closeCase(analyst, ref, 'Mended.', live.date());
      closed.set(name, ref);
    }
    const again = live.plant.faults.add(
      { kind: 'stuck', string: first, position: 3, at: 'now' },
      live.atS + 60,
    );
    live.sleepUntil(23.5);
    await live.minutes(20);
    expect((await open()).map((c) => c.headline)).toEqual([`Unit 3 of ${first} is stuck in shutdown`]);
    expect(await checkClosedCases(live.date())).toEqual({ checked: closed.size, reopened: 1 });
    const outcomes = new Map<string, string | null>();
    for (const [name, ref] of closed) outcomes.set(name, (await readCase(analyst, ref, live.date())).outcome);
    expect(Object.fromEntries(outcomes)).toEqual(
      Object.fromEntries(
        [...closed.keys()].map((name) => [name, name === 'units: stuck' ? 'not_held' : 'held']),
      ),
    );
    const stuck = closed.get('units: stuck') ?? '';
    expect((await readCase(analyst, stuck, live.date())).state).toBe('open');

    live.plant.faults.clear(again.id, live.atS);
    await live.minutes(12);
    expect(await open()).toEqual([]);
    await closeCase(analyst, stuck, 'The unit was replaced.', live.date());
    const later = new Date(live.date().getTime() + 60_000);
    expect(await checkClosedCases(later)).toEqual({ checked: 0, reopened: 0 });
  });
});

describe('a month without data', { timeout: 300_000 }, () => {
  it('is one cause, however many nights are judged meanwhile; what was low before is not over', async () => {
    const { site } = live;
    const beganAt = live.date();
    const days = 31;
    // a string that was low by then
    await db.owner.query(
      `insert into cause (site_id, key, kind, headline, evidence, confidence, units, string_ids, since, opened_at, changed_at,
         loss_wh_day, loss_wh, loss_until)
       values ($1, 'low_output:before', 'low_output', 'Low before', 'x', 0.9, $2, $3, $4, $4, $4, 900, 1800, $4)`,
      [
        site.id,
        JSON.stringify([
          {
            stringId: site.strings.get(plan.strings[0]!.name)!.ref,
            stringName: 'A1',
            position: null,
            serial: null,
            since: beganAt,
          },
        ]),
        [site.strings.get(plan.strings[0]!.name)!.id],
        beganAt,
      ],
    );
    await tellAll(beganAt);
    await db.owner.query('truncate notice, notice_subject, message cascade');
    const before = await lastEvent();

    live.uplink = false;
    await live.minutes(14);
    await live.silence(days * 24, 6, async (at) => {
      await setRollupWatermark(database('ingest'), at);
      for (const night of await nightsDue(at)) await judgeNight(night.siteId, night.day, at);
      await tellAll(at);
      await tellGathered(at);
    });
    const causes = await open();
    expect(causes.map((c) => c.kind)).toEqual(['low_output', 'silent']);
    // the logger was cut off the day before as well: it is that cause again, told once
    expect(await told(before)).toEqual(['reopened silent']);
    expect(causes[1]?.part).toBe(`logger ${plan.loggers[0]!.serial}`);
    expect(causes.map((c) => c.loss)).toEqual([1800, 0]); // nothing is reckoned where nothing is known

    // everybody read of it once and got one letter, the next morning
    const notices = await db.owner.query<{ who: string; headline: string; body: string; over: boolean }>(
      `select p.name as who, n.headline, n.body, n.over_at is not null as over
       from notice n join person p on p.id = n.person_id order by n.id`,
    );
    expect(new Set(notices.rows.map((n) => n.who)).size).toBe(notices.rows.length);
    for (const n of notices.rows) {
      expect(n.headline).toBe(`Again: ${causes[1]?.headline}`);
      // what its inputs said last is not what flows now
      expect(n.body).not.toContain('flows');
      expect(n.body).toContain('a shutdown can’t be confirmed: treat them as live');
      expect(n.over).toBe(false);
    }
    expect(await letters()).toEqual(notices.rows.map((n) => `${n.who}: One thing to do`).sort());
    const nights = await db.owner.query<{ outcome: string; n: number }>(
      `select outcome, count(distinct day)::int as n from output_day where day > $1 group by 1`,
      [beganAt],
    );
    expect(nights.rows).toMatchObject([{ outcome: 'cant_tell' }]);
    expect(nights.rows[0]?.n).toBeGreaterThanOrEqual(days - 1);
  });

  it('says of the month that nothing of it is known, on the page, in the file and on paper', async () => {
    const at = live.date();
    const month = new Date(at.getTime() - 12 * 86_400_000).toISOString().slice(0, 7);
    // the plant was on record before
    await db.owner.query(
      `insert into site_day (day, site_id, energy_ac, energy_dc) values ($1::timestamptz - interval '60 days', $2, 90000, 93000)`,
      [at, live.site.id],
    );
    const f = await asActor(analyst, (tx) => siteFigures(tx, live.site.ref, month, at));
    const words = siteWords(f);
    expect(words.finding).toMatch(/^No day of/);
    expect(words.sentence).toContain('should have');
    expect(f.now).toMatchObject({ days: 0 });
    expect(f.now?.completeness ?? 0).toBe(0);
    expect((await pdfPages(await monthReportPdf(f))).join(' ').replace(/\s+/g, ' ')).toContain(
      words.finding.replace(/\s+/g, ' '),
    );
    expect(await siteFiguresCsv(f).text()).not.toContain('90000');
  });

  it('is over when data return: told once, no false cause, and what was low before is judged by its days', async () => {
    const [first] = (await db.owner.query<{ n: number }>('select count(*)::int as n from notice')).rows;
    await db.owner.query(`select ensure_days($1::date, $1::date + 2)`, [live.date()]);
    const before = await lastEvent();
    live.uplink = true;
    await live.minutes(6);
    await tellAll(live.date());
    expect((await told(before)).filter((e) => !e.startsWith('changed'))).toEqual(['closed silent']);
    expect((await open()).map((c) => c.kind)).toEqual(['low_output']);
    // it is over once it has stayed away for half an hour
    for (let k = 0; k < 2; k++) {
      const later = new Date(live.date().getTime() + 35 * 60_000);
      await tellAll(later);
      await tellGathered(later);
    }
    const over = await db.owner.query<{ headline: string; over: boolean }>(
      `select headline, over_at is not null as over from notice order by id`,
    );
    const again = over.rows.filter((n) => n.headline.startsWith('Again'));
    expect(again.every((n) => n.over)).toBe(true);
    expect(again).toHaveLength(first?.n ?? 0);
    expect(over.rows.filter((n) => n.headline.startsWith('Over: ')).length).toBeLessThanOrEqual(again.length);
    expect(await letters()).toHaveLength(again.length);
  });
});
