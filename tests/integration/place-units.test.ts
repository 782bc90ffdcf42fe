import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { asActor } from '../../src/server/db/transaction';
import { AppError } from '../../src/server/errors';
import {
  checkPlacements,
  placeUnits,
  type PlaceChange,
  type PlaceOptions,
} from '../../src/server/services/place-units';
import type { SeededSite } from '../../seeds/plant/seeded';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';

let db: TestDatabase;
let fleet: TestFleet;
let site: SeededSite;
let other: SeededSite;
let actor: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(
    db,
    ['Weirside Clinic', 'Old Tannery Market Hall'],
    Math.floor(Date.now() / 1000) - 86_400,
  );
  site = fleet.site('Old Tannery Market Hall');
  other = fleet.site('Weirside Clinic');
  actor = await fleet.actor('technician@lowfield.example');
});
afterAll(() => db.drop());

const names = () => site.plan.strings.map((s) => s.name);
let at = 0;
beforeEach(() => {
  at = Math.max(Date.now(), at + 10);
});

const ref = (name: string, where = site) => {
  const found = where.strings.get(name);
  if (!found) throw new Error(`no string ${name}`);
  return found.ref;
};
const change = (
  name: string,
  position: number,
  serial: string | null,
  expected?: string | null,
): PlaceChange => ({
  slot: { string: ref(name), position },
  serial,
  ...(expected === undefined ? {} : { expected }),
});
const place = (changes: PlaceChange[], more: Partial<PlaceOptions> = {}, by = actor, siteId = site.id) =>
  asActor(by, (tx) =>
    placeUnits(tx, by, siteId, changes, {
      at: new Date(at),
      reason: 'as found on the roof',
      source: 'forms',
      ...more,
    }),
  );
const refusal = async (work: Promise<unknown>): Promise<AppError> => {
  const error: unknown = await work.then(
    () => null,
    (e: unknown) => e,
  );
  if (!(error instanceof AppError)) throw new Error(`no refusal, but ${String(error)}`);
  return error;
};
const inSlot = async (name: string, position: number, where = site): Promise<string | null> => {
  const { rows } = await db.owner.query<{ serial: string }>(
    `select u.serial from slot join placement p on p.slot_id = slot.id and p.placed_to is null join unit u on u.id = p.unit_id
     where slot.string_id = $1 and slot.position = $2`,
    [where.strings.get(name)?.id, position],
  );
  return rows[0]?.serial ?? null;
};
const stays = async (serial: string): Promise<{ slot: string; ended: boolean }[]> =>
  (
    await db.owner.query<{ slot: string; ended: boolean }>(
      `select s.name || '-' || slot.position as slot, p.placed_to is not null as ended from placement p
       join unit u on u.id = p.unit_id join slot on slot.id = p.slot_id join string s on s.id = slot.string_id
       where u.serial = $1 order by p.placed_from`,
      [serial],
    )
  ).rows;
const entries = async (serial: string) =>
  (
    await db.owner.query<{ action: string; reason: string; before: object; after: Record<string, unknown> }>(
      `select action, reason, before, after from audit_entry where site_id = $1 and subject = $2 order by id`,
      [site.id, `unit ${serial}`],
    )
  ).rows;

