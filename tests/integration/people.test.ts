import { Secret, TOTP } from 'otpauth';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { signedInBy } from '../../src/server/auth/sessions';
import { asActor } from '../../src/server/db/transaction';
import {
  beginSecondFactor,
  changePassword,
  confirmSecondFactor,
  type Caller,
} from '../../src/server/services/my-account';
import {
  askForPassword,
  openInvitation,
  setPasswordByLink,
  useInvitation,
} from '../../src/server/services/account-letters';
import { changePerson, invite, peoplePage, withdrawInvitation } from '../../src/server/services/people';
import { signIn } from '../../src/server/services/sign-in';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';

const CLINIC = 'Weirside Clinic';
const HERE = { address: '192.0.2.7', agent: 'Mozilla/5.0 (X11; Linux x86_64) Firefox/140.0' };
const NEW_PASSWORD = 'ladder-weather-inverter';
let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;
let technician: Actor;
let stranger: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, 'Netloft Terrace']);
  manager = await fleet.actor('manager@lowfield.example');
  technician = await fleet.actor('technician@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
});
afterAll(() => db.drop());

const at = (minutes = 0) => new Date(Date.now() + minutes * 60_000);
const sendInvitation = (actor: Actor, change: Partial<Parameters<typeof invite>[2]> = {}) =>
  asActor(actor, (tx) =>
    invite(
      tx,
      actor,
      { name: 'Vera Lund', email: 'vera@lowfield.example', role: 'analyst', sites: [], ...change },
      at(),
      HERE.address,
    ),
  );
/** The newest letter's link: what its reader would follow. */
async function tokenOf(to: string): Promise<string> {
  const { rows } = await db.owner.query<{ text_body: string }>(
    'select text_body from message where to_address = $1 order by id desc limit 1',
    [to],
  );
  return /\/(?:invitation|new-password|confirm-email)\/([\w-]+)/.exec(rows[0]?.text_body ?? '')?.[1] ?? '';
}
const enter = (email: string, password: string, code?: string, when = at()) =>
  signIn({ email, password, keep: false, code, ...HERE }, when);
const cookieOf = (setCookie: string) => setCookie.split(';')[0] ?? '';
const personRef = async (email: string) =>
  (await db.owner.query<{ ref: string }>('select ref from person where email = $1', [email])).rows[0]?.ref ??
  '';

describe('an invitation', () => {
  it('comes by letter, is used once, and makes the account with the role it names', async () => {
    await sendInvitation(manager);
    const token = await tokenOf('vera@lowfield.example');
    expect(token).toHaveLength(43);
    expect((await openInvitation(token, at(), HERE.address)).organisation).toBe('Lowfield Solar Works');
    const weak = await failure(useInvitation(token, { name: 'Vera Lund', password: 'short' }, HERE, at()));
    expect(weak.detail.fields?.[0]?.field).toBe('password');
    const { cookie, role } = await useInvitation(
      token,
      { name: 'Vera Lund', password: NEW_PASSWORD },
      HERE,
      at(),
    );
    expect(role).toBe('analyst');
    expect(await signedInBy(cookieOf(cookie))).toMatchObject({ viewer: { name: 'Vera Lund' } });
    const again = await failure(useInvitation(token, { name: 'Other', password: NEW_PASSWORD }, HERE, at()));
    expect(again.kind).toBe('not_found');
    await enter('vera@lowfield.example', NEW_PASSWORD);
  });

  it('keeps no secret in the database', async () => {
    await sendInvitation(manager, { email: 'plain@lowfield.example' });
    const token = await tokenOf('plain@lowfield.example');
    const { rows } = await db.owner.query(`select row_to_json(i)::text as row from invitation i`);
    expect(JSON.stringify(rows)).not.toContain(token);
  });

  it('ends when its week is over, when it is withdrawn, and when a newer one is sent', async () => {
    await sendInvitation(manager, { email: 'old@lowfield.example' });
    const first = await tokenOf('old@lowfield.example');
    expect((await failure(openInvitation(first, at(8 * 24 * 60), HERE.address))).kind).toBe('not_found');
    await sendInvitation(manager, { email: 'OLD@lowfield.example' });
    expect((await failure(openInvitation(first, at(), HERE.address))).kind).toBe('not_found');
    const second = await tokenOf('OLD@lowfield.example');
    const page = await asActor(manager, (tx) => peoplePage(tx, manager, at()));
    const open = page.invitations.find((i) => i.email === 'OLD@lowfield.example');
    await asActor(manager, (tx) => withdrawInvitation(tx, manager, open?.id ?? '', at(), null));
    expect((await failure(openInvitation(second, at(), HERE.address))).kind).toBe('not_found');
  });

  it('to somebody who has an account, or to a customer without sites, is refused at its field', async () => {
    const taken = await failure(sendInvitation(manager, { email: 'ANALYST@lowfield.example' }));
    expect(taken).toMatchObject({ kind: 'conflict', detail: { fields: [{ field: 'email' }] } });
    const none = await failure(sendInvitation(manager, { email: 'c@lowfield.example', role: 'customer' }));
    expect(none).toMatchObject({ kind: 'invalid', detail: { fields: [{ field: 'sites' }] } });
  });

  it('gives no site of another organisation', async () => {
    const refused = await failure(
      sendInvitation(stranger, {
        email: 'x@harbourline.example',
        role: 'customer',
        sites: [fleet.site(CLINIC).ref],
      }),
    );
    expect(refused.detail.fields?.[0]?.field).toBe('sites');
  });
});

