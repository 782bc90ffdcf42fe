import { mkdtemp, rm } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { openGaps } from '../../src/domain/commissioning/steps';
import { asActor } from '../../src/server/db/transaction';
import { lettersReceived, startLocalPost, type LocalPost } from '../../src/server/mail/local-post';
import { mailTransport, sendDue } from '../../src/server/mail/send-outbox';
import { paperOf } from '../../src/server/queries/handover';
import { acceptGap } from '../../src/server/services/accept-gap';
import { siteAndItsSteps, sitesAndTheirSteps } from '../../src/server/services/commissioning';
import { handoverPage } from '../../src/server/services/handover-page';
import { makeHandover } from '../../src/server/services/make-handover';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { pdfPages } from '../support/pdf';
import { failure } from '../support/refusal';

const HALL = 'Old Tannery Market Hall';
const CLINIC = 'Weirside Clinic';
const AT = new Date('2026-12-01T12:00:00Z');
let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;
let technician: Actor;
let customer: Actor;
let stranger: Actor;
let folder: string;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, CLINIC, 'Netloft Terrace'], AT.getTime() / 1000);
  manager = await fleet.actor('manager@lowfield.example');
  technician = await fleet.actor('technician@lowfield.example');
  customer = await fleet.actor('customer@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  folder = await mkdtemp(path.join(os.tmpdir(), 'wakeline-handover-'));
});
afterAll(async () => {
  await db.drop();
  await rm(folder, { recursive: true, force: true });
});

const ref = (site: string) => fleet.site(site).ref;
const steps = (actor: Actor, site: string) => asActor(actor, (tx) => siteAndItsSteps(tx, ref(site)));
const gapsOf = async (site: string) => openGaps((await steps(manager, site)).steps);
const accept = (actor: Actor, site: string, gap: string, reason = 'Reached by crane in spring.') =>
  asActor(actor, (tx) => acceptGap(tx, actor, ref(site), { gap, reason }, '127.0.0.1'));
const make = (actor: Actor, site: string, body = { remark: '', tellCustomers: true }, at = AT) =>
  asActor(actor, (tx) => makeHandover(tx, actor, ref(site), body, at, '127.0.0.1'));
async function acceptAll(site: string): Promise<void> {
  for (const gap of await gapsOf(site)) await accept(manager, site, gap.key);
}

describe('the steps of a site', () => {
  it('name what blocks, from the records', async () => {
    const site = await steps(technician, HALL);
    expect(site.steps.map((s) => s.key)).toEqual([
      'as_built',
      'install_checks',
      'meter_readings',
      'roll_call',
      'shutdown_test',
      'handover',
    ]);
    const keys = openGaps(site.steps).map((g) => g.key);
    expect(keys).toContain('install_checks/unsigned:A1');
    expect(keys).toContain('shutdown_test/untested:Whole roof');
  });

  it('change with what is recorded', async () => {
    const { id } = fleet.site(HALL);
    const string = fleet.site(HALL).strings.get('A1');
    await db.owner.query(
      `insert into meter_reading (site_id, string_id, person_id, at, stage, reading_kind, light, voltage, findings)
       values ($1, $2, $3, $4, 'before_energising', 'positive_to_negative', 'bright', 540, '{"outcome": "as_expected", "headline": "All pass", "expectedV": 541, "expectedLowV": 520, "expectedHighV": 560}')`,
      [id, string?.id, technician.personId, AT],
    );
    await db.owner.query(
      `insert into install_check (site_id, string_id, check_name, result, person_id, at)
       values ($1, $2, 'strain_relief', 'fail', $3, $4)`,
      [id, string?.id, technician.personId, AT],
    );
    const keys = (await gapsOf(HALL)).map((g) => g.key);
    expect(keys).not.toContain('meter_readings/unread:A1');
    expect(keys).toContain('install_checks/failed:A1');
    expect((await steps(manager, HALL)).lastHand?.person).toBeTruthy();
  });

  it('are another organisation’s business only', async () => {
    expect((await failure(steps(stranger, HALL))).kind).toBe('not_found');
    const seen = await asActor(stranger, (tx) => sitesAndTheirSteps(tx));
    expect(seen.map((s) => s.name)).not.toContain(HALL);
  });
});

