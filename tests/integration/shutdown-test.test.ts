import { randomUUID } from 'node:crypto';
import pg from 'pg';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { Act } from '../../src/domain/commissioning/shutdown-test-record';
import type { SignedTest } from '../../src/schemas/api/shutdown-test';
import { GET as listRoute, POST as startRoute } from '../../src/pages/api/sites/[site]/shutdown-tests';
import { GET as csvRoute } from '../../src/pages/api/sites/[site]/shutdown-tests.csv';
import { POST as signRoute } from '../../src/pages/api/shutdown-tests/[test]/sign';
import { asActor } from '../../src/server/db/transaction';
import { AppError } from '../../src/server/errors';
import { customerSite } from '../../src/server/services/customer-page';
import { fingerprintOf } from '../../src/server/reports/fingerprint';
import { shutdownTestPage } from '../../src/server/services/shutdown-test-page';
import { shutdownTestList, shutdownTestReport } from '../../src/server/services/shutdown-test-report';
import { signShutdownTest } from '../../src/server/services/shutdown-test-sign';
import { addActs, endShutdownTest, startShutdownTest } from '../../src/server/services/shutdown-test-write';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { PASSWORD, testFleet, type TestFleet } from '../support/fleet';
import { planOf, sent } from '../support/shutdown-test';

const CLINIC = 'Weirside Clinic';
const SCHOOL = 'Kestrel Row School';
let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let manager: Actor;
let analyst: Actor;
let stranger: Actor;
let customer: Actor;
/** Some minutes ago, so that a whole test lies in the past. */
let start: Date;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, SCHOOL, 'Netloft Terrace']);
  technician = await fleet.actor('technician@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  analyst = await fleet.actor('analyst@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  customer = await fleet.actor('customer@lowfield.example');
});
afterAll(() => db.drop());
beforeEach(async () => {
  // what is signed can't be removed: an owner may switch the guard off, the web may not
  await db.owner.query(
    `truncate shutdown_test, shutdown_test_draft, shutdown_test_act, shutdown_test_string cascade`,
  );
  await db.owner.query('delete from rate_limit; delete from command; delete from string_frame');
  start = new Date(Math.floor(Date.now() / 1000) * 1000 - 600_000);
});

const after = (s: number) => new Date(start.getTime() + s * 1000);
async function zoneRef(site: string, name?: string): Promise<string> {
  const { rows } = await db.owner.query<{ ref: string }>(
    'select ref from zone where site_id = $1 and ($2::text is null or name = $2) order by name',
    [fleet.site(site).id, name ?? null],
  );
  return rows[0]!.ref;
}
const startTest = async (actor = technician, site = CLINIC, zone?: string, follows?: string) =>
  (
    await asActor(actor, async (tx) =>
      startShutdownTest(
        tx,
        actor,
        fleet.site(site).ref,
        { zone: await zoneRef(site, zone), ...(follows ? { follows } : {}) },
        null,
      ),
    )
  ).id;
const add = (ref: string, act: Act, at: Date, actor = technician) =>
  asActor(actor, (tx) => addActs(tx, actor, ref, [sent(act, at)], new Date()));
const page = (ref: string, actor = technician) =>
  asActor(actor, (tx) => shutdownTestPage(tx, ref, new Date(), 'nobody'));
