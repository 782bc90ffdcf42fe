import { randomUUID } from 'node:crypto';
import { strFromU8, unzipSync } from 'fflate';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { CaseChangeBody, CasePage } from '../../src/schemas/api/cases';
import { asActor } from '../../src/server/db/transaction';
import { caseEvidence } from '../../src/server/services/case-evidence';
import { addCasePhoto, receiveCasePhoto } from '../../src/server/services/case-photo';
import { caseDraft, casePage, casesPage, openCasesOfSite } from '../../src/server/services/cases';
import { changeCase } from '../../src/server/services/change-case';
import { checkClosedCases } from '../../src/server/services/check-closed-cases';
import { commentCase } from '../../src/server/services/comment-case';
import { openCase, type CaseToOpen } from '../../src/server/services/open-case';
import { reportCase, reportedCases } from '../../src/server/services/report-case';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { noonEverywhere } from '../support/noon';
import { pdfPages } from '../support/pdf';
import { failure } from '../support/refusal';
import { stand } from '../support/standing';

/** A case from its opening to its closing for good, and what others may see of it. */
const CLINIC = 'Weirside Clinic';
const OTHER = 'Kestrel Row School';
const FOREIGN = 'Netloft Terrace';
const HOUR_MS = 3_600_000;
let db: TestDatabase;
let fleet: TestFleet;
let analyst: Actor;
let manager: Actor;
let customer: Actor;
let stranger: Actor;
const now = new Date();
let string: { name: string; id: number; ref: string };

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, OTHER, FOREIGN]);
  await noonEverywhere(db.owner);
  await db.owner.query(`update site set stage = 'operating', report_interval_s = 60`);
  analyst = await fleet.actor('analyst@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  customer = await fleet.actor('customer@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  const plan = fleet.site(CLINIC).plan.strings.find((s) => s.kind === 'monitored');
  const seeded = plan && fleet.site(CLINIC).strings.get(plan.name);
  if (!plan || !seeded) throw new Error('The clinic has no monitored string.');
  string = { name: plan.name, id: seeded.id, ref: seeded.ref };
  await stuck(now);
});
afterAll(() => db.drop());

const stuck = (at: Date) =>
  stand(db.owner, fleet.site(CLINIC), at, (name, position) =>
    name === string.name && position === 2 ? { state: 'shutdown', verdict: 'stuck' } : null,
  );
const allWell = (at: Date) => stand(db.owner, fleet.site(CLINIC), at);
const site = (name: string) => fleet.site(name).ref;
const call = (more: Partial<CaseToOpen> = {}): CaseToOpen => ({
  ref: randomUUID(),
  site: site(CLINIC),
  origin: 'string',
  title: 'Position 2 is stuck',
  what: 'Seen this morning.',
  kind: 'stuck',
  strings: [string.ref],
  parts: [{ string: string.ref, position: 2 }],
  address: '192.0.2.7',
  ...more,
});
const open = (more: Partial<CaseToOpen> = {}, actor = analyst, at = now) =>
  asActor(actor, (tx) => openCase(tx, actor, call(more), at));
const read = (ref: string, actor = analyst, at = now) => asActor(actor, (tx) => casePage(tx, actor, ref, at));
const change = (ref: string, body: CaseChangeBody, actor = analyst, at = now) =>
  asActor(actor, (tx) => changeCase(tx, actor, ref, body, at, null));
const close = async (ref: string, at: Date) =>
  change(
    ref,
    { act: 'state', version: (await read(ref)).case.version, state: 'done', note: 'Leads mated anew.' },
    analyst,
    at,
  );
const eventsOf = async (ref: string) =>
  (
    await db.owner.query<{ kind: string; detail: Record<string, unknown> }>(
      `select kind, detail from event where detail ->> 'case' = $1 order by id`,
      [ref],
    )
  ).rows;
const auditOf = async (ref: string) =>
  (
    await db.owner.query<{ action: string }>(
      `select action from audit_entry where subject = $1 order by id`,
      [`case ${ref}`],
    )
  ).rows.map((r) => r.action);

