import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { asActor } from '../../src/server/db/transaction';
import { endToken, tokensPage } from '../../src/server/services/api-tokens';
import { changePerson } from '../../src/server/services/people';
import { OPERATIONS } from '../../src/server/v1/operations';
import { askV1, tokenFor, writeFrames } from '../support/api-v1';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';
import { stand } from '../support/standing';

const CLINIC = 'Weirside Clinic';
const SCHOOL = 'Kestrel Row School';
const FOREIGN = 'Netloft Terrace';
const NOW = new Date(Math.floor(Date.now() / 60_000) * 60_000);
const FROM = new Date(Math.floor(NOW.getTime() / 86_400_000) * 86_400_000 - 86_400_000);
const MINUTES = 180;

let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;
let analyst: Actor;
let stranger: Actor;
let token: string;

interface Page<T> {
  data: T[];
  next: string | null;
}
interface Problem {
  status: number;
  detail: string;
  fields: { field: string; message: string }[];
}
const read = async <T>(path: string, by = token): Promise<T> => {
  const response = await askV1(path, { token: by });
  expect(response.status, await response.clone().text()).toBe(200);
  return (await response.json()) as T;
};
const refusal = async (response: Response): Promise<Problem> => {
  expect(response.headers.get('content-type')).toBe('application/problem+json');
  return (await response.json()) as Problem;
};
const within = (site: string) => ({
  from: FROM.toISOString(),
  to: new Date(FROM.getTime() + MINUTES * 60_000).toISOString(),
  site: fleet.site(site).ref,
});
const framesPath = (more: Record<string, string> = {}, site = CLINIC): string =>
  `/telemetry/frames?${new URLSearchParams({ ...within(site), ...more }).toString()}`;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, SCHOOL, FOREIGN]);
  manager = await fleet.actor('manager@lowfield.example');
  analyst = await fleet.actor('analyst@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  for (const name of [CLINIC, SCHOOL])
    await stand(db.owner, fleet.site(name), NOW, (_string, position) =>
      position === 3 ? { state: 'shutdown', verdict: 'stuck', since: NOW } : null,
    );
  for (const name of [CLINIC, FOREIGN]) await writeFrames(db.owner, fleet.site(name).id, FROM, MINUTES);
  ({ token } = await tokenFor(manager));
});
afterAll(() => db.drop());