const sign = async (ref: string, password = PASSWORD, actor = technician) => {
  const { fingerprint } = await page(ref, actor);
  return asActor(actor, (tx) =>
    signShutdownTest(
      tx,
      actor,
      { name: 'Bram Ottersley', address: null },
      ref,
      { password, fingerprint },
      new Date(),
    ),
  );
};
const report = (ref: string, actor = technician) => asActor(actor, (tx) => shutdownTestReport(tx, ref));
const refOf = (name: string, site = CLINIC) => fleet.site(site).strings.get(name)!.ref;
async function failure(work: Promise<unknown>): Promise<AppError> {
  const error = await work.then(
    () => undefined,
    (e: unknown) => e,
  );
  if (error instanceof AppError) return error;
  throw new Error('it should have been refused', { cause: error });
}
const reading = (
  string: string,
  moment: 'before' | 'after',
  volts: number,
  afterS: number | null,
  round = 0,
): Act => ({
  kind: 'reading',
  round,
  string,
  moment,
  afterS,
  secondsFrom: 'clock',
  atInverterEnd: true,
  voltages: { positiveToNegativeV: volts, positiveToEarthV: volts / 2, negativeToEarthV: -volts / 2 },
  note: '',
});

/** A whole test of some strings by instrument; `volts` stand at 20 s. */
async function runTest(ref: string, strings: Record<string, number>, site = CLINIC): Promise<void> {
  const refs = Object.keys(strings).map((n) => refOf(n, site));
  await add(ref, { kind: 'planned', plan: planOf(refs) }, after(0));
  await add(ref, { kind: 'caution_accepted', name: 'Bram Ottersley' }, after(5));
  await add(ref, { kind: 'watch_started', round: 0 }, after(10));
  for (const string of refs) await add(ref, reading(string, 'before', 480, null), after(20));
  await add(ref, { kind: 'operated', round: 0 }, after(60));
  for (const [name, volts] of Object.entries(strings))
    await add(ref, reading(refOf(name, site), 'after', volts, volts > 30 ? 40 : 20), after(80));
  await add(ref, { kind: 'released', round: 0 }, after(120));
  await add(ref, { kind: 'round_ended', round: 0 }, after(240));
  await add(ref, { kind: 'proved_after', proved: true }, after(250));
}
const strings = (site = CLINIC) => [...fleet.site(site).strings.keys()];
const all = (volts: number, more: Record<string, number> = {}) => ({
  ...Object.fromEntries(strings().map((n) => [n, volts])),
  ...more,
});

describe('a draft', () => {
  it('is one a zone: whoever comes second is told who is at it, and where', async () => {
    const ref = await startTest();
    const error = await failure(startTest(manager));
    expect(error.kind).toBe('conflict');
    expect(error.message).toContain('Bram Ottersley started it');
    expect(error.detail.fields).toEqual([{ field: 'open', message: ref }]);
    await startTest(technician, SCHOOL, 'Gym');
    await startTest(technician, SCHOOL, 'Main building');
  });

  it('is written step by step, by two people, and tells each of the other', async () => {
    const ref = await startTest();
    await add(ref, { kind: 'planned', plan: planOf([refOf('A1')]) }, after(0));
    await add(ref, { kind: 'caution_accepted', name: 'Somebody' }, after(5), manager);
    const seen = await asActor(technician, (tx) => shutdownTestPage(tx, ref, new Date(), 'Bram Ottersley'));
    expect(seen.record.plan?.strings).toEqual([refOf('A1')]);
    expect(seen.record.caution?.name).toBe('Somebody');
    expect(seen.others).toHaveLength(1);
    expect(seen.others[0]!.name).not.toBe('Bram Ottersley');
  });

  it('takes the same act twice once', async () => {
    const ref = await startTest();
    const act = sent({ kind: 'planned', plan: planOf([refOf('A1')]) }, after(0));
    const send = () => asActor(technician, (tx) => addActs(tx, technician, ref, [act], new Date()));
    await send();
    await send();
    expect((await db.owner.query('select from shutdown_test_act')).rowCount).toBe(1);
  });

  it.each<[string, Act, string]>([
    ['a caution before the plan', { kind: 'caution_accepted', name: 'A B' }, 'Say first who is there'],
    ['a reading before the plan', reading(randomUUID(), 'before', 1, null), 'Say first who is there'],
  ])('refuses %s', async (_, act, words) => {
    const ref = await startTest();
    const error = await failure(add(ref, act, after(0)));
    expect(error.message).toContain(words);
    expect(error.detail.fields?.[0]?.field).toBe('acts.0');
  });

  it('refuses a time to come, a foreign string, and anything once it is ended', async () => {
    const ref = await startTest();
    const plan: Act = { kind: 'planned', plan: planOf([refOf('A1')]) };
    expect((await failure(add(ref, plan, new Date(Date.now() + 600_000)))).message).toContain('future');
    await add(ref, plan, after(0));
    await add(ref, { kind: 'caution_accepted', name: 'A B' }, after(1));
    await add(ref, { kind: 'watch_started', round: 0 }, after(2));
    expect((await failure(add(ref, reading(refOf('A2'), 'before', 480, null), after(3)))).message).toContain(
      'not part of the test',
    );
    await asActor(technician, (tx) => endShutdownTest(tx, technician, ref, 'Rain came', null));
    expect((await failure(add(ref, { kind: 'remark', text: 'late' }, after(9)))).message).toContain(
      'Rain came',
    );
    const { tests } = await asActor(analyst, (tx) =>
      shutdownTestList(tx, fleet.site(CLINIC).ref, new Date()),
    );
    expect(tests).toEqual([expect.objectContaining({ state: 'ended', reason: 'Rain came', result: null })]);
    await startTest();
  });

  it('is nobody’s outside the organisation', async () => {
    const ref = await startTest();
    for (const actor of [stranger, customer])
      expect(
        (await failure(page(ref, { ...actor, sites: actor.role === 'customer' ? [] : 'all' }))).kind,
      ).toBe('not_found');
    expect((await failure(add(ref, { kind: 'remark', text: 'x' }, after(0), stranger))).kind).toBe(
      'not_found',
    );
    expect((await failure(startTest(stranger))).kind).toBe('not_found');
  });
});

