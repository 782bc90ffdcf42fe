import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { isolationPage as isolationSchema, type IsolationPage } from '../../src/schemas/api/isolation';
import { membershipPage as membershipSchema } from '../../src/schemas/api/membership';
import { asActor } from '../../src/server/db/transaction';
import {
  isolationPage,
  startIsolation,
  stopIsolation,
  WATCH_MAX_S,
} from '../../src/server/services/isolation';
import { membershipPage, membershipUnits } from '../../src/server/services/membership';
import { generator } from '../../src/domain/output/sample-plane';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';

/**
 * Frames of a site written as the ingest would: each string with a current of its own; C3-4 and D1-4 sit in each
 * other's string.
 */
const HALL = 'Old Tannery Market Hall';
const INTERVAL = 10;
let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let startS: number;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, 'Weirside Clinic', 'Netloft Terrace']);
  technician = await fleet.actor('technician@lowfield.example');
});
afterAll(() => db.drop());
beforeEach(async () => {
  await db.owner.query('delete from isolation; delete from string_frame; delete from audit_entry');
  // midday of the day for which partitions were made
  startS = Math.floor(new Date(`${new Date().toISOString().slice(0, 10)}T12:00:00Z`).getTime() / 1000);
});

const at = (sinceS: number) => new Date((startS + sinceS) * 1000);
const others: Record<string, string> = { C3: 'D1', D1: 'C3' };
const seatOf = (string: string, position: number): string =>
  position === 4 ? (others[string] ?? string) : string;

/** Currents of every string from `fromS` to `toS`; those of `isolated` are zero from `offS` on. */
async function frames(
  fromS: number,
  toS: number,
  options: { isolated?: string; offS?: number; sky?: (s: number) => number; step?: number } = {},
): Promise<void> {
  const { isolated, offS = Infinity, sky = () => 1, step = INTERVAL } = options;
  const random = generator(11);
  const { plan, strings } = fleet.site(HALL);
  const level = new Map(plan.strings.map((s) => [s.name, s.name.startsWith('C') ? 9 : 7.5]));
  const ids: number[] = [];
  const times: string[] = [];
  const currents: string[] = [];
  for (let t = fromS; t <= toS; t += step)
    for (const s of plan.strings) {
      ids.push(strings.get(s.name)?.id ?? 0);
      times.push(at(t).toISOString());
      const list = s.slots.map((_, i) => {
        const seat = seatOf(s.name, i + 1);
        const amps = seat === isolated && t >= offS ? 0 : (level.get(seat) ?? 0) * sky(t);
        return Math.round(1000 * amps * (1 + 0.004 * (random() - 0.5)));
      });
      currents.push(`{${list.join(',')}}`);
    }
  await db.owner.query(
    `insert into string_frame (at, mask, string_id, voltage_sum, power_sum, voltage, current, temperature, signal, via, state)
     select t, 1, i, 0, 0, '{}', c::int2[], '{}', '{}', '{}', '{}'
     from unnest($1::timestamptz[], $2::int4[], $3::text[]) x(t, i, c)`,
    [times, ids, currents],
  );
}
const ref = (name: string) => fleet.site(HALL).strings.get(name)?.ref ?? '';
const start = (string: string, when = at(0), actor = technician) =>
  asActor(actor, (tx) =>
    startIsolation(
      tx,
      actor,
      fleet.site(HALL).ref,
      { string: ref(string), personOnSite: 'Per Aalto', caution: true },
      when,
      '127.0.0.1',
    ),
  );
const stop = (when: Date, actor = technician) =>
  asActor(actor, (tx) => stopIsolation(tx, actor, fleet.site(HALL).ref, when, null));
const read = (when: Date, actor = technician): Promise<IsolationPage> =>
  asActor(actor, (tx) => isolationPage(tx, fleet.site(HALL).ref, when));
const named = (page: IsolationPage, fate: string): string[] =>
  (page.open ?? page.runs[0])?.finding.units
    .filter((u) => u.fate === fate)
    .map((u) => `${u.string}-${u.position}`) ?? [];