describe('a gap', () => {
  it('is accepted once, by name and with its reason on record', async () => {
    await accept(manager, HALL, 'install_checks/unsigned:A2', 'The lift was out of order.');
    const gaps = (await steps(manager, HALL)).steps.flatMap((s) => s.gaps);
    expect(gaps.find((g) => g.key === 'install_checks/unsigned:A2')?.accepted).toBe(true);
    expect((await failure(accept(manager, HALL, 'install_checks/unsigned:A2'))).kind).toBe('conflict');
    const { rows } = await db.owner.query(
      `select reason, after from audit_entry where action = 'commissioning.gap_accepted'`,
    );
    expect(rows).toEqual([
      expect.objectContaining({
        reason: 'The lift was out of order.',
        after: { gap: 'install_checks/unsigned:A2', words: 'A2 is not signed off.' },
      }),
    ]);
  });

  it('that is none can’t be accepted', async () => {
    expect((await failure(accept(manager, HALL, 'install_checks/unsigned:Z9'))).kind).toBe('conflict');
    expect((await failure(accept(stranger, HALL, 'install_checks/unsigned:A3'))).kind).toBe('not_found');
  });
});

describe('a handover', () => {
  it('names what blocks it, and makes nothing', async () => {
    const refused = await failure(make(technician, HALL));
    expect(refused.kind).toBe('conflict');
    expect(refused.detail.fields?.length).toBeGreaterThan(3);
    expect((await asActor(manager, (tx) => handoverPage(tx, ref(HALL), AT))).packs).toEqual([]);
  });

  it('keeps its papers, lets the site operate and writes to the customers', async () => {
    await acceptAll(HALL);
    await db.owner.query('insert into site_access (person_id, site_id) values ($1, $2)', [
      customer.personId,
      fleet.site(HALL).id,
    ]);
    const photo = await sharp({
      create: { width: 320, height: 240, channels: 3, background: '#3a6f7a' },
    })
      .webp()
      .toBuffer();
    const string = fleet.site(HALL).strings.get('A1');
    await db.owner.query(
      `with a as (
         insert into attachment (organisation_id, site_id, string_id, subject, name, media_type, byte_size, sha256, person_id, at, note)
         values ($1, $2, $3, 'install_check', 'p.webp', 'image/webp', $4, '\\x00', $5, $6, 'Connector pair at A1-3') returning id)
       insert into attachment_data (attachment_id, variant, media_type, data) select id, 'thumbnail', 'image/webp', $7 from a`,
      [manager.organisationId, fleet.site(HALL).id, string?.id, photo.length, technician.personId, AT, photo],
    );
    const pack = await make(technician, HALL, { remark: 'First season', tellCustomers: true });
    expect(pack).toMatchObject({ version: 1, remark: 'First season' });
    expect(pack.fingerprint).toMatch(/^[0-9a-f]{64}$/);
    const { rows } = await db.owner.query(
      'select stage, switched_on_on::text as day from site where id = $1',
      [fleet.site(HALL).id],
    );
    expect(rows[0]).toMatchObject({ stage: 'operating' });
    const { rows: waiting } = await db.owner.query('select to_address, subject, text_body from message');
    expect(waiting).toEqual([
      expect.objectContaining({
        to_address: 'customer@lowfield.example',
        subject: `${HALL}: your papers are ready`,
        text_body: expect.stringContaining(`/my-site/${ref(HALL)}`) as string,
      }),
    ]);
    expect((await steps(manager, HALL)).steps.at(-1)?.state).toBe('done');
  });

  it('says on paper what was recorded', async () => {
    const { packs } = await asActor(manager, (tx) => handoverPage(tx, ref(HALL), AT));
    const pdf = await asActor(manager, (tx) => paperOf(tx, packs[0]?.ref ?? '', 'pdf'));
    // words are set one by one: blanks between them are the reader's
    const pages = (await pdfPages(pdf?.bytes ?? new Uint8Array())).map((page) => page.replace(/\s+/g, ' '));
    const text = pages.join(' ');
    const serial = [...fleet.site(HALL).units.keys()][0] ?? 'none';
    for (const words of [
      HALL,
      'Handover pack',
      'Single-line description',
      serial,
      'Shutdown is not isolation',
      'Strain relief',
      'The lift was out of order.',
      'Connector pair at A1-3',
      '540',
      packs[0]?.fingerprint ?? 'none',
      `Page 1 of ${pages.length}`,
    ])
      expect(text).toContain(words);
    expect(pages.length).toBeGreaterThan(8);
  });

  it('is fingerprinted over its data: the same data, the same fingerprint; other data, another', async () => {
    const again = await make(manager, HALL, { remark: 'no change', tellCustomers: false });
    const { packs } = await asActor(manager, (tx) => handoverPage(tx, ref(HALL), AT));
    expect(again.version).toBe(2);
    // the accepted gaps and stage are in the data: the stage is not, so nothing that the papers say has changed
    const first = packs.find((p) => p.version === 1);
    await db.owner.query(`update site set contact_name = 'Somebody Else' where id = $1`, [
      fleet.site(HALL).id,
    ]);
    const changed = await make(manager, HALL, { remark: '', tellCustomers: false });
    expect(changed.fingerprint).not.toBe(again.fingerprint);
    expect(first?.version).toBe(1);
  });

  it('can’t be changed by the web’s account, nor read by strangers', async () => {
    const { packs } = await asActor(manager, (tx) => handoverPage(tx, ref(HALL), AT));
    const one = packs[0]?.ref ?? '';
    const owner = await fleet.actor('customer@lowfield.example'); // who sees the site by now
    expect(await asActor(owner, (tx) => paperOf(tx, one, 'csv'))).toBeDefined();
    expect(await asActor(stranger, (tx) => paperOf(tx, one, 'pdf'))).toBeUndefined();
    await expect(
      asActor(manager, (tx) => tx('handover_pack').update({ remark: 'other' })),
    ).rejects.toMatchObject({ code: '42501' });
  });
});