describe('a signature', () => {
  it('keeps name, time and a fingerprint that is found again', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    const { fingerprint } = await sign(ref);
    const signed = await report(ref);
    expect(signed).toMatchObject({ matches: true, fingerprint, recomputed: fingerprint, supersededBy: null });
    expect(signed.signature).toMatchObject({ name: 'Bram Ottersley', role: 'technician' });
    expect(signed.record?.verdict.result).toBe('passed');
    expect(signed.record?.evidence[0]?.origin).toBe('tapped');
    const { rows } = await db.owner.query<{ action: string }>(
      `select action from audit_entry where subject = $1 order by id`,
      [`shutdown test ${ref}`],
    );
    expect(rows.map((r) => r.action)).toEqual(['shutdown_test.start', 'shutdown_test.sign']);
  });

  it('is refused with a wrong password, and nothing is signed; after ten tries one must wait', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    const wrong = await failure(sign(ref, 'not-my-password'));
    expect(wrong.kind).toBe('invalid');
    expect(wrong.detail.fields?.[0]?.field).toBe('password');
    for (let i = 0; i < 9; i++) await failure(sign(ref, 'not-my-password'));
    const limited = await failure(sign(ref));
    expect(limited.kind).toBe('too_many');
    expect(limited.detail.retryAfterS).toBeGreaterThan(0);
    expect((await db.owner.query('select from shutdown_test')).rowCount).toBe(0);
    // another person is not locked out by it
    await sign(ref, PASSWORD, manager);
  });

  it('signs only what was shown', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    const { fingerprint } = await page(ref);
    await add(ref, { kind: 'remark', text: 'somebody adds this meanwhile' }, after(300), manager);
    const error = await failure(
      asActor(technician, (tx) =>
        signShutdownTest(
          tx,
          technician,
          { name: 'x', address: null },
          ref,
          { password: PASSWORD, fingerprint },
          new Date(),
        ),
      ),
    );
    expect(error.kind).toBe('conflict');
    expect(error.message).toContain('Look at it again');
  });

  it.each<[string, (ref: string) => Promise<void>, string]>([
    ['before anything is planned', () => Promise.resolve(), 'who is there'],
    [
      'while a round is open',
      async (ref) => {
        await add(ref, { kind: 'planned', plan: planOf([refOf('A1')]) }, after(0));
        await add(ref, { kind: 'caution_accepted', name: 'A B' }, after(1));
        await add(ref, { kind: 'watch_started', round: 0 }, after(2));
      },
      'No round',
    ],
  ])('is refused %s', async (_, prepare, words) => {
    const ref = await startTest();
    await prepare(ref);
    expect((await failure(sign(ref))).message).toContain(words);
  });

  it('is asked for through the endpoint, by people on site only', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    const { fingerprint } = await page(ref);
    const body = { password: PASSWORD, fingerprint };
    const call = (actor: Actor | null) =>
      ask(signRoute, { actor, params: { test: ref }, method: 'POST', body });
    expect((await call(null)).status).toBe(401);
    expect((await call(analyst)).status).toBe(403);
    expect((await call(customer)).status).toBe(403);
    expect((await call(stranger)).status).toBe(404);
    expect((await call(technician)).status).toBe(200);
    expect((await call(technician)).status).toBe(409);
  });
});