describe('a token', () => {
  it('is shown once and kept as a hash; its making leaves a trace that does not name it', async () => {
    const { rows } = await db.owner.query<{ text: string }>(
      `select row_to_json(t)::text as text from api_token t
       union all select row_to_json(a)::text from audit_entry a where action like 'account.token%'`,
    );
    expect(rows.length).toBeGreaterThan(1);
    for (const { text } of rows) expect(text).not.toContain(token.slice(4, 40));
    const page = await asActor(manager, (tx) => tokensPage(tx, manager, new Date()));
    expect(JSON.stringify(page)).not.toContain(token.slice(4, 40));
    expect(page.tokens[0]?.ending).toBe(token.slice(-4));
  });

  it('says whose it is, and notes when and from where it was used', async () => {
    const me = await read<{ person: { name: string }; organisation: { name: string } }>('/me');
    expect(me.organisation.name).toBe('Lowfield Solar Works');
    const page = await asActor(manager, (tx) => tokensPage(tx, manager, new Date()));
    expect(page.tokens.find((t) => t.ending === token.slice(-4))).toMatchObject({
      lastAddress: '192.0.2.9',
      lastUsedAt: expect.any(String) as unknown,
    });
  });

  it('that is none, ran out, was ended, or whose person may not sign in any more lets nobody in', async () => {
    const old = await tokenFor(manager, { at: new Date(Date.now() - 31 * 86_400_000) });
    const ended = await tokenFor(manager);
    const caller = { actor: manager, address: null };
    await asActor(manager, (tx) => endToken(tx, caller, ended.id, new Date()));
    for (const bad of [undefined, 'x', `wlk_${'a'.repeat(43)}`, old.token, ended.token]) {
      const response = await askV1('/me', { token: bad });
      expect(response.status).toBe(401);
      expect(response.headers.get('www-authenticate')).toMatch(/^Bearer realm="wakeline"/);
    }
    const { token: mine } = await tokenFor(analyst);
    await read('/me', mine);
    const [{ ref } = { ref: '' }] = (
      await db.owner.query<{ ref: string }>('select ref from person where id = $1', [analyst.personId])
    ).rows;
    const active = (is: boolean) =>
      asActor(manager, (tx) => changePerson(tx, manager, ref, { active: is }, new Date(), null));
    await active(false);
    expect((await askV1('/me', { token: mine })).status).toBe(401);
    await active(true);
    expect((await askV1('/me', { token: mine })).status, 'ended with the person').toBe(401);
  });

  it('never does more than its person: another role, and another person’s is nobody’s', async () => {
    const { token: mine, id } = await tokenFor(analyst);
    await db.owner.query(`update person set role = 'customer' where id = $1`, [analyst.personId]);
    try {
      expect((await askV1('/sites', { token: mine })).status).toBe(403);
    } finally {
      await db.owner.query(`update person set role = 'analyst' where id = $1`, [analyst.personId]);
    }
    const caller = { actor: manager, address: null };
    const refused = await failure(asActor(manager, (tx) => endToken(tx, caller, id, new Date())));
    expect(refused.kind).toBe('not_found');
  });

  it('needs the password, and sites that its person sees', async () => {
    const wrong = await failure(tokenFor(manager, { password: 'another-one-of-mine' }));
    expect(wrong).toMatchObject({ kind: 'invalid', detail: { fields: [{ field: 'current' }] } });
    const foreign = await failure(tokenFor(stranger, { sites: [fleet.site(CLINIC).ref] }));
    expect(foreign).toMatchObject({ kind: 'invalid', detail: { fields: [{ field: 'sites' }] } });
  });

  it('is counted: what is left is said, and past it comes 429 with the wait', async () => {
    const { token: mine, id } = await tokenFor(manager);
    const first = await askV1('/me', { token: mine });
    expect(first.headers.get('ratelimit-policy')).toBe('"requests";q=600;w=60');
    expect(first.headers.get('ratelimit')).toMatch(/^"requests";r=599;t=\d+$/);
    await db.owner.query(
      `update rate_limit set points = 600 where key = 'api:' || (select id from api_token where ref = $1)`,
      [id],
    );
    const last = await askV1('/me', { token: mine });
    expect(last.status).toBe(429);
    expect(Number(last.headers.get('retry-after'))).toBeGreaterThan(0);
  });
});

