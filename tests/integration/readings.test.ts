import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { readingInput, readingRecord, type ReadingInput } from '../../src/schemas/api/readings';
import { asActor } from '../../src/server/db/transaction';
import { commissioningFacts } from '../../src/server/queries/commissioning-facts';
import { recordReading } from '../../src/server/services/record-reading';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';

const HALL = 'Old Tannery Market Hall';
/** Its strings are shutdown-only. */
const GALLERY = 'Coopers Wharf Gallery';
let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let manager: Actor;
let stranger: Actor;
const now = new Date();

interface SeededString {
  id: number;
  ref: string;
  name: string;
  kind: string;
  slots: number;
  site: string;
  vocRef: number;
}
let strings: SeededString[];
const of = (site: string, nth = 0): SeededString => {
  const found = strings.filter((s) => s.site === fleet.site(site).ref)[nth];
  if (!found) throw new Error(`no string at ${site}`);
  return found;
};

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, GALLERY]);
  technician = await fleet.actor('technician@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  const { rows } = await db.owner.query<SeededString>(
    `select s.id, s.ref, s.name, s.kind, s.slots, site.ref as site,
       (select m.voc_ref from slot sl join module_type m on m.id = sl.module_type_id where sl.string_id = s.id limit 1) as "vocRef"
     from string s join site on site.id = s.site_id
     order by s.unit_type_id, (select min(module_type_id) from slot where string_id = s.id), s.slots desc, s.name`,
  );
  strings = rows;
});
afterAll(() => db.drop());
beforeEach(async () => {
  await db.owner.query('delete from meter_reading; delete from heard; delete from command');
});

const input = (string: SeededString, more: Partial<ReadingInput> = {}): ReadingInput =>
  readingInput.parse({
    ref: randomUUID(),
    stringId: string.ref,
    stage: 'before_energising',
    kind: 'positive_to_negative',
    light: 'bright',
    voltage: 500,
    at: now.toISOString(),
    ...more,
  });
const record = (string: SeededString, more: Partial<ReadingInput> = {}, actor = technician) =>
  asActor(actor, (tx) => recordReading(tx, actor, string.site, input(string, more), now));