describe('opening a case', () => {
  it('begins with what is found at its string or position, and with its name alone where nothing is', async () => {
    const draft = (position?: number) =>
      asActor(analyst, (tx) => caseDraft(tx, { string: string.ref, position }, now));
    const parts = [{ string: string.ref, position: 2 }];
    const found = await draft();
    expect(found).toMatchObject({ kind: 'stuck', origin: 'string', chosen: [string.ref], parts });
    expect(found.title + found.what).toMatch(new RegExp(`${string.name}.+stuck`));
    expect(await draft(2)).toMatchObject({ kind: 'stuck', parts });
    expect(await draft(1)).toMatchObject({ kind: 'other', title: `String ${string.name}, position 1` });
  });

  it('keeps the figures of the minute, with event, history and audit', async () => {
    const { people } = await asActor(analyst, (tx) => casesPage(tx, analyst, 'current', now));
    const assignee = people.find((p) => p.name !== (people[0]?.name ?? ''));
    const made = await open({ assignee: assignee?.id, dueOn: '2026-01-05' });
    const { case: c, entries } = await read(made.id);
    expect(c).toMatchObject({ number: made.number, state: 'open', assignee, overdue: true, version: 1 });
    expect(c.parts).toEqual([
      { stringId: string.ref, stringName: string.name, position: 2, serial: expect.any(String) as string },
    ]);
    const figures = c.before?.strings.find((s) => s.id === string.ref);
    expect(c.before?.light.is).toBe('light');
    expect(figures).toMatchObject({ stuck: 1, passing: (figures?.units ?? 0) - 1 });
    expect(figures?.slots.find((s) => s.position === 2)).toMatchObject({
      state: 'shutdown',
      verdict: 'stuck',
    });
    // only strings that it is about keep their units
    expect(c.before?.strings.filter((s) => s.slots.length > 0)).toHaveLength(1);
    expect(entries.map((e) => e.kind)).toEqual(['opened']);
    expect((await eventsOf(made.id)).map((e) => e.kind)).toEqual(['case_opened', 'case_assigned']);
    expect(await auditOf(made.id)).toEqual(['case.opened']);
  });

  it('numbers within the organisation, also when many open at once', async () => {
    const before = (await open()).number;
    const many = await Promise.all(Array.from({ length: 5 }, () => open()));
    expect(many.map((m) => m.number).sort((a, b) => a - b)).toEqual([1, 2, 3, 4, 5].map((i) => before + i));
  });

  it('opens one for one form, however often it is sent', async () => {
    const ref = randomUUID();
    expect(await open({ ref })).toEqual(await open({ ref }));
    expect((await failure(open({ ref }, manager))).kind).toBe('conflict');
  });

  it('names the field that is wrong', async () => {
    const position = await failure(open({ parts: [{ string: string.ref, position: 60 }] }));
    expect(position.detail.fields).toEqual([
      { field: 'body.parts', message: `${string.name} has no position 60. Choose one of its positions.` },
    ]);
    expect((await failure(open({ strings: [randomUUID()] }))).detail.fields?.[0]?.field).toBe('body.strings');
    expect((await failure(open({ assignee: randomUUID() }))).detail.fields?.[0]?.field).toBe('body.assignee');
  });

  it('one cause makes one case', async () => {
    const { rows } = await db.owner.query<{ ref: string }>(
      `insert into cause (site_id, key, kind, headline, evidence, confidence, since, opened_at, changed_at, string_ids)
       values ($1, 'stuck:test', 'stuck', 'One unit is stuck', 'It stands alone.', 0.9, now(), now(), now(), $2)
       returning ref`,
      [fleet.site(CLINIC).id, [string.id]],
    );
    const cause = rows[0]?.ref;
    const first = await open({ origin: 'cause', cause });
    const second = await failure(open({ origin: 'cause', cause }));
    expect(second.kind).toBe('conflict');
    expect(second.detail.current).toMatchObject({ number: first.number });
    await close(first.id, now);
    expect((await open({ origin: 'cause', cause })).number).toBeGreaterThan(first.number);
    await db.owner.query(`update case_file set closed_at = $1, state = 'done' where cause_id is not null`, [
      now,
    ]);
    await db.owner.query(`update cause set closed_at = now() where key = 'stuck:test'`);
  });
});

