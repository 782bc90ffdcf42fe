import { createHash } from 'node:crypto';
import http from 'node:http';
import net from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { WebSocket } from 'ws';
import { makeScene } from '../migrations/scene';
import { testDatabase, type TestDatabase } from '../support/database';
import { startSite, type RunningSite } from '../support/server';

const TOKEN = 'a-token-for-one-logger-only';
let db: TestDatabase;
let site: RunningSite;

beforeAll(async () => {
  db = await testDatabase();
  const scene = await makeScene(db.owner, 'here');
  await db.owner.query('insert into ingest_token (logger_id, hash) values ($1, $2)', [
    scene.logger,
    createHash('sha256').update(TOKEN).digest(),
  ]);
  site = await startSite(db);
});
afterAll(async () => {
  await site.stop();
  await db.drop();
});

/** Sends bytes as they are; gives the first line of the answer. */
function raw(request: string): Promise<string> {
  return new Promise((resolve, reject) => {
    const socket = net.connect(site.port, '127.0.0.1', () => socket.write(request));
    let text = '';
    socket.setTimeout(5000, () => socket.destroy(new Error('no answer')));
    socket.on('data', (chunk) => (text += chunk.toString()));
    socket.on('error', reject);
    socket.on('close', () => resolve(text.split('\r\n', 1)[0] ?? ''));
  });
}
const upgrade = (path: string, headers = '') =>
  raw(
    `GET ${path} HTTP/1.1\r\nHost: x\r\nConnection: Upgrade\r\nUpgrade: websocket\r\n` +
      `Sec-WebSocket-Version: 13\r\nSec-WebSocket-Key: dGhlIHNhbXBsZSBub25jZQ==\r\n${headers}\r\n`,
  );

describe('the server', () => {
  it.each([
    ['GET /%E0%A4%A HTTP/1.1\r\nHost: x\r\n\r\n', 400],
    ['GET http://[ HTTP/1.1\r\nHost: x\r\n\r\n', 400],
    ['GET / HTTP/1.1\r\nHost: a b\r\n\r\n', 400],
    ['GET / HTTP/1.1\r\n\r\n', 400],
    ['garbage\r\n\r\n', 400],
    [`POST /api/sign-in HTTP/1.1\r\nHost: x\r\nContent-Length: 99000000\r\n\r\n`, 413],
    ['GET /audit?q=%00 HTTP/1.1\r\nHost: x\r\n\r\n', 400],
    ['TRACE / HTTP/1.1\r\nHost: x\r\n\r\n', 405],
    ['GET /sign-in HTTP/1.1\r\nHost: x\r\nConnection: close\r\nCookie: other=%ff\r\n\r\n', 200],
  ])('answers %j with %i', async (request, status) => {
    expect(await raw(request)).toMatch(new RegExp(`^HTTP/1.1 ${status} `));
  });

  it.each([
    ['GET', '/api/nothing'],
    ['PUT', '/api/fleet'],
  ])('answers a program in the form that it knows: %s %s', async (method, path) => {
    const answer = await fetch(site.url + path, { method, headers: { origin: site.url } });
    expect(answer.status).toBe(404);
    expect(answer.headers.get('content-type')).toBe('application/problem+json');
  });

  it('refuses what the database keeps nowhere, with the field named', async () => {
    const answer = await fetch(`${site.url}/api/sign-in`, {
      method: 'POST',
      headers: { origin: site.url, 'content-type': 'application/json' },
      body: JSON.stringify({ email: 'somebody@lowfield.example\0', password: 'x' }),
    });
    expect(answer.status).toBe(422);
    expect(await answer.json()).toMatchObject({ fields: [{ field: 'body.email' }] });
  });

  it('gives no upgrade at a path of none of its sockets', async () => {
    expect(await upgrade('/elsewhere')).toBe('HTTP/1.1 404 Not Found');
    expect(await upgrade('//')).toBe('HTTP/1.1 404 Not Found');
  });

  it('gives no socket to a stranger', async () => {
    expect(await upgrade('/ingest/v1')).toMatch(/^HTTP\/1.1 401 /);
    expect(await upgrade('/ingest/v1', 'Authorization: Bearer wrong-token-wrong\r\n')).toMatch(
      /^HTTP\/1.1 401 /,
    );
    expect(await upgrade('/live')).toMatch(/^HTTP\/1.1 401 /);
    expect(await upgrade('/live', 'Origin: http://elsewhere.example\r\n')).toMatch(/^HTTP\/1.1 403 /);
  });

  it('does not believe what anybody says of a proxy', async () => {
    const answer = await fetch(`${site.url}/`, {
      redirect: 'manual',
      headers: { 'x-forwarded-host': 'evil.example', 'x-forwarded-proto': 'https' },
    });
    expect(answer.headers.get('location') ?? '').not.toContain('evil.example');
    expect(await answer.text()).not.toContain('evil.example');
  });

  it('refuses a form from another site', async () => {
    const answer = await fetch(`${site.url}/sign-in`, {
      method: 'POST',
      headers: { origin: 'http://elsewhere.example', 'content-type': 'application/x-www-form-urlencoded' },
      body: 'email=a&password=b',
    });
    expect(answer.status).toBe(403);
  });

  it('sends assets compressed, to be kept for good', async () => {
    const page = await (await fetch(`${site.url}/sign-in`)).text();
    const style = /href="(\/_astro\/[^"]+\.css)"/.exec(page)?.[1] ?? '';
    const headers = await new Promise<http.IncomingHttpHeaders>((resolve, reject) => {
      http
        .get(`${site.url}${style}`, { headers: { 'accept-encoding': 'br' } }, (response) => {
          response.resume();
          resolve(response.headers);
        })
        .on('error', reject);
    });
    expect(headers['content-encoding']).toBe('br');
    expect(headers['cache-control']).toContain('immutable');
  });

  it('shows nothing outside its folder of assets', async () => {
    for (const path of [
      '/../server/entry.mjs',
      '/..%2fserver%2fentry.mjs',
      '/.made-from',
      '/_astro/..%2f..%2f.made-from',
    ])
      expect(await raw(`GET ${path} HTTP/1.1\r\nHost: x\r\nConnection: close\r\n\r\n`)).toMatch(
        /^HTTP\/1.1 (30\d|40\d) /,
      );
  });

  it('ends in order: sockets are told, the exit code is 0', async () => {
    const second = await startSite(db);
    const socket = new WebSocket(`ws://127.0.0.1:${second.port}/ingest/v1`, {
      headers: { authorization: `Bearer ${TOKEN}` },
    });
    await new Promise((resolve, reject) => socket.once('open', resolve).once('error', reject));
    const closed = new Promise<number>((resolve) => socket.once('close', resolve));
    const idle = net.connect(second.port, '127.0.0.1').on('error', () => undefined); // a connection that never asks
    expect(await second.stop()).toBe(0);
    expect(await closed).toBe(1001);
    idle.destroy();
  });
});
