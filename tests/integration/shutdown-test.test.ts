import { randomUUID } from 'node:crypto';
import pg from 'pg';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { SignedTest } from '../../src/schemas/api/shutdown-test';
import { GET as listRoute, POST as startRoute } from '../../src/pages/api/sites/[site]/shutdown-tests';
import { GET as csvRoute } from '../../src/pages/api/sites/[site]/shutdown-tests.csv';
import { POST as signRoute } from '../../src/pages/api/shutdown-tests/[test]/sign';
import { asActor } from '../../src/server/db/transaction';
import { customerSite } from '../../src/server/services/customer-page';
import { fingerprintOf } from '../../src/server/reports/fingerprint';
import { shutdownTestList } from '../../src/server/services/shutdown-test-report';
import { signShutdownTest } from '../../src/server/services/shutdown-test-sign';
import { ask } from '../support/endpoint';
import { PASSWORD } from '../support/fleet';
import { planOf } from '../support/shutdown-test';
import { CLINIC, SCHOOL, failure, testScene, type TestScene } from '../support/shutdown-test-scene';

let scene: TestScene;
beforeAll(async () => {
  scene = await testScene();
});
afterAll(() => scene.db.drop());
beforeEach(() => scene.clear());

describe('a signature', () => {
  it('keeps name, time and a fingerprint that is found again', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    const { fingerprint } = await scene.sign(ref);
    const signed = await scene.report(ref);
    expect(signed).toMatchObject({ matches: true, fingerprint, recomputed: fingerprint, supersededBy: null });
    expect(signed.signature).toMatchObject({ name: 'Bram Ottersley', role: 'technician' });
    expect(signed.record?.verdict.result).toBe('passed');
    expect(signed.record?.evidence[0]?.origin).toBe('tapped');
    const { rows } = await scene.db.owner.query<{ action: string }>(
      `select action from audit_entry where subject = $1 order by id`,
      [`shutdown test ${ref}`],
    );
    expect(rows.map((r) => r.action)).toEqual(['shutdown_test.start', 'shutdown_test.sign']);
  });

  it('is refused with a wrong password, and nothing is signed; after ten tries one must wait', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    const wrong = await failure(scene.sign(ref, 'not-my-password'));
    expect(wrong.kind).toBe('invalid');
    expect(wrong.detail.fields?.[0]?.field).toBe('password');
    for (let i = 0; i < 9; i++) await failure(scene.sign(ref, 'not-my-password'));
    const limited = await failure(scene.sign(ref));
    expect(limited.kind).toBe('too_many');
    expect(limited.detail.retryAfterS).toBeGreaterThan(0);
    expect((await scene.db.owner.query('select from shutdown_test')).rowCount).toBe(0);
    // another person is not locked out by it
    await scene.sign(ref, PASSWORD, scene.manager);
  });

  it('signs only what was shown', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    const { fingerprint } = await scene.page(ref);
    await scene.add(
      ref,
      { kind: 'remark', text: 'somebody adds this meanwhile' },
      scene.after(300),
      scene.manager,
    );
    const error = await failure(
      asActor(scene.technician, (tx) =>
        signShutdownTest(
          tx,
          scene.technician,
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
        await scene.add(ref, { kind: 'planned', plan: planOf([scene.refOf('A1')]) }, scene.after(0));
        await scene.add(ref, { kind: 'caution_accepted', name: 'A B' }, scene.after(1));
        await scene.add(ref, { kind: 'watch_started', round: 0 }, scene.after(2));
      },
      'No round',
    ],
  ])('is refused %s', async (_, prepare, words) => {
    const ref = await scene.startTest();
    await prepare(ref);
    expect((await failure(scene.sign(ref))).message).toContain(words);
  });

  it('is asked for through the endpoint, by people on site only', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    const { fingerprint } = await scene.page(ref);
    const body = { password: PASSWORD, fingerprint };
    const call = (actor: Actor | null) =>
      ask(signRoute, { actor, params: { test: ref }, method: 'POST', body });
    expect((await call(null)).status).toBe(401);
    expect((await call(scene.analyst)).status).toBe(403);
    expect((await call(scene.customer)).status).toBe(403);
    expect((await call(scene.stranger)).status).toBe(404);
    expect((await call(scene.technician)).status).toBe(200);
    expect((await call(scene.technician)).status).toBe(409);
  });
});

