import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { GET as stringRoute } from '../../src/pages/api/strings/[string]/index';
import { GET as historyRoute } from '../../src/pages/api/strings/[string]/history';
import { GET as historyCsvRoute } from '../../src/pages/api/strings/[string]/history.csv';
import { GET as unitsRoute } from '../../src/pages/api/strings/[string]/units';
import { GET as unitsCsvRoute } from '../../src/pages/api/strings/[string]/units.csv';
import { stringHistory, stringPage, stringUnits } from '../../src/schemas/api/string';
import { siteNow, stringNow } from '../../src/schemas/api/now';
import { asActor } from '../../src/server/db/transaction';
import { stringsNow } from '../../src/server/queries/now';
import { sitesNow } from '../../src/server/queries/sites-now';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';
import { command, stand } from '../support/standing';

const HALL = 'Old Tannery Market Hall';
const NOW = new Date(Math.floor(Date.now() / 60_000) * 60_000);
const minutesAgo = (n: number) => new Date(NOW.getTime() - n * 60_000);
const STUCK = [5, 9];

let db: TestDatabase;
let fleet: TestFleet;
let analyst: Actor;
let stranger: Actor;
let customer: Actor;
const refOf = (name: string): string => fleet.site(HALL).strings.get(name)?.ref ?? '';

/** Two hours of reports: all pass, shutdown from 60 to 45 minutes ago, after which B3's 5 and 9 stay behind. */
async function report(): Promise<void> {
  await db.owner.query(
    `insert into string_frame (at, mask, string_id, voltage_sum, power_sum, voltage, voltage_in, current, temperature,
                               signal, via, state)
     select f.at, (1::int8 << s.slots::int) - 1, s.id, (select sum(v) from unnest(f.v) v),
            case when f.down then 0 else (select sum(v) from unnest(f.v) v) * 8 / 10 end,
            f.v, array_fill(4000::int2, array[s.slots::int]),
            array_fill((case when f.down then 0 else 8000 end)::int2, array[s.slots::int]),
            array_fill(400::int2, array[s.slots::int]), array_fill(-60::int2, array[s.slots::int]),
            array_fill(1::int2, array[s.slots::int]), array_fill(1::int2, array[s.slots::int])
     from string s
     cross join lateral (
       select at, at >= $2::timestamptz - interval '60 minutes' and at < $2::timestamptz - interval '45 minutes' as down,
              (select array_agg((case
                 when at >= $2::timestamptz - interval '60 minutes' and at < $2::timestamptz - interval '45 minutes' then 60
                 when s.name = 'B3' and p = any ($3::int[]) and at >= $2::timestamptz - interval '45 minutes' then -50
                 else 3900 end)::int2 order by p) from generate_series(1, s.slots) p) as v
       from generate_series($2::timestamptz - interval '2 hours', $2::timestamptz, interval '1 minute') as at) f
     where s.site_id = $1
       and not (s.name = 'B3' and f.at > $2::timestamptz - interval '100 minutes' and f.at < $2::timestamptz - interval '80 minutes')`,
    [fleet.site(HALL).id, NOW, STUCK],
  );
}

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, 'Netloft Terrace']);
  analyst = await fleet.actor('analyst@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  customer = await fleet.actor('customer@lowfield.example');
  const site = fleet.site(HALL);
  await command(db.owner, site, 'Whole roof', 'initiator', minutesAgo(60), 'Main initiator');
  await command(db.owner, site, 'Whole roof', 'released', minutesAgo(45), 'Main initiator');
  await stand(db.owner, site, NOW, (string, position) =>
    string === 'B3' && STUCK.includes(position)
      ? { state: 'shutdown', verdict: 'stuck', since: minutesAgo(45) }
      : string === 'C2' && position <= 3
        ? { state: 'silent', since: minutesAgo(20) }
        : string === 'B4'
          ? { state: 'unheard' }
          : null,
  );
  await report();
  await db.owner.query(
    `insert into event (at, organisation_id, site_id, string_id, kind, detail)
     values ($1, $2, $3, $4, 'units_stuck', $5)`,
    [
      minutesAgo(44),
      site.organisationId,
      site.id,
      site.strings.get('B3')?.id,
      { positions: STUCK, serials: [] },
    ],
  );
});
afterAll(() => db.drop());

