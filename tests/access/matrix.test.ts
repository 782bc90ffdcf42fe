import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { PERMISSIONS, ROLES, mayUse, type Role } from '../../src/domain/access/permissions';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet, type TestFleet } from '../support/fleet';
import { signInAt, startSite, type RunningSite } from '../support/server';
import { ROUTES, type Route, type Target } from './routes';

/**
 * Every route × manager, technician, analyst, customer, signed out × a site that was given, another site of the
 * organisation, a site of another organisation, a site that is not there. What is expected follows from the table
 * of permissions alone.
 */
const PAGES = fileURLToPath(new URL('../../src/pages', import.meta.url));
const METHODS = /export const (GET|POST|PUT|PATCH|DELETE|ALL)\b/g;
const GIVEN = 'Weirside Clinic';
const NOT_GIVEN = 'Kestrel Row School';
const FOREIGN = 'Netloft Terrace';
const ABSENT: Target = {
  site: '00000000-0000-4000-8000-000000000000',
  string: '00000000-0000-4000-8000-000000000001',
};
const PEOPLE: Record<Role, string> = {
  manager: 'manager@lowfield.example',
  technician: 'technician@lowfield.example',
  analyst: 'analyst@lowfield.example',
  customer: 'customer@lowfield.example',
};

const isPage = (route: Route): boolean => route.file.endsWith('.astro');
const filesOnDisk = readdirSync(PAGES, { recursive: true, withFileTypes: true })
  .filter((e) => e.isFile() && /\.(astro|ts)$/.test(e.name))
  .map((e) => join(e.parentPath, e.name).slice(PAGES.length + 1));
const sourceOf = (file: string): string => readFileSync(join(PAGES, file), 'utf8');

describe('the table of routes', () => {
  const onDisk = filesOnDisk.flatMap((file) =>
    file.endsWith('.astro')
      ? `GET ${file}`
      : [...sourceOf(file).matchAll(METHODS)].map((m) => `${m[1]} ${file}`),
  );
  it('names every route on disk, and none that is not there', () => {
    expect(ROUTES.map((r) => `${r.method} ${r.file}`).sort()).toEqual(onDisk.sort());
  });
  it.each(ROUTES.map((r) => [r.method, r.file, r] as const))(
    '%s %s declares the permission of the table',
    (_m, _f, route) => {
      const source = sourceOf(route.file);
      if (route.permission === 'public') expect(source).toMatch(/publicPage\(Astro\)|permission: 'public'/);
      else expect(source).toContain(`'${route.permission}'`);
    },
  );
});

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
const cookies = new Map<Role, string>();
const targets = new Map<string, Target>();

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [GIVEN, NOT_GIVEN, FOREIGN]);
  for (const name of [GIVEN, NOT_GIVEN, FOREIGN]) {
    const { ref, strings } = fleet.site(name);
    targets.set(name, { site: ref, string: [...strings.values()][0]?.ref ?? '' });
  }
  site = await startSite(db);
  for (const role of ROLES) cookies.set(role, await signInAt(site.url, PEOPLE[role], PASSWORD));
});
afterAll(async () => {
  await site.stop();
  await db.drop();
});

const targetOf = (name: string): Target => targets.get(name) ?? ABSENT;
const bodyOf = (route: Route, target: Target): unknown =>
  typeof route.body === 'function' ? (route.body as (target: Target) => unknown)(target) : route.body;
function ask(route: Route, who: Role | 'signed out', target: Target): Promise<Response> {
  const cookie = who === 'signed out' ? undefined : cookies.get(who);
  return fetch(site.url + route.path(target), {
    method: route.method,
    redirect: 'manual',
    headers: {
      origin: site.url,
      ...(cookie ? { cookie } : {}),
      ...(route.body === undefined ? {} : { 'content-type': 'application/json' }),
    },
    body: route.body === undefined ? undefined : JSON.stringify(bodyOf(route, target)),
  });
}
/** What the table of permissions says of it. */
function expected(route: Route, who: Role | 'signed out', where: string): readonly number[] {
  if (route.permission === 'public') return route.served;
  if (who === 'signed out') return isPage(route) ? [303] : [401];
  if (!mayUse(who, route.permission)) return [403];
  if (route.of === 'nothing') return route.served;
  const seen = where === GIVEN || (where === NOT_GIVEN && who !== 'customer');
  return seen ? route.served : [404];
}
const places = (route: Route) =>
  route.of === 'nothing' ? ['nowhere'] : [GIVEN, NOT_GIVEN, FOREIGN, 'nowhere'];
