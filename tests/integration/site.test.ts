import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { GET as siteRoute } from '../../src/pages/api/sites/[site]/index';
import { GET as eventsRoute } from '../../src/pages/api/sites/[site]/events';
import { GET as eventsCsvRoute } from '../../src/pages/api/sites/[site]/events.csv';
import { received, type Sent } from '../../src/schemas/api/causes-on-the-way';
import { eventsPage, sitePage, type SitePage } from '../../src/schemas/api/site';
import { database } from '../../src/server/db/pools';
import { asActor } from '../../src/server/db/transaction';
import { readSite } from '../../src/server/services/site-page';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';
import { command, stand } from '../support/standing';

const KESTREL = 'Kestrel Row School';
const CLINIC = 'Weirside Clinic';
const NETLOFT = 'Netloft Terrace';
const NOW = new Date();
const minutesAgo = (n: number) => new Date(NOW.getTime() - n * 60_000);

let db: TestDatabase;
let fleet: TestFleet;
let analyst: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [KESTREL, CLINIC, NETLOFT]);
  analyst = await fleet.actor('analyst@lowfield.example');
  const kestrel = fleet.site(KESTREL);
  await command(db.owner, kestrel, 'Gym', 'released', minutesAgo(600));
  await command(db.owner, kestrel, 'Gym', 'initiator', minutesAgo(25), 'Gym initiator');
  await stand(db.owner, kestrel, NOW, (string, position) =>
    string === 'C2' && position === 3
      ? { verdict: 'not_shutting_down', since: minutesAgo(24) }
      : string.startsWith('C')
        ? { state: 'shutdown' }
        : null,
  );
  await stand(db.owner, fleet.site(CLINIC), NOW);
  await db.owner.query('analyze');
});
afterAll(() => db.drop());
beforeEach(() => db.owner.query('delete from event'));

const get = (actor: Actor | null, site: string) => ask(siteRoute, { actor, params: { site } });
const ref = (name: string) => fleet.site(name).ref;

describe("a site's page", () => {
  it('has zones with what is in force, since when and by whom; the newest command wins', async () => {
    const page = sitePage.parse(
      received((await (await get(analyst, ref(KESTREL))).json()) as Sent<SitePage>),
    );
    expect(
      page.zones.map((z) => [z.name, z.command?.inForce ?? null, z.command?.by ?? null, z.strings.length]),
    ).toEqual([
      ['Gym', 'initiator', 'Gym initiator', 10],
      ['Main building', null, null, 16],
    ]);
    expect(page.zones[0]?.command?.since).toBe(minutesAgo(25).toISOString());
    expect(page.zones[0]?.initiatorPlace).toBe('Fire panel in the gym’s lobby');
  });

  it('has every string with its units, the gateways and loggers, whom to call, and the cause', async () => {
    const page = sitePage.parse(
      received((await (await get(analyst, ref(KESTREL))).json()) as Sent<SitePage>),
    );
    expect(page.strings).toHaveLength(26);
    const c2 = page.strings.find((s) => s.name === 'C2');
    expect(c2?.counts).toMatchObject({ units: 12, passing: 1, shutdown: 11, notShuttingDown: 1 });
    expect(c2?.slots[2]).toMatchObject({ position: 3, state: 'passing', verdict: 'not_shutting_down' });
    expect(page.inverters.length).toBeGreaterThan(0);
    expect(page.inverters.flatMap((i) => i.inputs.flatMap((n) => n.strings)).sort()).toEqual(
      page.strings.map((s) => s.name).sort(),
    );
    expect(page.gateways.map((g) => g.name)).toEqual(['Gateway 1, attic', 'Gateway 2, gym']);
    expect(page.loggers).toHaveLength(1);
    expect(page.contact).toMatchObject({ name: 'Ansel Thwaite', phone: '+00 555 0102' });
    expect(page.causes).toMatchObject([{ verdict: 'not_shutting_down', siteId: ref(KESTREL) }]);
    expect(page.rollCall).toBeNull();
    expect(page.ruleSet).toBe('rapid_shutdown_30s');
  });

  it('answers alike for what does not exist and for what is another organisation’s', async () => {
    const answers = await Promise.all(
      [ref(NETLOFT), '11111111-1111-4111-8111-111111111111', 'no-identifier'].map((site) =>
        get(analyst, site),
      ),
    );
    expect(answers.map((a) => a.status)).toEqual([404, 404, 404]);
    const texts = await Promise.all(answers.map((a) => a.text()));
    for (const text of texts) expect(text).not.toContain(NETLOFT);
    const events = await ask(eventsRoute, { actor: analyst, params: { site: ref(NETLOFT) } });
    expect(events.status).toBe(404);
  });

  it('is not for customers, not even of their own site, nor for nobody', async () => {
    const customer = await fleet.actor('customer@lowfield.example');
    expect((await get(customer, ref(CLINIC))).status).toBe(403);
    expect((await get(null, ref(CLINIC))).status).toBe(401);
  });

  it('takes a fixed number of statements, however many strings', async () => {
    const count = async (site: string) => {
      let statements = 0;
      const counting = () => void statements++;
      database('web').on('query', counting);
      await asActor(analyst, (tx) => readSite(tx, ref(site), NOW));
      database('web').removeListener('query', counting);
      return statements;
    };
    const many = await count(KESTREL);
    expect(many).toBeLessThan(20);
    // nothing is open at the clinic: no units of strings and no acknowledgements are asked for
    expect(await count(CLINIC)).toBeLessThanOrEqual(many);
  });
});