describe('isolating a string', () => {
  it('is watched live: who fell, who kept its current, and who belongs there', async () => {
    await frames(-120, 120, { isolated: 'C3', offS: 40 });
    const begun = isolationSchema.parse(await start('C3'));
    expect(begun.open).toMatchObject({
      stringName: 'C3',
      personOnSite: 'Per Aalto',
      startedBy: 'Bram Ottersley',
    });
    expect((await read(at(30))).open?.finding.outcome).toBe('watching');
    const page = isolationSchema.parse(await read(at(90)));
    expect(page.open?.finding).toMatchObject({ outcome: 'told', strings: ['C3'] });
    expect(page.open?.finding.dropped).toEqual({ after: at(30).toISOString(), by: at(40).toISOString() });
    expect(named(page, 'member_kept')).toEqual(['C3-4']);
    expect(named(page, 'other_dropped')).toEqual(['D1-4']);
    expect(named(page, 'member_dropped')).toHaveLength(11);
    expect(page.currents?.units.map((u) => u.label)).toContain('D1-4');
    expect(page.currents?.strings).toHaveLength(13);
  });

  it('keeps what it found when it is stopped, who asked and who was there, and can be repeated', async () => {
    await frames(-120, 120, { isolated: 'C3', offS: 40 });
    await start('C3');
    const stopped = await stop(at(90));
    expect(stopped.open).toBeNull();
    await db.owner.query('delete from string_frame'); // what was concluded does not rest on frames that are dropped
    const later = isolationSchema.parse(await read(at(5000)));
    expect(later.runs).toHaveLength(1);
    expect(later.runs[0]).toMatchObject({ stoppedBy: 'Bram Ottersley', finding: { outcome: 'told' } });
    expect(named(later, 'member_kept')).toEqual(['C3-4']);
    const audit = await db.owner.query('select action, person_id from audit_entry order by id');
    expect(audit.rows).toEqual([
      { action: 'isolation.start', person_id: technician.personId },
      { action: 'isolation.stop', person_id: technician.personId },
    ]);
    await start('D1', at(5000));
    expect((await read(at(5010))).runs).toHaveLength(1);
    expect((await read(at(5010))).open?.stringName).toBe('D1');
  });

  it('is not told by a cloud', async () => {
    await frames(-120, 200, { sky: (s) => (s > 30 ? 0.12 : 1) });
    await start('C3');
    expect((await read(at(200))).open?.finding).toMatchObject({ outcome: 'watching', dropped: null });
  });

  it('ends by itself after half an hour, honestly, and lets another begin', async () => {
    await frames(-120, WATCH_MAX_S + 60, { step: 60 });
    await db.owner.query('update site set report_interval_s = 60');
    await start('C3');
    const over = isolationSchema.parse(await read(at(WATCH_MAX_S + 1)));
    expect(over.open).toBeNull();
    expect(over.runs[0]).toMatchObject({
      stoppedBy: null,
      stoppedAt: at(WATCH_MAX_S).toISOString(),
      finding: { outcome: 'watching' },
    });
    await start('D1', at(WATCH_MAX_S + 10));
    const ended = await db.owner.query<{ stopped_at: Date; stopped_by: number | null }>(
      'select stopped_at, stopped_by from isolation where string_name = $1',
      ['C3'],
    );
    expect(ended.rows).toEqual([{ stopped_at: at(WATCH_MAX_S), stopped_by: null }]);
    await db.owner.query('update site set report_interval_s = 10');
  });

  it('one at a time, also when two start at the same moment; stopping none is said', async () => {
    await frames(-120, 0);
    const both = await Promise.allSettled([start('C3'), start('D1')]);
    expect(both.filter((r) => r.status === 'fulfilled')).toHaveLength(1);
    const error = await failure(start('A1'));
    expect([error.kind, error.message]).toEqual(['conflict', expect.stringContaining('Per Aalto')]);
    await stop(at(10));
    expect((await failure(stop(at(20)))).kind).toBe('conflict');
  });

  it('is nobody else’s, and a string of another site is none', async () => {
    const stranger = await fleet.actor('manager@harbourline.example');
    expect((await failure(start('C3', at(0), stranger))).kind).toBe('not_found');
    expect((await failure(read(at(0), stranger))).kind).toBe('not_found');
    await start('C3');
    const seen = await asActor(stranger, async (tx) => {
      const { rows } = await tx.raw<{ rows: unknown[] }>('select ref from isolation');
      return rows;
    });
    expect(seen).toEqual([]);
    const foreign = [...fleet.site('Weirside Clinic').strings.values()][0]?.ref ?? '';
    const error = await failure(
      asActor(technician, (tx) =>
        startIsolation(
          tx,
          technician,
          fleet.site(HALL).ref,
          { string: foreign, personOnSite: 'Per Aalto', caution: true },
          at(0),
          null,
        ),
      ),
    );
    expect([error.kind, error.detail.fields?.[0]?.field]).toEqual(['invalid', 'string']);
  });
});