describe('a person', () => {
  it('who is deactivated is signed out at once, and in no time can sign in', async () => {
    const { cookie } = await enter('analyst@lowfield.example', PASSWORD);
    const ref = await personRef('analyst@lowfield.example');
    const change = (active: boolean) =>
      asActor(manager, (tx) => changePerson(tx, manager, ref, { active }, at(), null));
    await change(false);
    expect('actor' in (await signedInBy(cookieOf(cookie)))).toBe(false);
    expect((await failure(enter('analyst@lowfield.example', PASSWORD))).kind).toBe('unauthenticated');
    await change(true);
    await enter('analyst@lowfield.example', PASSWORD);
  });

  it('can’t raise their own role, nor can the last manager go', async () => {
    const own = await personRef('manager@lowfield.example');
    const mine = (body: Parameters<typeof changePerson>[3]) =>
      asActor(manager, (tx) => changePerson(tx, manager, own, body, at(), null));
    expect((await failure(mine({ role: 'analyst' }))).kind).toBe('forbidden');
    expect((await failure(mine({ active: false }))).kind).toBe('forbidden');
    const other = await personRef('technician@lowfield.example');
    const by = (actor: Actor, ref: string, body: Parameters<typeof changePerson>[3]) =>
      asActor(actor, (tx) => changePerson(tx, actor, ref, body, at(), null));
    // called by somebody else, were that ever allowed: one manager stays
    expect((await failure(by(technician, own, { active: false }))).kind).toBe('conflict');
    await by(manager, other, { role: 'manager' });
    await by(manager, other, { role: 'technician' });
  });

  it('of another organisation is none', async () => {
    const ref = await personRef('technician@lowfield.example');
    const refused = await failure(
      asActor(stranger, (tx) => changePerson(tx, stranger, ref, { active: false }, at(), null)),
    );
    expect(refused.kind).toBe('not_found');
  });

  it('leaves a trace of every change, before and after', async () => {
    const { rows } = await db.owner.query(
      `select before, after from audit_entry where action = 'people.deactivated'`,
    );
    expect(rows).toEqual([
      {
        before: expect.objectContaining({ active: true }) as unknown,
        after: expect.objectContaining({ active: false }) as unknown,
      },
    ]);
  });
});

