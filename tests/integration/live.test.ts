import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { WebSocket } from 'ws';
import { loggerToken } from '../../simulator/scenarios/tokens';
import type { SeededSite } from '../../seeds/plant/seeded';
import { UNIT_STATES, VERDICTS } from '../../src/domain/verdicts/codes';
import { liveMessage, type LiveMessage } from '../../src/schemas/live';
import { paths } from '../../src/schemas/paths';
import { endSession, openSession } from '../../src/server/auth/sessions';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { liveHub, startLive, stopLive } from '../../src/server/live/service';
import { testDatabase, type TestDatabase } from '../support/database';
import { transactionElsewhere } from '../support/elsewhere';
import { SECRET, testFleet, type TestFleet } from '../support/fleet';
import {
  closed,
  frameOf,
  Inbox,
  nowS,
  openSockets,
  TestLogger,
  until,
  type Sockets,
} from '../support/ingest';
import { noonEverywhere } from '../support/noon';

let db: TestDatabase;
let sockets: Sockets;
let fleet: TestFleet;
let site: SeededSite;
let foreign: SeededSite;
let logger: TestLogger;
const open: WebSocket[] = [];

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, ['Old Tannery Market Hall', 'Weirside Clinic', 'Netloft Terrace']);
  await noonEverywhere(db.owner);
  site = fleet.site('Old Tannery Market Hall');
  foreign = fleet.site('Netloft Terrace');
  await startIngest();
  await startLive();
  sockets = await openSockets();
  const serial = [...site.loggers.keys()][0] ?? '';
  logger = await TestLogger.arrive(sockets, loggerToken(SECRET, serial), serial);
});
afterAll(async () => {
  for (const ws of open) ws.terminate();
  logger.ws.terminate();
  await stopLive();
  await stopIngest();
  await sockets.close();
  await db.drop();
});

const cookieOf = async (email: string): Promise<string> =>
  (await openSession(fleet.seeded.people.get(email)?.id ?? 0, false)).split(';')[0] ?? '';

async function browse(email: string, headers: Record<string, string> = {}): Promise<Inbox<LiveMessage>> {
  const ws = new WebSocket(`${sockets.url}${paths.live()}`, {
    headers: { cookie: await cookieOf(email), ...headers },
  });
  open.push(ws);
  const inbox = new Inbox<LiveMessage>(ws);
  await new Promise<void>((resolve, reject) => {
    ws.once('open', resolve);
    ws.once('unexpected-response', (_req, res) => reject(new Error(`HTTP ${res.statusCode}`)));
    ws.once('error', reject);
  });
  return inbox;
}
const subscribe = (inbox: Inbox<LiveMessage>, topic: string, cursor?: string) =>
  inbox.ws.send(JSON.stringify({ type: 'subscribe', topic, ...(cursor && { cursor }) }));
const ANALYST = 'analyst@lowfield.example';
const CUSTOMER = 'customer@lowfield.example';
const STRANGER = 'manager@harbourline.example';
const first = () => {
  const s = logger.roster.strings[0];
  if (!s) throw new Error('the roster is empty');
  return s;
};
const say = (claims: number | number[], at = nowS()) =>
  logger.durable(
    logger.frames([{ at, string: first().index, frame: frameOf(first().serials.length, 'both', claims) }]),
  );
const addEvent = (db_: pg.ClientBase | pg.Pool, siteId: number, note: string) =>
  db_.query(
    `insert into event (at, organisation_id, site_id, kind, detail)
     select now(), organisation_id, id, 'command', jsonb_build_object('note', $2::text) from site where id = $1`,
    [siteId, note],
  );
const notesIn = (inbox: Inbox<LiveMessage>): unknown[] =>
  inbox.all.flatMap((m) =>
    m.type === 'refused'
      ? []
      : (m.change.events ?? []).map((e) => e.detail.note).filter((n) => n !== undefined),
  );
const wake = (at = site) =>
  db.owner.query(
    `select pg_notify('changed', json_build_object('sites', json_build_array($1::int4))::text)`,
    [at.id],
  );

