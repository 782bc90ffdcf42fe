import { createServer, type IncomingHttpHeaders, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { NoticeKind } from '../../src/domain/notices/kinds';
import { VERIFY_EXAMPLE } from '../../src/features/webhooks/example';
import { asActor } from '../../src/server/db/transaction';
import { callOut } from '../../src/server/http/call-out';
import { sendCalls } from '../../src/server/services/webhook-send';
import type { CallBody } from '../../src/server/services/webhook-calls';
import {
  makeWebhook,
  resendCall,
  reviseWebhook,
  testWebhook,
  webhookPage,
} from '../../src/server/services/webhooks';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { after, AT, Happenings, HERE, tellAll } from '../support/happenings';
import { failure } from '../support/refusal';

const LIMITS = { within: 'loopback', timeoutMs: 400 } as const;
type Verify = (headers: IncomingHttpHeaders, body: string, secret: string, nowS: number) => boolean;

let db: TestDatabase;
let scene: Happenings;
let manager: Actor;
let stranger: Actor;
let folder: string | undefined;

interface Taken {
  headers: IncomingHttpHeaders;
  body: string;
}
/** A system that is called; answers as it is told. */
class Target {
  readonly taken: Taken[] = [];
  answer: 'takes' | 'fails' | 'hangs' | 'redirects' | 'floods' = 'takes';
  private readonly server: Server = createServer((req, res) => {
    let body = '';
    req.on('data', (chunk: Buffer) => (body += chunk.toString('utf8')));
    req.on('end', () => {
      this.taken.push({ headers: req.headers, body });
      if (this.answer === 'hangs') return;
      if (this.answer === 'redirects') res.writeHead(302, { location: 'http://169.254.169.254/' }).end();
      else if (this.answer === 'floods') res.writeHead(200).end('x'.repeat(5_000_000));
      else res.writeHead(this.answer === 'takes' ? 204 : 503).end(this.answer === 'fails' ? 'not now' : '');
    });
  });
  async start(): Promise<string> {
    await new Promise<void>((resolve) => this.server.listen(0, '127.0.0.1', resolve));
    return `http://127.0.0.1:${(this.server.address() as AddressInfo).port}/in`;
  }
  stop(): Promise<void> {
    this.server.closeAllConnections();
    return new Promise((resolve) => this.server.close(() => resolve()));
  }
}
const targets: Target[] = [];
async function target(): Promise<{ target: Target; url: string }> {
  const made = new Target();
  targets.push(made);
  return { target: made, url: await made.start() };
}

beforeAll(async () => {
  folder = process.env.LOCAL_MAIL_FOLDER;
  process.env.LOCAL_MAIL_FOLDER = '/nowhere'; // a demo: this machine may be called
  db = await testDatabase();
  scene = new Happenings(db);
  const fleet = await testFleet(db, [HERE, 'Netloft Terrace']);
  manager = await fleet.actor('manager@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
});
afterAll(async () => {
  if (folder === undefined) delete process.env.LOCAL_MAIL_FOLDER;
  else process.env.LOCAL_MAIL_FOLDER = folder;
  await db.drop();
});
beforeEach(() => scene.forget());
afterEach(async () => {
  for (const t of targets.splice(0)) await t.stop();
});

const make = (url: string, kinds: NoticeKind[] = ['hazard', 'planned_work']) =>
  asActor(manager, (tx) => makeWebhook(tx, manager, { name: 'Desk', url, kinds }, null));
const pageOf = (id: string) => asActor(manager, (tx) => webhookPage(tx, id, { show: 'all' }, AT));
const work = (reason: string) => scene.happens({ kind: 'planned_work', detail: { reason, assigneeId: 4 } });
/** Everything noted so far is due at this moment. */
async function callAt(at: Date) {
  await db.owner.query('update webhook_delivery set not_before = $1 where attempts = 0', [AT]);
  return sendCalls(() => at, LIMITS);
}

describe('a webhook', () => {
  it('is called once for what it is told of, signed so that the example of the page proves it', async () => {
    const { target: desk, url } = await target();
    const { id, secret } = await make(url);
    await scene.happens({
      kind: 'cause_opened',
      detail: await scene.cause('not_shutting_down', 'Unit 3 does not shut down'),
    });
    await scene.happens({ kind: 'roll_call_stopped', detail: {} });
    await Promise.all([tellAll(), tellAll()]);
    await callAt(after(1));
    await Promise.all([callAt(after(2)), callAt(after(3))]);
    expect(desk.taken).toHaveLength(1);
    const [call] = desk.taken as [Taken];
    const body = JSON.parse(call.body) as CallBody;
    expect(body).toMatchObject({
      kind: 'hazard',
      phase: 'comes',
      event: 'cause_opened',
      site: { name: HERE },
      headline: 'Unit 3 does not shut down',
      delivery: call.headers['wakeline-delivery'],
    });
    const address = `data:text/javascript,${encodeURIComponent(VERIFY_EXAMPLE)}`;
    const { isFromWakeline } = (await import(/* @vite-ignore */ address)) as { isFromWakeline: Verify };
    const nowS = Number(call.headers['wakeline-time']);
    expect(isFromWakeline(call.headers, call.body, secret, nowS)).toBe(true);
    expect(isFromWakeline(call.headers, `${call.body} `, secret, nowS)).toBe(false);
    expect(isFromWakeline(call.headers, call.body, `${secret}x`, nowS)).toBe(false);
    expect(isFromWakeline(call.headers, call.body, secret, nowS + 301)).toBe(false);
    expect((await pageOf(id)).deliveries[0]).toMatchObject({
      state: 'delivered',
      attempts: [{ status: 204 }],
    });
  });

  it('says none of the database’s numbers', async () => {
    const { target: desk, url } = await target();
    await make(url);
    await work('gutters');
    await tellAll();
    await callAt(after(1));
    expect((JSON.parse(desk.taken[0]?.body ?? '{}') as CallBody).detail).toEqual({ reason: 'gutters' });
  });

  it('that hangs is cut off and holds up no other; both stay on record', async () => {
    const { target: slow, url: slowUrl } = await target();
    const { target: quick, url } = await target();
    slow.answer = 'hangs';
    const hanging = await make(slowUrl);
    const well = await make(url);
    for (const n of [1, 2, 3]) await work(`work ${n}`);
    await tellAll();
    expect(await callAt(after(1))).toEqual({ delivered: 3, failed: 1 });
    expect(quick.taken).toHaveLength(3);
    expect(slow.taken).toHaveLength(1); // it is left alone until its next try
    const [tried] = (await pageOf(hanging.id)).deliveries.filter((d) => d.attempts.length > 0);
    expect(tried).toMatchObject({ state: 'waits', nextAt: after(2).toISOString() });
    expect(tried?.attempts[0]).toMatchObject({
      status: null,
      error: expect.stringContaining('within 0.4 s') as string,
    });
    expect((await pageOf(well.id)).webhook.failingSince).toBeNull();
  });

  it('that fails is tried again, later each time, and told once when it is well', async () => {
    const { target: desk, url } = await target();
    desk.answer = 'fails';
    const { id } = await make(url);
    await work('gutters');
    await tellAll();
    await callAt(after(1));
    expect((await callAt(after(1.5))).failed).toBe(0);
    await callAt(after(2));
    expect((await pageOf(id)).deliveries[0]).toMatchObject({
      nextAt: after(7).toISOString(),
      attempts: [{ status: 503, excerpt: 'not now' }, { status: 503 }],
    });
    desk.answer = 'takes';
    await callAt(after(7));
    await callAt(after(60));
    expect(new Set(desk.taken.map((t) => t.headers['wakeline-delivery'])).size).toBe(1);
    expect(desk.taken).toHaveLength(3);
    expect((await pageOf(id)).deliveries[0]?.state).toBe('delivered');
  });

  it('whose caller was killed is called again once the claim has run out, under the same name', async () => {
    const { target: desk, url } = await target();
    await make(url);
    await work('gutters');
    await tellAll();
    await db.owner.query('update webhook_delivery set claimed_until = $1', [after(2)]);
    expect(await callAt(after(1))).toEqual({ delivered: 0, failed: 0 });
    expect(await callAt(after(3))).toEqual({ delivered: 1, failed: 0 });
    expect(desk.taken).toHaveLength(1);
  });

  it('that failed for days is switched off, and the managers are told', async () => {
    const { target: desk, url } = await target();
    desk.answer = 'fails';
    const { id } = await make(url);
    await work('gutters');
    await tellAll();
    await callAt(after(1));
    await work('again');
    await tellAll();
    await callAt(after(5 * 1440 + 2));
    const { webhook, deliveries } = await pageOf(id);
    expect(webhook).toMatchObject({ active: false, waiting: 0 });
    expect(webhook.disabledAt).not.toBeNull();
    expect(deliveries.every((d) => d.state === 'given_up')).toBe(true);
    const told = (await scene.notices()).filter((n) => n.kind === 'webhook');
    expect(told.map((n) => n.email)).toEqual(['manager@lowfield.example']);
    expect((await scene.letters()).filter((l) => l.kind === 'webhook')).toHaveLength(1);
    // switched on again it begins anew; a test tells whether it answers
    desk.answer = 'takes';
    await asActor(manager, (tx) => reviseWebhook(tx, manager, id, { active: true }, null, AT));
    await asActor(manager, (tx) => testWebhook(tx, manager, id, AT));
    expect((await callAt(after(9000))).delivered).toBe(1);
    const [test] = (await pageOf(id)).deliveries;
    expect(test).toMatchObject({ kind: 'test', state: 'delivered' });
    await asActor(manager, (tx) => resendCall(tx, manager, test?.id ?? '', null));
    expect((await callAt(after(9001))).delivered).toBe(1);
  });

  it('is no door into our own network', async () => {
    const { target: desk, url } = await target();
    for (const bad of [
      'http://10.0.0.1/',
      'https://169.254.169.254/latest',
      'https://[fd00::1]/',
      'http://example.com/',
      'ftp://x.example',
      'https://a:b@x.example/',
      'nonsense',
    ]) {
      const refused = await failure(make(bad));
      expect(refused.detail.fields?.[0]?.field).toBe('body.url');
    }
    // a name that leads inside is found out when it is called, and nothing is sent
    const away = url.replace('127.0.0.1', 'localhost');
    const answer = await callOut(
      { url: away.replace('http:', 'https:'), headers: {}, body: '' },
      { within: 'nothing', timeoutMs: 400 },
    );
    expect(answer).toMatchObject({ status: null });
    expect(desk.taken).toHaveLength(0);
    desk.answer = 'redirects';
    const redirected = await callOut({ url, headers: {}, body: '{}' }, { ...LIMITS, timeoutMs: 20_000 });
    expect(redirected.status).toBe(302);
    desk.answer = 'floods';
    const unhurried = { ...LIMITS, timeoutMs: 20_000 }; // a flood of words takes a busy machine its time
    expect((await callOut({ url, headers: {}, body: '{}' }, unhurried)).excerpt.length).toBe(2048);
  });

  it('of another organisation is none, and its secret is read by nobody', async () => {
    const { url } = await target();
    const { id, secret } = await make(url);
    const asStranger = <T>(work: (tx: Parameters<Parameters<typeof asActor<T>>[1]>[0]) => Promise<T>) =>
      asActor(stranger, work);
    expect((await failure(asStranger((tx) => webhookPage(tx, id, { show: 'all' }, AT)))).kind).toBe(
      'not_found',
    );
    expect(
      (await failure(asStranger((tx) => reviseWebhook(tx, stranger, id, { active: false }, null, AT)))).kind,
    ).toBe('not_found');
    expect(JSON.stringify(await pageOf(id))).not.toContain(secret);
    await expect(asActor(manager, (tx) => tx('webhook').select('secret'))).rejects.toMatchObject({
      code: '42501',
    });
    const { rows } = await db.owner.query('select * from audit_entry');
    expect(JSON.stringify(rows)).not.toContain(secret);
  });
});
