import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { stopsOfPage } from '../../src/features/walk/stops';
import { walkPage as walkPageSchema } from '../../src/schemas/api/walk';
import type { PlaceBody } from '../../src/schemas/api/placing';
import { asActor } from '../../src/server/db/transaction';
import { placeHeard } from '../../src/server/services/place-heard';
import { rollCallPage } from '../../src/server/services/roll-call-page';
import { walkPage } from '../../src/server/services/walk';
import { tallyOf } from '../../src/features/commissioning/tally';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';

/** What somebody read on the roof goes into the as-built with its history; the walk shows what is out of order. */
const HALL = 'Old Tannery Market Hall';
const CLINIC = 'Weirside Clinic';
let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, CLINIC, 'Netloft Terrace']);
  technician = await fleet.actor('technician@lowfield.example');
});
afterAll(() => db.drop());
beforeEach(async () => {
  await db.owner.query('delete from heard');
});

const stringRef = (name: string, site = HALL) => fleet.site(site).strings.get(name)?.ref ?? '';
async function serialAt(name: string, position: number): Promise<string | null> {
  const { rows } = await db.owner.query<{ serial: string }>(
    `select u.serial from string s join slot sl on sl.string_id = s.id
     join placement p on p.slot_id = sl.id and p.placed_to is null join unit u on u.id = p.unit_id
     where s.ref = $1 and sl.position = $2`,
    [stringRef(name), position],
  );
  return rows[0]?.serial ?? null;
}
const slot = (name: string, position: number, serial: string | null, expected: string | null) => ({
  string: stringRef(name),
  position,
  serial,
  expected,
});
const told = { seen: 'label reads so, upper row', reason: 'found on the walk', checked: true as const };
const write = (body: PlaceBody, actor = technician, site = HALL) =>
  asActor(actor, (tx) => placeHeard(tx, actor, fleet.site(site).ref, body, new Date(), '127.0.0.1'));
async function hear(serial: string, gateway = 1): Promise<void> {
  const { id, loggers } = fleet.site(HALL);
  await db.owner.query(
    `insert into heard (site_id, serial, unit_id, logger_id, gateway_number, first_heard_at, last_heard_at, signal)
     values ($1, $2, (select u.id from unit u join placement p on p.unit_id = u.id and p.placed_to is null where u.serial = $2),
       $3, $4, now(), now(), -60)`,
    [id, serial, [...loggers.values()][0], gateway],
  );
}

describe('a serial that was heard and is on no drawing', () => {
  it('replaces the unit that nobody hears, and the old one’s life stays in the history', async () => {
    const old = await serialAt('B1', 2);
    await hear('NEW-0001-AA');
    const before = await asActor(technician, (tx) => rollCallPage(tx, fleet.site(HALL).ref, new Date()));
    expect(tallyOf(before).unknown.map((u) => u.answer.serial)).toEqual(['NEW-0001-AA']);

    const done = await write({ kind: 'replace', slots: [slot('B1', 2, 'NEW-0001-AA', old)], ...told });
    expect(done).toMatchObject({ replaced: 1 });
    expect(await serialAt('B1', 2)).toBe('NEW-0001-AA');
    const lives = await db.owner.query<{ serial: string; ended: boolean }>(
      `select u.serial, p.placed_to is not null as ended from placement p join unit u on u.id = p.unit_id
       join slot sl on sl.id = p.slot_id join string s on s.id = sl.string_id
       where s.ref = $1 and sl.position = 2 order by p.placed_from`,
      [stringRef('B1')],
    );
    expect(lives.rows).toEqual([
      { serial: old, ended: true },
      { serial: 'NEW-0001-AA', ended: false },
    ]);
    const audit = await db.owner.query<{ reason: string; person_id: number; after: { source: string } }>(
      `select reason, person_id, after from audit_entry where action = 'as_built.unit_replaced' and site_id = $1`,
      [fleet.site(HALL).id],
    );
    expect(audit.rows).toHaveLength(1);
    expect(audit.rows[0]).toMatchObject({ person_id: technician.personId, after: { source: 'roll_call' } });
    expect(audit.rows[0]?.reason).toContain('found on the walk');
    expect(audit.rows[0]?.reason).toContain('label reads so');
    const after = await asActor(technician, (tx) => rollCallPage(tx, fleet.site(HALL).ref, new Date()));
    expect(tallyOf(after).unknown).toEqual([]);
    expect(tallyOf(after).heard).toBe(1);
  });

  it('is not put over a unit that stands there unless it is said to replace it', async () => {
    const old = await serialAt('B1', 3);
    const error = await failure(
      write({ kind: 'place', slots: [slot('B1', 3, 'NEW-0002-AA', old)], ...told }),
    );
    expect([error.kind, error.detail.fields?.[0]?.field]).toEqual(['invalid', 'slots.0.serial']);
    expect(await serialAt('B1', 3)).toBe(old);
  });

  it('is refused where somebody has changed the slot meanwhile', async () => {
    const old = await serialAt('B1', 4);
    const error = await failure(
      write({ kind: 'replace', slots: [slot('B1', 4, 'NEW-0003-AA', 'SEEN-BEFORE')], ...told }),
    );
    expect(error.kind).toBe('conflict');
    expect(await serialAt('B1', 4)).toBe(old);
  });
});

