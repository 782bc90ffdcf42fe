import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { GET as lowCsvRoute } from '../../src/pages/api/low-output.csv';
import { GET as viewsRoute, POST as keepRoute } from '../../src/pages/api/saved-views/index';
import { DELETE as dropRoute, PATCH as changeRoute } from '../../src/pages/api/saved-views/[view]';
import {
  DELETE as removeRoute,
  PUT as restoreRoute,
} from '../../src/pages/api/sites/[site]/annotations/[annotation]';
import { GET as notesRoute, POST as pinRoute } from '../../src/pages/api/sites/[site]/annotations/index';
import { GET as explanationsRoute } from '../../src/pages/api/strings/[string]/explanations';
import { GET as heatRoute } from '../../src/pages/api/strings/[string]/heat';
import { GET as historyRoute } from '../../src/pages/api/strings/[string]/history';
import { GET as loopRoute } from '../../src/pages/api/strings/[string]/loop';
import { GET as momentRoute } from '../../src/pages/api/strings/[string]/moment';
import { GET as unitsRoute } from '../../src/pages/api/strings/[string]/units';
import { annotation } from '../../src/schemas/api/annotations';
import { savedView } from '../../src/schemas/api/saved-views';
import { stringHistory, stringUnits } from '../../src/schemas/api/string';
import { stringExplanations, stringHeat, stringLoop, stringMoment } from '../../src/schemas/api/workbench';
import { asActor } from '../../src/server/db/transaction';
import { readLowOutput } from '../../src/server/services/low-output';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';
import { judgeLow, LOOP_OHM as OHM, reportHours } from '../support/workbench-scene';

const HALL = 'Old Tannery Market Hall';
const NOW = new Date(Math.floor(Date.now() / 900_000) * 900_000);
const minutesAgo = (n: number) => new Date(NOW.getTime() - n * 60_000);
const epoch = (at: Date) => Math.floor(at.getTime() / 1000);

let db: TestDatabase;
let fleet: TestFleet;
let analyst: Actor;
let manager: Actor;
let stranger: Actor;
const stringOf = (name: string) => {
  const found = fleet.site(HALL).strings.get(name);
  if (!found) throw new Error(`no string ${name}`);
  return found;
};
const site = () => {
  const { id, organisationId } = fleet.site(HALL);
  return { id, organisationId };
};
let siteRef = '';

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL]);
  analyst = await fleet.actor('analyst@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  siteRef = fleet.site(HALL).ref;
  await reportHours(db, { siteId: site().id, string: stringOf('B3').id }, NOW);
  await judgeLow(
    site().id,
    ['B1', 'B2', 'B3'].map((name) => stringOf(name).id),
    NOW,
  );
});
afterAll(() => db.drop());

const get = async (route: Parameters<typeof ask>[0], name: string, query = '') =>
  ask(route, { actor: analyst, params: { string: stringOf(name).ref }, path: `/api/x?${query}` });

describe('a past minute', () => {
  const moment = async (minutes: number) =>
    stringMoment.parse(await (await get(momentRoute, 'B3', `at=${epoch(minutesAgo(minutes))}`)).json());

  it('is what every unit said then, against what the siblings gave then', async () => {
    const before = await moment(90);
    expect(before.source).toBe('report');
    expect(before.slots.map((s) => s.state)).toEqual(Array.from({ length: 14 }, () => 'passing'));
    expect(before.voltage).toBeCloseTo(14 * 39, 6);
    const after = await moment(30);
    expect(after.slots.filter((s) => s.state === 'shutdown').map((s) => s.position)).toEqual([5, 9]);
    expect(after.voltage).toBeCloseTo(12 * 39 - 1, 6);
    expect(after.expectedVoltage).toBeCloseTo(14 * 39, 6);
    expect(after.expectedFrom).toContain('other strings');
  });

  it('in which nothing was heard says so and shows no figure', async () => {
    const gap = await moment(105);
    expect(gap.source).toBe('nothing');
    expect(gap.voltage).toBeNull();
    expect(gap.slots.every((s) => s.state === null && s.voltage === null)).toBe(true);
  });

  it('shows the unit that sat there then, not the one of today', async () => {
    const { rows } = await db.owner.query<{ id: number; serial: string }>(
      `select p.id, u.serial from slot sl join placement p on p.slot_id = sl.id join unit u on u.id = p.unit_id
       where sl.string_id = $1 and sl.position = 7 and p.placed_to is null`,
      [stringOf('B3').id],
    );
    const old = rows[0];
    if (!old) throw new Error('no unit at 7');
    await db.owner.query('update placement set placed_to = $2 where id = $1', [old.id, minutesAgo(45)]);
    await db.owner.query(
      `with u as (insert into unit (organisation_id, serial, unit_type_id)
                  select organisation_id, 'NEW-7', unit_type_id from unit where serial = $3 returning id)
       insert into placement (site_id, unit_id, slot_id, placed_from)
       select $1, u.id, sl.id, $4 from u, slot sl where sl.string_id = $2 and sl.position = 7`,
      [site().id, stringOf('B3').id, old.serial, minutesAgo(45)],
    );
    expect((await moment(50)).slots[6]?.serial).toBe(old.serial);
    expect((await moment(20)).slots[6]?.serial).toBe('NEW-7');
    const units = stringUnits.parse(
      await (await get(unitsRoute, 'B3', 'quantity=voltage&positions=7')).json(),
    );
    expect(units.moves).toMatchObject([{ position: 7, out: old.serial, in: 'NEW-7' }]);
  });
});

