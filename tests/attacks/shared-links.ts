import { expect, it } from 'vitest';
import { newToken, tokenHash } from '../../src/server/auth/secret-link';
import { OWN, type Scene } from './scene';

/** Links that show a site without signing in: forged, ended, run out; and what a right one opens besides. */
export function sharedLinkAttacks(scene: () => Scene): void {
  const linked = async (change: string): Promise<string> => {
    const { db, fleet, secret } = scene();
    const token = secret(newToken());
    await db.owner.query(
      `insert into share_link (site_id, label, token_hash, created_by)
       select $1, 'Lobby', $2, id from person where email = 'manager@lowfield.example'`,
      [fleet.site(OWN).id, tokenHash(token)],
    );
    if (change)
      await db.owner.query(`update share_link set ${change} where token_hash = $1`, [tokenHash(token)]);
    return token;
  };

  it('forged, changed, ended and run out are one and the same', async () => {
    const { ask, secret } = scene();
    const good = await linked('');
    expect((await ask(`/shared/${good}`)).status).toBe(200);
    const flipped = good.slice(0, -1) + (good.endsWith('A') ? 'B' : 'A');
    // the last character of 43 carries two bits that mean nothing: a decoder would take another for the same
    const alike = good.slice(0, -1) + String.fromCharCode(good.charCodeAt(42) + 1);
    const bad = [
      secret(newToken()),
      secret(flipped),
      secret(alike),
      await linked('ended_at = now()'),
      await linked(`expires_at = now() - interval '1 second'`),
      good.toUpperCase(),
      "'or'1'='1",
    ];
    const answers = await Promise.all(
      bad.map(async (token) => {
        const response = await ask(`/api/shared/${encodeURIComponent(token)}`);
        return {
          status: response.status,
          body: (await response.text()).replace(/"requestId":"[^"]*"/, ''),
        };
      }),
    );
    expect(answers[0]?.status).toBe(404);
    for (const answer of answers) expect(answer).toEqual(answers[0]);
  });

  it('is only read, and its address is in no log when it is asked for otherwise', async () => {
    const { ask } = scene();
    const token = await linked('');
    for (const path of [`/shared/${token}`, `/api/shared/${token}`])
      for (const method of ['POST', 'PUT', 'DELETE']) expect((await ask(path, { method })).status).toBe(404);
  });

  it('is no session: neither as a cookie, as a bearer, nor in an address', async () => {
    const { ask, fleet } = scene();
    const token = await linked('');
    const ref = fleet.site(OWN).ref;
    const guises: Record<string, string>[] = [
      { cookie: `wakeline_session=${token}` },
      { cookie: `wakeline_kept=${token}` },
      { authorization: `Bearer ${token}` },
    ];
    for (const headers of guises)
      for (const path of [`/api/sites/${ref}`, `/api/my-site/${ref}`, '/api/fleet', `/api/shared/${ref}`])
        expect([401, 404], `${path} with ${Object.keys(headers).join()}`).toContain(
          (await ask(path, { headers })).status,
        );
  });

  it('stands in no frame, but for a lobby screen that names one', async () => {
    const { ask } = scene();
    const ordinary = await ask(`/shared/${await linked('')}`);
    expect(ordinary.headers.get('content-security-policy')).toContain("frame-ancestors 'none'");
    const framed = await ask(
      `/shared/${await linked(`kiosk = true, framed_by = 'https://screens.example'`)}`,
    );
    expect(framed.headers.get('content-security-policy')).toMatch(
      /frame-ancestors https:\/\/screens\.example$/,
    );
    expect(framed.headers.get('referrer-policy')).toBe('no-referrer');
  });
}