describe('who may listen', () => {
  it('nobody without a session, and no page of another origin', async () => {
    const ws = new WebSocket(`${sockets.url}${paths.live()}`);
    const status = await new Promise((resolve) => {
      ws.once('unexpected-response', (_req, res) => resolve(res.statusCode));
      ws.once('open', () => resolve('in'));
    });
    expect(status).toBe(401);
    await expect(browse(ANALYST, { origin: 'https://elsewhere.example' })).rejects.toThrow('HTTP 403');
  });

  it('each topic as far as role, organisation and site go', async () => {
    const string = site.strings.get(first().name)?.ref;
    const nothing = '00000000-0000-4000-8000-000000000000';
    const cases: [string, string, boolean][] = [
      [ANALYST, 'fleet', true],
      [ANALYST, `site:${site.ref}`, true],
      [ANALYST, `string:${string}`, true],
      [ANALYST, `roll-call:${site.ref}`, true],
      [ANALYST, `site:${foreign.ref}`, false],
      [ANALYST, `site:${nothing}`, false],
      [STRANGER, `site:${site.ref}`, false],
      [STRANGER, `string:${string}`, false],
      [STRANGER, `roll-call:${site.ref}`, false],
      [CUSTOMER, 'fleet', false],
      [CUSTOMER, `site:${fleet.site('Weirside Clinic').ref}`, false],
      [CUSTOMER, `string:${string}`, false],
      [CUSTOMER, `roll-call:${site.ref}`, false],
    ];
    for (const [email, topic, allowed] of cases) {
      const inbox = await browse(email);
      subscribe(inbox, topic);
      const answer = await inbox.next(allowed ? 'snapshot' : 'refused', (m) => m.topic === topic);
      expect(answer.type, `${email} ${topic}`).toBe(allowed ? 'snapshot' : 'refused');
      inbox.ws.terminate();
    }
  });

  it('a foreign site and one that is not there look the same', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, `site:${foreign.ref}`);
    const there = await inbox.next('refused');
    subscribe(inbox, 'site:00000000-0000-4000-8000-000000000000');
    expect((await inbox.next('refused')).reason).toBe(there.reason);
  });

  it('the fleet of one organisation has nothing of another', async () => {
    const inbox = await browse(STRANGER);
    subscribe(inbox, 'fleet');
    const { change } = await inbox.next('snapshot');
    expect(change.sites?.map((s) => s.name)).toEqual(['Netloft Terrace']);
    await say(1);
    await addEvent(db.owner, site.id, 'not for them');
    await wake();
    await new Promise((resolve) => setTimeout(resolve, 1200));
    expect(JSON.stringify(inbox.all)).not.toContain(site.ref);
  });

  it('nobody whose session has ended in the meantime', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, 'fleet');
    await inbox.next('snapshot');
    const end = closed(inbox.ws);
    const { rows } = await db.owner.query<{ id: string }>('delete from session returning id');
    expect(rows.length).toBeGreaterThan(0);
    await liveHub()?.checkSessions();
    expect((await end).code).toBe(4003);
    await endSession(null);
  });
});