describe('two people at one case', () => {
  it('the second is told what changed, and may send over it', async () => {
    const { id } = await open();
    await change(id, { act: 'facts', version: 1, title: 'Position 2 is stuck again' }, manager);
    const late = await failure(change(id, { act: 'facts', version: 1, what: 'My own words.' }));
    expect(late.kind).toBe('conflict');
    const current = late.detail.current as { page: CasePage; since: CasePage['entries'] };
    expect(current.page.case).toMatchObject({ title: 'Position 2 is stuck again', version: 2 });
    expect(current.since.map((e) => e.kind)).toEqual(['change']);
    expect(late.message).toContain('changed this case meanwhile');
    const done = await change(id, { act: 'facts', version: 2, what: 'My own words.' });
    expect(done.case).toMatchObject({
      title: 'Position 2 is stuck again',
      what: 'My own words.',
      version: 3,
    });
  });

  it('tick the checklist side by side, and see each other at one line', async () => {
    const { id } = await open();
    await change(id, { act: 'check', key: 'command', done: true, note: 'Switch is off', seen: null });
    const both = await change(id, { act: 'check', key: 'roster', done: true, note: '', seen: null }, manager);
    expect(both.case.checklist.map((m) => m.key).sort()).toEqual(['command', 'roster']);
    expect(both.case.version).toBe(1);
    const same = await failure(
      change(id, { act: 'check', key: 'command', done: false, note: '', seen: null }, manager),
    );
    expect(same.kind).toBe('conflict');
    expect(await auditOf(id)).toEqual(['case.opened', 'case.checked', 'case.checked']);
  });

  it('a comment tells whom it names, once', async () => {
    const { id } = await open();
    const { people } = await read(id);
    const someone = people.find((p) => p.id !== undefined && p.name.includes(' ')) ?? people[0];
    const body = {
      ref: randomUUID(),
      body: `@${someone?.name}, can you look?`,
      mentions: [someone?.id ?? ''],
    };
    const write = () => asActor(analyst, (tx) => commentCase(tx, analyst, id, body, now, null));
    await write();
    const page = await write();
    expect(page.entries.filter((e) => e.kind === 'comment')).toMatchObject([{ mentions: [someone?.name] }]);
    const told = (await eventsOf(id)).filter((e) => e.kind === 'case_mentioned');
    expect(told.length).toBeLessThanOrEqual(1);
    // nobody is told of their own words
    for (const { detail } of told) expect(detail.mentions).not.toContain(analyst.personId);
  });

  it('history is only added to: the web may not change it', async () => {
    const { id } = await open();
    await expect(
      asActor(manager, (tx) =>
        tx.raw(`update case_entry set body = 'x' where case_id in (select id from case_file where ref = ?)`, [
          id,
        ]),
      ),
    ).rejects.toThrow(/permission denied/);
  });
});