describe('the history', () => {
  const history = async (query: string) =>
    stringHistory.parse(await (await get(historyRoute, 'B3', query)).json());
  const span = () => `from=${epoch(minutesAgo(180))}&to=${epoch(NOW) + 60}`;

  it('tells current and power with their own expectation and gaps', async () => {
    const current = await history(`quantity=current&${span()}`);
    expect(current.unit).toBe('A');
    expect(Math.max(...current.values.map((v) => v ?? 0))).toBeLessThanOrEqual(8);
    // a string carries the current of its siblings, however many units they have
    expect(current.middle.values.at(-1)).toBeCloseTo(current.values.at(-1) ?? 0, 0);
    expect(current.values.filter((v) => v === null)).toHaveLength(1);
    const power = await history(`quantity=power&${span()}`);
    const i = power.values.length - 1;
    const amps = current.values[i] ?? 0;
    expect(Math.abs((power.values[i] ?? 0) - amps * (12 * 39 - 1))).toBeLessThan(2);
    const low = power.expected.low.at(-1) ?? 0;
    expect(power.values[i]).toBeLessThan(low);
  });

  it('lays each sibling beside it where asked for', async () => {
    const h = await history(`siblings=each&${span()}`);
    expect(h.siblings.map((s) => s.name)).toContain('B2');
    expect(h.siblings[0]?.values.at(-1)).toBeCloseTo(14 * 39, 6);
    expect((await history(span())).siblings).toEqual([]);
  });

  it('marks planned works as stretches', async () => {
    await db.owner.query(
      `insert into planned_work (site_id, starts_at, ends_at, reason, created_by) values ($1, $2, $3, 'Roof paint', $4)`,
      [site().id, minutesAgo(170), minutesAgo(160), manager.personId],
    );
    const marks = (await history(span())).marks.filter((m) => m.words.startsWith('Planned work'));
    expect(marks).toEqual([
      {
        from: epoch(minutesAgo(170)),
        to: epoch(minutesAgo(160)),
        words: 'Planned work: Roof paint',
        tone: 'slate',
      },
    ]);
  });
});

describe('what lies behind', () => {
  it('shows every unit over the day, a unit’s missing report as missing', async () => {
    const heat = stringHeat.parse(await (await get(heatRoute, 'B3', 'quantity=voltage')).json());
    expect(heat.rows).toHaveLength(14);
    const last = heat.at.length - 1;
    expect(heat.rows[4]?.values[last]).toBeLessThan(0);
    expect(heat.rows[5]?.values[last]).toBeCloseTo(39, 6);
    const missing = epoch(minutesAgo(110));
    expect(heat.at.some((at) => at <= missing && missing < at + heat.stepS)).toBe(false);
  });

  it('finds the resistance that was put between units and input', async () => {
    const loop = stringLoop.parse(await (await get(loopRoute, 'B3')).json());
    // steps of a volt and of a few samples: to an eighth
    expect(Math.abs((loop.fit?.ohm ?? 0) - OHM)).toBeLessThan(OHM / 8);
    expect(loop.points.length).toBeGreaterThan(20);
  });

  it('says why there is no line where units do not measure their output or nothing came', async () => {
    const loop = stringLoop.parse(await (await get(loopRoute, 'B3', 'on=2026-01-05')).json());
    expect(loop.fit).toBeNull();
    expect(loop.why).toContain('samples');
    expect(loop.outcome).toBe('cant_tell');
  });

  it('names the explanation that fits, with the figures of the night', async () => {
    const found = stringExplanations.parse(await (await get(explanationsRoute, 'B2')).json());
    expect(found.outcome).toBe('low');
    expect(found.explanations[0]).toMatchObject({ key: 'units_missing', fit: 'fits' });
    const sound = stringExplanations.parse(await (await get(explanationsRoute, 'B1')).json());
    expect(sound.outcome).toBe('as_expected');
    expect(sound.explanations.filter((e) => e.fit === 'fits')).toEqual([]);
  });
});

