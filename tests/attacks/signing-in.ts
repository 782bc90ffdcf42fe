import { Secret, TOTP } from 'otpauth';
import { expect, it } from 'vitest';
import { newRecoveryCodes } from '../../src/server/auth/second-factor';
import { newToken, tokenHash } from '../../src/server/auth/secret-link';
import { PASSWORD } from '../support/fleet';
import { cookiesSet, emailOf, type Scene } from './scene';

const NEW_PASSWORD = 'ladder-weather-inverter';
const form = (fields: Record<string, string>) => ({
  method: 'POST',
  headers: { 'content-type': 'application/x-www-form-urlencoded' },
  body: new URLSearchParams(fields).toString(),
});

/** Sessions, passwords, codes and links of letters. */
export function signingInAttacks(scene: () => Scene): void {
  const analyst = emailOf('analyst');
  const nameShown = async (cookie: string): Promise<string> => {
    const response = await scene().ask('/api/account', { cookie });
    if (!response.ok) return `status ${response.status}`;
    return ((await response.json()) as { person: { email: string } }).person.email;
  };

  it('a session that somebody planted in a browser is not taken up by signing in', async () => {
    const { signIn, cookieOf, secret } = scene();
    // made up: it never becomes a session
    const madeUp = `wakeline_session=${secret('q'.repeat(40))}`;
    const first = cookiesSet(await signIn(analyst, PASSWORD, {}, madeUp));
    expect(first.get('wakeline_session')).toMatch(/^[a-z0-9]{40}$/);
    expect(await nameShown(madeUp)).toBe('status 401');
    // real, of somebody else, and under the name that is read first: it ends
    const theirs = cookiesSet(await signIn(emailOf('technician'), PASSWORD, { keep: true }));
    const planted = `wakeline_kept=${secret(theirs.get('wakeline_kept') ?? '')}`;
    expect(await nameShown(planted)).toBe(emailOf('technician'));
    const after = cookiesSet(await signIn(analyst, PASSWORD, {}, planted));
    expect(after.get('wakeline_kept')).toBe('');
    expect(await nameShown(`wakeline_session=${secret(after.get('wakeline_session') ?? '')}`)).toBe(analyst);
    expect(await nameShown(planted)).toBe('status 401');
    expect(await nameShown(await cookieOf(emailOf('manager')))).toBe(emailOf('manager'));
  });

  it('a session that has run out does not end the one that begins', async () => {
    const { signIn, db } = scene();
    const old = cookiesSet(await signIn(analyst, PASSWORD)).get('wakeline_session') ?? '';
    await db.owner.query(
      `update session set expires_at = now() - interval '1 minute' where user_id =
      (select id from person where email = $1)`,
      [analyst],
    );
    const lines = (await signIn(analyst, PASSWORD, {}, `wakeline_session=${old}`)).headers.getSetCookie();
    expect(lines.filter((l) => l.startsWith('wakeline_session='))).toHaveLength(1);
    expect(lines.find((l) => l.startsWith('wakeline_session='))).toMatch(
      /^wakeline_session=[a-z0-9]{40};.*HttpOnly.*SameSite=Lax/i,
    );
  });

  it('whether an account exists is in no answer: sign-in, by page and by API, and a forgotten password', async () => {
    const { signIn, ask, db, forgiveAll } = scene();
    await db.owner.query(`update person set active = false where email = $1`, [emailOf('customer')]);
    const told = async (response: Response, email: string) => ({
      status: response.status,
      headers: [...response.headers.keys()].filter((n) => n !== 'content-length').sort(),
      body: (await response.text())
        .replaceAll(email, 'EMAIL')
        .replace(/"requestId":"[^"]*"/, '')
        .replace(/uid="[^"]*"/g, ''),
    });
    const answers = { api: [], page: [], forgotten: [] } as Record<string, unknown[]>;
    for (const email of [analyst, emailOf('customer'), 'nobody@lowfield.example']) {
      answers.api?.push(await told(await signIn(email, 'not the password'), email));
      answers.page?.push(
        await told(await ask('/sign-in', form({ email, password: 'not the password' })), email),
      );
      answers.forgotten?.push(await told(await ask('/forgot-password', form({ email })), email));
    }
    for (const [what, [first, ...others]] of Object.entries(answers))
      for (const other of others) expect(other, what).toEqual(first);
    const { rows } = await db.owner.query(`select to_address from message where kind = 'password_reset'`);
    expect(rows).toEqual([{ to_address: analyst }]);
    await db.owner.query(`update person set active = true where email = $1`, [emailOf('customer')]);
    await forgiveAll();
  });

  it('tries are counted and the wait is said, whatever a client claims to be forwarded for', async () => {
    const { ask, db, forgiveAll } = scene();
    const headers = { 'x-forwarded-for': '203.0.113.7', forwarded: 'for=203.0.113.7' };
    await ask('/api/sign-in', { method: 'POST', body: { email: analyst, password: PASSWORD }, headers });
    const { rows } = await db.owner.query(`select distinct address from session`);
    expect(rows).toEqual([{ address: '127.0.0.1' }]);
    const tried: number[] = [];
    let last: Response | undefined;
    for (let i = 0; i < 11; i++) {
      last = await ask('/api/sign-in', {
        method: 'POST',
        body: { email: 'nobody@lowfield.example', password: 'wrong' },
        headers,
      });
      tried.push(last.status);
    }
    expect(tried).toEqual([...Array<number>(10).fill(401), 429]);
    expect(Number(last?.headers.get('retry-after'))).toBeGreaterThan(0);
    expect(((await last?.json()) as { detail: string }).detail).toMatch(/Wait \d+ (minutes|seconds)/);
    await forgiveAll();
  });

  it('codes of the second factor can’t be tried through: neither six digits nor recovery codes', async () => {
    const { signIn, db, secret, forgiveAll } = scene();
    const key = secret(new Secret({ size: 20 }).base32);
    const { shown, hashes } = newRecoveryCodes();
    shown.forEach(secret);
    await db.owner.query(
      `update person set totp_secret = $2, totp_confirmed_at = now(), recovery_codes = $3 where email = $1`,
      [analyst, key, hashes],
    );
    const right = () => new TOTP({ secret: Secret.fromBase32(key) }).generate();
    const wrong = right() === '000000' ? '000001' : '000000';
    const kinds: number[] = [];
    for (let i = 0; i < 9; i++)
      kinds.push((await signIn(analyst, PASSWORD, { code: i % 2 ? wrong : 'aaaa-bbbb-cccc' })).status);
    expect(kinds).toEqual([...Array<number>(8).fill(401), 429]);
    // not even the right one, until the wait is over
    expect((await signIn(analyst, PASSWORD, { code: right() })).status).toBe(429);
    await forgiveAll();
    // two at once with one code: one of them
    const code = shown[0] ?? '';
    const both = await Promise.all([0, 1].map(() => signIn(analyst, PASSWORD, { code })));
    expect(both.map((r) => r.status).sort()).toEqual([200, 401]);
    await db.owner.query(
      `update person set totp_secret = null, totp_confirmed_at = null, recovery_codes = '{}' where email = $1`,
      [analyst],
    );
    await forgiveAll();
  });

  it('a letter’s link sets a password once, two at once included, and not after the password changed', async () => {
    const { ask, db, secret, signIn, forgiveAll } = scene();
    const who = emailOf('technician');
    const link = async (): Promise<string> => {
      const token = secret(newToken());
      await db.owner.query(
        `insert into account_link (person_id, purpose, token_hash, expires_at)
         select id, 'password_reset', $2, now() + interval '1 hour' from person where email = $1`,
        [who, tokenHash(token)],
      );
      return token;
    };
    const use = (token: string) => ask(`/new-password/${token}`, form({ password: secret(NEW_PASSWORD) }));
    const token = await link();
    const older = await link();
    const texts = await Promise.all((await Promise.all([use(token), use(token)])).map((r) => r.text()));
    expect(texts.filter((t) => t.includes('can’t be used'))).toHaveLength(1);
    expect((await signIn(who, NEW_PASSWORD)).status).toBe(200);
    for (const over of [token, older]) {
      const again = await use(over);
      expect(again.status).toBe(404);
      expect(await again.text()).toContain('can’t be used');
    }
    await db.owner.query(
      `update person set password_hash = (select password_hash from person where email = $2) where email = $1`,
      [who, emailOf('manager')],
    );
    await forgiveAll();
  });

  it.each([
    'https://elsewhere.example/',
    '//elsewhere.example',
    '/\\elsewhere.example',
    '/\t/elsewhere.example',
    '/%09/elsewhere.example/..//elsewhere.example',
    'javascript:alert(1)',
    '/api/sign-out',
    '/\r\nset-cookie: planted=1',
  ])('sign-in leads nowhere else: %j', async (next) => {
    const { ask, forgiveAll, secret } = scene();
    const typed = { email: analyst, password: secret(PASSWORD), next };
    const byPage = await ask('/sign-in', form(typed));
    const byApi = (await (await ask('/api/sign-in', { method: 'POST', body: typed })).json()) as {
      next: string;
    };
    for (const to of [byPage.headers.get('location') ?? '', byApi.next]) {
      expect(new URL(to, scene().site.url).origin).toBe(scene().site.url);
      expect(to).not.toMatch(/^\/api\//);
    }
    expect(byPage.status).toBe(303);
    expect([...cookiesSet(byPage).keys()]).not.toContain('planted');
    await forgiveAll();
  });
}