describe('what is signed', () => {
  const asApp = async (sql: string, values: unknown[] = []) => {
    const client = new pg.Client(scene.db.appUrl);
    await client.connect();
    try {
      await client.query('begin');
      await client.query(
        `select set_config('wakeline.organisation', $1, true), set_config('wakeline.sites', '*', true)`,
        [String(scene.technician.organisationId)],
      );
      return await client.query(sql, values);
    } finally {
      await client.end();
    }
  };
  const STANDS = { code: '23000', constraint: 'shutdown_test_stands' };

  it('can not be changed or removed by the web, whatever SQL it sends', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    await scene.sign(ref);
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
    expect((await scene.report(ref)).matches).toBe(true);
  });

  it('can not even be changed by the owner while the guard stands', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    await scene.sign(ref);
    await expect(scene.db.owner.query(`update shutdown_test set result = 'failed'`)).rejects.toMatchObject(
      STANDS,
    );
    await expect(scene.db.owner.query(`delete from shutdown_test_string`)).rejects.toMatchObject(STANDS);
    await expect(scene.db.owner.query(`update shutdown_test set superseded_by = id`)).rejects.toMatchObject(
      STANDS,
    );
  });

  it('shows it where the stored data has been tampered with past the guard', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    await scene.sign(ref);
    await scene.db.owner.query(`alter table shutdown_test disable trigger shutdown_test_stands`);
    await scene.db.owner.query(
      `update shutdown_test set detail = jsonb_set(detail, '{verdict,result}', '"failed"')`,
    );
    await scene.db.owner.query(`alter table shutdown_test enable trigger shutdown_test_stands`);
    const seen = await scene.report(ref);
    expect(seen.matches).toBe(false);
    expect(seen.recomputed).not.toBe(seen.fingerprint);
  });

  it('takes no more acts', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    await scene.sign(ref);
    expect(
      (await failure(scene.add(ref, { kind: 'remark', text: 'x y' }, scene.after(400)))).message,
    ).toContain('signed');
    await expect(
      asApp(
        `insert into shutdown_test_act (ref, draft_id, site_id, kind, body, person_id, at)
         select gen_random_uuid(), d.id, d.site_id, 'remark', '{}', $1, now() from shutdown_test_draft d`,
        [scene.technician.personId],
      ),
    ).rejects.toMatchObject({ constraint: 'shutdown_test_draft_is_open' });
  });

  it('hides from other organisations in every table', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    await scene.sign(ref);
    for (const table of ['shutdown_test', 'shutdown_test_draft', 'shutdown_test_act', 'shutdown_test_string'])
      for (const [actor, many] of [
        [scene.technician, true],
        [scene.stranger, false],
      ] as const)
        await asActor(actor, async (tx) => {
          const { rows } = await tx.raw<{ rows: { n: number }[] }>(`select count(*)::int as n from ${table}`);
          expect(rows[0]!.n > 0, table).toBe(many);
        });
    expect((await failure(scene.report(ref, scene.stranger))).kind).toBe('not_found');
    // the customer page tells its result, and nothing else of it
    expect((await failure(scene.report(ref, { ...scene.customer, sites: [] }))).kind).toBe('not_found');
  });
});

describe('repeating for what failed', () => {
  it('prefills people and the failed strings, carries the others, and supersedes', async () => {
    const first = await scene.startTest();
    await scene.runTest(first, scene.all(8.4, { A3: 212 }));
    await scene.sign(first);
    expect((await scene.report(first)).record?.verdict).toMatchObject({
      result: 'failed',
      treatAsLive: [expect.objectContaining({ name: 'A3' })],
    });
    const again = await scene.startTest(scene.technician, CLINIC, undefined, first);
    const opened = await scene.page(again);
    expect(opened.follows?.test).toBe(first);
    expect(opened.suggested).toMatchObject({
      onSite: 'Una Lathe',
      strings: [scene.refOf('A3')],
      instrument: { serial: 'HB-20881', provedBefore: false },
    });
    await scene.runTest(again, { A3: 8.1 });
    await scene.sign(again);
    const now = await scene.report(again);
    expect(now.record?.verdict.result).toBe('passed');
    const carried = now.record?.verdict.strings.filter((s) => s.carriedFrom !== null) ?? [];
    expect(carried).toHaveLength(scene.strings().length - 1);
    expect(carried.every((s) => s.carriedFrom?.test === first)).toBe(true);
    const before = await scene.report(first);
    expect(before.supersededBy?.test).toBe(again);
    expect(before.matches).toBe(true);
    const { zones, tests } = await asActor(scene.analyst, (tx) =>
      shutdownTestList(tx, scene.fleet.site(CLINIC).ref, new Date()),
    );
    expect(zones[0]).toMatchObject({ result: 'passed', untested: [], test: { ref: again } });
    expect(tests.map((t) => [t.id, t.superseded])).toEqual(
      expect.arrayContaining([
        [again, false],
        [first, true],
      ]),
    );
    // carried once more, a result still names the test in which it was measured
    const third = await scene.startTest();
    await scene.runTest(third, { A1: 8 });
    await scene.sign(third);
    const latest = (await scene.report(third)).record?.verdict.strings;
    expect(latest?.find((s) => s.name === 'A2')?.carriedFrom?.test).toBe(first);
    expect(latest?.find((s) => s.name === 'A3')?.carriedFrom?.test).toBe(again);
  });

  it('leaves strings that were never tested untested', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, { A1: 8, A2: 8 });
    await scene.sign(ref);
    const { zones } = await asActor(scene.analyst, (tx) =>
      shutdownTestList(tx, scene.fleet.site(CLINIC).ref, new Date()),
    );
    expect(zones[0]?.untested).toEqual(scene.strings().slice(2));
  });
});

