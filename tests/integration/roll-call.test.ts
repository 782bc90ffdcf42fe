import pg from 'pg';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { tallyOf } from '../../src/features/commissioning/tally';
import { rollCallPage as rollCallPageSchema } from '../../src/schemas/api/roll-call';
import { siteSteps } from '../../src/schemas/api/commissioning';
import { asActor } from '../../src/server/db/transaction';
import { AppError } from '../../src/server/errors';
import { sitesAndTheirSteps } from '../../src/server/services/commissioning';
import { rollCallByForm } from '../../src/server/services/roll-call-form';
import { rollCallPage } from '../../src/server/services/roll-call-page';
import { startRollCall } from '../../src/server/services/start-roll-call';
import { stopRollCall } from '../../src/server/services/stop-roll-call';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';

const HALL = 'Old Tannery Market Hall';
const GALLERY = 'Coopers Wharf Gallery';
let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let stranger: Actor;
let customer: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, GALLERY, 'Weirside Clinic', 'Netloft Terrace']);
  technician = await fleet.actor('technician@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  customer = await fleet.actor('customer@lowfield.example');
});
afterAll(() => db.drop());
beforeEach(async () => {
  await db.owner.query(
    `delete from heard; delete from roll_call; delete from event; delete from audit_entry`,
  );
});

const start = (actor: Actor, site: string, personOnSite = 'Per Aalto') =>
  asActor(actor, (tx) =>
    startRollCall(tx, actor, fleet.site(site).ref, { personOnSite, onSite: true }, '127.0.0.1'),
  );
const stop = (actor: Actor, site: string) =>
  asActor(actor, (tx) => stopRollCall(tx, actor, fleet.site(site).ref, '127.0.0.1'));
const read = (actor: Actor, site: string, at = new Date()) =>
  asActor(actor, (tx) => rollCallPage(tx, fleet.site(site).ref, at));
/** What the logger would have brought: first answers of the given serials, a minute apart. */
async function hear(site: string, serials: string[], startedAt: Date, unknown: string[] = []): Promise<void> {
  const seeded = fleet.site(site);
  const logger = [...seeded.loggers.values()][0];
  for (const [i, serial] of [...serials, ...unknown].entries())
    await db.owner.query(
      `insert into heard (site_id, serial, unit_id, logger_id, gateway_number, first_heard_at, last_heard_at, signal)
       values ($1, $2, $3, $4, 1, $5, $5, $6)`,
      [
        seeded.id,
        serial,
        seeded.units.get(serial) ?? null,
        logger,
        new Date(startedAt.getTime() + i * 60_000),
        -60 - i,
      ],
    );
}
const serialsOf = (site: string): string[] =>
  fleet.site(site).plan.strings.flatMap((s) => s.slots.flatMap((slot) => slot.serial ?? []));

describe('starting a roll call', () => {
  it('writes who started it, who is on site, an event and an audit entry', async () => {
    const run = await start(technician, HALL);
    expect(run).toMatchObject({ personOnSite: 'Per Aalto', startedBy: 'Bram Ottersley', stoppedAt: null });
    const events = await db.owner.query(`select kind, detail, site_id from event`);
    expect(events.rows).toEqual([
      {
        kind: 'roll_call_started',
        detail: { person: 'Bram Ottersley', personOnSite: 'Per Aalto' },
        site_id: fleet.site(HALL).id,
      },
    ]);
    const audit = await db.owner.query(
      `select action, person_id, host(address::inet) as address, after from audit_entry`,
    );
    expect(audit.rows).toEqual([
      {
        action: 'roll_call.start',
        person_id: technician.personId,
        address: '127.0.0.1',
        after: { rollCall: run.id, personOnSite: 'Per Aalto', confirmedOnSite: true },
      },
    ]);
  });

  it('tells the process that serves the loggers, after the commit', async () => {
    const listener = new pg.Client(db.url);
    await listener.connect();
    try {
      await listener.query('listen roll_call');
      const notice = new Promise<string | undefined>((resolve) =>
        listener.on('notification', (n) => resolve(n.payload)),
      );
      await start(technician, HALL);
      expect(await notice).toBe(String(fleet.site(HALL).id));
    } finally {
      await listener.end();
    }
  });

  it('is refused while one runs, naming who runs it and who is on site', async () => {
    await start(technician, HALL);
    const manager = await fleet.actor('manager@lowfield.example');
    const error = await failure(start(manager, HALL, 'Somebody Else'));
    expect(error.kind).toBe('conflict');
    expect(error.message).toContain('Bram Ottersley');
    expect(error.message).toContain('Per Aalto');
    expect((await db.owner.query('select count(*)::int as n from roll_call')).rows[0]).toEqual({ n: 1 });
  });

  it('lets exactly one of many at the same moment through', async () => {
    const all = await Promise.allSettled(Array.from({ length: 6 }, () => start(technician, HALL)));
    expect(all.filter((r) => r.status === 'fulfilled')).toHaveLength(1);
    for (const r of all) if (r.status === 'rejected') expect((r.reason as AppError).kind).toBe('conflict');
    expect((await db.owner.query(`select count(*)::int as n from event`)).rows[0]).toEqual({ n: 1 });
  });

  it('runs at two sites at once', async () => {
    await start(technician, HALL);
    await expect(start(technician, 'Weirside Clinic')).resolves.toMatchObject({ stoppedAt: null });
  });

  it('looks the same for another organisation’s site and for none', async () => {
    const foreign = await failure(start(stranger, HALL));
    const absent = await failure(
      asActor(technician, (tx) =>
        startRollCall(
          tx,
          technician,
          '00000000-0000-4000-8000-000000000000',
          { personOnSite: 'Per Aalto', onSite: true },
          null,
        ),
      ),
    );
    expect(foreign.kind).toBe('not_found');
    expect(foreign.message).toBe(absent.message);
    expect((await db.owner.query('select count(*)::int as n from roll_call')).rows[0]).toEqual({ n: 0 });
  });
});