describe('what they hear', () => {
  it('is what the schema says, to begin with and after', async () => {
    const inbox = await browse(ANALYST);
    for (const topic of ['fleet', `site:${site.ref}`, `roll-call:${site.ref}`]) subscribe(inbox, topic);
    for (let i = 0; i < 3; i++) await inbox.next('snapshot');
    await say(1);
    await inbox.next('delta', (m) => m.topic.startsWith('site:') && m.change.strings !== undefined);
    for (const m of inbox.all) expect(liveMessage.safeParse(m).error).toBeUndefined();
    const page = inbox.all.find((m) => m.topic.startsWith('site:'));
    if (page?.type !== 'snapshot') throw new Error('the site came without a snapshot');
    expect(page.change.strings).toHaveLength(site.plan.strings.length);
    expect(Object.keys(page.change).sort()).toEqual([
      'causes',
      'events',
      'gateways',
      'inverters',
      'site',
      'strings',
    ]);
  });

  it('of a fleet the causes of those sites where they changed, and nothing twice', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, 'fleet');
    const { change } = await inbox.next('snapshot');
    const clinic = fleet.site('Weirside Clinic');
    const [string] = [...clinic.strings.values()];
    const before = (change.causes ?? []).filter((c) => c.siteId === clinic.ref);
    const judge = (state: string, verdict: string) =>
      db.owner.query(
        `insert into string_judgement as j (string_id, site_id, judged_at, state, verdict, since, stuck)
         select $1, $2, now(), array[$3::int2], array[$4::int2], array[extract(epoch from now())::int4], $5
         on conflict (string_id) do update set state[1] = $3::int2, verdict[1] = $4::int2, stuck = excluded.stuck`,
        [
          string?.id,
          clinic.id,
          UNIT_STATES.indexOf(state as 'passing'),
          VERDICTS.indexOf(verdict as 'ok'),
          verdict === 'stuck' ? 1 : 0,
        ],
      );
    await judge('shutdown', 'stuck');
    await wake(clinic);
    const told = await inbox.next('delta', (m) => m.change.causesAt !== undefined);
    expect(told.change.causes).toBeUndefined();
    expect(told.change.causesAt?.map((at) => at.site)).toEqual([clinic.ref]);
    expect(told.change.causesAt?.[0]?.causes.map((c) => c.verdict)).toContain('stuck');
    await wake(clinic); // nothing is new
    await judge('passing', 'ok');
    await wake(clinic);
    const over = await inbox.next('delta', (m) => m.change.causesAt !== undefined);
    expect(over.change.causesAt).toEqual([{ site: clinic.ref, causes: before }]);
  });

  it("a unit's change, soon after its frame", async () => {
    const string = site.strings.get(first().name)?.ref;
    await say(1, nowS() - 20);
    const inbox = await browse(ANALYST);
    subscribe(inbox, `string:${string}`);
    const { change } = await inbox.next('snapshot');
    expect(change.strings?.[0]?.slots[3]?.state).toBe('passing');
    const claims = first().serials.map((_, i) => (i === 3 ? 2 : 1));
    await say(claims);
    const delta = await inbox.next('delta', (m) => m.change.strings?.[0]?.slots[3]?.state === 'shutdown');
    expect(delta.change.strings?.[0]?.slots[2]?.state).toBe('passing');
  });

  it('units heard by the roll call, on the as-built and not', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, `roll-call:${site.ref}`);
    await inbox.next('snapshot');
    const serial = logger.roster.strings[2]?.serials[4];
    const at = nowS();
    await logger.durable({
      type: 'heard',
      rows: [
        { at, serial, gateway: 1, signal: -88, voltage: 3800, current: 0 },
        { at, serial: 'STRANGER-0077', gateway: 1, signal: -99, voltage: null, current: null },
      ],
    });
    const items = await until(async () => {
      const heard = inbox.all.flatMap((m) => (m.type === 'delta' ? (m.change.heard ?? []) : []));
      return heard.length >= 2 && heard;
    }, 'both are told');
    expect(items.find((h) => h.serial === serial)).toMatchObject({ position: 5, signal: -88 });
    expect(items.find((h) => h.serial === 'STRANGER-0077')).toMatchObject({ stringId: null, position: null });
  });

  it('that a roll call was stopped', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, `roll-call:${site.ref}`);
    await inbox.next('snapshot');
    await db.owner.query(
      `insert into event (at, organisation_id, site_id, kind) select now(), organisation_id, id, 'roll_call_stopped' from site where id = $1`,
      [site.id],
    );
    await db.owner.query(`select pg_notify('roll_call', $1::text)`, [String(site.id)]);
    const { change } = await inbox.next('delta', (m) => m.change.rollCallStopped !== undefined);
    expect(change.rollCallStopped).toBe(true);
  });

  it('a message that is none is answered, and the connection stays', async () => {
    const inbox = await browse(ANALYST);
    inbox.ws.send('{"type":"subscribe","topic":"everything"}');
    expect((await inbox.next('refused')).topic).toBe('everything');
    inbox.ws.send('not json');
    await inbox.next('refused');
    for (const topic of ['{"toString":1}', '["fleet"]', `"site:${'-'.repeat(36)}"`]) {
      inbox.ws.send(`{"type":"subscribe","topic":${topic}}`);
      await inbox.next('refused');
    }
    subscribe(inbox, 'fleet');
    await inbox.next('snapshot');
  });
});