describe('what comes late', () => {
  it('changes nothing that is signed, and is told', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    await scene.sign(ref);
    const before = await scene.report(ref);
    expect(before.late).toEqual({ reports: 0, strings: [] });
    const string = scene.fleet.site(CLINIC).strings.get('A2')!;
    const n = scene.fleet.site(CLINIC).plan.strings.find((s) => s.name === 'A2')!.slots.length;
    await scene.db.owner.query(
      `insert into string_frame (at, mask, string_id, voltage_sum, power_sum, voltage, current, temperature, signal, via, state)
       select $1::timestamptz + make_interval(secs => s), 1, $2, 0, 0, a, a, a, a, a, a
       from generate_series(0, 20, 10) s, (select array_fill(1::int2, array[$3::int]) a) x`,
      [scene.after(70), string.id, n],
    );
    const later = await scene.report(ref);
    expect(later.late).toEqual({ reports: 3, strings: ['A2'] });
    expect(later).toMatchObject({ matches: true, fingerprint: before.fingerprint });
    expect(later.record).toEqual(before.record);
  });
});

describe('the list', () => {
  it('is for staff, in JSON and as CSV, filtered alike', async () => {
    const ref = await scene.startTest();
    await scene.runTest(ref, scene.all(8.4));
    await scene.sign(ref);
    const params = { site: scene.fleet.site(CLINIC).ref };
    for (const route of [listRoute, csvRoute]) {
      expect((await ask(route, { actor: null, params })).status).toBe(401);
      expect((await ask(route, { actor: scene.customer, params })).status).toBe(403);
      expect((await ask(route, { actor: scene.stranger, params })).status).toBe(404);
      expect((await ask(route, { actor: scene.analyst, params })).status).toBe(200);
    }
    const text = await (await ask(csvRoute, { actor: scene.analyst, params, path: '/x?show=all' })).text();
    const lines = text.trim().split('\r\n');
    expect(lines).toHaveLength(2);
    expect(lines[1]).toMatch(/^Whole roof,signed,.*,Passed,8,0,0,Bram Ottersley,,[0-9a-f]{64}$/);
    expect(
      (await (await ask(csvRoute, { actor: scene.analyst, params, path: '/x?show=superseded' })).text())
        .trim()
        .split('\r\n'),
    ).toHaveLength(1);
    expect(
      (await ask(startRoute, { actor: scene.analyst, params, method: 'POST', body: { zone: randomUUID() } }))
        .status,
    ).toBe(403);
  });

  it('tells the customer the result of every zone, not of the newest test', async () => {
    const gym = await scene.startTest(scene.technician, SCHOOL, 'Gym');
    const main = await scene.startTest(scene.technician, SCHOOL, 'Main building');
    const of = async (zone: string) =>
      (
        await scene.db.owner.query<{ name: string }>(
          'select s.name from string s join zone z on z.id = s.zone_id where z.site_id = $1 and z.name = $2',
          [scene.fleet.site(SCHOOL).id, zone],
        )
      ).rows.map((r) => r.name);
    const gyms = await of('Gym');
    await scene.runTest(gym, Object.fromEntries(gyms.map((n, i) => [n, i === 0 ? 200 : 8])), SCHOOL);
    await scene.sign(gym);
    scene.startLater(20);
    await scene.runTest(main, Object.fromEntries((await of('Main building')).map((n) => [n, 8])), SCHOOL);
    await scene.sign(main);
    const seen = await asActor(scene.manager, (tx) =>
      customerSite(tx, scene.fleet.site(SCHOOL).ref, new Date()),
    );
    expect(seen.lastTest?.result).toBe('failed');
  });
});

it('fingerprints whatever is signed the same after its journey through the database', async () => {
  const ref = await scene.startTest();
  await scene.runTest(ref, scene.all(8.4));
  await scene.sign(ref);
  const { rows } = await scene.db.owner.query<{ detail: SignedTest; fingerprint: string }>(
    'select detail, fingerprint from shutdown_test',
  );
  expect(fingerprintOf(rows[0]!.detail)).toBe(rows[0]!.fingerprint);
});