describe('units into slots', () => {
  it('swaps two in one go, with both histories kept', async () => {
    const [a, b] = [names()[0]!, names()[1]!];
    const [first, second] = [await inSlot(a, 1), await inSlot(b, 2)];
    expect(await place([change(a, 1, second), change(b, 2, first)])).toMatchObject({ moved: 2 });
    expect([await inSlot(a, 1), await inSlot(b, 2)]).toEqual([second, first]);
    expect(await stays(first!)).toEqual([
      { slot: `${a}-1`, ended: true },
      { slot: `${b}-2`, ended: false },
    ]);
    const [entry] = await entries(first!);
    expect(entry).toMatchObject({
      action: 'as_built.unit_moved',
      reason: 'as found on the roof',
      before: { serial: second },
      after: { of: `${b}-2`, serial: first, from: `${a}-1` },
    });
  });

  it('turns a ring of three, however the serials are typed', async () => {
    const [a] = names();
    const was = [await inSlot(a!, 3), await inSlot(a!, 4), await inSlot(a!, 5)];
    await place([
      change(a!, 3, ` ${was[1]!.toLowerCase()} `),
      change(a!, 4, was[2]!),
      change(a!, 5, was[0]!),
    ]);
    expect([await inSlot(a!, 3), await inSlot(a!, 4), await inSlot(a!, 5)]).toEqual([was[1], was[2], was[0]]);
  });

  it('replaces a unit; the new one is on record with the type of the string, and knows that it was heard', async () => {
    const [a] = names();
    const old = await inSlot(a!, 6);
    const [logger] = [...site.loggers.values()];
    await db.owner.query(
      `insert into heard (site_id, serial, logger_id, gateway_number, first_heard_at, last_heard_at)
       values ($1, 'NEW-0001', $2, 1, now(), now())`,
      [site.id, logger],
    );
    expect(await place([change(a!, 6, 'new-0001', old)])).toMatchObject({ replaced: 1 });
    const { rows } = await db.owner.query<{ type: boolean; heard: boolean }>(
      `select u.unit_type_id = s.unit_type_id as type, h.unit_id = u.id as heard from unit u
       join placement p on p.unit_id = u.id join slot on slot.id = p.slot_id join string s on s.id = slot.string_id
       left join heard h on h.serial = u.serial and h.site_id = s.site_id where u.serial = 'NEW-0001'`,
    );
    expect(rows).toEqual([{ type: true, heard: true }]);
    expect(await stays(old!)).toEqual([{ slot: `${a}-6`, ended: true }]);
  });

  it('a unit that leaves is on no as-built, and what was heard of it belongs to none', async () => {
    const [a] = names();
    await place([change(a!, 6, null)]);
    expect(await inSlot(a!, 6)).toBeNull();
    const { rows } = await db.owner.query(`select unit_id from heard where serial = 'NEW-0001'`);
    expect(rows).toEqual([{ unit_id: null }]);
    expect((await entries('NEW-0001')).map((e) => e.action)).toEqual([
      'as_built.unit_replaced',
      'as_built.unit_removed',
    ]);
  });

  it('says nothing and writes nothing where all is so already', async () => {
    const [a] = names();
    const was = await inSlot(a!, 7);
    expect(await place([change(a!, 7, was)], { reason: '' })).toEqual({
      placed: 0,
      removed: 0,
      moved: 0,
      replaced: 0,
      unchanged: 1,
    });
    expect(await entries(was!)).toEqual([]);
  });
});

