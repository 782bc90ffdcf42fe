import type { Role } from '../../src/domain/access/permissions';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet, type TestFleet } from '../support/fleet';
import { signInAt, startSite, type RunningSite } from '../support/server';

export const OWN = 'Weirside Clinic';
export const NOT_GIVEN = 'Kestrel Row School';
/** Of another organisation. */
export const FOREIGN = 'Netloft Terrace';
export const STRANGER = 'manager@harbourline.example';
export const emailOf = (role: Role): string => `${role}@lowfield.example`;

export interface Asked {
  method?: string;
  cookie?: string;
  /** Sent as JSON, a string as it is. */
  body?: unknown;
  headers?: Record<string, string>;
  /** false: a client that names no origin. */
  origin?: string | false;
}

/** One running site, at its most talkative, that all attacks are tried on. */
export interface Scene {
  db: TestDatabase;
  fleet: TestFleet;
  site: RunningSite;
  /** Everything that came in by `secret`, which no log may show. */
  secrets: Set<string>;
  secret(text: string): string;
  /** The cookie of somebody who is signed in; signs in at the first call. */
  cookieOf(email: string): Promise<string>;
  ask(path: string, asked?: Asked): Promise<Response>;
  /** A sign-in by the API as it is, right or wrong. */
  signIn(email: string, password: string, more?: Record<string, unknown>, cookie?: string): Promise<Response>;
  /** Tries are forgotten: what is counted against one address would else end the tests. */
  forgiveAll(): Promise<void>;
  end(): Promise<void>;
}

export async function makeScene(): Promise<Scene> {
  const db = await testDatabase();
  const fleet = await testFleet(db, [OWN, NOT_GIVEN, FOREIGN]);
  const site = await startSite(db, { WAKELINE_ROLES: 'web,ingest', LOG_LEVEL: 'debug' });
  const cookies = new Map<string, string>();
  const secrets = new Set<string>([PASSWORD]);
  const secret = (text: string): string => {
    if (text.length >= 6) secrets.add(text);
    return text;
  };
  const ask: Scene['ask'] = (path, asked = {}) => {
    const { method = 'GET', cookie, body, headers = {}, origin = site.url } = asked;
    return fetch(site.url + path, {
      method,
      redirect: 'manual',
      headers: {
        ...(origin === false ? {} : { origin }),
        ...(cookie ? { cookie } : {}),
        ...(body === undefined ? {} : { 'content-type': 'application/json' }),
        ...headers,
      },
      body: body === undefined ? undefined : typeof body === 'string' ? body : JSON.stringify(body),
    });
  };
  return {
    db,
    fleet,
    site,
    secrets,
    secret,
    ask,
    cookieOf: async (email) => {
      const known = cookies.get(email) ?? (await signInAt(site.url, email, PASSWORD));
      cookies.set(email, known);
      secret(known.split('=')[1] ?? '');
      return known;
    },
    signIn: (email, password, more = {}, cookie) =>
      ask('/api/sign-in', {
        method: 'POST',
        cookie,
        body: { email, password: secret(password), ...more },
      }),
    forgiveAll: async () => void (await db.owner.query('delete from rate_limit')),
    end: async () => {
      await site.stop();
      await db.drop();
    },
  };
}

/** Cookies that an answer sets, name to value; an ended one is ''. */
export const cookiesSet = (response: Response): Map<string, string> =>
  new Map(
    response.headers.getSetCookie().map((line) => {
      const [name = '', value = ''] = (line.split(';')[0] ?? '').split('=');
      return [name, value];
    }),
  );