describe('notes on the time axis', () => {
  const pin = (body: object, actor: Actor = analyst) =>
    ask(pinRoute, { actor, params: { site: siteRef }, method: 'POST', body });
  const list = async (query = '') => {
    const response = await ask(notesRoute, {
      actor: analyst,
      params: { site: siteRef },
      path: `/api/x?${query}`,
    });
    return annotation.array().parse(await response.json());
  };
  const note = (more: object = {}) => ({
    ref: randomUUID(),
    string: stringOf('B3').ref,
    from: minutesAgo(30).toISOString(),
    to: null,
    text: 'Two flat treads',
    ...more,
  });

  it('are pinned once however often they are sent, taken away and put back, each time written down', async () => {
    const sent = note();
    expect((await pin(sent)).status).toBe(200);
    expect((await pin(sent)).status).toBe(200);
    await pin(note({ string: null, text: 'Whole roof washed', from: minutesAgo(2000).toISOString() }));
    await pin(note({ string: stringOf('A1').ref, text: 'Another string' }));
    const ofB3 = `string=${stringOf('B3').ref}`;
    expect((await list(ofB3)).map((n) => n.text)).toEqual(['Two flat treads', 'Whole roof washed']);
    expect((await list(`${ofB3}&from=${epoch(minutesAgo(60))}&to=${epoch(NOW)}`)).map((n) => n.text)).toEqual(
      ['Two flat treads'],
    );
    const params = { site: siteRef, annotation: sent.ref };
    await ask(removeRoute, { actor: manager, params, method: 'DELETE' });
    await ask(removeRoute, { actor: manager, params, method: 'DELETE' });
    expect((await list(ofB3)).map((n) => n.text)).toEqual(['Whole roof washed']);
    await ask(restoreRoute, { actor: manager, params, method: 'PUT' });
    expect(await list(ofB3)).toHaveLength(2);
    const { rows } = await db.owner.query<{ action: string }>(
      `select action from audit_entry where action like 'annotation.%' and subject = 'note on B3' order by id`,
    );
    expect(rows.map((r) => r.action)).toEqual([
      'annotation.pinned',
      'annotation.removed',
      'annotation.restored',
    ]);
  });

  it.each([
    ['no words', { text: '  ' }, 'body.text'],
    ['an end before its beginning', { to: minutesAgo(60).toISOString() }, 'body.to'],
    ['a moment of next week', { from: minutesAgo(-8000).toISOString() }, 'from'],
  ])('refuse %s and name the field', async (_, more, field) => {
    const response = await pin(note(more));
    expect(response.status).toBe(422);
    const { fields } = (await response.json()) as { fields: { field: string }[] };
    expect(fields.map((f) => f.field)).toContain(field);
  });

  it('are neither read nor written from another organisation', async () => {
    expect((await pin(note(), stranger)).status).toBe(404);
    const response = await ask(notesRoute, { actor: stranger, params: { site: siteRef } });
    expect(response.status).toBe(404);
  });
});

describe('low strings and saved views', () => {
  it('are listed with what they lose, priced by the tariff of the day', async () => {
    await db.owner.query(
      `insert into tariff (site_id, from_on, price_kwh, created_by) values ($1, '2020-01-01', 0.25, $2)`,
      [site().id, manager.personId],
    );
    const low = await asActor(analyst, (tx) => readLowOutput(tx, NOW));
    expect(low.rows.map((r) => r.string.name)).toEqual(['B2']);
    const row = low.rows[0];
    expect(row).toMatchObject({ signature: 'units_missing', method: 'siblings', openCase: null });
    expect(row?.moneyDay).toBeCloseTo((row?.lossKWhDay ?? 0) * 0.25, 9);
    expect(low.judged).toBe(3);
    const csv = await (await ask(lowCsvRoute, { actor: analyst, path: '/api/x?q=b2' })).text();
    expect(csv.trim().split('\r\n')).toHaveLength(2);
    const none = await (await ask(lowCsvRoute, { actor: analyst, path: '/api/x?signature=shade' })).text();
    expect(none.trim().split('\r\n')).toHaveLength(1);
    expect((await asActor(stranger, (tx) => readLowOutput(tx, NOW))).rows).toEqual([]);
  });

  it('keep views under a name, a person’s own until shared, changed by their maker only', async () => {
    const keep = (body: object, actor: Actor = analyst) =>
      ask(keepRoute, { actor, method: 'POST', body: { list: 'low_output', query: 'case=none', ...body } });
    const views = async (actor: Actor) =>
      savedView
        .array()
        .parse(await (await ask(viewsRoute, { actor, path: '/api/x?list=low_output' })).json());
    const made = savedView.parse(await (await keep({ name: 'Not taken up' })).json());
    expect((await keep({ name: 'Not taken up' })).status).toBe(409);
    expect((await keep({ name: ' ' })).status).toBe(422);
    expect(await views(manager)).toEqual([]);
    const params = { view: made.id };
    const share = (actor: Actor) =>
      ask(changeRoute, { actor, params, method: 'PATCH', body: { shared: true } });
    expect((await share(manager)).status).toBe(404);
    expect((await share(analyst)).status).toBe(200);
    expect(await views(manager)).toMatchObject([{ name: 'Not taken up', own: false, shared: true }]);
    expect(await views(stranger)).toEqual([]);
    expect((await ask(dropRoute, { actor: manager, params, method: 'DELETE' })).status).toBe(404);
    expect((await ask(dropRoute, { actor: analyst, params, method: 'DELETE' })).status).toBe(204);
    expect(await views(analyst)).toEqual([]);
  });
});
