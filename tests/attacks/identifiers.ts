import { expect, it } from 'vitest';
import { mayUse, ROLES, type Role } from '../../src/domain/access/permissions';
import { ROUTES, type Route } from '../access/routes';
import { writeOneOfEach, writeSealed } from './rows';
import { emailOf, FOREIGN, NOT_GIVEN, OWN, STRANGER, type Scene } from './scene';

const ABSENT = '00000000-0000-4000-8000-00000000dead';
/** In an address, but no identifier of a thing. */
const WORDS = ['family'];
/** The tables whose things a name in an address stands for. */
const NAMED: Record<string, readonly string[]> = {
  site: ['site'],
  string: ['string'],
  part: ['plane', 'inverter', 'input', 'initiator', 'zone', 'logger', 'transmitter', 'sensor', 'string'],
  logger: ['logger'],
  attachment: ['attachment'],
  paper: ['handover_pack'],
  test: ['shutdown_test', 'shutdown_test_draft'],
  type: ['module_type', 'unit_type', 'inverter_type', 'connector_type'],
  pair: ['connector_pair'],
  person: ['person'],
  invitation: ['invitation'],
  link: ['share_link'],
  tariff: ['tariff'],
  case: ['case_file'],
  entry: ['case_entry'],
  cause: ['cause'],
  work: ['planned_work'],
  annotation: ['annotation'],
  notice: ['notice'],
  webhook: ['webhook'],
  delivery: ['webhook_delivery'],
  import: ['history_import'],
  view: ['saved_view'],
  token: ['api_token'], // those of letters and shared pages, which are public, are tried elsewhere
};
const OF_ORGANISATION = 'organisation_id = (select organisation_id from site where id = $1)';
type Things = Map<string, string>;