describe('closing a case', () => {
  const later = new Date(now.getTime() + 4 * HOUR_MS);
  /** The clock goes on and the sun with it: the site is moved to where it stands high again. */
  async function noonAt(at: Date): Promise<void> {
    const hours = at.getUTCHours() + at.getUTCMinutes() / 60;
    // an hour and a third past noon, and still on the globe
    const longitude = ((15 * (12 - hours) + 20 + 540) % 360) - 180;
    await db.owner.query('update site set longitude = $1', [longitude]);
  }

  it('asks what was done', async () => {
    const { id } = await open();
    const silent = await failure(change(id, { act: 'state', version: 1, state: 'done', note: ' ' }));
    expect(silent.detail.fields?.[0]?.field).toBe('body.note');
  });

  it('is looked at again: not at once, then opened where it did not hold, then closed for good', async () => {
    await db.owner.query(`update case_file set checked_at = now() where closed_at is not null`);
    await noonAt(later);
    const { id } = await open();
    await close(id, now);
    expect(await checkClosedCases(new Date(now.getTime() + 60_000))).toEqual({ checked: 0, reopened: 0 });
    expect((await read(id)).case).toMatchObject({ state: 'done', outcome: null });

    await stuck(later);
    // two workers at once: one of them decides
    const [one, two] = await Promise.all([checkClosedCases(later), checkClosedCases(later)]);
    expect(one.reopened + two.reopened).toBe(1);
    const again = await read(id);
    expect(again.case).toMatchObject({ state: 'open', outcome: 'not_held', closedAt: null });
    expect(again.entries.slice(-2).map((e) => [e.kind, e.person])).toEqual([
      ['checked', null],
      ['reopened', null],
    ]);
    expect(again.entries.at(-1)?.body).toContain(`Position 2 of ${string.name} is stuck in shutdown`);
    const reopened = (await eventsOf(id)).filter((e) => e.kind === 'case_reopened');
    expect(reopened).toHaveLength(1);
    expect(reopened[0]?.detail.reason).toContain('stuck in shutdown');
    expect(await auditOf(id)).toContain('case.reopened');
    expect(again.case.after?.strings.find((s) => s.id === string.ref)?.stuck).toBe(1);

    // put right by now: closed again, and it stays so
    await close(id, now);
    expect((await read(id)).case.outcome).toBeNull();
    await allWell(later);
    expect(await checkClosedCases(later)).toEqual({ checked: 1, reopened: 0 });
    expect(await checkClosedCases(later)).toEqual({ checked: 0, reopened: 0 });
    const held = await read(id);
    expect(held.case).toMatchObject({ state: 'done', outcome: 'held' });
    expect(held.entries.at(-1)).toMatchObject({ kind: 'checked', person: null });
    expect((await eventsOf(id)).filter((e) => e.kind === 'case_reopened')).toHaveLength(1);
    await stuck(now);
  });
});

describe('the evidence', () => {
  it('is one PDF and one ZIP that say the same, with photos and a fingerprint', async () => {
    const { id, number } = await open({ what: 'The half on the long lead is browned.' });
    const photo = await sharp({ create: { width: 900, height: 600, channels: 3, background: '#845' } })
      .jpeg()
      .toBuffer();
    const query = { ref: randomUUID(), name: 'Brown half.jpg', note: '', at: now.toISOString() };
    const request = new Request('http://here/', { method: 'POST', body: new Uint8Array(photo) });
    const file = await receiveCasePhoto(analyst, id, request, query, now);
    for (let sent = 0; sent < 2; sent++)
      await asActor(analyst, (tx) => addCasePhoto(tx, analyst, id, query, file, now, null));
    await change(id, { act: 'check', key: 'command', done: true, note: 'Switch is off', seen: null });
    const page = await read(id);
    expect(page.photos).toHaveLength(1);
    expect(page.entries.filter((e) => e.kind === 'photo')).toHaveLength(1);

    const pack = async (form: 'pdf' | 'zip') => {
      const reply = await asActor(analyst, (tx) => caseEvidence(tx, analyst, id, form, now));
      return new Uint8Array(await reply.arrayBuffer());
    };
    const pages = (await pdfPages(await pack('pdf'))).map((page) => page.replace(/\s+/g, ' '));
    const text = pages.join('\n');
    expect(text).toContain(`Evidence of case ${number}`);
    expect(text).toContain('The half on the long lead is browned.');
    expect(text).toContain('Strings stay dangerous in light.');
    expect(text).toContain(`String ${string.name}`);
    expect(text).toContain('Switch is off');
    expect(text).toContain('Brown half.jpg');
    const serial = page.case.parts[0]?.serial ?? 'none';
    expect(text).toContain(serial);
    // other cases of the string are not for whoever is called next
    expect(text).not.toMatch(new RegExp(`Case (?!${number}\\b)\\d+ opened`));
    for (const [i, each] of pages.entries()) {
      expect(each).toContain(`Page ${i + 1} of ${pages.length}`);
      expect(each).toMatch(/Fingerprint of the data \(SHA-256\) [0-9a-f]{64}/);
    }
    const zip = unzipSync(await pack('zip'));
    const folder = `case-${number}`;
    expect(Object.keys(zip).sort()).toEqual(
      [
        'as-built.csv',
        'contents.txt',
        'events.csv',
        'evidence.pdf',
        'meter-readings.csv',
        'photos/01-Brown-half.jpg',
        `readings/01-${string.name}-day.csv`,
        `readings/01-${string.name}-week.csv`,
      ].map((name) => `${folder}/${name}`),
    );
    expect(strFromU8(zip[`${folder}/as-built.csv`] ?? new Uint8Array())).toContain(serial);
    const [printed] = /[0-9a-f]{64}/.exec(text) ?? [];
    expect(strFromU8(zip[`${folder}/contents.txt`] ?? new Uint8Array())).toContain(printed);
  });
});

