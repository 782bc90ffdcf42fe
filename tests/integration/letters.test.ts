import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { noticesView } from '../../src/schemas/api/notices';
import { asActor } from '../../src/server/db/transaction';
import { tellGathered } from '../../src/server/jobs/tell';
import { lettersReceived, startLocalPost, type LocalPost } from '../../src/server/mail/local-post';
import { mailTransport, sendDue } from '../../src/server/mail/send-outbox';
import { markRead } from '../../src/server/queries/notices';
import { choicesPage, noticesPage, saveChoices } from '../../src/server/services/notices';
import { openWayOut, takeWayOut, undoWayOut } from '../../src/server/services/unsubscribe';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { after, AT, FOREIGN, Happenings, HERE, OTHER, tellAll } from '../support/happenings';
import { failure } from '../support/refusal';

const ADDRESS = '192.0.2.44';
let db: TestDatabase;
let scene: Happenings;
let fleet: TestFleet;
let folder: string;
let post: LocalPost;
let technician: Actor;
let manager: Actor;

beforeAll(async () => {
  db = await testDatabase();
  scene = new Happenings(db);
  fleet = await testFleet(db, [HERE, OTHER, FOREIGN]);
  folder = await mkdtemp(path.join(tmpdir(), 'wakeline-letters-'));
  post = await startLocalPost(folder);
  technician = await fleet.actor('technician@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
});
afterAll(async () => {
  await post.stop();
  await rm(folder, { recursive: true });
  await db.drop();
});
beforeEach(() => scene.forget());

describe('rules of a person', () => {
  const choose = (actor: Actor, body: Partial<Parameters<typeof saveChoices>[2]>) =>
    asActor(actor, (tx) =>
      saveChoices(
        tx,
        actor,
        { rules: {}, sites: null, digestAt: 420, quiet: null, timeZone: null, ...body },
        AT,
        ADDRESS,
      ),
    );

  it('gather the day in one letter at the hour of one’s own zone, on the day the clocks change too', async () => {
    await choose(manager, { timeZone: 'America/New_York', digestAt: 7 * 60 });
    const before = new Date('2027-03-13T18:00:00Z'); // the day before summer time begins there
    for (const n of [1, 2])
      await scene.happens({
        kind: 'cause_opened',
        detail: await scene.cause('stuck', `Cause ${n}`),
        at: before,
      });
    await tellAll(before);
    const mine = async () => (await scene.letters()).filter((l) => l.to === 'manager@lowfield.example');
    await tellGathered(new Date('2027-03-14T10:59:59Z'));
    expect(await mine()).toEqual([]);
    await Promise.all([1, 2, 3].map(() => tellGathered(new Date('2027-03-14T11:00:00Z')))); // 07:00 EDT
    const [letter, more] = await mine();
    expect(more).toBeUndefined();
    expect(letter?.subject.replaceAll(/\s/g, ' ')).toBe('Two things to do, worth about 8.4 kWh a day');
    expect(letter?.text).toContain('On the ladder: Bring spare units');
    expect(letter?.text).toContain('! Shutdown is not isolation.');
    expect(letter?.html).toContain('cid:drawing@wakeline');
  });

  it('gather once at an hour that the day of a clock change does not have, or has twice', async () => {
    await choose(manager, { timeZone: 'Europe/Oslo', digestAt: 150 }); // 02:30
    const mine = async () => (await scene.letters()).filter((l) => l.to === 'manager@lowfield.example');
    const happens = async (at: Date) => {
      const detail = await scene.cause('stuck', `Cause of ${at.toISOString()}`);
      await scene.happens({ kind: 'cause_opened', detail, at });
      await tellAll(at);
    };
    const gather = (at: string) => Promise.all([1, 2].map(() => tellGathered(new Date(at))));

    await happens(new Date('2026-03-28T12:00:00Z'));
    await gather('2026-03-29T01:29:59Z');
    expect(await mine()).toEqual([]);
    await gather('2026-03-29T01:30:00Z'); // 03:30: 02:30 by the clock of the day before
    expect(await mine()).toHaveLength(1);
    await gather('2026-03-29T02:30:00Z');
    expect(await mine()).toHaveLength(1);

    await happens(new Date('2026-10-24T12:00:00Z'));
    await gather('2026-10-25T00:29:59Z');
    expect(await mine()).toHaveLength(1);
    await gather('2026-10-25T00:30:00Z'); // 02:30 for the first time
    expect(await mine()).toHaveLength(2);
    await happens(new Date('2026-10-25T00:45:00Z'));
    await gather('2026-10-25T01:30:00Z'); // and for the second
    expect(await mine()).toHaveLength(2);
    await gather('2026-10-26T01:30:00Z');
    expect(await mine()).toHaveLength(3);
  });

  it('hold letters in quiet hours, hazards excepted, and nothing leaves for sites that were not chosen', async () => {
    const night = new Date('2026-12-01T23:30:00Z');
    await choose(technician, {
      rules: { cause: 'at_once' },
      quiet: { from: 22 * 60, to: 6 * 60 },
      timeZone: 'UTC',
    });
    await scene.happens({
      kind: 'cause_opened',
      detail: await scene.cause('stuck', 'Stuck at night'),
      at: night,
    });
    await scene.happens({
      kind: 'cause_opened',
      detail: await scene.cause('not_shutting_down', 'Live at night'),
      at: night,
    });
    await tellAll(night);
    const mine = async () =>
      (await scene.letters()).filter((l) => l.to === 'technician@lowfield.example').map((l) => l.kind);
    expect(await mine()).toEqual(['hazard']);
    await tellGathered(new Date('2026-12-02T06:00:00Z'));
    expect(await mine()).toEqual(['hazard', 'gathered']);
    await choose(technician, { sites: [fleet.site(OTHER).ref], rules: { cause: 'at_once' } });
    await scene.happens({
      kind: 'cause_opened',
      detail: await scene.cause('stuck', 'Not chosen'),
      at: after(1),
    });
    await tellAll(after(1));
    expect(await mine()).toEqual(['hazard', 'gathered']);
  });

  it('refuse at their field what can’t be chosen', async () => {
    const field = async (body: Parameters<typeof choose>[1]) =>
      (await failure(choose(manager, body))).detail.fields?.[0]?.field;
    expect(await field({ rules: { hazard: 'nothing' } })).toBe('body.rules.hazard');
    expect(await field({ rules: { own_report: 'at_once' } })).toBe('body.rules.own_report');
    expect(await field({ timeZone: 'Mars/Olympus' })).toBe('body.timeZone');
    expect(await field({ sites: [fleet.site(FOREIGN).ref] })).toBe('body.sites');
  });

  it('are changed by the link in a letter, signed out, and put back', async () => {
    await choose(technician, { rules: { cause: 'at_once' } });
    await scene.happens({ kind: 'cause_opened', detail: await scene.cause('stuck', 'Two units are stuck') });
    await tellAll();
    const text = (await scene.letters()).find((l) => l.to === 'technician@lowfield.example')?.text ?? '';
    const token = /\/unsubscribe\/(\S+)/.exec(text)?.[1] ?? '';
    const way = await openWayOut(token, ADDRESS);
    expect(way).toMatchObject({ what: 'Causes', letters: ['cause:at_once'], ended: false });
    const howNow = async () =>
      (await asActor(technician, (tx) => choicesPage(tx, technician, '', AT))).kinds.find(
        (k) => k.kind === 'cause',
      )?.how;
    expect((await takeWayOut(token, ADDRESS, AT)).ended).toBe(true);
    expect(await howNow()).toBe('in_product');
    await takeWayOut(token, ADDRESS, AT); // a mail program may do it twice
    expect((await undoWayOut(token, way.letters, ADDRESS, AT)).ended).toBe(false);
    expect(await howNow()).toBe('at_once');
    // a hazard can’t be slipped in, and another’s signature ends nothing
    await undoWayOut(token, ['hazard:digest', 'nonsense', 'cause:nothing'], ADDRESS, AT);
    expect(await howNow()).toBe('at_once');
    for (const forged of [
      token.replace('.cause.', '.silence.'),
      token.replace('.cause.', '.hazard.'),
      `${token.slice(0, -2)}AA`,
      'x',
    ])
      expect((await failure(takeWayOut(forged, ADDRESS, AT))).kind).toBe('not_found');
  });
});

describe('one’s own notices', () => {
  it('are read, and nobody else’s', async () => {
    await scene.happens({ kind: 'planned_work', detail: { reason: 'gutters' } });
    await tellAll();
    const view = noticesView.parse({});
    const page = (actor: Actor) => asActor(actor, (tx) => noticesPage(tx, actor, view, AT));
    const mine = await page(manager);
    expect(mine).toMatchObject({ unread: 1, items: [{ headline: 'Planned work: gutters', readAt: null }] });
    const theirs = (await page(technician)).items[0]?.id ?? '';
    expect(await asActor(manager, (tx) => markRead(tx, manager.personId, { ids: [theirs] }, AT))).toBe(0);
    await asActor(manager, (tx) => markRead(tx, manager.personId, { upTo: mine.items[0]?.number ?? 0 }, AT));
    expect((await page(manager)).unread).toBe(0);
    expect((await page(technician)).unread).toBe(1);
  });
});

describe('letters', () => {
  it('all go out once after an hour without a mail server, with drawing and way out; no name makes a header', async () => {
    await db.owner.query(`update site set name = E'Weir\\r\\nBcc: thief@evil.example' where name = $1`, [
      HERE,
    ]);
    try {
      for (const headline of ['A', 'B'])
        await scene.happens({
          kind: 'cause_opened',
          detail: await scene.cause(
            headline === 'A' ? 'silent' : 'not_shutting_down',
            `${headline}\r\nX-Bad: 1`,
            'Weir\r\nBcc: thief@evil.example',
          ),
          site: 'Weir\r\nBcc: thief@evil.example',
        });
      await tellAll();
      const count = (await scene.letters()).length;
      expect(count).toBe(4);
      await db.owner.query('update message set not_before = $1', [AT]);
      const closed = mailTransport('smtp://127.0.0.1:9');
      for (let m = 1; m <= 60; m++)
        expect((await sendDue(() => after(m), closed, 'w@lowfield.example')).sent).toBe(0);
      const open = mailTransport(`smtp://127.0.0.1:${post.port}`);
      const rounds = await Promise.all(
        [61, 61, 61].map((m) => sendDue(() => after(m), open, 'Wakeline <w@lowfield.example>')),
      );
      expect(rounds.reduce((n, r) => n + r.sent, 0)).toBe(count);
      expect((await sendDue(() => after(90), open, 'w@lowfield.example')).sent).toBe(0);
      const received = await lettersReceived(folder);
      expect(received).toHaveLength(count);
      for (const letter of received) {
        expect(letter.to).toMatch(/^[a-z]+@lowfield\.example$/);
        expect(Object.keys(letter.headers)).not.toContain('bcc');
        expect(Object.keys(letter.headers)).not.toContain('x-bad');
        expect(letter.attachments).toMatchObject([{ cid: 'drawing@wakeline', type: 'image/png' }]);
        expect(letter.html).toContain('data:image/png;base64');
        expect(letter.html).toContain("font-family:'Inter Tight'");
      }
      const silence = received.find((l) => l.text.includes('/unsubscribe/'));
      expect(silence?.headers['list-unsubscribe']).toMatch(/^<http.*\/unsubscribe\/\S+>$/);
      expect(silence?.headers['list-unsubscribe-post']).toBe('List-Unsubscribe=One-Click');
      const hazard = received.find((l) => l.subject.startsWith('NOT SHUTTING DOWN'));
      expect(hazard?.headers).not.toHaveProperty('list-unsubscribe');
    } finally {
      await db.owner.query(`update site set name = $1 where name like 'Weir%Bcc%'`, [HERE]);
    }
  });
});
