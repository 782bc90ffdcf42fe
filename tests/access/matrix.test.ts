import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { PERMISSIONS, ROLES, mayUse, type Role } from '../../src/domain/access/permissions';
import { newToken, tokenHash } from '../../src/server/auth/secret-link';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet, type TestFleet } from '../support/fleet';
import { signInAt, startSite, type RunningSite } from '../support/server';
import { ROUTES, type Route, type Target } from './routes';

/**
 * Every route × manager, technician, analyst, customer, signed out × a site that was given, another site of the
 * organisation, a site of another organisation, a site that is not there; and × a manager who was deactivated after
 * signing in, and a link that shares the given site, held out as a session and as a token. What is expected follows
 * from the table of permissions alone.
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

const GONE = 'gone@lowfield.example';
/** Nobody who is signed in now, whatever they hold out. */
const OUTSIDE = ['signed out', 'deactivated', 'share link'] as const;
type Who = Role | (typeof OUTSIDE)[number];
const isInside = (who: Who): who is Role => !(OUTSIDE as readonly string[]).includes(who);

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
/** What each of them sends to be known by. */
const held = new Map<Who, Record<string, string>>([['signed out', {}]]);
const targets = new Map<string, Target>();

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [GIVEN, NOT_GIVEN, FOREIGN]);
  for (const name of [GIVEN, NOT_GIVEN, FOREIGN]) {
    const { ref, strings } = fleet.site(name);
    targets.set(name, { site: ref, string: [...strings.values()][0]?.ref ?? '' });
  }
  site = await startSite(db);
  for (const role of ROLES) held.set(role, { cookie: await signInAt(site.url, PEOPLE[role], PASSWORD) });
  await db.owner.query(
    `insert into person (organisation_id, email, name, role, password_hash)
     select organisation_id, $2, 'Sunniva Quill', role, password_hash from person where email = $1`,
    [PEOPLE.manager, GONE],
  );
  held.set('deactivated', { cookie: await signInAt(site.url, GONE, PASSWORD) });
  // the row of the session stays: it is the person that no longer counts
  await db.owner.query('update person set active = false where email = $1', [GONE]);
  const token = newToken();
  await db.owner.query(
    `insert into share_link (site_id, label, token_hash, created_by) select $1, 'Lobby', $2, id from person where email = $3`,
    [fleet.site(GIVEN).id, tokenHash(token), PEOPLE.manager],
  );
  held.set('share link', {
    cookie: `wakeline_session=${token}; wakeline_kept=${token}`,
    authorization: `Bearer ${token}`,
  });
});
afterAll(async () => {
  await site.stop();
  await db.drop();
});

const targetOf = (name: string): Target => targets.get(name) ?? ABSENT;
const bodyOf = (route: Route, target: Target): unknown =>
  typeof route.body === 'function' ? (route.body as (target: Target) => unknown)(target) : route.body;
function ask(route: Route, who: Who, target: Target): Promise<Response> {
  return fetch(site.url + route.path(target), {
    method: route.method,
    redirect: 'manual',
    headers: {
      origin: site.url,
      ...held.get(who),
      ...(route.body === undefined ? {} : { 'content-type': 'application/json' }),
    },
    body: route.body === undefined ? undefined : JSON.stringify(bodyOf(route, target)),
  });
}
const goesElsewhere = (route: Route, who: Who): boolean =>
  who === 'customer' && route.customerGoesTo !== undefined;
/** What the table of permissions says of it. */
function expected(route: Route, who: Who, where: string): readonly number[] {
  if (route.permission === 'public') return route.served;
  if (!isInside(who)) return isPage(route) ? [303] : [401];
  if (!mayUse(who, route.permission)) return [goesElsewhere(route, who) ? 303 : 403];
  if (route.of === 'nothing') return route.served;
  const seen = where === GIVEN || (where === NOT_GIVEN && who !== 'customer');
  return seen ? route.served : [404];
}
/** Who is known but let in no longer is tried where they were, or are shown something. */
const places = (route: Route, who: Who) => {
  if (route.of === 'nothing') return ['nowhere'];
  return who === 'deactivated' || who === 'share link' ? [GIVEN] : [GIVEN, NOT_GIVEN, FOREIGN, 'nowhere'];
};
/** Signing out would end the session that the others of the matrix use. */
const asked = ROUTES.filter((r) => r.file !== 'api/sign-out.ts');

describe.each<Who>([...ROLES, ...OUTSIDE])('%s', (who) => {
  it.each(
    asked.flatMap((route) =>
      places(route, who).map((where) => [route.method, route.file, where, route] as const),
    ),
  )('%s %s, %s', async (_method, _file, where, route) => {
    const response = await ask(route, who, targetOf(where));
    const body = await response.text();
    expect(expected(route, who, where), `${response.status}: ${body.slice(0, 400)}`).toContain(
      response.status,
    );
    if (route.permission !== 'public' && !isInside(who) && isPage(route))
      expect(response.headers.get('location')).toMatch(/^\/sign-in(\?next=|$)/);
    if (goesElsewhere(route, who)) expect(response.headers.get('location')).toBe(route.customerGoesTo);
    // what a person may not see is not in any answer, whatever was asked
    if (isInside(who)) {
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
          ...held.get('manager'),
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
