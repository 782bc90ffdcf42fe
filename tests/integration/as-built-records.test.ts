import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { HistoryPage } from '../../src/schemas/api/as-built';
import { asActor } from '../../src/server/db/transaction';
import { asBuiltParts } from '../../src/server/queries/as-built';
import { setSlotFacts } from '../../src/server/services/edit-as-built-strings';
import { GET as getCsv } from '../../src/pages/api/sites/[site]/as-built.csv';
import { GET as getHistory } from '../../src/pages/api/sites/[site]/as-built/history';
import { GET as getHistoryCsv } from '../../src/pages/api/sites/[site]/as-built/history.csv';
import { POST as postPlacements } from '../../src/pages/api/sites/[site]/placements';
import type { SeededSite } from '../../seeds/plant/seeded';
import { call, newSite, only, siteForms, strangerIn } from '../support/as-built';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet } from '../support/fleet';

let db: TestDatabase;
let technician: Actor;
let manager: Actor;
let stranger: Actor;
/** A site of the demo, with units placed: it operates. */
let operating: SeededSite;
/** The site that the tests make. */
let site = '';
const { built, add, change, remove, stringValues } = siteForms(() => ({ technician, site }));

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Weirside Clinic'], Math.floor(Date.now() / 1000) - 86_400);
  technician = await fleet.actor('technician@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  stranger = await strangerIn(db);
  operating = fleet.site('Weirside Clinic');
  site = (await newSite(technician, { name: 'Ferry Sheds', shutdownSwitchPlace: 'Beside the slipway door' }))
    .data.id;
  await add('plane', { name: 'Southern roof', surfaceTilt: 12, surfaceAzimuth: 180 });
  await add('inverter', { name: 'W1', acPowerMax: 10_000, inputs: 3 });
  await add('logger', { serial: 'LG-TEST-1' });
  await add('string', await stringValues(), { alike: 4 });
  const a1 = (await built()).strings[0]?.id;
  await call(postPlacements, {
    actor: technician,
    params: { site },
    method: 'POST',
    body: { changes: [{ slot: { string: a1, position: 4 }, serial: 'form-0006' }] },
  });
});
afterAll(() => db.drop());

describe('deleting', () => {
  it('says what a part is in use by', async () => {
    const b = await built();
    expect((await remove('plane', b.planes[0]!.id)).problem.detail).toContain(
      'in use by strings A1, A2, A3 and A4.',
    );
    expect((await remove('zone', b.zones[0]!.id)).status).toBe(409);
    expect((await remove('initiator', b.initiators[0]!.id)).problem.detail).toContain('zone Whole site');
    expect((await remove('logger', b.loggers[0]!.id)).status).toBe(409);
    const shrink = await change('inverter', b.inverters[0]!.id, { inputs: 3 }, { inputs: 1 });
    expect(shrink.status).toBe(204); // all are on input 1
    expect((await remove('inverter', b.inverters[0]!.id)).status).toBe(409);
  });

  it('a string with records stays, and says which', async () => {
    const string = (await built()).strings.find((s) => s.name === 'A2')!;
    await db.owner.query(
      `insert into install_check (site_id, string_id, check_name, result, person_id, at)
       select site_id, id, 'labels', 'pass', $2, now() from string where ref = $1`,
      [string.id, technician.personId],
    );
    expect((await remove('string', string.id)).problem.detail).toContain('1 install check hangs on it');
  });

  it('a string without any goes with its slots and their serials; the history keeps them', async () => {
    const string = (await built()).strings.find((s) => s.name === 'A1')!;
    expect(only(await remove('string', string.id))).toEqual(['reason']);
    expect((await remove('string', string.id, { reason: 'drawn twice' })).status).toBe(204);
    expect((await built()).strings.map((s) => s.name)).not.toContain('A1');
    const { rows } = await db.owner.query<{ before: { serials: string[] } }>(
      `select before from audit_entry where action = 'as_built.string_deleted' and subject = $1`,
      [`string ${string.id}`],
    );
    expect(rows[0]?.before.serials).toEqual(['FORM-0006']);
  });

  it('what is somebody else’s is not there', async () => {
    const string = (await built()).strings[0]!;
    expect((await remove('string', string.id, { actor: stranger, reason: 'x' })).status).toBe(404);
    expect((await remove('string', string.id, { at: operating.ref, reason: 'x' })).status).toBe(404);
  });
});

describe('a site that operates', () => {
  it('asks for the reason of every change', async () => {
    const at = operating.ref;
    expect(
      only(
        await change(
          'site',
          at,
          { contactPhone: (await built(at)).site.contactPhone },
          { contactPhone: '+00 555 0199' },
          { at },
        ),
      ),
    ).toEqual(['reason']);
    const said = await change(
      'site',
      at,
      { contactPhone: (await built(at)).site.contactPhone },
      { contactPhone: '+00 555 0199' },
      { at, reason: 'new caretaker' },
    );
    expect(said.status).toBe(204);
    expect(only(await add('initiator', { name: 'North switch' }, { at }))).toEqual(['reason']);
  });
});