describe('the cursor', () => {
  it('misses nothing where writers commit out of order', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, `site:${site.ref}`);
    await inbox.next('snapshot');
    const slow = new pg.Client(db.url);
    await slow.connect();
    await slow.query('begin');
    await addEvent(slow, site.id, 'began first, ended last');
    await addEvent(db.owner, site.id, 'began last, ended first');
    await wake();
    await new Promise((resolve) => setTimeout(resolve, 600));
    // the later one waits for the earlier one: the cursor does not pass over it
    expect(notesIn(inbox)).not.toContain('began last, ended first');
    await slow.query('commit');
    await slow.end();
    await wake();
    await until(async () => notesIn(inbox).length >= 2, 'both are told');
    const notes = notesIn(inbox).filter((n) => String(n).startsWith('began'));
    expect(notes).toEqual(['began first, ended last', 'began last, ended first']);
  });

  it('goes on while a transaction of another database of the cluster runs', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, `site:${site.ref}`);
    await inbox.next('snapshot');
    const elsewhere = await transactionElsewhere(db);
    try {
      await addEvent(db.owner, site.id, 'nobody here is writing');
      await wake();
      await until(async () => notesIn(inbox).includes('nobody here is writing'), 'it is told');
    } finally {
      await elsewhere.end();
    }
  });

  it('of an earlier connection brings what happened in between, once', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, `site:${site.ref}`);
    const { cursor } = await inbox.next('snapshot');
    inbox.ws.terminate();
    for (let i = 0; i < 5; i++) await addEvent(db.owner, site.id, `while away ${i}`);
    const again = await browse(ANALYST);
    subscribe(again, `site:${site.ref}`, cursor);
    const { change } = await again.next('delta');
    expect(change.strings).toHaveLength(site.plan.strings.length);
    await wake();
    await addEvent(db.owner, site.id, 'while away 5');
    await wake();
    await until(async () => notesIn(again).includes('while away 5'), 'the next one is told');
    expect(notesIn(again).filter((n) => String(n).startsWith('while away'))).toEqual(
      [0, 1, 2, 3, 4, 5].map((i) => `while away ${i}`),
    );
  });

  it('says that some were left out where more came than are sent; a roll call gets every answer then', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, `site:${site.ref}`);
    subscribe(inbox, `roll-call:${site.ref}`);
    const { cursor } = await inbox.next('snapshot', (m) => m.topic.startsWith('roll-call'));
    await db.owner.query(
      `insert into event (at, organisation_id, site_id, kind, detail)
       select now(), organisation_id, id, 'command', jsonb_build_object('flood', n)
       from site, generate_series(1, 2001) n where id = $1`,
      [site.id],
    );
    await wake();
    const { rows } = await db.owner.query<{ n: number }>(
      'select count(*)::int as n from heard where site_id = $1',
      [site.id],
    );
    const some = await inbox.next('delta', (m) => m.topic.startsWith('site') && m.change.leftOut === true);
    expect(some.change.events).toHaveLength(2000);
    const roll = await inbox.next('delta', (m) => m.topic.startsWith('roll') && m.change.leftOut === true);
    expect(roll.change.heard).toHaveLength(rows[0]!.n);
    const again = await browse(ANALYST);
    for (const topic of ['site', 'roll-call']) subscribe(again, `${topic}:${site.ref}`, cursor);
    const back = await again.next('delta', (m) => m.topic.startsWith('site'));
    expect([back.change.events?.length, back.change.leftOut]).toEqual([500, true]);
    const heard = await again.next('delta', (m) => m.topic.startsWith('roll'));
    expect([heard.change.heard?.length, heard.change.leftOut]).toEqual([rows[0]!.n, true]);
    // and what comes after it is told as ever
    await addEvent(db.owner, site.id, 'after the flood');
    await wake();
    await until(async () => notesIn(again).includes('after the flood'), 'the next one is told');
  });

  it('goes on by itself when the connection that listens for notices is lost', async () => {
    const inbox = await browse(ANALYST);
    subscribe(inbox, `site:${site.ref}`);
    await inbox.next('snapshot');
    await db.owner.query(
      `select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and query ilike 'listen%'`,
    );
    await addEvent(db.owner, site.id, 'while nobody listened');
    await until(async () => notesIn(inbox).includes('while nobody listened'), 'it heals', 10_000);
  });
});
