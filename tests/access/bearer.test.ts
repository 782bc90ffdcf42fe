import { execFile } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { promisify } from 'node:util';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { exampleRequest, exampleValues } from '../../src/server/v1/curl';
import type { Operation } from '../../src/server/v1/operation';
import { OPERATIONS } from '../../src/server/v1/operations';
import { TOKEN_SCOPES } from '../../src/domain/access/scopes';
import { tokenFor } from '../support/api-v1';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet, type TestFleet } from '../support/fleet';
import { signInAt, startSite, type RunningSite } from '../support/server';
import { stand } from '../support/standing';

/**
 * Every operation of /api/v1 over HTTP × who asks: the own token, one held to another site, another organisation's, none, one
 * that ran out, one that was ended, one without the scope, a deactivated person's, a browser's session. And the examples
 * of the page, run as they stand.
 */
const GIVEN = 'Weirside Clinic';
const OTHER = 'Kestrel Row School';
const FOREIGN = 'Netloft Terrace';
const NOW = new Date();

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let cookie: string;
const tokens = new Map<string, string>();
const tests = new Map<string, string>();
const cases = new Map<string, string>();
const causes = new Map<string, string>();

const WHO = [
  'own',
  'other site',
  'other organisation',
  'none',
  'ran out',
  'ended',
  'deactivated',
  'session',
] as const;
type Who = (typeof WHO)[number];

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [GIVEN, OTHER, FOREIGN]);
  for (const name of [GIVEN, OTHER]) {
    await stand(db.owner, fleet.site(name), NOW, (_string, position) =>
      position === 2 ? { state: 'shutdown', verdict: 'stuck' } : null,
    );
    const { rows } = await db.owner.query<{ ref: string }>(
      `insert into shutdown_test (site_id, at, made_by, result, strings) values ($1, $2, 'Nils Ahrend', 'passed', 1)
       returning ref`,
      [fleet.site(name).id, NOW],
    );
    tests.set(name, rows[0]?.ref ?? '');
    const opened = await db.owner.query<{ ref: string }>(
      `insert into case_file (organisation_id, site_id, number, title, origin)
       select organisation_id, id, 900 + id, 'Two units stuck', 'hand' from site where id = $1 returning ref`,
      [fleet.site(name).id],
    );
    cases.set(name, opened.rows[0]?.ref ?? '');
  }
  const manager = await fleet.actor('manager@lowfield.example');
  const analyst = await fleet.actor('analyst@lowfield.example');
  const make = async (who: Who, ...args: Parameters<typeof tokenFor>) => {
    const made = await tokenFor(...args);
    tokens.set(who, made.token);
    return made.id;
  };
  await make('own', manager);
  await make('other site', manager, { sites: [fleet.site(OTHER).ref] });
  await make('other organisation', await fleet.actor('manager@harbourline.example'));
  await make('ran out', manager, { at: new Date(Date.now() - 31 * 86_400_000) });
  const ended = await make('ended', manager);
  await db.owner.query('update api_token set ended_at = now() where ref = $1', [ended]);
  await make('deactivated', analyst);
  await db.owner.query('update person set active = false where id = $1', [analyst.personId]);
  for (const scope of TOKEN_SCOPES)
    tokens.set(
      `without ${scope}`,
      (await tokenFor(manager, { scopes: TOKEN_SCOPES.filter((s) => s !== scope) })).token,
    );
  site = await startSite(db, { WAKELINE_ROLES: 'web' }); // what stands here is not judged anew
  cookie = await signInAt(site.url, 'manager@lowfield.example', PASSWORD);
  const found = await fetch(`${site.url}/api/v1/causes`, {
    headers: { authorization: `Bearer ${tokens.get('own')}` },
  });
  const { data } = (await found.json()) as { data: { key: string; siteId: string }[] };
  for (const cause of data) causes.set(cause.siteId, cause.key);
});
afterAll(async () => {
  await site.stop();
  await db.drop();
});