describe('what is signed', () => {
  const asApp = async (sql: string, values: unknown[] = []) => {
    const client = new pg.Client(db.appUrl);
    await client.connect();
    try {
      await client.query('begin');
      await client.query(
        `select set_config('wakeline.organisation', $1, true), set_config('wakeline.sites', '*', true)`,
        [String(technician.organisationId)],
      );
      return await client.query(sql, values);
    } finally {
      await client.end();
    }
  };
  const STANDS = { code: '23000', constraint: 'shutdown_test_stands' };

  it('can not be changed or removed by the web, whatever SQL it sends', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    await sign(ref);
    const DENIED = { code: '42501' };
    for (const sql of [
      `update shutdown_test set result = 'failed'`,
      `update shutdown_test set superseded_by = id`,
      'delete from shutdown_test',
      'truncate shutdown_test cascade',
      `update shutdown_test_string set result = 'failed'`,
      'delete from shutdown_test_string',
      `update shutdown_test_act set at = now()`,
      'delete from shutdown_test_act',
      `update shutdown_test_draft set zone_id = zone_id`,
      'delete from shutdown_test_draft',
      'alter table shutdown_test disable trigger all',
    ])
      await expect(asApp(sql), sql).rejects.toMatchObject(DENIED);
    await expect(
      asApp(
        `insert into shutdown_test_string (test_id, string_id, site_id, result)
         select t.id, s.id, s.site_id, 'passed' from shutdown_test t, string s where s.site_id <> t.site_id limit 1`,
      ),
    ).rejects.toThrow();
    await expect(
      asApp(
        `insert into shutdown_test_string (test_id, string_id, site_id, result)
         select t.id, s.id, s.site_id, 'passed' from shutdown_test t join string s on s.site_id = t.site_id limit 1`,
      ),
    ).rejects.toMatchObject(STANDS);
    expect((await report(ref)).matches).toBe(true);
  });

  it('can not even be changed by the owner while the guard stands', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    await sign(ref);
    await expect(db.owner.query(`update shutdown_test set result = 'failed'`)).rejects.toMatchObject(STANDS);
    await expect(db.owner.query(`delete from shutdown_test_string`)).rejects.toMatchObject(STANDS);
    await expect(db.owner.query(`update shutdown_test set superseded_by = id`)).rejects.toMatchObject(STANDS);
  });

  it('shows it where the stored data has been tampered with past the guard', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    await sign(ref);
    await db.owner.query(`alter table shutdown_test disable trigger shutdown_test_stands`);
    await db.owner.query(
      `update shutdown_test set detail = jsonb_set(detail, '{verdict,result}', '"failed"')`,
    );
    await db.owner.query(`alter table shutdown_test enable trigger shutdown_test_stands`);
    const seen = await report(ref);
    expect(seen.matches).toBe(false);
    expect(seen.recomputed).not.toBe(seen.fingerprint);
  });

  it('takes no more acts', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    await sign(ref);
    expect((await failure(add(ref, { kind: 'remark', text: 'x y' }, after(400)))).message).toContain(
      'signed',
    );
    await expect(
      asApp(
        `insert into shutdown_test_act (ref, draft_id, site_id, kind, body, person_id, at)
         select gen_random_uuid(), d.id, d.site_id, 'remark', '{}', $1, now() from shutdown_test_draft d`,
        [technician.personId],
      ),
    ).rejects.toMatchObject({ constraint: 'shutdown_test_draft_is_open' });
  });

  it('hides from other organisations in every table', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    await sign(ref);
    for (const table of ['shutdown_test', 'shutdown_test_draft', 'shutdown_test_act', 'shutdown_test_string'])
      for (const [actor, many] of [
        [technician, true],
        [stranger, false],
      ] as const)
        await asActor(actor, async (tx) => {
          const { rows } = await tx.raw<{ rows: { n: number }[] }>(`select count(*)::int as n from ${table}`);
          expect(rows[0]!.n > 0, table).toBe(many);
        });
    expect((await failure(report(ref, stranger))).kind).toBe('not_found');
    // the customer page tells its result, and nothing else of it
    expect((await failure(report(ref, { ...customer, sites: [] }))).kind).toBe('not_found');
  });
});

