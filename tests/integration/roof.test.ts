import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { GET as readRoute, PUT as saveRoute } from '../../src/pages/api/sites/[site]/roof';
import { roofPlan, type RoofPlan, type RoofSave } from '../../src/schemas/api/roof';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';

const HALL = 'Old Tannery Market Hall';
let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let analyst: Actor;
let stranger: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL]);
  technician = await fleet.actor('technician@lowfield.example');
  analyst = await fleet.actor('analyst@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
});
afterAll(async () => {
  await db.drop();
});

const params = () => ({ site: fleet.site(HALL).ref });
async function read(): Promise<RoofPlan> {
  const response = await ask(readRoute, { actor: analyst, params: params() });
  expect(response.status).toBe(200);
  return roofPlan.parse(await response.json());
}
const save = (body: RoofSave, actor: Actor = technician) =>
  ask(saveRoute, { actor, params: params(), method: 'PUT', body });
const laid = (plan: RoofPlan, name: string, y: number) => {
  const string = plan.strings.find((s) => s.name === name);
  if (!string) throw new Error(`no string ${name}`);
  return {
    id: string.id,
    seen: string.version,
    slots: string.slots.map((s) => ({
      position: s.position,
      roofX: s.position * 1.2,
      roofY: y,
      roofPlace: `row at ${y} m, module ${s.position}`,
    })),
  };
};

describe('the roof plan', () => {
  it('keeps an outline and several strings in one request, with history', async () => {
    const before = await read();
    const points: [number, number][] = [
      [0, 0],
      [42.5, 0],
      [42.5, 18],
      [0, 18],
    ];
    const response = await save({
      outline: { points, seen: before.outlineVersion },
      strings: [laid(before, 'B3', 2), laid(before, 'B4', 4)],
      reason: 'Measured on site',
    });
    expect(response.status).toBe(200);
    const after = await read();
    expect(after.outline).toEqual(points);
    const b3 = after.strings.find((s) => s.name === 'B3');
    expect(b3?.slots[4]).toMatchObject({ roofY: 2, roofPlace: 'row at 2 m, module 5' });
    expect(b3?.slots[4]?.roofX).toBeCloseTo(6, 4);
    expect(after.strings.find((s) => s.name === 'A1')).toEqual(before.strings.find((s) => s.name === 'A1'));
    const { rows } = await db.owner.query<{ action: string; of: string; reason: string }>(
      `select action, after ->> 'of' as of, reason from audit_entry where site_id = $1 and action like 'as_built.%' order by id`,
      [fleet.site(HALL).id],
    );
    expect(rows).toEqual([
      { action: 'as_built.site_changed', of: HALL, reason: 'Measured on site' },
      { action: 'as_built.slots_changed', of: 'B3', reason: 'Measured on site' },
      { action: 'as_built.slots_changed', of: 'B4', reason: 'Measured on site' },
    ]);
    // the same once more leaves no trace
    const again = await save({
      outline: { points, seen: after.outlineVersion },
      strings: [laid(after, 'B3', 2)],
    });
    expect(again.status).toBe(200);
    const { rows: count } = await db.owner.query<{ n: number }>(
      `select count(*)::int as n from audit_entry where site_id = $1 and action like 'as_built.%'`,
      [fleet.site(HALL).id],
    );
    expect(count[0]?.n).toBe(3);
  });

  it('tells the second of two who change the same string, and lets the other strings be', async () => {
    const mine = await read();
    const theirs = await read();
    expect((await save({ strings: [laid(theirs, 'C1', 7)] })).status).toBe(200);
    expect((await save({ strings: [laid(mine, 'C2', 9)] })).status).toBe(200);
    const late = await save({ strings: [laid(mine, 'A1', 1), laid(mine, 'C1', 8)] });
    expect(late.status).toBe(409);
    const told = (await late.json()) as { detail: string; fields: { field: string }[] };
    expect(told.fields.map((f) => f.field)).toEqual(['strings.1']);
    expect(told.detail).toContain('C1 has been laid anew');
    const now = await read();
    expect(now.strings.find((s) => s.name === 'C1')?.slots[0]?.roofY).toBe(7);
    expect(now.strings.find((s) => s.name === 'A1')).toEqual(mine.strings.find((s) => s.name === 'A1'));
  });

  it('refuses an outline that crosses itself, a place far away, and a position that is not there', async () => {
    const plan = await read();
    const crossed: [number, number][] = [
      [0, 0],
      [10, 8],
      [10, 0],
      [0, 8],
    ];
    const outline = await save({ outline: { points: crossed, seen: plan.outlineVersion } });
    expect(outline.status).toBe(422);
    expect(JSON.stringify(await outline.json())).toContain('crosses the line');
    const far = laid(plan, 'A1', 1);
    expect((await save({ strings: [{ ...far, slots: [{ ...far.slots[0]!, roofX: 9e9 }] }] })).status).toBe(
      422,
    );
    const beyond = await save({ strings: [{ ...far, slots: [{ ...far.slots[0]!, position: 63 }] }] });
    expect(beyond.status).toBe(422);
    expect(await read()).toEqual(plan);
  });

  it('is seen by staff, written by those who build, and not there for others', async () => {
    expect((await save({ strings: [] }, analyst)).status).toBe(403);
    expect((await save({ strings: [] }, stranger)).status).toBe(404);
    expect((await ask(readRoute, { actor: stranger, params: params() })).status).toBe(404);
  });
});