describe('the history', () => {
  const history = async (path: string) =>
    (await call<HistoryPage>(getHistory, { actor: technician, params: { site }, path: `/api/x?${path}` }))
      .data;

  it('tells who, what, when and why, newest first, in pages', async () => {
    const all = await history('limit=200');
    expect(all.items.at(-1)).toMatchObject({ action: 'site_added', of: 'Ferry Sheds' });
    const inverter = all.items.find((i) => i.action === 'inverter_changed');
    expect(inverter).toMatchObject({ of: 'W1', before: { inputs: 3 }, after: { inputs: 1 } });
    const first = await history('limit=3');
    const next = await history(`limit=3&before=${first.before ?? 0}`);
    expect([...first.items, ...next.items].map((i) => i.id)).toEqual(all.items.slice(0, 6).map((i) => i.id));
  });

  it('is found by serial, kind, string and person; a serial shows its whole life', async () => {
    const a3 = (await built()).strings.find((s) => s.name === 'A3')!;
    for (const serial of ['LIFE-0001', null])
      await call(postPlacements, {
        actor: manager,
        params: { site },
        method: 'POST',
        body: { changes: [{ slot: { string: a3.id, position: 1 }, serial }], reason: 'it was cracked' },
      });
    const life = await history('find=life-0001');
    expect(life.items.map((i) => i.action)).toEqual(['unit_removed', 'unit_placed']);
    expect(life.stays).toMatchObject([
      { serial: 'LIFE-0001', string: 'A3', position: 1, to: expect.any(String) as string },
    ]);
    expect((await history(`string=${a3.id}&kind=units`)).items).toHaveLength(2);
    expect((await history('kind=site')).items.map((i) => i.action)).toEqual(['site_added']);
    const person = life.people.find((p) => p.name === life.items[0]!.person)!;
    const theirs = await history(`person=${person.id}&limit=200`);
    expect(new Set(theirs.items.map((i) => i.person))).toEqual(new Set([person.name]));
    expect((await history('find=100%25_')).items).toEqual([]);
  });

  it('comes as CSV', async () => {
    const response = await ask(getHistoryCsv, {
      actor: technician,
      params: { site },
      path: '/api/x?kind=units',
    });
    const text = await response.text();
    expect(text).toContain('LIFE-0001 placed in A3-1');
    expect(text).toContain('it was cracked');
  });
});

describe('facts of slots and the table', () => {
  it('are written where they change, once a string in the history', async () => {
    const a3 = (await built()).strings.find((s) => s.name === 'A3')!;
    const siteId = (await db.owner.query<{ id: number }>('select id from site where ref = $1', [site]))
      .rows[0]!.id;
    const facts = [1, 2, 3].map((position) => ({
      string: a3.id,
      position,
      roofX: position * 1.1,
      roofY: 2.5,
      roofPlace: 'upper row',
    }));
    const set = () =>
      asActor(technician, (tx) =>
        setSlotFacts(tx, technician, siteId, facts, { reason: '', source: 'forms' }),
      );
    expect(await set()).toBe(3);
    expect(await set()).toBe(0);
    const slots = (await built()).strings.find((s) => s.name === 'A3')!.slots;
    expect(slots.map((s) => [s.roofX, s.roofPlace])).toEqual([
      [1.1, 'upper row'],
      [2.2, 'upper row'],
      [3.3, 'upper row'],
      [null, ''],
    ]);
  });

  it('the CSV has one row a slot under the heads that the import reads', async () => {
    const response = await ask(getCsv, { actor: technician, params: { site } });
    const lines = (await response.text()).replace('\uFEFF', '').trim().split('\r\n');
    expect(lines[0]).toBe(
      'string,position,serial,unit type,module type,plane,inverter,input,zone,logger,transmitters,roof x (m),roof y (m),place on the roof',
    );
    const slots = (await built()).strings.reduce((n, s) => n + s.slots.length, 0);
    expect(lines).toHaveLength(1 + slots);
    expect(lines.find((l) => l.startsWith('A3,2,'))).toContain(
      'Southern roof,W1,1,Whole site,LG-TEST-1,,2.2,2.5,upper row',
    );
  });

  it('the whole as-built is read in a fixed number of statements', async () => {
    const counting = async (ref: string) => {
      const { rows } = await db.owner.query<{ id: number }>('select id from site where ref = $1', [ref]);
      let n = 0;
      await asActor(technician, async (tx) => {
        tx.on('query', () => n++);
        await asBuiltParts(tx, rows[0]!.id);
      });
      return n;
    };
    expect(await counting(site)).toBe(await counting(operating.ref));
  });
});