describe('a forgotten password', () => {
  it('is set anew by a letter, once; every session ends', async () => {
    const { cookie } = await enter('vera@lowfield.example', NEW_PASSWORD);
    await askForPassword('vera@lowfield.example', HERE.address, at());
    const token = await tokenOf('vera@lowfield.example');
    await setPasswordByLink(token, 'another-roof-another-day', HERE.address, at());
    expect('actor' in (await signedInBy(cookieOf(cookie)))).toBe(false);
    expect((await failure(enter('vera@lowfield.example', NEW_PASSWORD))).kind).toBe('unauthenticated');
    await enter('vera@lowfield.example', 'another-roof-another-day');
    expect((await failure(setPasswordByLink(token, NEW_PASSWORD, HERE.address, at()))).kind).toBe(
      'not_found',
    );
  });

  it('runs out after two hours', async () => {
    await askForPassword('vera@lowfield.example', HERE.address, at());
    const token = await tokenOf('vera@lowfield.example');
    expect((await failure(setPasswordByLink(token, NEW_PASSWORD, HERE.address, at(121)))).kind).toBe(
      'not_found',
    );
  });

  it('of nobody answers as for somebody, and writes no letter', async () => {
    await expect(askForPassword('nobody@lowfield.example', HERE.address, at())).resolves.toBeUndefined();
    const { rows } = await db.owner.query(
      `select 1 from message where to_address = 'nobody@lowfield.example'`,
    );
    expect(rows).toEqual([]);
  });

  it('asked for too often makes wait', async () => {
    for (let i = 0; i < 3; i++) await askForPassword('often@lowfield.example', '192.0.2.9', at());
    const refused = await failure(askForPassword('often@lowfield.example', '192.0.2.9', at()));
    expect(refused.kind).toBe('too_many');
    expect(refused.detail.retryAfterS).toBeGreaterThan(60);
  });
});

describe('one’s own account', () => {
  async function callerOf(email: string): Promise<{ caller: Caller; cookie: string }> {
    const { cookie } = await enter(email, PASSWORD);
    const found = await signedInBy(cookieOf(cookie));
    if (!('actor' in found)) throw new Error('nobody is signed in');
    return { caller: { ...found, address: HERE.address }, cookie };
  }

  it('changes its password with the current one, and signs other devices out', async () => {
    const other = await enter('technician@lowfield.example', PASSWORD);
    const { caller, cookie } = await callerOf('technician@lowfield.example');
    const change = (current: string, password: string) =>
      asActor(caller.actor, (tx) => changePassword(tx, caller, { current, password }));
    expect((await failure(change('wrong', NEW_PASSWORD))).detail.fields?.[0]?.field).toBe('current');
    expect((await failure(change(PASSWORD, 'passwordpassword'))).detail.fields?.[0]?.field).toBe('password');
    await change(PASSWORD, NEW_PASSWORD);
    expect('actor' in (await signedInBy(cookieOf(cookie)))).toBe(true);
    expect('actor' in (await signedInBy(cookieOf(other.cookie)))).toBe(false);
  });

  it('with a second factor asks for its code, each once, and takes a recovery code once', async () => {
    const { caller } = await callerOf('analyst@lowfield.example');
    const begun = await asActor(caller.actor, (tx) => beginSecondFactor(tx, caller, PASSWORD));
    const codeAt = (when: Date) =>
      new TOTP({ secret: Secret.fromBase32(begun.secret), period: 30, digits: 6 }).generate({
        timestamp: when.getTime(),
      });
    const first = at();
    const { recoveryCodes } = await asActor(caller.actor, (tx) =>
      confirmSecondFactor(tx, caller, codeAt(first), first),
    );
    expect(recoveryCodes).toHaveLength(10);
    const bare = await failure(enter('analyst@lowfield.example', PASSWORD));
    expect(bare).toMatchObject({ kind: 'unauthenticated', detail: { fields: [{ field: 'code' }] } });
    // a wrong password says nothing of a second factor
    expect((await failure(enter('analyst@lowfield.example', 'wrong'))).detail.fields).toBeUndefined();
    const later = at(2);
    await enter('analyst@lowfield.example', PASSWORD, codeAt(later), later);
    expect((await failure(enter('analyst@lowfield.example', PASSWORD, codeAt(later), later))).kind).toBe(
      'unauthenticated',
    );
    const spare = recoveryCodes[3] ?? '';
    await enter('analyst@lowfield.example', PASSWORD, spare);
    expect((await failure(enter('analyst@lowfield.example', PASSWORD, spare))).kind).toBe('unauthenticated');
  });
});
