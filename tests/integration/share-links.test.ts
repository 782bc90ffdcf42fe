import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { DELETE } from '../../src/pages/api/share-links/[link]';
import { GET as READ } from '../../src/pages/api/shared/[token]';
import { GET as LIST, POST } from '../../src/pages/api/sites/[site]/share-links';
import {
  shareLinkBody,
  sharedSite,
  shareLinks,
  type MadeShareLink,
  type ShareLinkBody,
  type SharedSite,
} from '../../src/schemas/api/share';
import { asActor } from '../../src/server/db/transaction';
import { newToken } from '../../src/server/auth/secret-link';
import {
  makeShareLink,
  sharedPage,
  siteShareLinks,
  withdrawShareLink,
} from '../../src/server/services/share-links';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';

const CLINIC = 'Weirside Clinic';
const OTHER = 'Kestrel Row School';
const FOREIGN = 'Netloft Terrace';
const AT = new Date('2026-12-01T11:00:00Z');
const MINUTE = 60_000;
let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;
let stranger: Actor;
let address = 0;
/** A new place for each try, so that no test uses up another's. */
const somewhere = () => `192.0.2.${++address}`;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, OTHER, FOREIGN]);
  manager = await fleet.actor('manager@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  await db.owner.query(
    `update site set time_zone = 'Europe/London', switched_on_on = '2025-03-12', place = 'Aldermere Quay',
            shutdown_switch_place = 'east stairwell, ground floor';
     update organisation set phone = '+44 1632 960111'`,
  );
});
afterAll(() => db.drop());

const make = (more: Partial<ShareLinkBody> = {}, actor = manager, site = CLINIC, at = AT) =>
  asActor(actor, (tx) =>
    makeShareLink(
      tx,
      actor,
      fleet.site(site).ref,
      { label: 'Lobby', kiosk: false, endsOn: null, framedBy: null, ...more },
      { at, address: '192.0.2.200', origin: 'https://roofs.example' },
    ),
  );
const tokenOf = (made: MadeShareLink) => made.address.split('/shared/')[1] ?? '';
const end = (made: MadeShareLink, actor = manager) =>
  asActor(actor, (tx) => withdrawShareLink(tx, actor, made.link.id, AT, '192.0.2.200'));
const list = async (site = CLINIC, at = AT) =>
  (await asActor(manager, (tx) => siteShareLinks(tx, fleet.site(site).ref, at))).links;