describe('repeating for what failed', () => {
  it('prefills people and the failed strings, carries the others, and supersedes', async () => {
    const first = await startTest();
    await runTest(first, all(8.4, { A3: 212 }));
    await sign(first);
    expect((await report(first)).record?.verdict).toMatchObject({
      result: 'failed',
      treatAsLive: [expect.objectContaining({ name: 'A3' })],
    });
    const again = await startTest(technician, CLINIC, undefined, first);
    const opened = await page(again);
    expect(opened.follows?.test).toBe(first);
    expect(opened.suggested).toMatchObject({
      onSite: 'Una Lathe',
      strings: [refOf('A3')],
      instrument: { serial: 'HB-20881', provedBefore: false },
    });
    await runTest(again, { A3: 8.1 });
    await sign(again);
    const now = await report(again);
    expect(now.record?.verdict.result).toBe('passed');
    const carried = now.record?.verdict.strings.filter((s) => s.carriedFrom !== null) ?? [];
    expect(carried).toHaveLength(strings().length - 1);
    expect(carried.every((s) => s.carriedFrom?.test === first)).toBe(true);
    const before = await report(first);
    expect(before.supersededBy?.test).toBe(again);
    expect(before.matches).toBe(true);
    const { zones, tests } = await asActor(analyst, (tx) =>
      shutdownTestList(tx, fleet.site(CLINIC).ref, new Date()),
    );
    expect(zones[0]).toMatchObject({ result: 'passed', untested: [], test: { ref: again } });
    expect(tests.map((t) => [t.id, t.superseded])).toEqual(
      expect.arrayContaining([
        [again, false],
        [first, true],
      ]),
    );
    // carried once more, a result still names the test in which it was measured
    const third = await startTest();
    await runTest(third, { A1: 8 });
    await sign(third);
    const latest = (await report(third)).record?.verdict.strings;
    expect(latest?.find((s) => s.name === 'A2')?.carriedFrom?.test).toBe(first);
    expect(latest?.find((s) => s.name === 'A3')?.carriedFrom?.test).toBe(again);
  });

  it('leaves strings that were never tested untested', async () => {
    const ref = await startTest();
    await runTest(ref, { A1: 8, A2: 8 });
    await sign(ref);
    const { zones } = await asActor(analyst, (tx) =>
      shutdownTestList(tx, fleet.site(CLINIC).ref, new Date()),
    );
    expect(zones[0]?.untested).toEqual(strings().slice(2));
  });
});

