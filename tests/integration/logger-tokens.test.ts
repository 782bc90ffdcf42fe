import { afterAll, beforeAll, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import type { SeededSite } from '../../seeds/plant/seeded';
import type { Actor } from '../../src/domain/access/permissions';
import { GET as loggersRoute } from '../../src/pages/api/sites/[site]/loggers/index';
import { POST as tokenRoute } from '../../src/pages/api/sites/[site]/loggers/[logger]/tokens/index';
import { POST as endRoute } from '../../src/pages/api/sites/[site]/loggers/[logger]/tokens/[token]/end';
import type { LoggersPage, NewTokenReply } from '../../src/schemas/api/loggers';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { strangerIn } from '../support/as-built';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { SECRET, testFleet } from '../support/fleet';
import { openSockets, TestLogger, until, type Sockets } from '../support/ingest';
import { HttpsLogger } from '../support/ingest-https';

let db: TestDatabase;
let site: SeededSite;
let sockets: Sockets;
let serial: string;
let actor: Actor;
let loggerRef: string;

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Old Tannery Market Hall']);
  site = fleet.site('Old Tannery Market Hall');
  serial = [...site.loggers.keys()][0] ?? '';
  actor = await fleet.actor('technician@lowfield.example');
  await db.owner.query(`update site set stage = 'operating' where ref = $1`, [site.ref]);
  await startIngest();
  sockets = await openSockets();
  loggerRef = (await look()).id;
});
afterAll(async () => {
  await stopIngest();
  await sockets.close();
  await db.drop();
});

async function look() {
  const response = await ask(loggersRoute, { actor, params: { site: site.ref } });
  const page = (await response.json()) as LoggersPage;
  const found = page.loggers.find((l) => l.serial === serial);
  if (!found) throw new Error('the logger is not on the page');
  return found;
}
const rotate = (body: object, who = actor) =>
  ask(tokenRoute, { actor: who, method: 'POST', params: { site: site.ref, logger: loggerRef }, body });
const end = (token: string, body: object = { reason: 'the logger was stolen' }) =>
  ask(endRoute, { actor, method: 'POST', params: { site: site.ref, logger: loggerRef, token }, body });

it('a token is made beside the old one, which goes on for the time that was said', async () => {
  const old = await TestLogger.arrive(sockets, loggerToken(SECRET, serial), serial);
  const response = await rotate({ name: 'second logger cabinet', overlapHours: 24, reason: 'yearly change' });
  expect(response.status).toBe(200);
  const made = (await response.json()) as NewTokenReply;
  expect(made.token).toMatch(/^wl_[\w-]{43}$/);
  expect(made.ending).toBe(1);
  const inHours = (new Date(made.endsAt).getTime() - Date.now()) / 3_600_000;
  expect(inHours).toBeGreaterThan(23.9);
  expect(inHours).toBeLessThanOrEqual(24);

  const { tokens } = await look();
  expect(tokens.map((t) => [t.name, t.state])).toEqual([
    ['second logger cabinet', 'in_force'],
    ['', 'ending'],
  ]);
  expect(tokens[1]?.lastUsedAt).not.toBeNull();
  expect(tokens[0]?.lastUsedAt).toBeNull();
  // both let the logger in
  await expect(new HttpsLogger(loggerToken(SECRET, serial)).roster()).resolves.toMatchObject({ status: 200 });
  await expect(new HttpsLogger(made.token, '192.0.2.44').roster()).resolves.toMatchObject({ status: 200 });
  expect((await look()).tokens[0]).toMatchObject({ lastAddress: '192.0.2.44' });
  expect(old.ws.readyState).toBe(old.ws.OPEN);

  // only the hash is kept
  const { rows } = await db.owner.query<{ n: number }>(
    `select count(*)::int as n from ingest_token where hash = sha256($1::bytea)`,
    [Buffer.from(made.token)],
  );
  expect(rows[0]?.n).toBe(1);
  const audit = await db.owner.query<{ entry: string }>(
    `select to_json(a)::text as entry from audit_entry a where action = 'as_built.token_made'`,
  );
  expect(audit.rows).toHaveLength(1);
  expect(audit.rows[0]?.entry).toContain('yearly change');
  expect(audit.rows[0]?.entry).not.toContain(made.token);

  // the overlap over: its connection is closed at the next look, and it lets nobody in
  await db.owner.query(
    `with over as (update ingest_token set ended_at = now() where ended_at > now() returning logger_id)
     select pg_notify('tokens', logger_id::text) from over`,
  );
  expect((await old.closed).code).toBe(4401);
  await expect(TestLogger.connect(sockets, loggerToken(SECRET, serial))).rejects.toThrow('HTTP 401');
});

it('a token is ended now: its connection is closed at once, and what comes with it is counted', async () => {
  const made = (await (
    await rotate({ overlapHours: 0, reason: 'the logger was changed' })
  ).json()) as NewTokenReply;
  const connected = await TestLogger.arrive(sockets, made.token, serial);
  const { tokens, refused } = await look();
  const inForce = tokens.filter((t) => t.state === 'in_force');
  expect(inForce).toHaveLength(1);
  const id = inForce[0]?.id ?? '';

  expect((await end(id, {})).status).toBe(422); // an operating site wants to know why
  const started = Date.now();
  expect((await end(id)).status).toBe(204);
  expect(await connected.closed).toMatchObject({
    code: 4401,
    reason: 'this token was ended; give the logger a new one',
  });
  expect(Date.now() - started).toBeLessThan(8000); // by the notice, not by the look every ten seconds
  expect((await end(id)).status).toBe(409);

  await expect(TestLogger.connect(sockets, made.token)).rejects.toThrow('HTTP 401');
  expect(await new HttpsLogger(made.token).post([{}])).toMatchObject({ status: 401 });
  const after = await until(async () => {
    const logger = await look();
    return logger.refused >= refused + 2 && logger;
  }, 'refusals are counted');
  expect(after.refusals).toContainEqual(
    expect.objectContaining({ field: 'token', reason: 'it was ended; give the logger a new one' }),
  );
  expect(after.tokens.every((t) => t.state === 'ended')).toBe(true);
});

it('attempts with tokens that nobody knows are seen where the logger last spoke from', async () => {
  const made = (await (await rotate({ overlapHours: 0, reason: 'a new cabinet' })).json()) as NewTokenReply;
  await new HttpsLogger(made.token, '192.0.2.51').roster();
  for (const guess of ['guess-one', 'guess-two'])
    expect(await new HttpsLogger(guess, '192.0.2.51').roster()).toMatchObject({ status: 401 });
  await new HttpsLogger('guess-elsewhere', '198.51.100.1').roster();
  const seen = await until(async () => (await look()).wrongTokens, 'wrong tokens are counted');
  expect(seen.count).toBe(2);
});

it('is nobody else’s business, and says what is wrong at its field', async () => {
  const stranger = await strangerIn(db);
  expect((await rotate({ overlapHours: 0 }, stranger)).status).toBe(404);
  const response = await rotate({ overlapHours: 9999 });
  expect(response.status).toBe(422);
  expect(((await response.json()) as { fields: { field: string }[] }).fields[0]?.field).toBe(
    'body.overlapHours',
  );
});