describe('membership by current', () => {
  const page = (hours = 2, when = at(0)) =>
    asActor(technician, (tx) => membershipPage(tx, fleet.site(HALL).ref, hours, when));

  it('finds the pair that looks exchanged, with the evidence of both', async () => {
    await frames(-3600, 0, { step: 60, sky: (s) => 0.7 + 0.25 * Math.sin(s / 400) });
    const found = membershipSchema.parse(await page());
    const named = found.suspects.map((s) => `${s.string}-${s.position}`).sort();
    expect(named).toEqual(['C3-4', 'D1-4']);
    const c = found.suspects.find((s) => s.string === 'C3');
    // C1 and C2 carry what C3 carries, A1 what D1: where each belongs the currents alone don't say
    expect(c).toMatchObject({
      outcome: 'cant_tell',
      fitsOwn: false,
      counterpart: { string: 'D1', position: 4 },
    });
    expect(c?.apartOther).toBeLessThan(0.02);
    expect(c?.apartOwn).toBeGreaterThan(0.1);
    expect(c?.series.at.length).toBe(c?.series.unit.length);
    expect(c?.series.own.filter((v) => v !== null).length).toBeGreaterThan(30);
    expect(found.counts.elsewhere).toBe(2);
  });

  it('can’t tell before anything ran, at night, and where strings are alike', async () => {
    const nothing = membershipSchema.parse(await page());
    expect(nothing.window).toMatchObject({ steps: 0, withCurrent: 0 });
    expect(nothing.counts).toMatchObject({ cantTell: 184, here: 0, elsewhere: 0 });
    await frames(-3600, 0, { step: 60, sky: () => 0.002 });
    const dark = membershipSchema.parse(await page());
    expect(dark.window.withCurrent).toBe(0);
    expect(dark.counts.cantTell).toBe(184);
    expect(dark.reasons[0]?.why).toContain('no current');
  });

  it('a unit that was moved is judged by its reports since', async () => {
    await frames(-3600, 0, { step: 60, sky: (s) => 0.7 + 0.25 * Math.sin(s / 400) });
    const [string] = (
      await db.owner.query<{ id: number }>(`select id from string where ref = $1`, [ref('C3')])
    ).rows;
    await db.owner.query(
      `update placement p set placed_from = $2 from slot sl where sl.id = p.slot_id and sl.string_id = $1 and sl.position = 4`,
      [string?.id, at(-120)],
    );
    const { units } = await asActor(technician, (tx) => membershipUnits(tx, fleet.site(HALL).ref, 2, at(0)));
    const moved = units.find((u) => u.string === 'C3' && u.position === 4);
    expect(moved?.outcome).toBe('cant_tell');
    expect(moved?.steps).toBeLessThan(4);
    await db.owner.query(
      `update placement p set placed_from = $2 from slot sl where sl.id = p.slot_id and sl.string_id = $1 and sl.position = 4`,
      [string?.id, at(-86_400)],
    );
  });
});
