import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { hashPassword } from '../../src/server/auth/password';
import { actorOfCookie, endSession, signedInBy } from '../../src/server/auth/sessions';
import { signIn } from '../../src/server/services/sign-in';
import { testDatabase, type TestDatabase } from '../support/database';
import { failure } from '../support/refusal';

const PASSWORD = 'a long enough sentence';
let db: TestDatabase;

beforeAll(async () => {
  db = await testDatabase();
  const hash = await hashPassword(PASSWORD);
  await db.owner.query(`insert into organisation (name) values ('Lowfield Solar Works')`);
  await db.owner.query(
    `insert into person (organisation_id, email, name, role, password_hash, active) values
     (1, 'Analyst@lowfield.example', 'Odile Nkemelu', 'analyst', $1, true),
     (1, 'customer@lowfield.example', 'Ruth Abara', 'customer', $1, true),
     (1, 'gone@lowfield.example', 'Gone Person', 'analyst', $1, false)`,
    [hash],
  );
  await db.owner.query(
    `insert into site (organisation_id, name, latitude, longitude, time_zone) values (1, 'Kestrel Row School', 51, 0, 'Europe/London')`,
  );
  await db.owner.query(
    `insert into site_access select p.id, s.id from person p, site s where p.role = 'customer'`,
  );
});
afterAll(() => db.drop());

const attempt = (email: string, password = PASSWORD, address = '127.0.0.1', keep = false) =>
  signIn({ email, password, keep, address, agent: null }, new Date());
const cookieOf = (setCookie: string) => setCookie.split(';')[0] ?? '';

describe('signing in', () => {
  it('opens a session for the right password, whatever the case of the address', async () => {
    const { cookie, role } = await attempt('analyst@LOWFIELD.example');
    expect(role).toBe('analyst');
    expect(cookie).toMatch(/HttpOnly/i);
    expect(cookie).toMatch(/SameSite=Lax/i);
    const found = await signedInBy(cookieOf(cookie));
    expect(found).toMatchObject({
      actor: { role: 'analyst', sites: 'all' },
      viewer: { name: 'Odile Nkemelu', initials: 'ON', organisationName: 'Lowfield Solar Works' },
    });
  });

  it('keeps no session id that could be used from the table', async () => {
    const { cookie } = await attempt('analyst@lowfield.example');
    const id = cookieOf(cookie).split('=')[1];
    const { rows } = await db.owner.query('select id from session');
    expect(rows.length).toBeGreaterThan(0);
    expect(rows.map((r) => r.id)).not.toContain(id);
    const stolen = await signedInBy(`wakeline_session=${String(rows[0]?.id)}`);
    expect(stolen).not.toHaveProperty('actor');
  });

  it('reads nothing but its own cookies of what a browser sends', async () => {
    const { cookie } = await attempt('analyst@lowfield.example');
    for (const other of ['other=%ff', 'other=%', 'a;b;;=c', 'wakeline_kept=%ff', 'wakeline_kept=\u0000'])
      expect(await signedInBy(`${other}; ${cookieOf(cookie)}`)).toHaveProperty('actor');
  });

  it('"keep me signed in" gives a cookie that outlives the browser; without it none does', async () => {
    expect((await attempt('analyst@lowfield.example', PASSWORD, '127.0.0.1', true)).cookie).toMatch(
      /Max-Age=\d{7}/,
    );
    expect((await attempt('analyst@lowfield.example')).cookie).toMatch(/wakeline_session=/);
  });

  it('gives a customer the sites that were given', async () => {
    const { cookie } = await attempt('customer@lowfield.example');
    const found = await actorOfCookie(cookieOf(cookie));
    expect(found?.actor).toMatchObject({ role: 'customer', sites: [1] });
  });

  it('answers the same to a wrong password, an unknown address and a deactivated person', async () => {
    const wrong = await failure(attempt('analyst@lowfield.example', 'wrong'));
    const unknown = await failure(attempt('nobody@lowfield.example'));
    const gone = await failure(attempt('gone@lowfield.example'));
    for (const e of [wrong, unknown, gone]) {
      expect(e.kind).toBe('unauthenticated');
      expect(e.message).toBe(wrong.message);
    }
  });

  it('ends: the cookie is worth nothing afterwards', async () => {
    const cookie = cookieOf((await attempt('analyst@lowfield.example')).cookie);
    const found = await actorOfCookie(cookie);
    await endSession(found?.sessionId ?? null);
    expect(await actorOfCookie(cookie)).toBeNull();
  });

  it('ends at once for a person who is deactivated', async () => {
    const cookie = cookieOf((await attempt('analyst@lowfield.example')).cookie);
    await db.owner.query(`update person set active = false where name = 'Odile Nkemelu'`);
    expect(await actorOfCookie(cookie)).toBeNull();
    await db.owner.query(`update person set active = true where name = 'Odile Nkemelu'`);
  });

  it('makes an account wait after ten wrong passwords, an unknown one alike, and says how long', async () => {
    for (const email of ['customer@lowfield.example', 'nobody-at-all@lowfield.example']) {
      for (let i = 0; i < 10; i++) await failure(attempt(email, 'wrong', '10.0.0.1'));
      const blocked = await failure(attempt(email, PASSWORD, '10.0.0.1'));
      expect(blocked.kind).toBe('too_many');
      expect(blocked.message).toMatch(/Wait \d+ (minutes|seconds)/);
      expect(blocked.detail.retryAfterS).toBeGreaterThan(0);
    }
  });

  it('makes an address wait after fifty tries, over any accounts', async () => {
    for (let i = 0; i < 50; i++) await failure(attempt(`nobody${i}@lowfield.example`, 'wrong', '10.0.0.2'));
    expect((await failure(attempt('analyst@lowfield.example', PASSWORD, '10.0.0.2'))).kind).toBe('too_many');
    await attempt('analyst@lowfield.example', PASSWORD, '10.0.0.3');
  });
});