/** Every thing that has an identifier, asked for at every address that takes one, by those who may not see it. */
export function identifierAttacks(scene: () => Scene): void {
  const names = (route: Route): string[] => [...route.file.matchAll(/\[(\w+)\]/g)].map((m) => m[1] ?? '');
  const named = ROUTES.filter((r) => r.permission !== 'public' && names(r).some((n) => !WORDS.includes(n)));

  /** An identifier of each table that a name in an address may stand for, of a site or its organisation. */
  async function identifiersOf(siteName: string, among: 'site' | 'organisation'): Promise<Things> {
    const { db, fleet } = scene();
    const { id } = fleet.site(siteName);
    const { rows: columns } = await db.owner.query<{ name: string; site: boolean; org: boolean }>(
      `select table_name as name, bool_or(column_name = 'site_id') as site, bool_or(column_name = 'organisation_id') as org
       from information_schema.columns where table_schema = 'public' group by 1`,
    );
    const things: Things = new Map();
    for (const [table, { site, org }] of columns.map((c) => [c.name, c] as const)) {
      if (!Object.values(NAMED).flat().includes(table)) continue;
      const ways = [
        ...(table === 'site' ? ['id = $1'] : []),
        ...(site ? ['site_id = $1'] : []),
        ...(org && among === 'organisation' ? [OF_ORGANISATION] : []),
      ];
      const of = ways.join(' or ');
      if (!of) continue;
      const { rows } = await db.owner.query<{ ref: string }>(
        `select ref from ${table} where ${of} order by id limit 1`,
        [id],
      );
      if (rows[0]) things.set(table, rows[0].ref);
    }
    return things;
  }
  /** The address of a route with a thing in the place of its last name, and own ones before it. */
  function address(route: Route, thing: string, own: { site: string; string: string }): string {
    const path = route.path(own);
    const query = path.includes('?') ? path.slice(path.indexOf('?')) : '';
    const variable = names(route).filter((n) => !WORDS.includes(n));
    let left = variable.length;
    const file = `/${route.file.replace(/(\/index)?\.(ts|astro)$/, '')}`.replaceAll(
      /\[(\w+)\]/g,
      (_all, name: string) => {
        if (name === 'family') return 'modules';
        if (WORDS.includes(name)) return name;
        left--;
        if (left === 0) return thing;
        return name === 'string' ? own.string : own.site;
      },
    );
    return file + query;
  }
  const plain = (text: string): string =>
    text.replace(/[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}/g, 'ID').replace(/uid="[^"]*"/g, '');

  it('has something of each kind to ask for', async () => {
    const { db, fleet } = scene();
    for (const name of [FOREIGN, NOT_GIVEN]) {
      await writeOneOfEach(db.owner, fleet.site(name).id);
      await writeSealed(db.owner, fleet.site(name).id);
    }
    const theirs = await identifiersOf(FOREIGN, 'organisation');
    for (const name of new Set(named.flatMap(names).filter((n) => !WORDS.includes(n)))) {
      expect(NAMED, 'say in this file which tables the name stands for').toHaveProperty(name);
      const tables = NAMED[name] ?? [];
      expect(
        tables.filter((t) => theirs.has(t)),
        `write one in rows.ts: ${name}`,
      ).not.toEqual([]);
    }
  });

  const tried = async (
    who: Role,
    things: Things,
    routes: readonly Route[],
  ): Promise<{ faults: string[]; asked: number }> => {
    const { ask, cookieOf, fleet } = scene();
    const cookie = await cookieOf(emailOf(who));
    const { ref, strings } = fleet.site(OWN);
    const own = { site: ref, string: [...strings.values()][0]?.ref ?? '' };
    const faults: string[] = [];
    let asked = 0;
    for (const route of routes) {
      const body =
        typeof route.body === 'function' ? (route.body as (t: typeof own) => unknown)(own) : route.body;
      const request = (thing: string) =>
        ask(address(route, thing, own), { method: route.method, cookie, body });
      const absent = await request(ABSENT);
      const nothing = { status: absent.status, text: plain(await absent.text()) };
      const last = names(route).findLast((n) => !WORDS.includes(n)) ?? '';
      const fitting = [...things].filter(([table]) => NAMED[last]?.includes(table));
      asked += fitting.length;
      await Promise.all(
        fitting.map(async ([table, thing]) => {
          const response = await request(thing);
          const text = plain(await response.text());
          if (response.status !== nothing.status || text !== nothing.text)
            faults.push(
              `${who}: ${route.method} ${address(route, table, own)} gives ${response.status}: ${text.slice(0, 200)}`,
            );
        }),
      );
    }
    return { faults, asked };
  };

  it('what belongs to another organisation is nowhere, for a manager at every address', async () => {
    const things = await identifiersOf(FOREIGN, 'organisation');
    const { faults, asked } = await tried('manager', things, named);
    expect(faults).toEqual([]);
    expect(asked).toBeGreaterThan(named.length);
  });

  it('what belongs to a site that was not given is nowhere, for its owner’s neighbour', async () => {
    const things = await identifiersOf(NOT_GIVEN, 'site');
    const { faults } = await tried(
      'customer',
      things,
      named.filter((r) => r.permission !== 'public' && mayUse('customer', r.permission)),
    );
    expect(faults).toEqual([]);
  });

  it('and for those whose it is, it is there', async () => {
    const { ask, cookieOf, fleet } = scene();
    const cookie = await cookieOf(STRANGER);
    const things = await identifiersOf(FOREIGN, 'organisation');
    const { strings } = fleet.site(FOREIGN);
    const own = { site: fleet.site(FOREIGN).ref, string: [...strings.values()][0]?.ref ?? '' };
    const kinds: Record<string, string> = {
      attachment: 'attachment',
      paper: 'handover_pack',
      test: 'shutdown_test_draft',
    };
    for (const [name, table] of Object.entries(kinds)) {
      const route = ROUTES.find(
        (r) => r.method === 'GET' && names(r).at(-1) === name && r.file.startsWith('api/'),
      );
      if (!route) throw new Error(`no address takes the identifier of: ${name}`);
      const path = address(route, things.get(table) ?? '', own);
      expect((await ask(path, { cookie })).status, path).toBe(200);
    }
  });

  it('a body that names what belongs elsewhere is refused, and nothing is written', async () => {
    const { ask, cookieOf, fleet, db } = scene();
    const own = fleet.site(OWN);
    const theirs = [...fleet.site(FOREIGN).strings.values()][0]?.ref ?? '';
    const bodyOf = (r: Route, t: { site: string; string: string }) =>
      typeof r.body === 'function' ? (r.body as (target: typeof t) => unknown)(t) : undefined;
    const routes = ROUTES.filter((r) =>
      JSON.stringify(bodyOf(r, { site: own.ref, string: theirs }) ?? '').includes(theirs),
    );
    expect(routes.length).toBeGreaterThan(2);
    const count = async () =>
      (
        await db.owner.query(
          'select (select count(*) from install_check) + (select count(*) from meter_reading) as n',
        )
      ).rows;
    const before = await count();
    for (const role of ROLES.filter((r) => r !== 'customer'))
      for (const route of routes) {
        const body = bodyOf(route, { site: own.ref, string: theirs });
        const path = route.path({ site: own.ref, string: theirs });
        const response = await ask(path, {
          method: route.method,
          cookie: await cookieOf(emailOf(role)),
          body,
        });
        const text = await response.text();
        expect(
          [403, 404, 409, 422],
          `${role}: ${route.method} ${route.file} ${text.slice(0, 200)}`,
        ).toContain(response.status);
        expect(text).not.toContain(FOREIGN);
      }
    expect(await count()).toEqual(before);
  });
}
