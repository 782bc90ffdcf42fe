import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Act } from '../../src/domain/commissioning/shutdown-test-record';
import { asActor } from '../../src/server/db/transaction';
import { siteAndItsSteps } from '../../src/server/services/commissioning';
import { shutdownTestPage } from '../../src/server/services/shutdown-test-page';
import { shutdownTestList } from '../../src/server/services/shutdown-test-report';
import { addActs, endShutdownTest } from '../../src/server/services/shutdown-test-write';
import { planOf, sent } from '../support/shutdown-test';
import { CLINIC, SCHOOL, failure, reading, testScene, type TestScene } from '../support/shutdown-test-scene';

let scene: TestScene;
beforeAll(async () => {
  scene = await testScene();
});
afterAll(() => scene.db.drop());
beforeEach(() => scene.clear());

describe('a draft', () => {
  it('is one a zone: whoever comes second is told who is at it, and where', async () => {
    const ref = await scene.startTest();
    const error = await failure(scene.startTest(scene.manager));
    expect(error.kind).toBe('conflict');
    expect(error.message).toContain('Bram Ottersley started it');
    expect(error.detail.fields).toEqual([{ field: 'open', message: ref }]);
    await scene.startTest(scene.technician, SCHOOL, 'Gym');
    await scene.startTest(scene.technician, SCHOOL, 'Main building');
  });

  it('is written step by step, by two people, and tells each of the other', async () => {
    const ref = await scene.startTest();
    await scene.add(ref, { kind: 'planned', plan: planOf([scene.refOf('A1')]) }, scene.after(0));
    await scene.add(ref, { kind: 'caution_accepted', name: 'Somebody' }, scene.after(5), scene.manager);
    const seen = await asActor(scene.technician, (tx) =>
      shutdownTestPage(tx, ref, new Date(), 'Bram Ottersley'),
    );
    expect(seen.record.plan?.strings).toEqual([scene.refOf('A1')]);
    expect(seen.record.caution?.name).toBe('Somebody');
    expect(seen.others).toHaveLength(1);
    expect(seen.others[0]!.name).not.toBe('Bram Ottersley');
  });

  it('counts the units of its strings that pass because they have not answered the roll call', async () => {
    const ref = await scene.startTest();
    const zone = (await scene.page(ref)).unheard;
    expect(zone.unheard).toBe(zone.units); // nothing has reported here
    await scene.add(ref, { kind: 'planned', plan: planOf([scene.refOf('A1')]) }, scene.after(0));
    const { units, unheard } = (await scene.page(ref)).unheard;
    expect(unheard).toBe(units);
    expect(units).toBeLessThan(zone.units);
    const { rowCount } = await scene.db.owner.query(
      `insert into heard (site_id, serial, unit_id, logger_id, gateway_number, first_heard_at, last_heard_at)
       select s.site_id, unit.serial, unit.id, s.logger_id, 1, now(), now() from string s join slot on slot.string_id = s.id
       join placement p on p.slot_id = slot.id and p.placed_to is null join unit on unit.id = p.unit_id
       where s.ref = $1 and slot.position <= 3`,
      [scene.refOf('A1')],
    );
    expect(rowCount).toBe(3);
    expect((await scene.page(ref)).unheard).toEqual({ units, unheard: units - 3 });
    await scene.db.owner.query('delete from heard');
    await scene.db.owner.query(`update unit_type set out_of_box = 'shutdown'`);
    expect((await scene.page(ref)).unheard.unheard).toBe(0);
    await scene.db.owner.query(`update unit_type set out_of_box = 'passing'`);
  });

  it('shows on the commissioning pages while it is open, and there only', async () => {
    const step = async () =>
      (await asActor(scene.technician, (tx) => siteAndItsSteps(tx, scene.fleet.site(CLINIC).ref))).steps.find(
        (s) => s.key === 'shutdown_test',
      );
    expect(await step()).toMatchObject({ state: 'not_started', startedAt: null });
    const ref = await scene.startTest();
    const begun = await step();
    expect(begun).toMatchObject({ state: 'under_way', words: 'test of Whole roof under way' });
    expect(begun?.startedAt).not.toBeNull();
    await asActor(scene.technician, (tx) => endShutdownTest(tx, scene.technician, ref, 'Rain came', null));
    expect(await step()).toMatchObject({ state: 'not_started', words: 'not started', startedAt: null });
  });

  it('takes the same act twice once', async () => {
    const ref = await scene.startTest();
    const act = sent({ kind: 'planned', plan: planOf([scene.refOf('A1')]) }, scene.after(0));
    const send = () =>
      asActor(scene.technician, (tx) => addActs(tx, scene.technician, ref, [act], new Date()));
    await send();
    await send();
    expect((await scene.db.owner.query('select from shutdown_test_act')).rowCount).toBe(1);
  });

  it.each<[string, Act, string]>([
    ['a caution before the plan', { kind: 'caution_accepted', name: 'A B' }, 'Say first who is there'],
    ['a reading before the plan', reading(randomUUID(), 'before', 1, null), 'Say first who is there'],
  ])('refuses %s', async (_, act, words) => {
    const ref = await scene.startTest();
    const error = await failure(scene.add(ref, act, scene.after(0)));
    expect(error.message).toContain(words);
    expect(error.detail.fields?.[0]?.field).toBe('acts.0');
  });

  it('refuses a time to come, a foreign string, and anything once it is ended', async () => {
    const ref = await scene.startTest();
    const plan: Act = { kind: 'planned', plan: planOf([scene.refOf('A1')]) };
    expect((await failure(scene.add(ref, plan, new Date(Date.now() + 600_000)))).message).toContain('future');
    await scene.add(ref, plan, scene.after(0));
    await scene.add(ref, { kind: 'caution_accepted', name: 'A B' }, scene.after(1));
    await scene.add(ref, { kind: 'watch_started', round: 0 }, scene.after(2));
    expect(
      (await failure(scene.add(ref, reading(scene.refOf('A2'), 'before', 480, null), scene.after(3))))
        .message,
    ).toContain('not part of the test');
    await asActor(scene.technician, (tx) => endShutdownTest(tx, scene.technician, ref, 'Rain came', null));
    expect(
      (await failure(scene.add(ref, { kind: 'remark', text: 'late' }, scene.after(9)))).message,
    ).toContain('Rain came');
    const { tests } = await asActor(scene.analyst, (tx) =>
      shutdownTestList(tx, scene.fleet.site(CLINIC).ref, new Date()),
    );
    expect(tests).toEqual([expect.objectContaining({ state: 'ended', reason: 'Rain came', result: null })]);
    await scene.startTest();
  });

  it('is nobody’s outside the organisation', async () => {
    const ref = await scene.startTest();
    for (const actor of [scene.stranger, scene.customer])
      expect(
        (await failure(scene.page(ref, { ...actor, sites: actor.role === 'customer' ? [] : 'all' }))).kind,
      ).toBe('not_found');
    expect(
      (await failure(scene.add(ref, { kind: 'remark', text: 'x' }, scene.after(0), scene.stranger))).kind,
    ).toBe('not_found');
    expect((await failure(scene.startTest(scene.stranger))).kind).toBe('not_found');
  });
});