/** Signing out would end the session that the others of the matrix use. */
const asked = ROUTES.filter((r) => r.file !== 'api/sign-out.ts');

describe.each([...ROLES, 'signed out' as const])('%s', (who) => {
  it.each(
    asked.flatMap((route) => places(route).map((where) => [route.method, route.file, where, route] as const)),
  )('%s %s, %s', async (_method, _file, where, route) => {
    const response = await ask(route, who, targetOf(where));
    const body = await response.text();
    expect(expected(route, who, where), `${response.status}: ${body.slice(0, 400)}`).toContain(
      response.status,
    );
    if (route.permission !== 'public' && who === 'signed out' && isPage(route))
      expect(response.headers.get('location')).toMatch(/^\/sign-in(\?next=|$)/);
    // what a person may not see is not in any answer, whatever was asked
    if (who !== 'signed out') {
      expect(body).not.toContain(FOREIGN);
      if (who === 'customer') expect(body).not.toContain(NOT_GIVEN);
    }
  });
});

/** Whoever sees least of those who may at all. */
const asking = (route: Route): Role =>
  route.permission === 'customer_page.read'
    ? 'customer'
    : route.permission === 'public' || mayUse('technician', route.permission)
      ? 'technician'
      : 'manager';
describe('what is somebody else’s looks like what is not there', () => {
  const named = ROUTES.filter((r) => r.of !== 'nothing');
  it.each(named.map((r) => [r.method, r.file, r] as const))('%s %s', async (_m, _f, route) => {
    const plain = async (target: Target) => {
      const response = await ask(route, asking(route), target);
      const body = (await response.text())
        .replace(/[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}/g, 'ID')
        .replace(/uid="[^"]*"/g, '');
      return { status: response.status, body };
    };
    const foreign = await plain(targetOf(FOREIGN));
    expect(foreign).toEqual(await plain(ABSENT));
    expect(foreign.status).toBe(404);
  });
  it.each(named.map((r) => [r.method, r.file, r] as const))(
    '%s %s with an identifier that is none',
    async (_m, _f, route) => {
      for (const bad of ['1', 'x', '%00', "'--"]) {
        const response = await ask(route, 'manager', {
          site: encodeURIComponent(bad),
          string: encodeURIComponent(bad),
        });
        expect([404, 400]).toContain(response.status);
      }
    },
  );
  it('a string at the address of another site is not there', async () => {
    const route = ROUTES.find((r) => r.file === 'sites/[site]/strings/[string].astro');
    if (!route) throw new Error('the route of a string is gone');
    for (const string of [targetOf(NOT_GIVEN).string, targetOf(FOREIGN).string]) {
      const response = await ask(route, 'manager', { site: targetOf(GIVEN).site, string });
      expect(response.status).toBe(404);
    }
  });
});

describe('requests of another site', () => {
  it.each(ROUTES.filter((r) => r.method !== 'GET').map((r) => [r.method, r.file, r] as const))(
    '%s %s is refused, whoever is signed in',
    async (_m, _f, route) => {
      const response = await fetch(site.url + route.path(targetOf(GIVEN)), {
        method: route.method,
        headers: {
          origin: 'https://elsewhere.example',
          cookie: cookies.get('manager') ?? '',
          'content-type': 'text/plain',
        },
        body: JSON.stringify(bodyOf(route, targetOf(GIVEN)) ?? {}),
      });
      expect(response.status).toBe(403);
    },
  );
});

describe('the table of permissions', () => {
  it('is used: every permission has a route', () => {
    const used = new Set(ROUTES.map((r) => r.permission));
    expect(Object.keys(PERMISSIONS).filter((p) => !used.has(p as Route['permission']))).toEqual([]);
  });
});
