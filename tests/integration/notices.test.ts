import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { tell } from '../../src/server/jobs/tell';
import { tellRound } from '../../src/server/services/notices-tell';
import { testDatabase, type TestDatabase } from '../support/database';
import { transactionElsewhere } from '../support/elsewhere';
import { testFleet } from '../support/fleet';
import { after, AT, FOREIGN, Happenings, HERE, OTHER, tellAll } from '../support/happenings';

let db: TestDatabase;
let scene: Happenings;
let customer: Actor;

beforeAll(async () => {
  db = await testDatabase();
  scene = new Happenings(db);
  const fleet = await testFleet(db, [HERE, OTHER, FOREIGN]);
  customer = await fleet.actor('customer@lowfield.example');
});
afterAll(() => db.drop());
beforeEach(() => scene.forget());

describe('what happens', () => {
  it('is told once to whom it concerns: a hazard at once to all staff of the organisation, no others', async () => {
    await scene.happens({
      kind: 'cause_opened',
      detail: await scene.cause('not_shutting_down', 'Unit 3 of A1 does not shut down'),
    });
    await Promise.all([tellAll(), tellAll(), tellAll()]);
    await tellAll(after(1));
    const letters = await scene.letters();
    expect(letters.map((l) => l.to).sort()).toEqual(
      ['analyst', 'manager', 'technician'].map((w) => `${w}@lowfield.example`),
    );
    expect(letters[0]?.subject).toBe(`NOT SHUTTING DOWN: ${HERE}: Unit 3 of A1 does not shut down`);
    expect(letters[0]?.text).toContain('Treat as live: all of');
    expect((await scene.notices()).every((n) => n.kind === 'hazard')).toBe(true);
    const { rows } = await db.owner.query('select count(*)::int as n from letter_picture');
    expect(rows).toEqual([{ n: 1 }]); // one drawing, however many letters
  });

  it('found at the same moment at one site is one letter that names each', async () => {
    for (const n of [3, 7, 9])
      await scene.happens({
        kind: 'cause_opened',
        detail: await scene.cause('not_shutting_down', `Unit ${n} does not shut down`),
      });
    await tellAll();
    const letters = await scene.letters();
    expect(letters).toHaveLength(3);
    expect(letters[0]?.subject).toContain('Unit 3 does not shut down, and 2 more');
    for (const n of [3, 7, 9]) expect(letters[0]?.text).toContain(`Unit ${n} does not shut down`);
    expect(await scene.notices()).toHaveLength(9);
  });

  it('that flaps is one line; over is told after half an hour away', async () => {
    const detail = await scene.cause('not_shutting_down', 'Unit 3 does not shut down');
    await scene.happens({ kind: 'cause_opened', detail });
    await tellAll();
    for (const at of [5, 15]) {
      await scene.setOpen(detail.cause, false);
      await scene.happens({ kind: 'cause_closed', detail, at: after(at) });
      await tellAll(after(at));
      await scene.setOpen(detail.cause, true);
      await scene.happens({ kind: 'cause_reopened', detail, at: after(at + 3) });
      await tellAll(after(at + 3));
    }
    expect(await scene.letters()).toHaveLength(3);
    expect((await scene.notices()).map((n) => n.came)).toEqual([2, 2, 2]);
    await scene.setOpen(detail.cause, false);
    await scene.happens({ kind: 'cause_closed', detail, at: after(40) });
    await tellAll(after(60));
    expect(await scene.letters()).toHaveLength(3);
    await tellAll(after(71));
    const letters = await scene.letters();
    expect(letters).toHaveLength(6);
    expect(letters.at(-1)?.subject).toBe(`${HERE}: Over: Unit 3 does not shut down`);
    expect((await scene.notices()).filter((n) => n.over)).toHaveLength(3);
  });

  it('that is over when it is read, or is history by then, is not told', async () => {
    const detail = await scene.cause('stuck', 'Two units are stuck');
    await scene.setOpen(detail.cause, false);
    await scene.happens({ kind: 'cause_opened', detail });
    await scene.happens({ kind: 'cause_closed', detail, at: after(2) });
    await scene.happens({ kind: 'roll_call_stopped', detail: {}, at: after(-300), recordedAt: AT });
    await tellAll(after(200));
    await tellAll(after(300));
    expect(await scene.notices()).toEqual([]);
    expect(await scene.letters()).toEqual([]);
  });

  it('commits out of order and loses nothing; a hazard does not wait for its turn', async () => {
    const slow = await db.owner.connect();
    try {
      const { id, organisation } = await scene.site(HERE);
      await slow.query('begin');
      await slow.query(
        `insert into event (at, recorded_at, organisation_id, site_id, kind, detail) values ($1, $1, $2, $3, 'roll_call_stopped', '{}')`,
        [AT, organisation, id],
      );
      await scene.happens({ kind: 'planned_work', detail: { reason: 'gutters' } });
      await scene.happens({
        kind: 'cause_opened',
        detail: await scene.cause('not_shutting_down', 'Unit 3 does not shut down'),
      });
      await tell(() => AT);
      expect([...new Set((await scene.notices()).map((n) => n.kind))]).toEqual(['hazard']);
      await slow.query('commit');
    } finally {
      slow.release();
    }
    await tellAll(after(1));
    const kinds = (await scene.notices()).map((n) => n.kind);
    expect([...new Set(kinds)].sort()).toEqual(['hazard', 'planned_work', 'roll_call']);
    expect(kinds.filter((k) => k === 'hazard')).toHaveLength(3);
  });

  it('is told while a transaction of another database of the cluster runs', async () => {
    const elsewhere = await transactionElsewhere(db);
    try {
      await scene.happens({ kind: 'planned_work', detail: { reason: 'gutters' } });
      await tellAll();
      expect((await scene.notices()).map((n) => n.kind)).toContain('planned_work');
    } finally {
      await elsewhere.end();
    }
  });

  it('whose teller is killed before its commit is told by the next, once', async () => {
    await scene.happens({
      kind: 'cause_opened',
      detail: await scene.cause('not_shutting_down', 'Unit 3 does not shut down'),
    });
    // everything that a round writes waits for this lock; then its connection is ended, as a kill would
    const blocker = await db.owner.connect();
    await blocker.query('begin; lock table message in exclusive mode');
    const round = tellRound(AT).then(
      () => 'told',
      () => 'killed',
    );
    await expect
      .poll(
        async () => {
          const { rows } = await db.owner.query<{ pid: number }>(
            `select pid from pg_stat_activity where datname = current_database() and wait_event_type = 'Lock'
             and query ilike '%insert into "message"%'`,
          );
          for (const { pid } of rows) await db.owner.query('select pg_cancel_backend($1)', [pid]);
          return rows.length;
        },
        { timeout: 20_000 },
      )
      .toBeGreaterThan(0);
    expect(await round).toBe('killed');
    await blocker.query('rollback');
    blocker.release();
    expect(await scene.notices()).toEqual([]);
    await tellAll();
    await tellAll();
    expect(await scene.letters()).toHaveLength(3);
    expect(await scene.notices()).toHaveLength(3);
  });

  it('waits an hour where a logger is lost, and is not told where it came back', async () => {
    const logger = (
      await db.owner.query<{ serial: string }>(
        `select l.serial from logger l join site on site.id = l.site_id where site.name = $1 limit 1`,
        [HERE],
      )
    ).rows[0]!.serial;
    await scene.happens({ kind: 'logger_lost', detail: { logger } });
    await tellAll(after(1));
    expect(await scene.notices()).toEqual([]);
    await tellAll(after(61));
    expect((await scene.notices()).map((n) => n.email)).toContain('technician@lowfield.example');
    await db.owner.query('truncate notice, notice_subject, message cascade');
    await scene.happens({ kind: 'logger_lost', detail: { logger }, at: after(100) });
    await scene.happens({ kind: 'logger_connected', detail: { logger }, at: after(110) });
    await tellAll(after(111));
    await tellAll(after(300));
    expect(await scene.notices()).toEqual([]);
  });

  it('reaches a customer only where it is theirs', async () => {
    const { id, organisation } = await scene.site(OTHER);
    const mine = customer.sites === 'all' ? [] : customer.sites;
    const own = (
      await db.owner.query<{ name: string }>('select name from site where id = any ($1)', [[...mine]])
    ).rows[0]!.name;
    await scene.happens({ kind: 'handover_made', detail: { version: 1 }, site: own });
    await db.owner.query('delete from site_access where person_id = $1 and site_id = $2', [
      customer.personId,
      id,
    ]);
    await scene.happens({ kind: 'handover_made', detail: { version: 1 }, site: OTHER });
    await scene.happens({
      kind: 'cause_opened',
      detail: await scene.cause('not_shutting_down', 'Hazard', own),
      site: own,
    });
    await tellAll();
    const theirs = (await scene.notices()).filter((n) => n.email === 'customer@lowfield.example');
    expect(theirs.map((n) => n.kind)).toEqual(['handover']);
    expect(organisation).toBeGreaterThan(0);
  });
});
