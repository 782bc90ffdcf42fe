import { execFileSync, spawn, type ChildProcess } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import type { Browser } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { WebSocket } from 'ws';
import { freePort } from '../../src/server/up/processes.mjs';
import { startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet, type TestFleet } from '../support/fleet';
import { askSecurely, selfSigned, type SelfSigned } from '../support/https';
import { startSite, type RunningSite } from '../support/server';

/** HTTPS as a phone needs it: by the site itself, and by nginx with the README's recipe as it stands there. */
let db: TestDatabase;
let fleet: TestFleet;
let folder: string;
let first: SelfSigned;
let second: SelfSigned;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, ['Weirside Clinic']);
  folder = fs.mkdtempSync(path.join(os.tmpdir(), 'wakeline-https-'));
  first = selfSigned(folder, 'first');
  second = selfSigned(folder, 'second');
  browser = await startBrowser();
});
afterAll(async () => {
  await browser.close();
  await db.drop();
  fs.rmSync(folder, { recursive: true, force: true });
});

async function signIn(url: string, ca: string): Promise<{ cookie: string; whole: string }> {
  const answer = await askSecurely(`${url}/api/sign-in`, ca, {
    method: 'POST',
    headers: { 'content-type': 'application/json', origin: url },
    body: JSON.stringify({ email: 'technician@lowfield.example', password: PASSWORD }),
  });
  expect(answer.status, answer.body).toBe(200);
  const whole = String(answer.headers['set-cookie']);
  return { cookie: whole.split(';')[0] ?? '', whole };
}

/** The first message of a live socket, or the status that it was refused with. */
const liveAt = (url: string, ca: string, cookie: string, topic: string): Promise<string> =>
  new Promise((resolve, reject) => {
    const socket = new WebSocket(`${url.replace('https', 'wss')}/live`, {
      ca: fs.readFileSync(ca),
      headers: { cookie, origin: url },
    });
    socket.on('open', () => socket.send(JSON.stringify({ type: 'subscribe', topic })));
    socket.on('message', (data: Buffer) => {
      resolve(data.toString());
      socket.close();
    });
    socket.on('unexpected-response', (_, response) => resolve(`refused ${response.statusCode}`));
    socket.on('error', reject);
  });

/** Chromium opens the phone's page and keeps its worker: it would do neither on an origin that it does not trust. */
async function phoneOpens(url: string, cookie: string): Promise<void> {
  const [name = '', value = ''] = cookie.split('=');
  const context = await browser.newContext({
    ignoreHTTPSErrors: true,
    viewport: { width: 390, height: 844 },
  });
  await context.addCookies([{ name, value, url, secure: true }]);
  const page = await context.newPage();
  await page.goto(`${url}/capture/${fleet.site('Weirside Clinic').ref}`);
  await page.getByRole('heading', { level: 1, name: /reading \+ to −/ }).waitFor();
  const facts = await page.evaluate(() => ({
    secure: window.isSecureContext,
    camera: 'mediaDevices' in navigator,
    worker: 'serviceWorker' in navigator,
  }));
  expect(facts).toEqual({ secure: true, camera: true, worker: true });
  await context.close();
}

