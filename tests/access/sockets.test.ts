import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { WebSocket } from 'ws';
import { ROLES, mayUse, type Permission, type Role } from '../../src/domain/access/permissions';
import { CLOSE_SIGNED_OUT, type LiveMessage } from '../../src/schemas/live';
import { newToken, tokenHash } from '../../src/server/auth/secret-link';
import { loggerToken } from '../../simulator/scenarios/tokens';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, SECRET, testFleet, type TestFleet } from '../support/fleet';
import { signInAt, startSite, type RunningSite } from '../support/server';

/** Who may hear which topic of /live, and which token may speak at /ingest/v1. */
const GIVEN = 'Weirside Clinic';
const NOT_GIVEN = 'Kestrel Row School';
const FOREIGN = 'Netloft Terrace';
const ABSENT = '00000000-0000-4000-8000-000000000000';
const TOPICS: readonly { kind: string; permission: Permission; of: 'nothing' | 'site' | 'string' }[] = [
  { kind: 'fleet', permission: 'fleet.read', of: 'nothing' },
  { kind: 'notices', permission: 'notice.read', of: 'nothing' },
  { kind: 'site', permission: 'site.read', of: 'site' },
  { kind: 'string', permission: 'string.read', of: 'string' },
  { kind: 'roll-call', permission: 'roll_call.read', of: 'site' },
];

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
const cookies = new Map<Role, string>();
/** A manager who is deactivated while a page of theirs is open. */
const LEAVING = 'leaving@lowfield.example';
let shared = '';

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [GIVEN, NOT_GIVEN, FOREIGN]);
  site = await startSite(db);
  for (const role of ROLES) cookies.set(role, await signInAt(site.url, `${role}@lowfield.example`, PASSWORD));
  await db.owner.query(
    `insert into person (organisation_id, email, name, role, password_hash)
     select organisation_id, $2, 'Sunniva Quill', role, password_hash from person where email = $1`,
    ['manager@lowfield.example', LEAVING],
  );
  shared = newToken();
  await db.owner.query(
    `insert into share_link (site_id, label, token_hash, created_by) select $1, 'Lobby', $2, id from person where email = $3`,
    [fleet.site(GIVEN).id, tokenHash(shared), 'manager@lowfield.example'],
  );
});
afterAll(async () => {
  await site.stop();
  await db.drop();
});

interface Opened {
  status: number;
  socket: WebSocket | null;
}
/** Asks for an upgrade; gives the status of the answer, and the socket where it stands. */
function open(path: string, headers: Record<string, string>): Promise<Opened> {
  return new Promise((resolve, reject) => {
    const socket = new WebSocket(site.url.replace('http', 'ws') + path, { headers });
    socket.once('open', () => resolve({ status: 101, socket }));
    socket.once('unexpected-response', (request, response) => {
      request.destroy();
      resolve({ status: response.statusCode ?? 0, socket: null });
    });
    socket.on('error', reject);
  });
}
function next<T>(socket: WebSocket): Promise<T> {
  return new Promise((resolve, reject) => {
    socket.once('message', (data) => resolve(JSON.parse((data as Buffer).toString()) as T));
    socket.once('close', (code, reason) => reject(new Error(`closed with ${code}: ${reason.toString()}`)));
  });
}
async function stands(opened: Opened): Promise<WebSocket> {
  if (!opened.socket) throw new Error(`The upgrade was answered with ${opened.status}.`);
  return opened.socket;
}
const nameOf = (kind: string, of: string, where: string): string => {
  if (of === 'nothing') return kind;
  if (where === 'nowhere') return `${kind}:${ABSENT}`;
  const { ref, strings } = fleet.site(where);
  return `${kind}:${of === 'site' ? ref : ([...strings.values()][0]?.ref ?? '')}`;
};