describe('a list', () => {
  it('comes page by page, each thing once, in one order', async () => {
    const all = await read<Page<{ string: { name: string }; position: number; site: { name: string } }>>(
      `/units?site=${fleet.site(CLINIC).ref}&limit=200`,
    );
    const seen: unknown[] = [];
    let cursor: string | null = null;
    let pages = 0;
    do {
      const path = `/units?site=${fleet.site(CLINIC).ref}&limit=7${cursor ? `&cursor=${cursor}` : ''}`;
      const page: typeof all = await read(path);
      seen.push(...page.data);
      cursor = page.next;
      pages++;
    } while (cursor);
    expect(pages).toBeGreaterThan(3);
    const key = (u: (typeof all)['data'][0]) => `${u.string.name} ${u.position}`;
    expect((seen as typeof all.data).map(key)).toEqual(all.data.map(key));
  });

  it('says its next address, filters, and refuses what it does not know by name', async () => {
    const response = await askV1('/strings?limit=1', { token });
    const { next } = (await response.clone().json()) as Page<unknown>;
    expect(response.headers.get('link')).toBe(`</api/v1/strings?limit=1&cursor=${next}>; rel="next"`);
    const stuck = await read<Page<{ verdict: string }>>('/units?verdict=stuck&limit=200');
    expect(stuck.data.length).toBeGreaterThan(0);
    expect(new Set(stuck.data.map((u) => u.verdict))).toEqual(new Set(['stuck']));
    const verdicts = await read<Page<{ position: number | null }>>('/verdicts?limit=200');
    expect(verdicts.data.filter((v) => v.position !== null)).toHaveLength(stuck.data.length);
    for (const [path, field] of [
      ['/units?colour=red', 'query.colour'],
      ['/units?limit=0', 'query.limit'],
      ['/units?limit=3&limit=4', 'query.limit'],
      ['/units?cursor=none', 'query.cursor'],
      ['/units?site=x', 'query.site'],
      ['/me?limit=3', 'query.limit'],
      [framesPath({ from: '2026-01-02', to: 'yesterday' }), 'query.from'],
      [framesPath({ to: FROM.toISOString() }), 'query.to'],
    ] as const) {
      const refused = await askV1(path, { token });
      expect(refused.status, path).toBe(422);
      expect((await refusal(refused)).fields.map((f) => f.field)).toContain(field);
    }
  });

  it('of events can be followed: nothing twice, nothing missed, a cursor also at the end', async () => {
    type Events = Page<{ id: string; detail: Record<string, unknown> }>;
    const add = (kind: string) =>
      db.owner.query(
        `insert into event (at, organisation_id, site_id, kind, detail)
         select now(), organisation_id, id, $2, '{"note": "x", "personId": 7}' from site where id = $1`,
        [fleet.site(CLINIC).id, kind],
      );
    await add('roster_changed');
    let page = await read<Events>('/events?order=recorded&limit=200');
    await expect
      .poll(async () => (page = await read<Events>('/events?order=recorded&limit=200')).data.length, {
        timeout: 30_000,
      })
      .toBeGreaterThan(0);
    const seen = page.data.map((e) => e.id);
    expect(page.data.at(-1)?.detail).toEqual({ note: 'x' });
    page = await read<Events>(`/events?order=recorded&cursor=${page.next}`);
    expect(page.data).toEqual([]);
    // one that was begun before and committed after another
    const late = await db.owner.connect();
    await late.query('begin');
    await late.query(
      `insert into event (at, organisation_id, site_id, kind) select now(), organisation_id, id, 'gateway_back' from site where id = $1`,
      [fleet.site(CLINIC).id],
    );
    await add('gateway_silent');
    page = await read<Events>(`/events?order=recorded&cursor=${page.next}`);
    expect(page.data).toEqual([]);
    await late.query('commit');
    late.release();
    const { next } = page;
    await expect
      .poll(async () => (page = await read<Events>(`/events?order=recorded&cursor=${next}`)).data.length, {
        timeout: 30_000,
      })
      .toBe(2);
    expect(seen).not.toContain(page.data[0]?.id);
  });

  it('has a tag by which it is not sent twice; HEAD has no body; other methods are named', async () => {
    const first = await askV1('/strings', { token });
    const etag = first.headers.get('etag') ?? '';
    const again = await askV1('/strings', { token, headers: { 'if-none-match': `"other", W/${etag}` } });
    expect(again.status).toBe(304);
    expect(await again.text()).toBe('');
    const head = await askV1('/strings', { token, method: 'HEAD' });
    expect([head.status, head.headers.get('etag'), await head.text()]).toEqual([200, etag, '']);
    const options = await askV1('/strings', { method: 'OPTIONS' });
    expect([options.status, options.headers.get('allow')]).toEqual([204, 'GET, HEAD, OPTIONS']);
    const wrong = await askV1('/strings', { token, method: 'DELETE' });
    expect([wrong.status, wrong.headers.get('allow')]).toEqual([405, 'GET, HEAD, OPTIONS']);
    expect((await askV1('/nothing', { token })).status).toBe(404);
  });
});