describe('what is refused', () => {
  it('a serial that sits elsewhere, with the place; asked to move, it moves', async () => {
    const [a, b] = names();
    const there = await inSlot(b!, 3);
    const error = await refusal(place([change(a!, 6, there)]));
    expect(error.kind).toBe('conflict');
    expect(error.detail.fields).toEqual([
      { field: 'changes.0.serial', message: expect.stringContaining(`in ${b}, position 3`) as string },
    ]);
    await place([change(a!, 6, there)], { move: true });
    expect([await inSlot(a!, 6), await inSlot(b!, 3)]).toEqual([there, null]);
    expect((await entries(there!)).map((e) => e.action)).toEqual([
      'as_built.unit_removed',
      'as_built.unit_moved',
    ]);
  });

  it('a serial at another site of the organisation, by the name of the site; asked to move, both sites tell', async () => {
    const [a] = names();
    const [string] = other.plan.strings;
    const there = string!.slots.find((s) => s.serial !== null)!.serial!;
    const error = await refusal(place([change(a!, 8, there)], { retype: true }));
    expect(error.detail.fields?.[0]?.message).toContain('at Weirside Clinic');
    await place([change(a!, 8, there)], { move: true, retype: true });
    expect(await inSlot(a!, 8)).toBe(there);
    const { rows } = await db.owner.query(`select site_id from audit_entry where subject = $1 order by id`, [
      `unit ${there}`,
    ]);
    expect(rows).toEqual([{ site_id: other.id }, { site_id: site.id }]);
  });

  it('says nothing of a serial of another organisation: there it is another unit', async () => {
    const { rows } = await db.owner.query<{ id: number }>(
      `insert into organisation (name) values ('Elsewhere and Daughters') returning id`,
    );
    const type = await db.owner.query<{ id: number }>(
      `insert into unit_type (organisation_id, name, kind, out_of_box, released_by, on_command_loss, shutdown_voltage_min,
         shutdown_voltage_max, measures, voltage_in_max, current_max)
       values ($1, 'Theirs', 'monitored', 'passing', 'logger', 'holds', 0.5, 0.7, 'output', 80, 15) returning id`,
      [rows[0]!.id],
    );
    await db.owner.query(
      `insert into unit (organisation_id, unit_type_id, serial) values ($1, $2, 'THEIRS-01')`,
      [rows[0]!.id, type.rows[0]!.id],
    );
    const [, b] = names();
    expect(await place([change(b!, 3, 'THEIRS-01')])).toMatchObject({ placed: 1 });
  });

  it('the same serial twice, the same slot twice, no serial, no slot: each at its place, and nothing is written', async () => {
    const [a, b] = names();
    const was = await inSlot(a!, 9);
    const error = await refusal(
      place([
        change(a!, 9, 'TWICE-01'),
        change(b!, 4, 'TWICE-01'),
        change(a!, 9, 'TWICE-02'),
        change(b!, 5, '??'),
        change(b!, 60, 'GOOD-001'),
      ]),
    );
    expect(error.kind).toBe('invalid');
    expect(error.detail.fields?.map((f) => f.field)).toEqual([
      'changes.1.serial',
      'changes.2.slot',
      'changes.3.serial',
      'changes.4.slot',
    ]);
    expect(await inSlot(a!, 9)).toBe(was);
  });

  it('a unit of another type, unless its record is to be mended', async () => {
    const [a] = names();
    const foreign = await db.owner.query<{ id: number; name: string }>(
      `select id, name from unit_type where organisation_id = $1 and id <> (select unit_type_id from string where id = $2) limit 1`,
      [site.organisationId, site.strings.get(a!)?.id],
    );
    await db.owner.query(
      `insert into unit (organisation_id, unit_type_id, serial) values ($1, $2, 'FOREIGN-1')`,
      [site.organisationId, foreign.rows[0]!.id],
    );
    const error = await refusal(place([change(a!, 10, 'FOREIGN-1')]));
    expect(error.detail.fields?.[0]?.message).toContain(foreign.rows[0]!.name);
    await place([change(a!, 10, 'FOREIGN-1')], { retype: true });
    expect(await inSlot(a!, 10)).toBe('FOREIGN-1');
  });

  it('an edit of a slot that somebody else has changed meanwhile, with the name of who did', async () => {
    const [a] = names();
    const seen = await inSlot(a!, 11);
    const manager = await fleet.actor('manager@lowfield.example');
    await place([change(a!, 11, 'MANAGER-1')], {}, manager);
    at += 10;
    const error = await refusal(place([change(a!, 11, 'MINE-0001', seen)]));
    expect(error.kind).toBe('conflict');
    const { rows } = await db.owner.query<{ name: string }>('select name from person where id = $1', [
      manager.personId,
    ]);
    expect(error.message).toContain('has MANAGER-1 now');
    expect(error.message).toContain(rows[0]!.name);
  });

  it('two at the same moment: one is written, the other is told', async () => {
    const [, b] = names();
    const seen = await inSlot(b!, 6);
    const both = await Promise.allSettled([
      place([change(b!, 6, 'RACE-0001', seen)]),
      place([change(b!, 6, 'RACE-0002', seen)]),
    ]);
    expect(both.map((r) => r.status).sort()).toEqual(['fulfilled', 'rejected']);
    const lost = both.find((r) => r.status === 'rejected');
    expect(lost?.reason).toMatchObject({ kind: 'conflict' });
  });

  it('two who enter one serial at two sites at the same moment: one has it, the other is told', async () => {
    const [string] = other.plan.strings;
    const empty = { slot: { string: ref(string!.name, other), position: 1 }, serial: 'BOTH-0001' };
    const both = await Promise.allSettled([
      place([change(names()[1]!, 10, 'BOTH-0001')]),
      place([empty], {}, actor, other.id),
    ]);
    expect(both.map((r) => r.status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(['conflict', 'invalid']).toContain(
      (both.find((r) => r.status === 'rejected')?.reason as AppError).kind,
    );
    const { rows } = await db.owner.query(
      `select 1 from placement p join unit u on u.id = p.unit_id where u.serial = 'BOTH-0001' and p.placed_to is null`,
    );
    expect(rows).toHaveLength(1);
  });

  it('a time that has not come, and one before what stands', async () => {
    const [, b] = names();
    const soon = await refusal(place([change(b!, 7, 'EARLY-001')], { at: new Date(Date.now() + 3_600_000) }));
    expect(soon.detail.fields?.[0]?.field).toBe('at');
    const late = await refusal(place([change(b!, 6, 'LATE-0001')], { at: new Date(Date.now() - 3_600_000) }));
    expect(late.kind).toBe('conflict');
  });

  it('no reason, where a placed unit leaves its slot', async () => {
    const [, b] = names();
    const error = await refusal(place([change(b!, 8, null)], { reason: ' ' }));
    expect(error.detail.fields?.[0]?.field).toBe('reason');
  });

  it('what another organisation tries', async () => {
    const stranger: Actor = {
      personId: actor.personId,
      organisationId: 999_999,
      role: 'technician',
      sites: 'all',
    };
    expect((await refusal(place([change(names()[1]!, 8, null)], {}, stranger))).kind).toBe('not_found');
  });

  it('is told beforehand by a check that writes nothing', async () => {
    const [a, b] = names();
    const there = await inSlot(b!, 9);
    const faults = await asActor(actor, (tx) =>
      checkPlacements(tx, actor, site.id, [change(a!, 12, there), change(a!, 13, 'FINE-0001')], {
        at: new Date(at),
      }),
    );
    expect(faults.map((f) => [f.index, f.kind])).toEqual([[0, 'elsewhere']]);
    expect(await inSlot(a!, 12)).not.toBe(there);
  });
});