describe('a meter reading', () => {
  it('of a monitored string at full voltage before the roll call is as expected, and does not obey', async () => {
    const b1 = of(HALL);
    expect(b1.kind).toBe('monitored');
    const { record: kept } = await record(b1, { voltage: 0.95 * b1.vocRef * b1.slots });
    expect(readingRecord.parse(kept).finding).toMatchObject({
      outcome: 'as_expected',
      heard: 0,
      obeysInitiator: false,
    });
    expect(kept.finding?.cautions.join(' ')).toContain('treat the string as live');
    const { rows } = await db.owner.query<{ outcome: string; siblings: string[] }>(
      `select findings ->> 'outcome' as outcome, siblings from meter_reading`,
    );
    expect(rows).toEqual([{ outcome: 'as_expected', siblings: [] }]);
  });

  it('is judged by who had answered when it was taken', async () => {
    const b1 = of(HALL);
    const earlier = new Date(now.getTime() - 3_600_000);
    await db.owner.query(
      `insert into heard (site_id, serial, unit_id, logger_id, gateway_number, first_heard_at, last_heard_at, signal)
       select u.site_id, unit.serial, unit.id, (select id from logger where site_id = u.site_id limit 1), 0, $2, $2, -60
       from slot sl join placement u on u.slot_id = sl.id join unit on unit.id = u.unit_id where sl.string_id = $1`,
      [b1.id, new Date(now.getTime() - 1_800_000)],
    );
    const after = await record(b1, {
      stage: 'after_roll_call',
      commanded: 'shutdown',
      voltage: 0.6 * b1.slots,
    });
    expect(after.record.finding).toMatchObject({
      outcome: 'as_expected',
      heard: b1.slots,
      obeysInitiator: true,
    });
    // the same figure an hour before, when nobody had been heard, is a finding
    const before = await record(b1, {
      commanded: 'shutdown',
      voltage: 0.6 * b1.slots,
      at: earlier.toISOString(),
    });
    expect(before.record.finding).toMatchObject({ outcome: 'finding', heard: 0 });
  });

  it('takes a negative voltage as a finding: reversed, do not connect', async () => {
    const { record: kept } = await record(of(GALLERY), { voltage: -0.6 * of(GALLERY).slots });
    expect(kept.voltage).toBeCloseTo(-0.6 * of(GALLERY).slots, 3);
    expect(kept.finding?.outcome).toBe('finding');
    expect(kept.finding?.headline).toContain('do not connect');
  });

  it('uses strings of its types that were read under the same light', async () => {
    const [first, second] = strings.filter((s) => s.site === of(HALL).site);
    if (!first || !second) throw new Error('two strings are needed');
    const one = await record(second, { voltage: 0.95 * second.vocRef * second.slots });
    const hours = new Date(now.getTime() - 3 * 3_600_000).toISOString();
    const { record: kept } = await record(first, { voltage: 0.95 * first.vocRef * first.slots });
    expect(kept.finding?.siblings).toEqual([second.name]);
    const { rows } = await db.owner.query<{ siblings: string[] }>(
      'select siblings from meter_reading where ref = $1',
      [kept.ref],
    );
    expect(rows[0]?.siblings).toEqual([one.record.ref]);
    const alone = await record(first, {
      voltage: 0.95 * first.vocRef * first.slots,
      at: hours,
      supersedes: kept.ref,
    });
    expect(alone.record.finding?.siblings).toEqual([]);
  });

  it('finds a conductor that touches earth from the three readings together', async () => {
    const b1 = of(HALL);
    const u = 0.95 * b1.vocRef * b1.slots;
    await record(b1, { voltage: u });
    const positive = await record(b1, { kind: 'positive_to_earth', voltage: (u * 9) / b1.slots });
    expect(positive.record.finding?.outcome).toBe('cant_tell');
    expect(positive.record.finding?.headline).toContain('− to earth');
    const negative = await record(b1, {
      kind: 'negative_to_earth',
      voltage: (-u * (b1.slots - 9)) / b1.slots,
    });
    expect(negative.record.finding).toMatchObject({ outcome: 'finding', earth: { outcome: 'fault' } });
    expect(negative.record.finding?.headline).toContain('Do not connect');
    // the step counts the string as amiss, though + to − alone was as expected
    const siteId = fleet.site(HALL).id;
    const facts = await asActor(technician, (tx) => commissioningFacts(tx, [siteId]));
    expect(facts.get(siteId)?.strings.find((s) => s.name === b1.name)?.reading).toBe('finding');
  });

  it('is stored once, clashes with what somebody else took meanwhile, and refuses future times', async () => {
    const b1 = of(HALL);
    const one = input(b1, { voltage: 412.3 });
    const send = (what: ReadingInput, actor = technician) =>
      asActor(actor, (tx) => recordReading(tx, actor, b1.site, what, now));
    const first = await send(one);
    expect(await send(one)).toEqual({ made: false, record: first.record });
    expect((await failure(send({ ...one, voltage: 412.4 }))).kind).toBe('conflict');
    const mine = input(b1, { voltage: 8 });
    const refused = await failure(send(mine, manager));
    expect(readingRecord.parse(refused.detail.current)).toEqual(first.record);
    expect((await send({ ...mine, supersedes: one.ref }, manager)).made).toBe(true);
    const future = input(b1, {
      stage: 'after_roll_call',
      at: new Date(now.getTime() + 600_000).toISOString(),
    });
    expect((await failure(send(future))).detail.fields?.[0]?.field).toBe('body.at');
    expect((await failure(send(input(b1), stranger))).kind).toBe('not_found');
  });

  it('takes light and temperature from a sensor in the plane', async () => {
    const b1 = of(HALL);
    const { rows } = await db.owner.query<{ id: number }>(
      `insert into sensor (site_id, logger_id, plane_id, number, kind)
       select s.site_id, s.logger_id, s.plane_id, 77, 'poa_global' from string s where s.id = $1 returning id`,
      [b1.id],
    );
    await db.owner.query(
      `insert into weather_frame (at, sensor_id, irradiance, temperature_air, temperature_module) values ($1, $2, 850, 180, 420)`,
      [new Date(now.getTime() - 60_000), rows[0]?.id],
    );
    const without = await record(b1, { voltage: 500, at: new Date(now.getTime() - 3_600_000).toISOString() });
    const withIt = await record(b1, { voltage: 500, supersedes: without.record.ref });
    const width = (r: typeof without.record) =>
      (r.finding?.expectedHighV ?? NaN) - (r.finding?.expectedLowV ?? NaN);
    expect(width(withIt.record)).toBeLessThan(0.7 * width(without.record));
  });
});