describe('/live', () => {
  const cells = ROLES.flatMap((role) =>
    TOPICS.flatMap((topic) =>
      (topic.of === 'nothing' ? ['nowhere'] : [GIVEN, NOT_GIVEN, FOREIGN, 'nowhere']).map(
        (where) => [role, topic.kind, where, topic] as const,
      ),
    ),
  );
  it.each(cells)('%s, %s, %s', async (role, kind, where, topic) => {
    const socket = await stands(await open('/live', { cookie: cookies.get(role) ?? '', origin: site.url }));
    try {
      const answer = next<LiveMessage>(socket);
      const name = nameOf(kind, topic.of, where);
      socket.send(JSON.stringify({ type: 'subscribe', topic: name }));
      const message = await answer;
      expect(message.topic).toBe(name);
      const seen = topic.of === 'nothing' || where === GIVEN || (where === NOT_GIVEN && role !== 'customer');
      expect(message.type).toBe(mayUse(role, topic.permission) && seen ? 'snapshot' : 'refused');
      expect(JSON.stringify(message)).not.toContain(FOREIGN);
    } finally {
      socket.terminate();
    }
  });

  it('refuses another organisation’s site in the words for none', async () => {
    const socket = await stands(
      await open('/live', { cookie: cookies.get('manager') ?? '', origin: site.url }),
    );
    try {
      const reasons: string[] = [];
      for (const where of [FOREIGN, 'nowhere']) {
        const answer = next<LiveMessage>(socket);
        socket.send(JSON.stringify({ type: 'subscribe', topic: nameOf('site', 'site', where) }));
        const message = await answer;
        if (message.type === 'refused') reasons.push(message.reason);
      }
      expect(reasons).toHaveLength(2);
      expect(reasons[0]).toBe(reasons[1]);
    } finally {
      socket.terminate();
    }
  });

  it.each([
    ['nobody', {}, 401],
    ['a cookie of nobody', { cookie: 'wakeline_session=abcdefabcdefabcdefabcdefabcdefabcdefabcd' }, 401],
    ['a logger’s token', { authorization: 'Bearer TOKEN' }, 401],
    ['a link that shares a site, as a session', { cookie: 'wakeline_session=LINK; wakeline_kept=LINK' }, 401],
    ['a link that shares a site, as a token', { authorization: 'Bearer LINK' }, 401],
  ])('opens for no one: %s', async (_who, headers, status) => {
    const token = loggerToken(SECRET, fleet.site(GIVEN).plan.loggers[0]?.serial ?? '');
    const sent = Object.fromEntries(
      Object.entries(headers).map(([k, v]) => [k, v.replace('TOKEN', token).replaceAll('LINK', shared)]),
    );
    expect((await open('/live', { origin: site.url, ...sent })).status).toBe(status);
  });

  it('ends for whoever is deactivated, and opens no more', async () => {
    const cookie = await signInAt(site.url, LEAVING, PASSWORD);
    const socket = await stands(await open('/live', { cookie, origin: site.url }));
    const closed = new Promise<number>((resolve) => socket.once('close', (code) => resolve(code)));
    // the row of the session stays: it is the person that no longer counts
    await db.owner.query('update person set active = false where email = $1', [LEAVING]);
    expect((await open('/live', { cookie, origin: site.url })).status).toBe(401);
    expect(await closed).toBe(CLOSE_SIGNED_OUT);
  });

  it('opens for no page of another site, whoever is signed in', async () => {
    const answer = await open('/live', {
      cookie: cookies.get('manager') ?? '',
      origin: 'https://elsewhere.example',
    });
    expect(answer.status).toBe(403);
  });
});

describe('/ingest/v1', () => {
  const serialOf = (name: string) => fleet.site(name).plan.loggers[0]?.serial ?? '';
  const hello = (logger: string) =>
    JSON.stringify({
      type: 'hello',
      protocol: 1,
      logger,
      firmware: 'test',
      clock: Math.floor(Date.now() / 1000),
    });

  it.each([
    ['without a token', undefined],
    ['with a token that nobody knows', 'Bearer aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa'],
    ['with a token of another installation', `Bearer ${loggerToken('another secret', 'LG-000000')}`],
    ['with something that is no token', 'Basic bWFuYWdlcjpwYXNzd29yZA=='],
  ])('stays shut %s', async (_how, authorization) => {
    expect((await open('/ingest/v1', authorization ? { authorization } : {})).status).toBe(401);
  });

  it('stays shut for somebody who is signed in', async () => {
    expect(
      (await open('/ingest/v1', { cookie: cookies.get('manager') ?? '', origin: site.url })).status,
    ).toBe(401);
  });

  it('gives a logger the roster of its own strings and of no other’s', async () => {
    const socket = await stands(
      await open('/ingest/v1', { authorization: `Bearer ${loggerToken(SECRET, serialOf(GIVEN))}` }),
    );
    try {
      const answer = next<{ type: string; strings: { name: string }[] }>(socket);
      socket.send(hello(serialOf(GIVEN)));
      const roster = await answer;
      expect(roster.type).toBe('roster');
      expect(roster.strings.map((s) => s.name).sort()).toEqual(
        fleet
          .site(GIVEN)
          .plan.strings.map((s) => s.name)
          .sort(),
      );
    } finally {
      socket.terminate();
    }
  });

  it('lets no token speak for another logger', async () => {
    for (const other of [NOT_GIVEN, FOREIGN]) {
      const socket = await stands(
        await open('/ingest/v1', { authorization: `Bearer ${loggerToken(SECRET, serialOf(GIVEN))}` }),
      );
      try {
        const closed = new Promise<string>((resolve) =>
          socket.once('close', (code) => resolve(`closed ${code}`)),
        );
        const first = next<{ type: string }>(socket).then(
          (m) => m.type,
          (e: unknown) => String(e),
        );
        socket.send(hello(serialOf(other)));
        expect(await Promise.race([first, closed])).not.toBe('roster');
      } finally {
        socket.terminate();
      }
    }
  });

  it('stays shut for a token that was ended', async () => {
    await db.owner.query(`update ingest_token set ended_at = now() where logger_id = $1`, [
      [...fleet.site(NOT_GIVEN).loggers.values()][0],
    ]);
    const authorization = `Bearer ${loggerToken(SECRET, serialOf(NOT_GIVEN))}`;
    expect((await open('/ingest/v1', { authorization })).status).toBe(401);
  });
});