describe('what holds now', () => {
  it('is the shape that pages, API and live share', async () => {
    const strings = await asActor(analyst, (tx) => stringsNow(tx, NOW, { siteId: fleet.site(HALL).id }));
    for (const s of strings) stringNow.parse(s);
    expect(strings.map((s) => s.name)).toEqual([
      ...['A1', 'A2', 'A3', 'B1', 'B2', 'B3', 'B4', 'C1', 'C2', 'C3', 'D1', 'D2', 'D3'],
    ]);
    const b3 = strings.find((s) => s.name === 'B3');
    expect(b3?.counts).toMatchObject({ units: 14, passing: 12, shutdown: 2, stuck: 2 });
    expect(b3?.slots.filter((s) => s.verdict === 'stuck').map((s) => s.position)).toEqual(STUCK);
    // 12 × 36 V and 2 × 0.6 V; siblings of the plane give 36 V a unit
    expect(b3?.voltage).toBeCloseTo(12 * 36 + 2 * 0.6, 3);
    expect(b3?.expectedVoltage).toBeCloseTo(14 * 36, 3);
    expect(b3?.expectedFrom).toBe('the other strings on the south roof');
    expect(b3?.command).toMatchObject({ where: 'Whole roof', inForce: 'released' });
    // what silent and unheard units last said does not count as voltage now
    expect(strings.find((s) => s.name === 'C2')?.voltage).toBeCloseTo(9 * 36, 3);
    expect(strings.find((s) => s.name === 'B4')?.voltage).toBeNull();
  });

  it('adds up to the site', async () => {
    const [site] = await asActor(analyst, (tx) => sitesNow(tx, NOW));
    siteNow.parse(site);
    expect(site?.name).toBe(HALL);
    expect(site?.counts).toMatchObject({
      units: 184,
      stuck: 2,
      silent: 3,
      unheard: 14,
      passing: 184 - 2 - 3 - 14,
    });
    expect(site?.commands).toEqual([]);
    expect(site?.inShutdownSince).toBeNull();
  });
});

describe('a string', () => {
  it('comes with what was lost, its neighbours and its events', async () => {
    const response = await ask(stringRoute, { actor: analyst, params: { string: refOf('B3') } });
    const page = stringPage.parse(await response.json());
    expect(page.neighbours).toMatchObject({ previous: { name: 'B2' }, next: { name: 'B4' } });
    expect(page.events.map((e) => e.kind)).toEqual(['units_stuck']);
    // two units of 39 V at 8 A missing for 45 minutes, less what they draw back: 2 × 39.5 V × 8 A × 0.75 h
    expect(page.lostToday?.wh).toBeGreaterThan(2 * 39 * 8 * 0.74);
    expect(page.lostToday?.wh).toBeLessThan(2 * 40 * 8 * 0.82);
    expect(new Date(page.lostToday?.since ?? 0).getTime()).toBe(minutesAgo(45).getTime());
  });

  it('loses nothing where nothing stands', async () => {
    const response = await ask(stringRoute, { actor: analyst, params: { string: refOf('A1') } });
    expect(stringPage.parse(await response.json()).lostToday).toBeNull();
  });

  it.each([
    ['another organisation’s', () => stranger],
    ['nobody’s', () => null],
    ['a customer’s', () => customer],
  ])('is kept from %s eyes', async (_, who) => {
    const response = await ask(stringRoute, { actor: who(), params: { string: refOf('B3') } });
    expect([401, 403, 404]).toContain(response.status);
    expect(await response.text()).not.toContain('B3');
  });

  it('that does not exist is not found, whatever its identifier looks like', async () => {
    for (const string of ['00000000-0000-4000-8000-000000000000', 'x', "'; select 1"]) {
      const response = await ask(historyRoute, { actor: analyst, params: { string } });
      expect(response.status).toBe(404);
    }
  });
});

