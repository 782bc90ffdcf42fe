import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { randomUUID } from 'node:crypto';
import { simpleParser } from 'mailparser';
import type pg from 'pg';
import { SMTPServer } from 'smtp-server';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import type { Actor } from '../../src/domain/access/permissions';
import { asActor } from '../../src/server/db/transaction';
import { JOBS } from '../../src/server/jobs/tasks';
import { ensureDays, writeFrames } from '../../src/server/queries/ingest-frames';
import { openCase } from '../../src/server/services/open-case';
import { chooseLetter } from '../../src/server/services/roof-letters';
import { makeWebhook } from '../../src/server/services/webhooks';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { Happenings } from '../support/happenings';
import { KilledWorker, betweenMinutes } from '../support/killed-worker';
import { noonEverywhere } from '../support/noon';
import { ingestClient } from '../support/pipeline';
import { stand } from '../support/standing';

/**
 * A worker process is killed in the middle of each kind of job: stopped by a lock at a table that it needs, or by
 * somebody who does not answer, it has done half of its work by then. Another worker does it again, and its effects
 * are there once.
 */
const SITE = 'Weirside Clinic';
const OTHER = 'Slate Lane Library';
const DAY_MS = 86_400_000;
let db: TestDatabase;
let scene: Happenings;
let site: SeededSite;
let other: SeededSite;
let analyst: Actor;
let manager: Actor;
let customer: Actor;
let ingest: pg.Client;
let worker: KilledWorker;

/** A mail server that takes letters, or takes them and never says that it did. */
const mail = { answers: true, taken: [] as string[], held: [] as string[] };
const post = new SMTPServer({
  authOptional: true,
  disabledCommands: ['STARTTLS', 'AUTH'],
  onData: (stream, _session, done) => {
    void simpleParser(stream).then((letter) => {
      (mail.answers ? mail.taken : mail.held).push(`${letter.messageId} ${letter.subject}`);
      if (mail.answers) done();
    });
  },
});
post.on('error', () => undefined); // whoever is killed hangs up
/** Another system that is called, with the identifiers of the calls. */
const desk = { answers: true, taken: [] as string[], held: [] as string[] };
const target: Server = createServer((req, res) => {
  (desk.answers ? desk.taken : desk.held).push(String(req.headers['wakeline-delivery']));
  if (desk.answers) res.writeHead(204).end();
});
const port = (server: { address(): unknown }): number => (server.address() as AddressInfo).port;