describe('a link', () => {
  it('shows its site to whoever has it, and is told once', async () => {
    const made = await make({ label: 'Lobby', kiosk: true });
    expect(made.address).toMatch(/^https:\/\/roofs\.example\/shared\/[\w-]{43}$/);
    const site = await sharedPage(tokenOf(made), AT, somewhere());
    expect(site).toMatchObject({ name: CLINIC, organisation: 'Lowfield Solar Works', kiosk: true });
    const { rows } = await db.owner.query<{ kept: string }>('select l::text as kept from share_link l');
    expect(rows.map((r) => r.kept).join()).not.toContain(tokenOf(made));
    expect(JSON.stringify(await list())).not.toContain(tokenOf(made));
  });

  it('of a lobby screen may name one page that shows it in a frame', async () => {
    const framedBy = 'https://screens.example';
    const made = await make({ label: 'Framed', kiosk: true, framedBy });
    expect((await sharedPage(tokenOf(made), AT, somewhere())).framedBy).toBe(framedBy);
    const body = { label: 'Framed', kiosk: true, endsOn: null };
    expect(shareLinkBody.parse({ ...body, framedBy: ' https://SCREENS.example/ ' }).framedBy).toBe(framedBy);
    for (const wrong of [
      { ...body, kiosk: false, framedBy },
      ...[
        'screens.example',
        'https://screens.example/page',
        'https://a.example https://b.example',
        "https://a.example; script-src 'unsafe-inline'",
        'https://a.example\r\nset-cookie: x=1',
        'javascript:alert(1)',
        "'self'",
        '*',
        'https://*.example',
      ].map((text) => ({ ...body, framedBy: text })),
    ])
      expect(shareLinkBody.safeParse(wrong).error?.issues.map((i) => i.path.join('.'))).toEqual(['framedBy']);
  });

  it('tells when it was last used, at most every minute', async () => {
    const made = await make({ label: 'Newsletter' });
    const lastUsed = async () => (await list()).find((l) => l.id === made.link.id)?.lastUsedAt;
    expect(await lastUsed()).toBeNull();
    await sharedPage(tokenOf(made), AT, somewhere());
    await sharedPage(tokenOf(made), new Date(AT.getTime() + MINUTE / 2), somewhere());
    expect(await lastUsed()).toBe(AT.toISOString());
    await sharedPage(tokenOf(made), new Date(AT.getTime() + 2 * MINUTE), somewhere());
    expect(await lastUsed()).toBe(new Date(AT.getTime() + 2 * MINUTE).toISOString());
  });

  it('ends with the last day at the site, not before and not later', async () => {
    await db.owner.query(`update site set time_zone = 'America/New_York' where id = $1`, [
      fleet.site(OTHER).id,
    ]);
    const made = await make({ endsOn: '2026-12-01' }, manager, OTHER);
    expect(made.link.expiresAt).toBe('2026-12-02T05:00:00.000Z');
    const before = new Date('2026-12-02T04:59:59Z');
    const after = new Date('2026-12-02T05:00:00Z');
    expect((await sharedPage(tokenOf(made), before, somewhere())).name).toBe(OTHER);
    expect((await failure(sharedPage(tokenOf(made), after, somewhere()))).kind).toBe('not_found');
    expect((await list(OTHER, before))[0]?.state).toBe('open');
    expect((await list(OTHER, after))[0]?.state).toBe('expired');
  });

  it('is not made for a day that is over', async () => {
    const { kind, detail } = await failure(make({ endsOn: '2026-11-30' }));
    expect(kind).toBe('invalid');
    expect(detail.fields?.[0]?.field).toBe('endsOn');
  });

  it('that is ended, ran out, was forged or never made is refused in the same words', async () => {
    const ended = await make({ label: 'Fair' });
    await end(ended);
    const expired = await make({ label: 'Week', endsOn: '2026-12-01' });
    const whole = tokenOf(await make({ label: 'Whole' }));
    const later = new Date('2026-12-03T00:00:00Z');
    const answers = await Promise.all(
      [
        tokenOf(ended),
        tokenOf(expired),
        newToken(),
        whole.slice(0, -1),
        `${whole}=`,
        whole.split('').reverse().join(''),
        "' or true --",
        '',
      ].map((token) => failure(sharedPage(token, later, somewhere()))),
    );
    expect(new Set(answers.map((a) => `${a.kind} ${a.message}`)).size).toBe(1);
    expect(answers[0]?.kind).toBe('not_found');
    expect((await sharedPage(whole, later, somewhere())).name).toBe(CLINIC);
  });

  it('that is guessed at is throttled, and the guesses darken no screen behind the same connection', async () => {
    const made = await make({ label: 'Screen' });
    const place = '198.51.100.7';
    const kinds = new Set<string>();
    for (let i = 0; i < 62; i++) kinds.add((await failure(sharedPage(newToken(), AT, place))).kind);
    expect([...kinds]).toEqual(['not_found', 'too_many']);
    expect((await sharedPage(tokenOf(made), AT, place)).name).toBe(CLINIC);
  });
});

