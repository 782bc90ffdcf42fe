import net from 'node:net';
import { gzipSync } from 'node:zlib';
import { expect, it } from 'vitest';
import { ROUTES } from '../access/routes';
import { emailOf, OWN, type Scene } from './scene';

/** What comes in over HTTP that no page of ours would send, and what each answer says to a browser. */
export function requestAttacks(scene: () => Scene): void {
  const target = () => {
    const { ref, strings } = scene().fleet.site(OWN);
    return { site: ref, string: [...strings.values()][0]?.ref ?? '' };
  };
  /** What the server answers to these very characters, until it closes. */
  const raw = (request: string): Promise<string> =>
    new Promise((resolve, reject) => {
      const socket = net.connect(scene().site.port, '127.0.0.1');
      let said = '';
      socket.on('data', (chunk: Buffer) => (said += chunk.toString('latin1')));
      // it closes on who goes on sending what it refused
      socket.on('error', (error) => (said ? resolve(said) : reject(error)));
      socket.on('close', () => resolve(said));
      socket.write(request);
    });
  const unsafe = ROUTES.filter((r) => r.method !== 'GET');

  it('a page of another origin changes nothing, by form, by script, framed or without an Origin', async () => {
    const { ask, cookieOf, db } = scene();
    const cookie = await cookieOf(emailOf('manager'));
    const before = await db.owner.query('select count(*) from audit_entry');
    const guises: Record<string, string>[] = [
      { 'sec-fetch-site': 'cross-site', origin: 'https://elsewhere.example' },
      { 'sec-fetch-site': 'same-site', origin: 'https://other.roofs.example' },
      { 'sec-fetch-site': 'cross-site' },
      { origin: 'null' },
      { origin: 'https://elsewhere.example', 'x-forwarded-host': 'elsewhere.example' },
      { origin: `${scene().site.url}.elsewhere.example` },
    ];
    const types = ['application/x-www-form-urlencoded', 'text/plain', 'application/json'];
    for (const [i, route] of unsafe.entries()) {
      const guise = guises[i % guises.length] ?? {};
      const response = await ask(route.path(target()), {
        method: route.method,
        cookie,
        origin: false,
        headers: { ...guise, 'content-type': types[i % types.length] ?? '' },
        body: 'a=1',
      });
      expect(response.status, `${route.method} ${route.file}, ${JSON.stringify(guise)}`).toBe(403);
    }
    for (const path of ['/sign-in', '/forgot-password', '/new-password/x', '/invitation/x'])
      for (const headers of guises)
        expect((await ask(path, { method: 'POST', origin: false, headers, body: 'a=1' })).status).toBe(403);
    expect(await db.owner.query('select count(*) from audit_entry')).toMatchObject({ rows: before.rows });
  });

  it('JSON in the guise of a form is not read as JSON', async () => {
    const { ask, cookieOf } = scene();
    const cookie = await cookieOf(emailOf('manager'));
    const response = await ask('/api/theme', {
      method: 'PUT',
      cookie,
      headers: { 'content-type': 'text/plain' },
      body: '{"theme":"dark"}',
    });
    expect(response.status).toBe(422);
  });

  it('bodies that are endless, bottomless or no text are refused, and nothing breaks', async () => {
    const { ask, cookieOf } = scene();
    const cookie = await cookieOf(emailOf('manager'));
    const deep = (open: string, close: string) => `{"x":${open.repeat(60_000)}1${close.repeat(60_000)}}`;
    const bodies: Record<string, string> = {
      'lists in lists': deep('[', ']'),
      'objects in objects': `{"x":${'{"x":'.repeat(40_000)}1${'}'.repeat(40_001)}`,
      'keys of prototypes': '{"__proto__":{"role":"manager"},"constructor":{"prototype":{"x":1}}}',
      'a broken surrogate': '{"label":"\\ud800","kiosk":false,"endsOn":null}',
      'a null character': '{"label":"a\\u0000b","name":"a\\u0000b","kiosk":false,"endsOn":null}',
      'a number without end': `{"label":${'9'.repeat(100_000)}}`,
      'no object': '[1,2,3]',
      nothing: '',
    };
    const kinds = Object.entries(bodies);
    // every address, each kind of body: two of them in turn for each
    for (const [i, route] of unsafe.filter((r) => r.body !== undefined).entries())
      for (const [what, body] of [0, 3].map((j) => kinds[(i + j) % kinds.length] ?? ['', ''])) {
        const response = await ask(route.path(target()), { method: route.method, cookie, body });
        const said = await response.text();
        expect(response.status, `${route.method} ${route.file}, ${what}: ${said.slice(0, 300)}`).toBeLessThan(
          500,
        );
      }
    expect(({} as Record<string, unknown>).role).toBeUndefined();
    // by its length before anything of it came, and by what came where no length was said
    const size = 40 * 1024 * 1024;
    const early = await raw(`PUT /api/theme HTTP/1.1\r\nhost: 127.0.0.1\r\ncontent-length: ${size}\r\n\r\n`);
    expect(early).toMatch(/^HTTP\/1\.1 413 /);
    const piece = `2710\r\n${' '.repeat(10_000)}\r\n`;
    const streamed = await raw(
      `PUT /api/theme HTTP/1.1\r\nhost: 127.0.0.1\r\nconnection: close\r\ncookie: ${cookie}\r\n` +
        `content-type: application/json\r\ntransfer-encoding: chunked\r\n\r\n${piece.repeat(40)}`,
    );
    expect(streamed).toMatch(/^HTTP\/1\.1 413 /);
    const packed = await ask('/api/theme', {
      method: 'PUT',
      cookie,
      headers: { 'content-encoding': 'gzip' },
      body: gzipSync('{"theme":"dark"}').toString('latin1'),
    });
    expect(packed.status).toBe(422); // only ingest unpacks, and it counts as it does
  });

  it('senders who never finish keep nobody from being served', async () => {
    const { ask, cookieOf, site } = scene();
    const cookie = await cookieOf(emailOf('manager'));
    const stuck = Array.from({ length: 40 }, () => {
      const socket = net.connect(site.port, '127.0.0.1');
      socket.on('error', () => undefined);
      socket.write(
        `PUT /api/theme HTTP/1.1\r\nhost: 127.0.0.1\r\ncookie: ${cookie}\r\norigin: ${site.url}\r\n` +
          `content-type: application/json\r\ncontent-length: 100\r\n\r\n{"the`,
      );
      return socket;
    });
    try {
      await Promise.all(stuck.map((s) => new Promise((done) => s.once('ready', done))));
      // ten connections to the database serve all: none waits with a sender
      for (let i = 0; i < 12; i++) expect((await ask('/api/fleet', { cookie })).status).toBe(200);
    } finally {
      stuck.forEach((s) => s.destroy());
    }
  });

  it('addresses that lead out of their folder lead nowhere', async () => {
    for (const path of [
      '/../package.json',
      '/_astro/../../package.json',
      '/_astro/..%2f..%2f..%2fpackage.json',
      '/%2e%2e/%2e%2e/etc/passwd',
      '/_astro/..%5c..%5cpackage.json',
      '/.made-from',
      '/api/attachments/..%2f..%2f..%2fetc%2fpasswd',
      '/api/papers/..%2fx',
      '/%',
      '/%c0%ae%c0%ae/x',
      'http://elsewhere.example/',
    ]) {
      const answer = await raw(`GET ${path} HTTP/1.1\r\nhost: 127.0.0.1\r\nconnection: close\r\n\r\n`);
      expect(answer.split('\r\n')[0], path).toMatch(/^HTTP\/1\.1 (303|40[014]) /);
      expect(answer, path).not.toMatch(/"name": "wakeline"|root:x:|elsewhere\.example/);
    }
  });

  it('no answer lets a browser guess, frame it, take it elsewhere or run what it does not know', async () => {
    const { ask, cookieOf, site } = scene();
    const cookie = await cookieOf(emailOf('manager'));
    const page = await ask('/', { cookie });
    const script = /src="(\/_astro\/[^"]+\.js)"/.exec(await page.clone().text())?.[1] ?? '';
    expect(script).not.toBe('');
    const answers: [string, Response][] = [
      ['a page', page],
      ['a page that is not there', await ask('/nothing', { cookie })],
      ['sign-in', await ask('/sign-in')],
      ['the way to sign-in', await ask('/')],
      ['data', await ask('/api/fleet', { cookie })],
      ['a table', await ask('/api/fleet.csv', { cookie })],
      ['a refusal', await ask('/api/fleet')],
      ['a foreign request', await ask('/api/theme', { method: 'PUT', origin: 'https://elsewhere.example' })],
      ['a file of the build', await ask(script)],
      ['no address', await ask('/%')],
    ];
    for (const [what, response] of answers) {
      const said = (name: string) => response.headers.get(name) ?? '';
      expect(said('x-content-type-options'), what).toBe('nosniff');
      expect(said('cross-origin-resource-policy'), what).toBe('same-origin');
      expect(said('access-control-allow-origin'), what).toBe('');
      expect(said('server') + said('x-powered-by'), what).toBe('');
      if (what === 'a file of the build') continue;
      expect(said('referrer-policy'), what).toBe('same-origin');
      expect(said('permissions-policy'), what).toContain('camera=(),');
      expect(said('content-security-policy'), what).toContain("frame-ancestors 'none'");
      expect(said('content-security-policy'), what).toContain("default-src 'none'");
      expect(said('content-security-policy').replace("style-src-attr 'unsafe-inline'", ''), what).not.toMatch(
        /unsafe-(inline|eval|hashes)|\*|https?:|script-src [^;]*data:/,
      );
      if (said('content-type').startsWith('text/html'))
        expect(said('cache-control'), what).toBe('private, no-store');
    }
    const serials = await ask(`/commissioning/${target().site}/serials`, { cookie });
    expect(serials.headers.get('permissions-policy')).toContain('camera=(self)');
    expect(site.output()).not.toContain('unhandled');
  });
}