beforeAll(async () => {
  db = await testDatabase();
  scene = new Happenings(db);
  const fleet = await testFleet(db, [SITE, OTHER]);
  site = fleet.site(SITE);
  other = fleet.site(OTHER);
  analyst = await fleet.actor('analyst@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  customer = await fleet.actor('customer@lowfield.example');
  await db.owner.query(
    `update site set stage = 'operating', time_zone = 'UTC', longitude = 0, report_interval_s = 60`,
  );
  ingest = await ingestClient(db);
  await new Promise<void>((resolve) => post.listen(0, '127.0.0.1', resolve));
  await new Promise<void>((resolve) => target.listen(0, '127.0.0.1', resolve));
  worker = new KilledWorker(db, {
    SMTP_URL: `smtp://127.0.0.1:${port(post.server)}`,
    LOCAL_MAIL_FOLDER: '/nowhere', // a demo: this machine may be called
  });
  await worker.start();
});
afterAll(async () => {
  await worker.kill();
  target.closeAllConnections();
  target.close();
  await new Promise<void>((resolve) => post.close(() => resolve()));
  await ingest.end();
  await db.drop();
});

beforeEach(betweenMinutes);

const count = (sql: string, values: unknown[] = []): Promise<number> => worker.count(sql, values);
const stuckAtTwo = (): Promise<void> =>
  stand(db.owner, site, new Date(), (_, position) =>
    position === 2 ? { state: 'shutdown', verdict: 'stuck' } : null,
  );
const ago = (ms: number): Date => new Date(Date.now() - ms);

/** An hour of frames of the site's first string, one a minute. */
async function writeHour(from: Date) {
  const [plan] = site.plan.strings;
  const string = site.strings.get(plan!.name)!;
  const of = (x: number): number[] => plan!.slots.map(() => x);
  await ensureDays(ingest, from, new Date());
  const frames = Array.from({ length: 60 }, (_, k) => ({
    stringId: string.id,
    siteId: site.id,
    at: from.getTime() / 1000 + 60 * k,
    voltage: of(3500),
    voltageIn: null,
    current: of(5000),
    power: null,
    temperature: of(300),
    signal: of(-70),
    via: of(1),
    state: of(1),
  }));
  await writeFrames(ingest, frames, new Date(0));
  return { string, units: plan!.slots.length };
}

describe('a worker that is killed in the middle of its jobs', { timeout: 180_000 }, () => {
  it('sums up, and gives up old readings, as if nothing had happened', async () => {
    const from = new Date(Math.floor((Date.now() - 4 * 3_600_000) / 900_000) * 900_000);
    const { string, units } = await writeHour(from);
    await db.owner.query('delete from rollup_watermark');
    await db.owner.query('insert into rollup_watermark (quarter) values ($1)', [from]);
    const old = new Date(Date.now() - 120 * 86_400_000);
    await db.owner.query('select ensure_days($1::date, $1::date)', [old]);
    const partition = `string_frame_${old.toISOString().slice(0, 10).replaceAll('-', '')}`;
    const kept = (): Promise<number> =>
      count(`pg_class where relname like '%' || right($1, 8) and relname !~ 'quarter' and relkind = 'r'`, [
        partition,
      ]);
    const all = await kept();

    await worker.inTheMiddle(
      [
        { task: 'roll_up', at: 'string_day' },
        { task: 'keep_days', at: partition },
      ],
      async () => {
        // quarters may be there; until their days are, they count as not done
        const { rows } = await db.owner.query<{ quarter: Date }>('select quarter from rollup_watermark');
        expect(rows[0]?.quarter).toEqual(from);
        // all of a day or none of it: what the dead worker had asked for may yet be done by the database
        expect([0, all]).toContain(await kept());
      },
    );
    const { rows } = await db.owner.query<{ wh: number }>(
      'select sum(energy)::int as wh from string_day where string_id = $1',
      [string.id],
    );
    expect(rows[0]?.wh).toBe(units * 35 * 5); // one hour
    expect(await kept()).toBe(0);
  });

  it('packs the readings of a day: none is lost, none is there twice', async () => {
    const from = new Date(Math.floor(ago(5 * DAY_MS).getTime() / DAY_MS) * DAY_MS + DAY_MS / 2);
    const { string } = await writeHour(from);
    const single = 'string_frame where string_id = $1 and at >= $2 and at < $3';
    const hour = [string.id, from, new Date(from.getTime() + 3_600_000)];
    const aside = `packed_frame_${from.toISOString().slice(0, 10).replaceAll('-', '')}`;
    // all is packed and put aside, and the swap does not come
    await worker.inTheMiddle([{ task: 'pack_days', at: 'packed_frame', mode: 'share' }], async () => {
      // in one of the two places: what the dead worker had asked for may yet be done by the database
      expect(await count(aside)).toBe(1);
      expect([
        [60, 0],
        [0, 1],
      ]).toContainEqual([await count(single, hour), await count('packed_frame')]);
    });
    expect(await count(single, hour)).toBe(0);
    const { rows } = await db.owner.query<{ frames: number }>(
      'select sum(frames)::int as frames from packed_frame where string_id = $1',
      [string.id],
    );
    expect(rows[0]?.frames).toBe(60);
  });

  it('finds causes and judges a day: nothing half told, then each told once', async () => {
    await stuckAtTwo();
    const day = new Date(Date.now() - 86_400_000).toISOString().slice(0, 10);
    const sweptBefore = await count('cause');
    expect(sweptBefore).toBe(0);
    await worker.inTheMiddle(
      [
        { task: 'causes', payload: { siteId: site.id }, key: `causes:${site.id}`, at: 'event' },
        {
          task: 'output_night',
          payload: { siteId: other.id, day },
          key: `night:${other.id}:${day}`,
          at: 'output_day',
        },
      ],
      async () => {
        expect(await count('cause')).toBe(0);
        expect(await count('output_day')).toBe(0);
        expect(await count('output_night where site_id = $1', [other.id])).toBe(0);
      },
    );
    const causes = await count('cause');
    expect(causes).toBeGreaterThan(0);
    expect(await count(`event where kind = 'cause_opened'`)).toBe(causes);
    const strings = await count('string where site_id = $1', [other.id]);
    expect(await count('output_night where site_id = $1 and day = $2', [other.id, day])).toBe(1);
    // nothing was reported that day: it can't be told, and that is said
    expect(
      await count(
        `output_day where site_id = $1 and outcome = 'cant_tell' and finding ->> 'words' like '%0 days with enough sun%'`,
        [other.id],
      ),
    ).toBe(strings);
  });

  it('tells of what happened, and looks again at a closed case: each once', async () => {
    await noonEverywhere(db.owner);
    const plan = site.plan.strings.find((s) => s.kind === 'monitored')!;
    const ref = randomUUID();
    await asActor(analyst, (tx) =>
      openCase(
        tx,
        analyst,
        {
          ref,
          site: site.ref,
          origin: 'string',
          title: 'Position 2 is stuck',
          what: '',
          kind: 'stuck',
          strings: [],
          parts: [{ string: site.strings.get(plan.name)!.ref, position: 2 }],
          address: null,
        },
        ago(5 * 3_600_000),
      ),
    );
    const hook = { name: 'Desk', url: 'https://desk.example/in', kinds: ['hazard' as const] };
    await asActor(manager, (tx) => makeWebhook(tx, manager, hook, null));
    await db.owner.query('update webhook set url = $1', [`http://127.0.0.1:${port(target)}/in`]);
    await stuckAtTwo();
    const subject = 'Unit 3 does not shut down';
    await worker.inTheMiddle(
      [
        { task: 'tell', at: 'message', woken: true },
        { task: 'check_cases', at: 'audit_entry' },
      ],
      async () => {
        expect(await count('notice where headline like $1', [`%${subject}%`])).toBe(0);
        expect(await count('message where subject like $1', [`%${subject}%`])).toBe(0);
        expect(await count('webhook_delivery')).toBe(0);
        expect(await count('case_file where ref = $1 and closed_at is not null', [ref])).toBe(1);
        expect(await count(`case_entry where kind in ('checked', 'reopened')`)).toBe(0);
      },
      async () => {
        await scene.happens({
          kind: 'cause_opened',
          detail: await scene.cause('not_shutting_down', subject, SITE),
          site: SITE,
          at: new Date(),
        });
        await db.owner.query(
          `update case_file set state = 'done', closed_at = $2, version = version + 1 where ref = $1`,
          [ref, ago(4 * 3_600_000)],
        );
      },
    );
    for (const what of ['notice where headline like $1', 'message where subject like $1'])
      await expect.poll(() => count(what, [`%${subject}%`]), { message: what }).toBe(3); // manager, analyst, technician
    expect(await count(`webhook_delivery where kind = 'hazard'`)).toBe(1);
    expect(await count('case_file where ref = $1 and closed_at is null', [ref])).toBe(1);
    for (const kind of ['checked', 'reopened'])
      expect([kind, await count('case_entry where kind = $1', [kind])]).toEqual([kind, 1]);
    expect(await count(`event where kind = 'case_reopened'`)).toBe(1);
    expect(await count(`audit_entry where action = 'case.reopened'`)).toBe(1);
  });

  it('gathers the day’s letter, and writes one about a roof: each once', async () => {
    await asActor(customer, (tx) => chooseLetter(tx, customer, site.ref, 'week', ago(15 * DAY_MS)));
    const gathered = `message where kind = 'gathered'`;
    const roof = `message where kind = 'roof_letter'`;
    await worker.inTheMiddle(
      [
        { task: 'tell_gathered', at: 'message' },
        { task: 'roof_letters', at: 'message' },
      ],
      async () => {
        expect([await count(gathered), await count(roof)]).toEqual([0, 0]);
        expect(await count('notice where letter_due is not null and lettered_at is null')).toBeGreaterThan(0);
      },
      async () => {
        const { rows } = await db.owner.query<{ n: number }>(
          `with due as (update notice set letter_due = now() - interval '1 minute'
             where letter_due is not null and lettered_at is null returning person_id)
           select count(distinct person_id)::int as n from due`,
        );
        expect(rows[0]?.n).toBeGreaterThan(0);
      },
    );
    const people = await count(
      '(select distinct person_id from notice where letter_due is not null and lettered_at is not null) p',
    );
    expect(await count(gathered)).toBe(people);
    expect(await count(roof)).toBe(1);
  });

  it('sends a letter and makes a call that nobody had answered: each is taken once', async () => {
    // what was written before is none of this
    await db.owner.query(`update message set given_up_at = now() where sent_at is null`);
    await db.owner.query(`update webhook_delivery set given_up_at = now() where delivered_at is null`);
    mail.answers = false;
    desk.answers = false;
    mail.taken.length = 0;
    desk.taken.length = 0;
    const key = randomUUID();
    await db.owner.query(
      `insert into message (organisation_id, site_id, kind, event_key, to_address, to_name, subject, text_body, html_body)
       select organisation_id, id, 'cause', $2, 'analyst@lowfield.example', 'A', 'The letter', 'x', 'x' from site where id = $1`,
      [site.id, key],
    );
    const call = randomUUID();
    await db.owner.query(
      `insert into webhook_delivery (ref, webhook_id, organisation_id, site_id, event_key, kind, body)
       select $1, id, organisation_id, null, $2, 'hazard', '{}' from webhook limit 1`,
      [call, key],
    );
    const sent = 'message where event_key = $1 and sent_at is not null';
    const tries = 'webhook_attempt a join webhook_delivery d on d.id = a.delivery_id where d.ref = $1';
    await worker.whileTheyWait(
      ['send_letters', 'send_calls'],
      () => mail.held.length === 1 && desk.held.length === 1,
      async () => {
        expect(await count('message where sent_at is null and given_up_at is null')).toBeGreaterThan(0);
        expect(await count(tries, [desk.held[0]])).toBe(0);
        mail.answers = true;
        desk.answers = true;
        // the dead worker's claim ends after a minute
        expect(await count('webhook_delivery where ref = $1 and claimed_until > now()', desk.held)).toBe(1);
        await db.owner.query('update webhook_delivery set claimed_until = now()');
      },
    );
    await expect.poll(() => count(sent, [key])).toBe(1);
    await expect.poll(() => count(tries, [call])).toBe(1);
    // what was not answered came again, the same; nothing was taken twice
    expect(mail.taken).toContain(mail.held[0]);
    expect(new Set(mail.taken).size).toBe(mail.taken.length);
    expect(desk.taken).toEqual(expect.arrayContaining([desk.held[0], call]));
    expect(new Set(desk.taken).size).toBe(desk.taken.length);
  });

  it('looks after all sites, and asks for nights: each cause and each night once', async () => {
    const here = `event e where site_id = $1 and kind = 'cause_opened' and detail ->> 'kind' = 'stuck'`;
    const nights = 'output_night where site_id = $1 and day = $2';
    const day = ago(DAY_MS).toISOString().slice(0, 10);
    await db.owner.query('delete from output_night');
    await worker.inTheMiddle(
      [
        { task: 'causes_sweep', at: 'event' },
        { task: 'nights', at: 'output_night' },
      ],
      async () => {
        expect(await count(here, [other.id])).toBe(0);
        expect(await count(nights, [site.id, day])).toBe(0);
      },
      () =>
        stand(db.owner, other, new Date(), (_, position) =>
          position === 1 ? { state: 'shutdown', verdict: 'stuck' } : null,
        ),
    );
    expect(await count(here, [other.id])).toBe(await count('cause where site_id = $1', [other.id]));
    expect(await count(here, [other.id])).toBeGreaterThan(0);
    await expect.poll(() => count(nights, [site.id, day]), { timeout: 30_000 }).toBe(1);
    const judged = await count('output_day where site_id = $1 and day = $2', [site.id, day]);
    expect(judged).toBe(await count('string where site_id = $1', [site.id]));
  });

  it('was killed in every kind of job that there is', () => {
    expect([...worker.seen].sort()).toEqual(Object.keys(JOBS).sort());
  });
});