describe('the outbox', () => {
  let post: LocalPost | undefined;
  // letters are due from the moment they are written, by the database's clock
  const due = new Date(Date.now() + 3_600_000);

  it('waits while the mail server is away, and tries again later', async () => {
    const closed = mailTransport('smtp://127.0.0.1:9');
    const outcome = await sendDue(() => due, closed, 'Wakeline <w@lowfield.example>');
    expect(outcome).toEqual({ sent: 0, failed: 1 });
    expect(await sendDue(() => due, closed, 'w@lowfield.example')).toEqual({ sent: 0, failed: 0 }); // not due yet
    const { rows } = await db.owner.query('select attempts, sent_at, last_error, not_before from message');
    expect(rows[0]).toMatchObject({
      attempts: 1,
      sent_at: null,
      not_before: new Date(due.getTime() + 60_000),
    });
    expect(rows[0].last_error).toContain('ECONNREFUSED');
  });

  it('sends each letter once, however often it runs', async () => {
    post = await startLocalPost(folder);
    const transport = mailTransport(`smtp://127.0.0.1:${post.port}`);
    const later = () => new Date(due.getTime() + 61_000);
    const both = await Promise.all([
      sendDue(later, transport, 'Wakeline <w@lowfield.example>'),
      sendDue(later, transport, 'Wakeline <w@lowfield.example>'),
    ]);
    expect(both.reduce((n, o) => n + o.sent, 0)).toBe(1);
    const received = await lettersReceived(folder);
    expect(received).toHaveLength(1);
    expect(received[0]).toMatchObject({
      to: 'customer@lowfield.example',
      subject: `${HALL}: your papers are ready`,
    });
    expect(received[0]?.text).toContain('has been handed over');
    expect(received[0]?.html).toContain('See your site and its papers');
    await post.stop();
  });

  it('gives up what the server refuses for good', async () => {
    await db.owner.query(
      `insert into message (organisation_id, kind, event_key, to_address, subject, text_body, html_body)
       values ($1, 'handover', 'refused', 'nobody@lowfield.example', 's', 't', 'h')`,
      [manager.organisationId],
    );
    const refusing = {
      sendMail: () =>
        Promise.reject(
          Object.assign(new Error('550 no such mailbox'), { responseCode: 550, command: 'RCPT TO' }),
        ),
    };
    const outcome = await sendDue(() => new Date(), refusing, 'w@lowfield.example');
    expect(outcome).toEqual({ sent: 0, failed: 1 });
    const { rows } = await db.owner.query(`select given_up_at from message where event_key = 'refused'`);
    expect(rows[0].given_up_at).not.toBeNull();
  });
});
