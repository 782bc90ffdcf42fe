import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { asActor } from '../../src/server/db/transaction';
import { customerSite } from '../../src/server/services/customer-page';
import { chooseLetter, letterOf, writeRoofLetters } from '../../src/server/services/roof-letters';
import { testDatabase, type TestDatabase } from '../support/database';
import { writeDays } from '../support/days';
import { testFleet, type TestFleet } from '../support/fleet';

const CLINIC = 'Weirside Clinic';
const EMAIL = 'customer@lowfield.example';
let db: TestDatabase;
let fleet: TestFleet;
let owner: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC]);
  owner = await fleet.actor(EMAIL);
  await db.owner.query(
    `update site set time_zone = 'America/Denver', switched_on_on = '2025-06-01'; update organisation set currency = 'USD', phone = '+1 555 0100'`,
  );
  const id = fleet.site(CLINIC).id;
  await writeDays(db.owner, id, { from: '2025-06-01', count: 500, nameplate: 20_000, sun: 5 });
  await db.owner.query(
    `insert into tariff (site_id, from_on, price_kwh, created_by) select $1, '2026-01-01', 0.1, id from person where email = $2`,
    [id, 'manager@lowfield.example'],
  );
});
afterAll(() => db.drop());

const ref = () => fleet.site(CLINIC).ref;
const choose = (every: 'week' | 'month' | null, at: string) =>
  asActor(owner, (tx) => chooseLetter(tx, owner, ref(), every, new Date(at)));
const letters = async () =>
  (
    await db.owner.query<{ subject: string; text: string; to: string; key: string }>(
      `select subject, text_body as text, to_address as to, event_key as key from message where kind = 'roof_letter' order by id`,
    )
  ).rows;
const plain = (text: string): string => text.replace(/[^\S\n]+/g, ' ');

describe('a letter about a roof', () => {
  it('comes once a week after it was asked for, at the hour of the site, however often and by however many the job runs', async () => {
    // a Wednesday; the first letter is about the week that is not over yet
    await choose('week', '2026-09-16T12:00:00Z');
    expect(await asActor(owner, (tx) => letterOf(tx, owner, ref()))).toBe('week');
    expect(await writeRoofLetters(new Date('2026-09-17T12:00:00Z'))).toEqual({ written: 0 });
    // Monday 06:59 in Denver
    expect(await writeRoofLetters(new Date('2026-09-21T12:59:00Z'))).toEqual({ written: 0 });
    const runs = await Promise.all([0, 1, 2].map(() => writeRoofLetters(new Date('2026-09-21T13:01:00Z'))));
    expect(runs.reduce((sum, r) => sum + r.written, 0)).toBe(1);
    expect(await writeRoofLetters(new Date('2026-09-22T13:01:00Z'))).toEqual({ written: 0 });
    const [one, ...more] = await letters();
    expect(more).toEqual([]);
    expect(one).toMatchObject({ to: EMAIL, key: `roof_letter:${ref()}:week:2026-09-14` });
    expect(plain(one?.subject ?? '')).toBe(
      'Weirside Clinic made 595 kWh in the week from 14 September to 20 September',
    );
    const text = plain(one?.text ?? '');
    expect(text).toContain('about as much as in the same days a year before');
    expect(text).toContain('Worth, at your price: $59.50');
    expect(text).toContain('Last shutdown test: none on record');
    expect(text).toContain(`/my-site/${ref()}`);
  });

  it('says what is missing, and nothing that it does not know', async () => {
    await db.owner.query(`delete from site_day where day >= '2026-09-21'`);
    await writeRoofLetters(new Date('2026-09-28T14:00:00Z'));
    const text = plain((await letters()).at(-1)?.text ?? '');
    expect(text).toContain('No data came from Weirside Clinic');
    expect(text).toContain('Energy: not known');
    expect(text).not.toContain('0 Wh');
  });

  it('goes to nobody who may not see the roof any more, nor after it was ended', async () => {
    const count = (await letters()).length;
    await db.owner.query(`update person set active = false where email = $1`, [EMAIL]);
    await writeRoofLetters(new Date('2026-10-05T14:00:00Z'));
    await db.owner.query(`update person set active = true where email = $1`, [EMAIL]);
    await choose(null, '2026-10-06T14:00:00Z');
    await writeRoofLetters(new Date('2026-10-06T15:00:00Z'));
    expect(await letters()).toHaveLength(count);
  });
});

describe('the owner’s page', () => {
  it('has the year, what it was worth, and a report of each month', async () => {
    const roof = await asActor(owner, (tx) => customerSite(tx, ref(), new Date('2026-08-02T18:00:00Z')));
    expect(roof.year?.energy).toBeCloseTo(213 * 85_000, -3);
    expect(roof.worth).toMatchObject({ currency: 'USD', partly: true });
    expect(roof.worth?.month).toBeCloseTo(2 * 8.5, 2);
    expect(roof.months[0]).toBe('2026-09');
  });
});