describe('the history of a string', () => {
  const history = async (name: string, query = '') => {
    const response = await ask(historyRoute, {
      actor: analyst,
      params: { string: refOf(name) },
      path: `/api/x?${query}`,
    });
    return stringHistory.parse(await response.json());
  };

  it('of a day has every report, its gap, the band of its siblings, the night and what happened', async () => {
    const from = Math.floor(minutesAgo(120).getTime() / 1000);
    const h = await history('B3', `range=day&from=${from}&to=${Math.floor(NOW.getTime() / 1000) + 60}`);
    expect(h.resolution).toBe('minute');
    expect(h.values.filter((v) => v !== null)).toHaveLength(121 - 19);
    expect(h.values.filter((v) => v === null)).toHaveLength(1);
    expect(h.values.at(-1)).toBeCloseTo(12 * 39 - 1, 3);
    const low = h.expected.low.at(-1) ?? 0;
    const high = h.expected.high.at(-1) ?? 0;
    expect(low).toBeLessThan(14 * 39);
    expect(high).toBeGreaterThan(14 * 39);
    expect(h.expected.from).toContain('other strings on the south roof');
    // siblings in steps of five minutes, each at the middle of its reports: the site has one every ten seconds
    expect([...new Set([...h.middle.at, ...h.expected.at].map((at) => at % 300))]).toEqual([145]);
    expect(h.middle.at.length).toBeGreaterThan(15);
    expect(h.middle.at.length).toBeLessThan(26);
    expect(h.marks.map((m) => [m.words, m.tone, m.to === null])).toEqual([
      ['Shutdown by the initiator', 'plum', false],
      ['Positions 5 and 9 are stuck in shutdown', 'rust', true],
    ]);
  });

  it('of a day without reports says so by being empty, with the nights of the place', async () => {
    const h = await history('B3', 'range=day&on=2026-06-03');
    expect(h.at).toEqual([]);
    expect(h.to - h.from).toBe(86_400);
    expect(h.nights.length).toBeGreaterThan(0);
  });

  it('is coarser the longer it is', async () => {
    expect((await history('B3', 'range=week')).resolution).toBe('quarter');
    expect((await history('B3', 'range=month')).resolution).toBe('quarter');
    expect((await history('B3', 'range=year')).resolution).toBe('day');
    const to = Math.floor(NOW.getTime() / 1000);
    expect((await history('B3', `range=year&from=${to - 30 * 86_400}&to=${to}`)).resolution).toBe('quarter');
  });

  it.each([
    ['range=century', 'query.range'],
    ['range=day&on=yesterday', 'query.on'],
    ['range=day&from=1700000000', 'query.to'],
    ['range=day&from=1700000000&to=1600000000', 'query.to'],
    ['range=day&from=x&to=1', 'query.from'],
  ])('refuses %s and names the field', async (query, field) => {
    const response = await ask(historyRoute, {
      actor: analyst,
      params: { string: refOf('B3') },
      path: `/api/x?${query}`,
    });
    expect(response.status).toBe(422);
    const problem = (await response.json()) as { fields: { field: string }[] };
    expect(problem.fields.map((f) => f.field)).toContain(field);
  });

  it('leaves as CSV with its units', async () => {
    const from = Math.floor(minutesAgo(30).getTime() / 1000);
    const response = await ask(historyCsvRoute, {
      actor: analyst,
      params: { string: refOf('B3') },
      path: `/api/x?range=day&from=${from}&to=${from + 600}`,
    });
    expect(response.headers.get('content-disposition')).toMatch(/Old-Tannery-Market-Hall-B3-voltage-day/);
    const lines = (await response.text()).trim().split('\r\n');
    expect(lines[0]).toContain('voltage, mean (V)');
    expect(lines).toHaveLength(11);
    expect(lines[1]?.split(',')[1]).toBe('467');
  });
});

describe('single units', () => {
  it('come for the positions asked for', async () => {
    const response = await ask(unitsRoute, {
      actor: analyst,
      params: { string: refOf('B3') },
      path: '/api/x?quantity=voltage&positions=5,6,99',
    });
    const units = stringUnits.parse(await response.json());
    expect(units.lines.map((l) => l.position)).toEqual([5, 6]);
    expect(units.lines.map((l) => l.values.at(-1))).toEqual([-0.5, 39]);
    expect(units.at.length).toBe(units.lines[0]?.values.length);
  });

  it('have a power where they report none: voltage times current', async () => {
    const response = await ask(unitsRoute, {
      actor: analyst,
      params: { string: refOf('B3') },
      path: '/api/x?quantity=power&positions=6',
    });
    expect(stringUnits.parse(await response.json()).lines[0]?.values.at(-1)).toBeCloseTo(39 * 8, 1);
  });

  it('leave as CSV, one column a position', async () => {
    const response = await ask(unitsCsvRoute, {
      actor: analyst,
      params: { string: refOf('B3') },
      path: '/api/x?quantity=current&positions=5,9',
    });
    const [head] = (await response.text()).split('\r\n');
    expect(head?.replace('\uFEFF', '')).toBe('time (UTC),position 5 (A),position 9 (A)');
  });

  it('refuses positions that are none', async () => {
    const response = await ask(unitsRoute, {
      actor: analyst,
      params: { string: refOf('B3') },
      path: '/api/x?positions=5;drop',
    });
    expect(response.status).toBe(422);
  });
});