describe('the site itself', () => {
  let site: RunningSite;
  let files: SelfSigned;
  beforeAll(async () => {
    files = { cert: path.join(folder, 'in-use.pem'), key: path.join(folder, 'in-use.key') };
    fs.copyFileSync(first.cert, files.cert);
    fs.copyFileSync(first.key, files.key);
    site = await startSite(db, { WAKELINE_ROLES: 'web', TLS_CERT: files.cert, TLS_KEY: files.key });
  });
  afterAll(async () => {
    await site.stop();
  });

  it('speaks HTTPS and wss, and its cookies stay with them', async () => {
    const { cookie, whole } = await signIn(site.url, files.cert);
    expect(whole).toContain('Secure');
    const page = await askSecurely(`${site.url}/`, files.cert, { headers: { cookie } });
    expect(page.status).toBe(200);
    expect(await liveAt(site.url, files.cert, cookie, 'fleet')).toContain('snapshot');
    await phoneOpens(site.url, cookie);
    // spoken to without TLS it answers nothing
    await expect(fetch(site.url.replace('https', 'http'))).rejects.toThrow();
  });

  it('takes a new certificate on SIGHUP and keeps the old one where the new one is at fault', async () => {
    const shown = async (ca: string) => (await askSecurely(`${site.url}/sign-in`, ca)).shownBy;
    expect(await shown(first.cert)).toBe('first');
    fs.copyFileSync(second.cert, files.cert); // key and certificate do not belong together yet
    site.signal('SIGHUP');
    await expect.poll(() => site.output()).toContain('the one before stays in use');
    expect(await shown(first.cert)).toBe('first');
    fs.copyFileSync(second.key, files.key);
    site.signal('SIGHUP');
    await expect.poll(() => shown(second.cert).catch(() => 'still the first')).toBe('second');
    // without a signal too: the files are looked at
    fs.copyFileSync(first.key, files.key);
    fs.copyFileSync(first.cert, files.cert);
    const changed = () => shown(first.cert).catch(() => 'still the second');
    await expect.poll(changed, { timeout: 30_000, interval: 500 }).toBe('first');
  });

  it('says what is wrong with the files instead of starting', async () => {
    const start = (env: Record<string, string>) => startSite(db, { WAKELINE_ROLES: 'web', ...env });
    await expect(start({ TLS_CERT: '/nowhere/site.pem', TLS_KEY: first.key })).rejects.toThrow(
      /TLS_CERT is "\/nowhere\/site.pem", which cannot be read/,
    );
    await expect(start({ TLS_CERT: first.cert, TLS_KEY: second.key })).rejects.toThrow(
      /are no certificate and its key/,
    );
    await expect(start({ TLS_CERT: first.cert })).rejects.toThrow(/TLS_KEY: TLS_CERT is set/);
  });
});