describe('two serials that stand in each other’s place', () => {
  it('are exchanged together, and back', async () => {
    const [a, b] = [await serialAt('C3', 4), await serialAt('D1', 4)];
    await write({ kind: 'swap', slots: [slot('C3', 4, b, a), slot('D1', 4, a, b)], ...told });
    expect([await serialAt('C3', 4), await serialAt('D1', 4)]).toEqual([b, a]);
    await write({ kind: 'swap', slots: [slot('C3', 4, a, b), slot('D1', 4, b, a)], ...told });
    expect([await serialAt('C3', 4), await serialAt('D1', 4)]).toEqual([a, b]);
  });
  it('a swap that is none is refused, and nothing moves', async () => {
    const [a, b] = [await serialAt('C3', 5), await serialAt('D1', 5)];
    const error = await failure(
      write({ kind: 'swap', slots: [slot('C3', 5, 'OTHER-01', a), slot('D1', 5, a, b)], ...told }),
    );
    expect(error.kind).toBe('invalid');
    expect([await serialAt('C3', 5), await serialAt('D1', 5)]).toEqual([a, b]);
  });
  it('one moves to a slot that is empty', async () => {
    const a = await serialAt('C3', 6);
    const b = await serialAt('D1', 6);
    await write({ kind: 'replace', slots: [slot('D1', 6, 'NEW-0004-AA', b)], ...told });
    await db.owner.query(
      `delete from placement p using slot sl, string s where p.slot_id = sl.id and sl.string_id = s.id and s.ref = $1 and sl.position = 6`,
      [stringRef('D1')],
    );
    await write({ kind: 'move', slots: [slot('C3', 6, null, a), slot('D1', 6, a, null)], ...told });
    expect([await serialAt('C3', 6), await serialAt('D1', 6)]).toEqual([null, a]);
  });
});

describe('who may', () => {
  it('another organisation finds no such site, and a string of another site is none', async () => {
    const stranger = await fleet.actor('manager@harbourline.example');
    const a = await serialAt('B2', 1);
    const body: PlaceBody = { kind: 'replace', slots: [slot('B2', 1, 'NEW-0005-AA', a)], ...told };
    expect((await failure(write(body, stranger))).kind).toBe('not_found');
    expect((await failure(write(body, technician, CLINIC))).kind).toBe('invalid');
    expect(await serialAt('B2', 1)).toBe(a);
  });
});

describe('the walk', () => {
  const walk = (actor = technician) => asActor(actor, (tx) => walkPage(tx, fleet.site(HALL).ref, new Date()));

  it('has no stop for unheard units before anybody was heard, and every one after', async () => {
    const before = walkPageSchema.parse(await walk());
    expect(before.rollCalled).toBe(false);
    expect(stopsOfPage(before).every((s) => s.kind === 'unplaced')).toBe(true);
    const [first] = fleet.site(HALL).plan.strings[0]?.slots ?? [];
    await hear(first?.serial ?? '');
    const after = walkPageSchema.parse(await walk());
    const stops = stopsOfPage(after);
    expect(after.rollCalled).toBe(true);
    expect(stops.some((s) => s.key === 'A1-1')).toBe(false);
    expect(stops.filter((s) => s.stringName === 'A1' && s.kind === 'unheard')).toHaveLength(13);
    expect(stops.every((s) => s.at !== null && /row/.test(s.roofPlace))).toBe(true);
  });

  it('says what a meter should read: fourteen units in shutdown 8.4 V, passing what their modules give', async () => {
    const page = walkPageSchema.parse(await walk());
    const a1 = page.roof.find((r) => r.stringId === stringRef('A1'));
    expect(a1?.readings.inShutdown.volts).toBeCloseTo(8.4, 6);
    expect(a1?.readings.passing.volts).toBeGreaterThan(14 * 30);
    expect(page.outline.length).toBeGreaterThan(3);
  });

  it('is nobody else’s', async () => {
    const stranger = await fleet.actor('manager@harbourline.example');
    expect((await failure(walk(stranger))).kind).toBe('not_found');
  });
});