describe("a site's events", () => {
  const happened = (minutes: number, kind: string, some: { string?: string; supersedes?: number } = {}) =>
    db.owner.query<{ id: number }>(
      `insert into event (at, recorded_at, organisation_id, site_id, string_id, kind, detail, supersedes)
       select $1, $1, organisation_id, id, $2, $3, '{"positions": [3]}', $4 from site where name = $5 returning id`,
      [
        minutesAgo(minutes),
        some.string ? fleet.site(KESTREL).strings.get(some.string)?.id : null,
        kind,
        some.supersedes ?? null,
        KESTREL,
      ],
    );
  const read = async (query = '') => {
    const response = await ask(eventsRoute, {
      actor: analyst,
      params: { site: ref(KESTREL) },
      path: `/api/sites/x/events${query}`,
    });
    return eventsPage.parse(await response.json());
  };

  it('come newest first, page by page, none twice and none left out, whatever shares a time', async () => {
    for (let i = 0; i < 7; i++) await happened(Math.floor(i / 3) * 10, 'units_stuck', { string: 'C2' });
    const seen: string[] = [];
    let before: string | null = null;
    let pages = 0;
    do {
      const page = await read(`?limit=3${before ? `&before=${before}` : ''}`);
      seen.push(...page.events.map((e) => e.id));
      before = page.before;
      pages++;
    } while (before && pages < 10);
    expect(pages).toBe(3);
    expect(seen).toHaveLength(7);
    expect(new Set(seen).size).toBe(7);
    const all = await read();
    expect(seen).toEqual(all.events.map((e) => e.id));
    expect(all.events[0]).toMatchObject({ stringName: 'C2', siteName: KESTREL, kind: 'units_stuck' });
    const times = all.events.map((e) => e.at);
    expect([...times].sort().reverse()).toEqual(times);
  });

  it('can be of one kind, and leave out what another event supersedes', async () => {
    const old = await happened(30, 'units_stuck');
    await happened(20, 'units_stuck', { supersedes: Number(old.rows[0]?.id) });
    await happened(10, 'command');
    expect((await read()).events.map((e) => e.kind)).toEqual(['command', 'units_stuck']);
    expect((await read('?kind=command')).events.map((e) => e.kind)).toEqual(['command']);
    expect((await read('?kind=units_silent')).events).toEqual([]);
  });

  it('say what is wrong with a question', async () => {
    const wrong = async (query: string) =>
      (await ask(eventsRoute, { actor: analyst, params: { site: ref(KESTREL) }, path: `/x${query}` })).status;
    expect(await wrong('?kind=party')).toBe(422);
    expect(await wrong('?limit=0')).toBe(422);
    expect(await wrong('?before=yesterday')).toBe(422);
    expect(await wrong('?befor=1.1')).toBe(422);
  });

  it('are all in the table to download, which is read no faster than it is taken', async () => {
    const MANY = 3300;
    await db.owner.query(
      `insert into event (at, recorded_at, organisation_id, site_id, kind, detail)
       select $1::timestamptz - (n / 700) * interval '1 hour', $1, organisation_id, id, 'units_stuck',
              jsonb_build_object('positions', jsonb_build_array(n))
       from site, generate_series(1, $2::int) n where name = $3`,
      [NOW, MANY, KESTREL],
    );
    await happened(5, 'units_silent');
    let pages = 0;
    const counting = ({ sql }: { sql: string }) => void (sql.includes('from event e join site') && pages++);
    database('web').on('query', counting);
    const response = await ask(eventsCsvRoute, {
      actor: analyst,
      params: { site: ref(KESTREL) },
      path: '/api/sites/x/events.csv?kind=units_stuck',
    });
    expect(response.headers.get('content-disposition')).toBe('attachment; filename="events.csv"');
    const reader = response.body?.getReader();
    const bytes: Uint8Array[] = [];
    for (let piece = await reader?.read(); piece && !piece.done; piece = await reader?.read()) {
      bytes.push(piece.value);
      expect(pages).toBeLessThanOrEqual(bytes.length + 1); // at most one is ready before it is asked for
    }
    database('web').removeListener('query', counting);
    expect(pages).toBe(4);
    const lines = Buffer.concat(bytes).toString('utf8').trim().split('\r\n');
    expect(lines[0]).toContain('at (UTC),reported (UTC),site,string,kind,what happened');
    expect(lines).toHaveLength(1 + MANY);
    expect(new Set(lines).size).toBe(1 + MANY);
    const elsewhere = await ask(eventsCsvRoute, { actor: analyst, params: { site: ref(NETLOFT) } });
    expect(elsewhere.status).toBe(404);
  });
});
