import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet } from '../support/fleet';
import { signInAt, startSite, type RunningSite } from '../support/server';

/** A database that is there and does not answer: locks stand for whatever makes it slow. */
let db: TestDatabase;
let site: RunningSite;
let cookie: string;
let lock: pg.Client;

beforeAll(async () => {
  db = await testDatabase();
  await testFleet(db, ['Weirside Clinic']);
  site = await startSite(db, { LOG_LEVEL: 'info', WAKELINE_ROLES: 'web' });
  cookie = await signInAt(site.url, 'analyst@lowfield.example', PASSWORD);
  lock = new pg.Client(db.url);
  await lock.connect();
});
afterAll(async () => {
  await lock.end();
  await site.stop();
  await db.drop();
});

const get = (path: string): Promise<Response> => fetch(`${site.url}${path}`, { headers: { cookie } });
async function whileLocked<T>(table: string, work: () => Promise<T>): Promise<T> {
  await lock.query(`begin; lock table ${table} in access exclusive mode`);
  try {
    return await work();
  } finally {
    await lock.query('rollback');
  }
}

describe('a database that does not answer in time', () => {
  it('is said on pages and in problem documents, with the number that stands in the log', async () => {
    const [page, api] = await whileLocked('string_state', () => Promise.all([get('/'), get('/api/fleet')]));
    const text = await page.text();
    expect(page.status, text.slice(0, 300)).toBe(503);
    expect(text).toContain('The database does not answer');
    expect(text).not.toContain('Something failed on our side');
    const problem = (await api.json()) as { status: number; requestId: string; detail: string };
    expect(api.status).toBe(503);
    expect(problem.requestId).toBe(api.headers.get('x-request-id'));
    expect(problem.detail).toContain('does not answer');
    expect(api.headers.get('retry-after')).not.toBeNull();
    const lines = () =>
      site
        .output()
        .split('\n')
        .slice(0, -1)
        .filter((line) => line.includes(problem.requestId))
        .map((line) => JSON.parse(line) as { msg: string; route?: string; status?: number });
    // the log comes through a pipe of its own, which may be slower than the answer
    await expect
      .poll(() => lines().map((l) => l.msg))
      .toEqual(['a request failed', 'a request was answered']);
    expect(lines()[1]).toMatchObject({ route: '/api/fleet', status: 503 });
  });

  it('is said where nobody can be recognised', async () => {
    const page = await whileLocked('session', () => get('/'));
    expect(page.status).toBe(503);
    expect(await page.text()).toContain('cannot tell who you are');
  });

  it('leaves the process alive, and is over when it is over', async () => {
    expect((await fetch(`${site.url}/healthz`)).status).toBe(200);
    expect((await fetch(`${site.url}/readyz`)).status).toBe(200);
    expect((await get('/')).status).toBe(200);
    const figures = await (await fetch(`${site.url}/metrics`)).text();
    expect(figures).toMatch(/wakeline_http_request_seconds_count\{route="\/",method="GET",status="503"\} 2/);
    expect((await fetch(`${site.url}/metrics`, { headers: { 'x-forwarded-for': '10.0.0.4' } })).status).toBe(
      403,
    );
  });
});