describe('who may', () => {
  it('another organisation’s manager neither makes, lists nor ends', async () => {
    expect((await failure(make({}, stranger))).kind).toBe('not_found');
    const made = await make({ label: 'Ours' });
    expect((await failure(end(made, stranger))).kind).toBe('not_found');
    const listed = asActor(stranger, (tx) => siteShareLinks(tx, fleet.site(CLINIC).ref, AT));
    expect((await failure(listed)).kind).toBe('not_found');
    expect((await sharedPage(tokenOf(made), AT, somewhere())).name).toBe(CLINIC);
  });

  it('an actor of another site of the organisation does not end it', async () => {
    const made = await make({ label: 'Ours too' });
    const elsewhere: Actor = { ...manager, sites: [fleet.site(OTHER).id] };
    expect((await failure(end(made, elsewhere))).kind).toBe('not_found');
  });

  it.each(['technician', 'analyst', 'customer'] as const)('%s: none of it', async (role) => {
    const actor = await fleet.actor(`${role}@lowfield.example`);
    const params = { site: fleet.site(CLINIC).ref, link: (await make()).link.id };
    const body = { label: 'Mine', kiosk: false, endsOn: null, framedBy: null };
    expect((await ask(POST, { actor, params, method: 'POST', body })).status).toBe(403);
    expect((await ask(LIST, { actor, params })).status).toBe(403);
    expect((await ask(DELETE, { actor, params, method: 'DELETE' })).status).toBe(403);
  });

  it('a manager, over the API, with what is wrong named at its field', async () => {
    const params = { site: fleet.site(CLINIC).ref };
    const wrong = await ask(POST, {
      actor: manager,
      params,
      method: 'POST',
      body: { label: ' ', kiosk: false, endsOn: 'soon' },
    });
    expect(wrong.status).toBe(422);
    const { fields } = (await wrong.json()) as { fields: { field: string }[] };
    expect(fields.map((f) => f.field)).toEqual(['body.label', 'body.endsOn']);
    const made = await ask(POST, {
      actor: manager,
      params,
      method: 'POST',
      body: { label: 'API', kiosk: false, endsOn: null },
    });
    const { link, address: href } = (await made.json()) as MadeShareLink;
    expect(new URL(href).pathname).toMatch(/^\/shared\/[\w-]{43}$/);
    const listed = shareLinks.parse(await (await ask(LIST, { actor: manager, params })).json());
    expect(listed.links.map((l) => l.id)).toContain(link.id);
    const over = await ask(DELETE, { actor: manager, params: { link: link.id }, method: 'DELETE' });
    expect(((await over.json()) as { state: string }).state).toBe('ended');
    const again = await ask(DELETE, { actor: manager, params: { link: link.id }, method: 'DELETE' });
    expect(again.status).toBe(404);
  });

  it('is written down, who made and who ended it, without the token', async () => {
    const made = await make({ label: 'Written', kiosk: true, endsOn: '2026-12-24' });
    await end(made);
    const { rows } = await db.owner.query<{ action: string; site: number; person: number; all: string }>(
      `select action, site_id as site, person_id as person, a::text as all from audit_entry a
       where subject = 'shared page “Written”' order by id`,
    );
    expect(rows.map((r) => r.action)).toEqual(['share.made', 'share.ended']);
    for (const row of rows) {
      expect(row).toMatchObject({ site: fleet.site(CLINIC).id, person: manager.personId });
      expect(row.all).not.toContain(tokenOf(made));
    }
    expect(rows[0]?.all).toContain('2026-12-24');
  });
});

describe('what is shown', () => {
  const read = async (): Promise<{ site: SharedSite; text: string; headers: Headers }> => {
    const made = await make();
    const response = await ask(READ, { actor: null, params: { token: tokenOf(made) } });
    expect(response.status).toBe(200);
    const text = await response.text();
    return { site: sharedSite.parse(JSON.parse(text)), text, headers: response.headers };
  };

  it('is less than the owner sees: no address, no telephone, no person, no identifier, no serial', async () => {
    const { rows } = await db.owner.query<{ secret: string }>(
      `select ref::text as secret from site where name = $1
       union all select serial from unit u join placement p on p.unit_id = u.id join slot on slot.id = p.slot_id
         join string s on s.id = slot.string_id join site on site.id = s.site_id where site.name = $1
       union all select serial from logger l join site on site.id = l.site_id where site.name = $1
       union all select name from person
       union all select email from person`,
      [CLINIC],
    );
    expect(rows.length).toBeGreaterThan(20);
    const { text } = await read();
    for (const secret of [
      'Aldermere Quay',
      'east stairwell',
      '960111',
      ...rows.map((r) => r.secret),
      OTHER,
      FOREIGN,
    ])
      expect(text).not.toContain(secret);
  });

  it('is never kept, indexed or told to others', async () => {
    const { headers } = await read();
    expect(headers.get('cache-control')).toBe('no-store');
    expect(headers.get('x-robots-tag')).toBe('noindex');
    expect(headers.get('referrer-policy')).toBe('no-referrer');
  });

  it('sums the year from its first day, and today once', async () => {
    const made = await make();
    const { id } = fleet.site(CLINIC);
    await db.owner.query(
      `insert into site_day (day, site_id, energy_ac, energy_dc, energy_expected, lost_minutes, lost_minutes_grid, complete)
       select day::date, $1, 1000, 1000, null, 0, 0, 1
       from unnest(array['2025-12-31', '2026-01-01', '2026-07-01', '2026-11-30', '2026-12-01']) day`,
      [id],
    );
    await db.owner.query(
      `insert into site_quarter (at, site_id, ac_power)
       select '2026-12-01T10:00:00Z'::timestamptz + i * interval '15 min', $1, 4000 from generate_series(0, 3) i`,
      [id],
    );
    const site = await sharedPage(tokenOf(made), AT, somewhere());
    expect(site.year).toEqual({ first: '2026-01-01', energy: 3000 + 4000 });
    expect(site.life?.energy).toBe(4000 + 4000);
    expect(site.month.energy).toBe(4000);
  });
});