describe('who sees what', () => {
  it('another organisation sees no case, opens none, changes none', async () => {
    const { id } = await open();
    expect((await failure(read(id, stranger))).kind).toBe('not_found');
    expect(
      (await failure(change(id, { act: 'state', version: 1, state: 'waiting', note: '' }, stranger))).kind,
    ).toBe('not_found');
    expect((await failure(open({}, stranger))).kind).toBe('not_found');
    const theirs = await asActor(stranger, (tx) => casesPage(tx, stranger, 'all', now));
    expect(theirs.cases).toEqual([]);
    const pdf = failure(asActor(stranger, (tx) => caseEvidence(tx, stranger, id, 'pdf', now)));
    expect((await pdf).kind).toBe('not_found');
  });

  it('a customer reports at their own sites, and sees the own words and the state only', async () => {
    const given = customer.sites === 'all' ? [] : customer.sites;
    const own = [CLINIC, OTHER].find((name) => given.includes(fleet.site(name).id)) ?? CLINIC;
    const notOwn = [CLINIC, OTHER].find((name) => !given.includes(fleet.site(name).id)) ?? FOREIGN;
    const report = { ref: randomUUID(), what: 'The display has been dark since Sunday.\nIt never was.' };
    const send = (where: string) =>
      asActor(customer, (tx) => reportCase(tx, customer, site(where), report, now, null));
    expect((await failure(send(notOwn))).kind).toBe('not_found');
    const told = await send(own);
    expect(told).toEqual({
      id: report.ref,
      number: expect.any(Number) as number,
      what: report.what,
      state: 'open',
      at: now.toISOString(),
      closedAt: null,
    });
    const staff = await read(report.ref);
    expect(staff.case).toMatchObject({
      title: 'Reported: The display has been dark since Sunday.',
      origin: 'customer',
    });
    expect(staff.case.before?.at).toBe(now.toISOString());
    expect((await failure(open({ site: site(own) }, customer))).kind).toBe('forbidden');
    // what another person reported there is not theirs
    const others = await asActor(manager, (tx) => reportedCases(tx, manager, site(own)));
    expect(others).toEqual([]);
  });

  it('a site names its open cases', async () => {
    const cases = await asActor(analyst, (tx) => openCasesOfSite(tx, site(CLINIC), now));
    expect(cases.length).toBeGreaterThan(0);
    expect(cases.every((c) => c.closedAt === null && c.siteId === site(CLINIC))).toBe(true);
    expect(await asActor(analyst, (tx) => openCasesOfSite(tx, site(OTHER), now))).toSatisfy(
      (list: { siteId: string }[]) => list.every((c) => c.siteId === site(OTHER)),
    );
  });
});