describe('nginx in front, by the README', () => {
  let site: RunningSite;
  let nginx: ChildProcess;
  let said = '';
  let url: string;
  let plainPort: number;
  const program = process.env.WAKELINE_NGINX ?? '/usr/sbin/nginx';

  /** The README's server blocks, with this test's names in the place of its examples and nothing else changed. */
  function recipe(changes: [string, string][]): string {
    const readme = fs.readFileSync(new URL('../../README.md', import.meta.url), 'utf8');
    let text = /```nginx\n([\s\S]*?)```/.exec(readme)?.[1] ?? '';
    for (const [from, to] of changes) {
      expect(text, `the recipe in README.md has no "${from}"`).toContain(from);
      text = text.replaceAll(from, to);
    }
    return text;
  }

  beforeAll(async () => {
    expect(fs.existsSync(program), `nginx is missing: run "apt-get install -y nginx" (${program})`).toBe(
      true,
    );
    site = await startSite(db, { WAKELINE_ROLES: 'web', TRUST_PROXY: '1', COOKIE_SECURE: '1' });
    const port = await freePort(0);
    plainPort = await freePort(0);
    url = `https://127.0.0.1:${port}`;
    const own = recipe([
      ['listen 80;', `listen 127.0.0.1:${plainPort};`],
      ['listen 443 ssl http2;', `listen 127.0.0.1:${port} ssl http2;`],
      ['server_name roofs.example;', 'server_name 127.0.0.1;'],
      ['/etc/letsencrypt/live/roofs.example/fullchain.pem', first.cert],
      ['/etc/letsencrypt/live/roofs.example/privkey.pem', first.key],
      ['http://127.0.0.1:4321', `http://127.0.0.1:${site.port}`],
    ]);
    const places = ['client_body', 'proxy', 'fastcgi', 'uwsgi', 'scgi'].map(
      (name) => `${name}_temp_path ${folder}/${name};`,
    );
    const account = process.getuid?.() === 0 ? 'user root;' : '';
    const conf = path.join(folder, 'nginx.conf');
    fs.writeFileSync(
      conf,
      `${account}\ndaemon off;\nworker_processes 1;\npid ${folder}/nginx.pid;\nerror_log stderr warn;\nevents {}\n` +
        `http {\naccess_log off;\n${places.join('\n')}\n${own}\n}\n`,
    );
    const started = ['-p', folder, '-c', conf, '-e', 'stderr'];
    execFileSync(program, ['-t', '-q', ...started], { stdio: 'pipe' }); // its own check of the syntax
    nginx = spawn(program, started, { stdio: ['ignore', 'pipe', 'pipe'] });
    nginx.stderr?.on('data', (chunk: Buffer) => (said += chunk.toString()));
    const up = () =>
      askSecurely(`${url}/sign-in`, first.cert).then(
        (answer) => answer.status === 200,
        () => false,
      );
    for (let tries = 0; !(await up()); tries++) {
      if (tries > 100) throw new Error(`nginx does not serve the site: ${said}`);
      await new Promise((later) => setTimeout(later, 100));
    }
  });
  afterAll(async () => {
    const ended = new Promise((resolve) => nginx.once('exit', resolve));
    nginx.kill('SIGQUIT');
    await ended;
    await site.stop();
  });

  it('serves pages and sockets by HTTPS, and sends plain HTTP there', async () => {
    const plain = await fetch(`http://127.0.0.1:${plainPort}/capture/x`, { redirect: 'manual' });
    expect(plain.status).toBe(301);
    expect(plain.headers.get('location')).toBe('https://127.0.0.1/capture/x');
    const { cookie, whole } = await signIn(url, first.cert);
    expect(whole).toContain('Secure');
    expect(await liveAt(url, first.cert, cookie, 'fleet')).toContain('snapshot');
    expect(await liveAt(url, first.cert, 'wakeline_session=nobody', 'fleet')).toBe('refused 401');
    await phoneOpens(url, cookie);
  });

  it('lets photos through whose size is a camera’s', async () => {
    const { cookie } = await signIn(url, first.cert);
    const noise = Buffer.from(
      Array.from({ length: 1500 * 1500 * 3 }, (_, i) => (i * 7919 * (i % 251)) % 256),
    );
    const photo = await sharp(noise, { raw: { width: 1500, height: 1500, channels: 3 } })
      .jpeg({ quality: 100 })
      .toBuffer();
    expect(photo.length).toBeGreaterThan(1.5e6);
    const query = new URLSearchParams({
      ...{ ref: randomUUID(), subject: 'site', name: 'roof.jpg', at: new Date().toISOString() },
    });
    const at = `${url}/api/sites/${fleet.site('Weirside Clinic').ref}/attachments?${query.toString()}`;
    const answer = await askSecurely(at, first.cert, {
      method: 'POST',
      headers: { cookie, origin: url, 'content-type': 'image/jpeg', 'content-length': String(photo.length) },
      body: photo,
    });
    expect(answer.status, answer.body.slice(0, 300)).toBe(201);
  });

  it('tells the site who is asking, whatever a client claims', async () => {
    const tries = (claimed: string) =>
      askSecurely(`${url}/api/sign-in`, first.cert, {
        method: 'POST',
        headers: { 'content-type': 'application/json', origin: url, 'x-forwarded-for': claimed },
        body: JSON.stringify({ email: `nobody${claimed}@lowfield.example`, password: 'wrong' }),
      });
    let last = 0;
    for (let i = 0; i < 80 && last !== 429; i++) last = (await tries(`203.0.113.${i}`)).status;
    expect(last, 'a client escapes the limit of its address by claiming others').toBe(429);
  });
});