function ask(operation: Operation, who: string, where = GIVEN): Promise<Response> {
  const { ref, strings } = fleet.site(where);
  const values = exampleValues(
    NOW,
    { site: ref, string: [...strings.values()][0]?.ref ?? '' },
    {
      cause: { key: causes.get(ref) ?? 'none', siteId: ref },
      test: tests.get(where),
      case: cases.get(where),
    },
  );
  const { path, body } = exampleRequest(operation, { ...values, ref: randomUUID() });
  const token = tokens.get(who);
  return fetch(site.url + path, {
    method: operation.method,
    headers: {
      ...(token === undefined ? {} : { authorization: `Bearer ${token}` }),
      ...(who === 'session' ? { cookie, origin: site.url } : {}),
      ...(body === undefined ? {} : { 'content-type': 'application/json' }),
    },
    body: body === undefined ? undefined : JSON.stringify(body),
  });
}

/** What names a thing of a site at its address or in its body; lists only leave it out. */
const names = (o: Operation): boolean => o.path.includes('{') || o.kind === 'stream' || o.method === 'POST';
function expected(o: Operation, who: Who): number[] {
  if (who === 'own') return o.kind === 'stream' ? [200] : Object.keys(o.statuses).map(Number);
  if (who === 'other site' || who === 'other organisation') return names(o) ? [404] : [200];
  return [401];
}

describe.each(WHO)('%s', (who) => {
  it.each(OPERATIONS.map((o) => [o.method, o.path, o] as const))(
    '%s %s',
    async (_method, _path, operation) => {
      const response = await ask(operation, who);
      const text = await response.text();
      expect(expected(operation, who), `${response.status}: ${text.slice(0, 300)}`).toContain(
        response.status,
      );
      if (who !== 'other organisation') expect(text).not.toContain(FOREIGN);
      if (who !== 'own') expect(text).not.toContain(GIVEN);
      expect(response.headers.get('set-cookie')).toBeNull();
      if (response.status === 401) expect(response.headers.get('www-authenticate')).toMatch(/^Bearer /);
      else expect(response.headers.get('ratelimit')).toMatch(/^"requests";r=\d+;t=\d+$/);
    },
  );
});

describe('a token without the scope', () => {
  const scoped = OPERATIONS.filter((o) => o.scope !== null);
  it.each(scoped.map((o) => [o.method, o.path, o] as const))('%s %s', async (_method, _path, operation) => {
    const response = await ask(operation, `without ${operation.scope}`);
    expect(response.status).toBe(403);
    expect(response.headers.get('www-authenticate')).toContain(`scope="${operation.scope}"`);
  });
});

describe('the examples of the page', () => {
  const unescaped = (html: string) =>
    html
      .replace(/&#x27;|&#39;/g, "'")
      .replace(/&quot;/g, '"')
      .replace(/&lt;/g, '<')
      .replace(/&gt;/g, '>')
      .replace(/&amp;/g, '&');
  it('run in a shell as they stand, one for each operation', async () => {
    const html = await (await fetch(`${site.url}/developers`, { headers: { cookie } })).text();
    const examples = [...html.matchAll(/<pre data-example="(\w+)"[^>]*>([^<]*)<\/pre>/g)];
    expect(examples.map((e) => e[1])).toEqual(OPERATIONS.map((o) => o.id));
    for (const [, id, curl] of examples) {
      const { stdout } = await promisify(execFile)('sh', ['-c', unescaped(curl ?? '')], {
        env: { ...process.env, WAKELINE_TOKEN: tokens.get('own') },
        maxBuffer: 64 * 1024 * 1024,
      });
      const operation = OPERATIONS.find((o) => o.id === id);
      if (operation?.kind === 'json')
        expect(operation.answer.safeParse(JSON.parse(stdout)).error, id).toBeUndefined();
    }
  });
});

describe('nothing of a token', () => {
  it('is in what the server says', () => {
    for (const token of tokens.values()) expect(site.output()).not.toContain(token.slice(4, 30));
  });
});