describe('stopping a roll call', () => {
  it('ends it, keeps what was heard, and lets another begin', async () => {
    const first = await start(technician, HALL);
    await hear(HALL, serialsOf(HALL).slice(0, 3), new Date(first.startedAt));
    const stopped = await stop(technician, HALL);
    expect(stopped).toMatchObject({ id: first.id, stoppedBy: 'Bram Ottersley' });
    expect(tallyOf(await read(technician, HALL)).heard).toBe(3);
    const second = await start(technician, HALL);
    expect(second.id).not.toBe(first.id);
    expect((await read(technician, HALL)).run?.id).toBe(second.id);
    const kinds = (await db.owner.query<{ kind: string }>('select kind from event order by id')).rows;
    expect(kinds.map((r) => r.kind)).toEqual(['roll_call_started', 'roll_call_stopped', 'roll_call_started']);
  });
  it('says so when none runs', async () => {
    expect((await failure(stop(technician, HALL))).kind).toBe('conflict');
  });
  it('is not found for another organisation', async () => {
    await start(technician, HALL);
    expect((await failure(stop(stranger, HALL))).kind).toBe('not_found');
    expect((await read(technician, HALL)).run?.stoppedAt).toBeNull();
  });
});

describe('reading a roll call', () => {
  it('counts the answers of the as-built and keeps strangers apart', async () => {
    const run = await start(technician, HALL);
    const serials = serialsOf(HALL);
    expect(serials).toHaveLength(184);
    await hear(HALL, serials.slice(0, 20), new Date(run.startedAt), ['ZZ99-0001-AA']);
    const page = await read(technician, HALL);
    expect(() => rollCallPageSchema.parse(page)).not.toThrow();
    const tally = tallyOf(page);
    expect(tally).toMatchObject({ roster: 184, heard: 20 });
    expect(tally.missing).toHaveLength(164);
    expect(tally.unknown.map((u) => u.answer.serial)).toEqual(['ZZ99-0001-AA']);
    expect(tally.weakest?.serial).toBe(serials[19]);
    expect(tally.missing[0]?.roofPlace).not.toBe('');
    expect(page.passesUntilHeard.length).toBeGreaterThan(0);
  });
  it('does not count a unit that was taken off the as-built', async () => {
    const [serial] = serialsOf(HALL);
    if (!serial) throw new Error('the hall has no units');
    await hear(HALL, [serial], new Date());
    await db.owner.query(`update placement set placed_to = now() where unit_id = $1 and placed_to is null`, [
      fleet.site(HALL).units.get(serial),
    ]);
    try {
      const tally = tallyOf(await read(technician, HALL));
      expect(tally).toMatchObject({ roster: 183, heard: 0, emptySlots: 1 });
      expect(tally.unknown.map((u) => u.answer.serial)).toEqual([serial]);
    } finally {
      await db.owner.query(`update placement set placed_to = null where unit_id = $1`, [
        fleet.site(HALL).units.get(serial),
      ]);
    }
  });
  it('has no roll for units that cannot answer', async () => {
    const tally = tallyOf(await read(technician, GALLERY));
    expect(tally.roster).toBe(0);
    expect(tally.mute).toBe(serialsOf(GALLERY).length);
  });
  it('says which logger does not speak', async () => {
    const at = new Date();
    await db.owner.query(`update logger set last_spoke_at = $1 where site_id = $2`, [
      new Date(at.getTime() - 20_000),
      fleet.site(HALL).id,
    ]);
    expect((await read(technician, HALL, at)).loggers.map((l) => l.connected)).toEqual([true]);
    expect((await read(technician, HALL, new Date(at.getTime() + 60_000))).loggers[0]?.connected).toBe(false);
  });
  it('is not found for strangers and for customers who were not given the site', async () => {
    expect((await failure(read(stranger, HALL))).kind).toBe('not_found');
    expect((await failure(read(customer, HALL))).kind).toBe('not_found');
  });
});