describe('what comes late', () => {
  it('changes nothing that is signed, and is told', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    await sign(ref);
    const before = await report(ref);
    expect(before.late).toEqual({ reports: 0, strings: [] });
    const string = fleet.site(CLINIC).strings.get('A2')!;
    const n = fleet.site(CLINIC).plan.strings.find((s) => s.name === 'A2')!.slots.length;
    await db.owner.query(
      `insert into string_frame (at, mask, string_id, voltage_sum, power_sum, voltage, current, temperature, signal, via, state)
       select $1::timestamptz + make_interval(secs => s), 1, $2, 0, 0, a, a, a, a, a, a
       from generate_series(0, 20, 10) s, (select array_fill(1::int2, array[$3::int]) a) x`,
      [after(70), string.id, n],
    );
    const later = await report(ref);
    expect(later.late).toEqual({ reports: 3, strings: ['A2'] });
    expect(later).toMatchObject({ matches: true, fingerprint: before.fingerprint });
    expect(later.record).toEqual(before.record);
  });
});

describe('the list', () => {
  it('is for staff, in JSON and as CSV, filtered alike', async () => {
    const ref = await startTest();
    await runTest(ref, all(8.4));
    await sign(ref);
    const params = { site: fleet.site(CLINIC).ref };
    for (const route of [listRoute, csvRoute]) {
      expect((await ask(route, { actor: null, params })).status).toBe(401);
      expect((await ask(route, { actor: customer, params })).status).toBe(403);
      expect((await ask(route, { actor: stranger, params })).status).toBe(404);
      expect((await ask(route, { actor: analyst, params })).status).toBe(200);
    }
    const text = await (await ask(csvRoute, { actor: analyst, params, path: '/x?show=all' })).text();
    const lines = text.trim().split('\r\n');
    expect(lines).toHaveLength(2);
    expect(lines[1]).toMatch(/^Whole roof,signed,.*,Passed,8,0,0,Bram Ottersley,,[0-9a-f]{64}$/);
    expect(
      (await (await ask(csvRoute, { actor: analyst, params, path: '/x?show=superseded' })).text())
        .trim()
        .split('\r\n'),
    ).toHaveLength(1);
    expect(
      (await ask(startRoute, { actor: analyst, params, method: 'POST', body: { zone: randomUUID() } }))
        .status,
    ).toBe(403);
  });

  it('tells the customer the result of every zone, not of the newest test', async () => {
    const gym = await startTest(technician, SCHOOL, 'Gym');
    const main = await startTest(technician, SCHOOL, 'Main building');
    const of = async (zone: string) =>
      (
        await db.owner.query<{ name: string }>(
          'select s.name from string s join zone z on z.id = s.zone_id where z.site_id = $1 and z.name = $2',
          [fleet.site(SCHOOL).id, zone],
        )
      ).rows.map((r) => r.name);
    const gyms = await of('Gym');
    await runTest(gym, Object.fromEntries(gyms.map((n, i) => [n, i === 0 ? 200 : 8])), SCHOOL);
    await sign(gym);
    start = after(20);
    await runTest(main, Object.fromEntries((await of('Main building')).map((n) => [n, 8])), SCHOOL);
    await sign(main);
    const seen = await asActor(manager, (tx) => customerSite(tx, fleet.site(SCHOOL).ref, new Date()));
    expect(seen.lastTest?.result).toBe('failed');
  });
});

it('fingerprints whatever is signed the same after its journey through the database', async () => {
  const ref = await startTest();
  await runTest(ref, all(8.4));
  await sign(ref);
  const { rows } = await db.owner.query<{ detail: SignedTest; fingerprint: string }>(
    'select detail, fingerprint from shutdown_test',
  );
  expect(fingerprintOf(rows[0]!.detail)).toBe(rows[0]!.fingerprint);
});