describe('a write', () => {
  const reading = (): Record<string, unknown> => ({
    ref: randomUUID(),
    stringId: [...fleet.site(CLINIC).strings.values()][0]?.ref,
    stage: 'before_energising',
    kind: 'positive_to_negative',
    light: 'bright',
    voltage: 8.4,
    at: NOW.toISOString(),
  });
  const post = (body: unknown, key?: string, by = token) =>
    askV1(`/sites/${fleet.site(CLINIC).ref}/readings`, {
      token: by,
      method: 'POST',
      body,
      headers: key === undefined ? {} : { 'idempotency-key': key },
    });
  const cases = async () =>
    (await db.owner.query<{ n: number }>('select count(*)::int as n from case_file')).rows[0]?.n ?? 0;
  const newCase = (title = 'Hail on the roof') => ({
    ref: randomUUID(),
    site: fleet.site(CLINIC).ref,
    origin: 'hand',
    title,
    kind: 'other',
  });
  const open = (body: unknown, key: string) =>
    askV1('/cases', { token, method: 'POST', body, headers: { 'idempotency-key': key } });

  it('with a key is done once: the same again gets the first reply, another under it is refused', async () => {
    const body = newCase();
    const before = await cases();
    const [one, two] = [await open(body, 'k-1'), await open(body, '"k-1"')];
    expect([one.status, two.status]).toEqual([201, 201]);
    expect(two.headers.get('idempotency-replayed')).toBe('true');
    expect(await two.json()).toEqual(await one.json());
    expect(await cases()).toBe(before + 1);
    const other = await open(newCase('Another'), 'k-1');
    expect(other.status).toBe(422);
    expect((await refusal(other)).fields[0]?.field).toBe('Idempotency-Key');
    await db.owner.query(`update api_reply set at = at - interval '25 hours'`);
    expect((await open(newCase('A day later'), 'k-1')).status).toBe(201);
    expect((await open(newCase(), 'with blank')).status).toBe(422);
  });

  it('sent twice at the same time is done once', async () => {
    const body = newCase('Twice at once');
    const before = await cases();
    const replies = await Promise.all([0, 1, 2].map(() => open(body, 'k-2')));
    const statuses = replies.map((r) => r.status);
    expect(statuses).toContain(201);
    expect(statuses.filter((s) => s !== 201 && s !== 409)).toEqual([]);
    expect(await cases()).toBe(before + 1);
  });

  it('that was refused leaves nothing, so it can be mended under the same key', async () => {
    const wrong = await post({ ...reading(), voltage: 9999 }, 'k-3');
    expect((await refusal(wrong)).fields[0]?.field).toBe('body.voltage');
    const right = await post(reading(), 'k-3');
    expect(right.status).toBe(201);
    expect(await right.json()).toMatchObject({
      voltage: 8.4,
      finding: { outcome: expect.any(String) as unknown },
    });
  });

  it('leaves a trace with the token that it came by; a token without the scope writes nothing', async () => {
    const { rows } = await db.owner.query<{ after: { operation: string } }>(
      `select after from audit_entry where action = 'account.token_wrote' order by id`,
    );
    expect(rows.map((r) => r.after.operation)).toContain('recordMeterReading');
    const { token: reader } = await tokenFor(manager, { scopes: ['sites:read'] });
    const refused = await post(reading(), undefined, reader);
    expect(refused.status).toBe(403);
    expect(refused.headers.get('www-authenticate')).toContain('error="insufficient_scope", scope="write"');
  });

  it('acknowledges a cause in the name of its person', async () => {
    const { data } = await read<Page<{ key: string; siteId: string }>>('/causes');
    const [cause] = data;
    const reply = await askV1(`/sites/${cause?.siteId}/acknowledgements`, {
      token,
      method: 'POST',
      body: { key: cause?.key },
    });
    expect(reply.status).toBe(200);
    expect(await reply.json()).toMatchObject({ key: cause?.key, siteId: cause?.siteId });
  });
});

describe('what is not one’s own', () => {
  const paths = (site: string): string[] => {
    const { ref, strings } = fleet.site(site);
    const string = [...strings.values()][0]?.ref ?? '';
    return [
      `/sites/${ref}`,
      `/strings/${string}`,
      framesPath({}, site),
      `/telemetry/days?${new URLSearchParams({ string, from: '2026-01-01', to: '2026-12-31' }).toString()}`,
    ];
  };
  const lists = (): string[] =>
    OPERATIONS.filter((o) => o.kind === 'json' && o.method === 'GET' && !o.path.includes('{')).map(
      (o) => o.path,
    );

  it('of another organisation is not there, in no list and at no address', async () => {
    const { token: theirs } = await tokenFor(stranger);
    for (const path of paths(CLINIC)) {
      const refused = await askV1(path, { token: theirs });
      expect(refused.status, path).toBe(404);
    }
    for (const path of lists()) {
      const text = await (await askV1(path, { token: theirs })).text();
      expect(text, path).not.toContain(CLINIC);
    }
    for (const [path, body] of [
      [`/sites/${fleet.site(CLINIC).ref}/acknowledgements`, { key: 'x' }],
      [
        '/cases',
        { ref: randomUUID(), site: fleet.site(CLINIC).ref, origin: 'hand', title: 'Not mine', kind: 'other' },
      ],
    ] as const)
      expect((await askV1(path, { token: theirs, method: 'POST', body })).status).toBe(404);
  });

  it('of another site is not there either, where the token names its sites', async () => {
    const { token: held } = await tokenFor(manager, { sites: [fleet.site(SCHOOL).ref] });
    for (const path of paths(CLINIC)) expect((await askV1(path, { token: held })).status, path).toBe(404);
    for (const path of paths(SCHOOL)) {
      const response = await askV1(path, { token: held });
      expect(response.status, path).toBe(200);
      await response.text();
    }
    for (const path of lists())
      expect(await (await askV1(path, { token: held })).text(), path).not.toContain(CLINIC);
    const sites = await read<Page<{ name: string }>>('/sites', held);
    expect(sites.data.map((s) => s.name)).toEqual([SCHOOL]);
  });
});