describe('the sites under way', () => {
  it('are those being commissioned and those where a roll call runs, own ones only', async () => {
    const names = async (actor: Actor) =>
      (await asActor(actor, (tx) => sitesAndTheirSteps(tx))).map((s) => s.name);
    expect(await names(technician)).toEqual([HALL]);
    await start(technician, 'Weirside Clinic');
    expect(await names(technician)).toEqual([HALL, 'Weirside Clinic']);
    expect(await names(stranger)).toEqual([]);
  });
  it('tell what is known of each today', async () => {
    const hall = fleet.site(HALL);
    await start(technician, HALL);
    await hear(HALL, serialsOf(HALL).slice(0, 5), new Date(), ['ZZ99-0001-AA']);
    const string = [...hall.strings.values()][0]?.id;
    await db.owner.query(
      `insert into meter_reading (site_id, string_id, person_id, at, stage, reading_kind, light, voltage)
       values ($1, $2, $3, '2026-12-01T10:00Z', 'before_energising', 'positive_to_negative', 'bright', 611)`,
      [hall.id, string, technician.personId],
    );
    await db.owner.query(
      `insert into install_check (site_id, string_id, check_name, result, person_id, at) values
       ($1, $2, 'connectors', 'fail', $3, '2026-12-01T09:00Z'), ($1, $2, 'connectors', 'pass', $3, '2026-12-01T09:30Z'),
       ($1, $2, 'labels', 'fail', $3, '2026-12-01T09:30Z')`,
      [hall.id, string, technician.personId],
    );
    const [site] = await asActor(technician, (tx) => sitesAndTheirSteps(tx));
    const steps = siteSteps.parse(site);
    expect(steps).toMatchObject({
      name: HALL,
      units: 184,
      strings: hall.strings.size,
      rollCallRunning: true,
    });
    const words = Object.fromEntries(steps.steps.map((step) => [step.key, step.words]));
    expect(words).toMatchObject({
      as_built: `184 units, ${hall.strings.size} strings`,
      roll_call: '5 of 184 heard',
      shutdown_test: 'not started',
    });
    const gaps = steps.steps.flatMap((step) => step.gaps.map((gap) => gap.words));
    expect(gaps).toContain('1 serial is heard and on no slot.');
    expect(gaps.filter((gap) => gap.endsWith(': labels failed.'))).toHaveLength(1);
  });
});

describe('the form of a page without a script', () => {
  const send = (actor: Actor, form: Record<string, string>) =>
    asActor(actor, (tx) => rollCallByForm(tx, actor, fleet.site(HALL).ref, form, '127.0.0.1'));

  it('starts and stops as the page does', async () => {
    expect(await send(technician, { action: 'start', personOnSite: 'Per Aalto', onSite: 'true' })).toBeNull();
    expect((await read(technician, HALL)).run).toMatchObject({ personOnSite: 'Per Aalto', stoppedAt: null });
    expect(await send(technician, { action: 'stop' })).toBeNull();
    expect((await read(technician, HALL)).run?.stoppedBy).toBe('Bram Ottersley');
  });
  it('gives back what was typed with what is wrong', async () => {
    expect(await send(technician, { action: 'start', personOnSite: 'Per Aalto' })).toEqual({
      personOnSite: 'Per Aalto',
      fault: 'Confirm that this person is on site now.',
      status: 'invalid',
    });
    await send(technician, { personOnSite: 'Per Aalto', onSite: 'true' });
    expect(await send(technician, { personOnSite: 'Another One', onSite: 'true' })).toMatchObject({
      personOnSite: 'Another One',
      status: 'conflict',
    });
  });
  it('is not for who may not run one, and not for another organisation’s site', async () => {
    const analyst = await fleet.actor('analyst@lowfield.example');
    const form = { personOnSite: 'Per Aalto', onSite: 'true' };
    expect((await failure(send(analyst, form))).kind).toBe('forbidden');
    expect((await failure(send(stranger, form))).kind).toBe('not_found');
    expect((await db.owner.query('select from roll_call')).rowCount).toBe(0);
  });
});
