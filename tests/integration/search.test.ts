import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { GET as searchRoute } from '../../src/pages/api/search';
import { searchReply } from '../../src/schemas/api/search';
import { asActor } from '../../src/server/db/transaction';
import { likePrefix } from '../../src/server/queries/search';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';

const KESTREL = 'Kestrel Row School';
const CLINIC = 'Weirside Clinic';
const NETLOFT = 'Netloft Terrace';
let db: TestDatabase;
let fleet: TestFleet;
let analyst: Actor;
let stranger: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [KESTREL, CLINIC, NETLOFT]);
  analyst = await fleet.actor('analyst@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
});
afterAll(() => db.drop());

const find = async (q: string, actor = analyst) => {
  const response = await ask(searchRoute, { actor, path: `/api/search?q=${encodeURIComponent(q)}` });
  expect(response.status).toBe(200);
  return searchReply.parse(await response.json()).results;
};
const serialAt = (site: string, string: string, position: number) => {
  const serial = fleet.site(site).plan.strings.find((s) => s.name === string)?.slots[position - 1]?.serial;
  if (!serial) throw new Error('no unit there');
  return serial;
};

describe('search', () => {
  it('finds a site by the beginning of any of its words, whatever the case', async () => {
    for (const q of ['kestrel', 'ROW', 'scho', 'Kestrel Row'])
      expect((await find(q))[0]).toMatchObject({
        kind: 'site',
        label: KESTREL,
        href: `/sites/${fleet.site(KESTREL).ref}`,
      });
    expect(await find('estrel')).toEqual([]);
  });

  it('finds sites by the beginning of any word of their place, those first whose name begins so', async () => {
    const asOwner = async (name: string, place: string) =>
      db.owner.query('update site set place = $2 where id = $1', [fleet.site(name).id, place]);
    await asOwner(KESTREL, 'Upper Weirside');
    await asOwner(CLINIC, 'Nether Edge');
    const labels = async (q: string) => (await find(q)).filter((r) => r.kind === 'site').map((r) => r.label);
    expect(await labels('WEIR')).toEqual([CLINIC, KESTREL]);
    expect(await labels('upper weirside')).toEqual([KESTREL]);
    // a name does not go on in the place
    expect(await labels('school upper')).toEqual([]);
    const a1 = (await find('nether a1')).filter((r) => r.kind === 'string');
    expect(a1.length).toBeGreaterThan(0);
    expect(a1.every((r) => r.where === CLINIC)).toBe(true);
  });

  it('finds a string at every site, or at the site that is named before it', async () => {
    expect((await find('C2')).filter((r) => r.kind === 'string')).toMatchObject([
      { label: 'String C2', where: KESTREL },
    ]);
    const a1 = (await find('kestrel a1')).filter((r) => r.kind === 'string');
    expect(a1.length).toBeGreaterThan(0);
    expect(a1.every((r) => r.where === KESTREL)).toBe(true);
    expect(a1[0]?.label).toBe('String A1');
  });

  it('finds a unit by the beginning of its serial and leads to its position', async () => {
    const serial = serialAt(KESTREL, 'C2', 3);
    const [found] = await find(serial.toLowerCase());
    expect(found).toMatchObject({ kind: 'unit', label: serial, where: `${KESTREL}, C2 position 3` });
    expect(found?.href).toBe(
      `/sites/${fleet.site(KESTREL).ref}/strings/${fleet.site(KESTREL).strings.get('C2')?.ref}#position-3`,
    );
    expect((await find(serial.slice(0, 4))).some((r) => r.kind === 'unit')).toBe(true);
  });

  it('takes a percent sign and an underscore for what they are', async () => {
    expect(await find('%%')).toEqual([]);
    expect(await find('__')).toEqual([]);
    expect(likePrefix('50%_\\')).toBe('50\\%\\_\\\\%');
  });

  it('finds nothing of another organisation', async () => {
    expect(await find('Netloft')).toEqual([]);
    expect(await find(serialAt(NETLOFT, 'A1', 1))).toEqual([]);
    expect((await find('Netloft', stranger))[0]?.label).toBe(NETLOFT);
    expect(await find('Kestrel', stranger)).toEqual([]);
  });

  it('says what is wrong with a question that is too short, and is not for customers', async () => {
    const response = await ask(searchRoute, { actor: analyst, path: '/api/search?q=%20a' });
    expect(response.status).toBe(422);
    expect(((await response.json()) as { detail: string }).detail).toContain('two letters');
    const customer = await fleet.actor('customer@lowfield.example');
    expect((await ask(searchRoute, { actor: customer, path: '/api/search?q=kestrel' })).status).toBe(403);
  });

  it('reads serials by their index', async () => {
    const plan = await asActor(analyst, async (tx) => {
      await tx.raw('set local enable_seqscan = off');
      const { rows } = await tx.raw<{ rows: { 'QUERY PLAN': string }[] }>(
        `explain select serial from unit where organisation_id = (select actor_organisation()) and serial like '4E%'`,
      );
      return rows.map((r) => r['QUERY PLAN']).join('\n');
    });
    expect(plan).toMatch(/Index.*unit_serial_search/);
  });
});
