import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { PART_DEFAULTS, type PartKind } from '../../src/domain/commissioning/as-built/parts';
import type { AsBuilt, HistoryPage, PartAdded, PartValues } from '../../src/schemas/api/as-built';
import { asBuilt } from '../../src/schemas/api/as-built';
import { partOf } from '../../src/schemas/as-built-values';
import { asActor } from '../../src/server/db/transaction';
import { asBuiltParts } from '../../src/server/queries/as-built';
import { setSlotFacts } from '../../src/server/services/edit-as-built-strings';
import { POST as postSite } from '../../src/pages/api/sites/index';
import { GET as getAsBuilt } from '../../src/pages/api/sites/[site]/as-built/index';
import { GET as getCsv } from '../../src/pages/api/sites/[site]/as-built.csv';
import { GET as getHistory } from '../../src/pages/api/sites/[site]/as-built/history';
import { GET as getHistoryCsv } from '../../src/pages/api/sites/[site]/as-built/history.csv';
import { POST as postPart } from '../../src/pages/api/sites/[site]/as-built/parts/index';
import {
  DELETE as deletePart,
  PATCH as patchPart,
} from '../../src/pages/api/sites/[site]/as-built/parts/[part]';
import { POST as postPlacements } from '../../src/pages/api/sites/[site]/placements';
import type { SeededSite } from '../../seeds/plant/seeded';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';

let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let manager: Actor;
let stranger: Actor;
/** A site of the demo, with units placed: it operates. */
let operating: SeededSite;
/** The site that the tests make. */
let site = '';

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, ['Weirside Clinic'], Math.floor(Date.now() / 1000) - 86_400);
  technician = await fleet.actor('technician@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  operating = fleet.site('Weirside Clinic');
  const { rows } = await db.owner.query<{ org: number; person: number }>(
    `with o as (insert into organisation (name) values ('Elsewhere and Daughters') returning id)
     insert into person (organisation_id, email, name, role, password_hash)
     select id, 'elsewhere@elsewhere.example', 'Esme Elsewhere', 'manager', '!' from o returning organisation_id as org, id as person`,
  );
  stranger = { personId: rows[0]!.person, organisationId: rows[0]!.org, role: 'manager', sites: 'all' };
});
afterAll(() => db.drop());

interface Problem {
  status: number;
  detail: string;
  fields: { field: string; message: string }[];
}
interface Reply<T> {
  status: number;
  data: T;
  problem: Problem;
}
async function call<T>(
  route: Parameters<typeof ask>[0],
  asked: Parameters<typeof ask>[1],
): Promise<Reply<T>> {
  const response = await ask(route, asked);
  const text = await response.text();
  const json: unknown = text === '' ? undefined : JSON.parse(text);
  return { status: response.status, data: json as T, problem: json as Problem };
}
const newSite = (values: PartValues, actor = technician) =>
  call<{ id: string }>(postSite, {
    actor,
    method: 'POST',
    body: {
      values: {
        ...PART_DEFAULTS.site,
        latitude: 51.4,
        longitude: -2.6,
        timeZone: 'Europe/London',
        ...values,
      },
    },
  });
const add = (
  kind: Exclude<PartKind, 'site'>,
  values: PartValues,
  more: { alike?: number; reason?: string; at?: string; actor?: Actor } = {},
) => {
  const { at = site, actor = technician, ...rest } = more;
  return call<PartAdded>(postPart, {
    actor,
    params: { site: at },
    method: 'POST',
    body: { kind, values: { ...PART_DEFAULTS[kind], ...values }, ...rest },
  });
};
const change = (
  kind: PartKind,
  part: string,
  before: PartValues,
  after: PartValues,
  { actor = technician, reason = '', at = site } = {},
) =>
  call<undefined>(patchPart, {
    actor,
    params: { site: at, part },
    method: 'PATCH',
    body: { kind, before, after, reason },
  });
const remove = (kind: PartKind, part: string, { reason = '', at = site, actor = technician } = {}) =>
  call<undefined>(deletePart, {
    actor,
    params: { site: at, part },
    method: 'DELETE',
    body: { kind, reason },
  });
const built = async (at = site): Promise<AsBuilt> => {
  const { data } = await call<AsBuilt>(getAsBuilt, { actor: technician, params: { site: at } });
  return asBuilt.parse(data);
};
const only = (reply: Reply<unknown>) => reply.problem.fields.map((f) => f.field);

async function stringValues(some: PartValues = {}): Promise<PartValues> {
  const b = await built();
  return {
    name: 'A1',
    slots: 4,
    unitType: b.catalogue.unitTypes.find((t) => t.kind === 'monitored')!.id,
    moduleType: b.catalogue.moduleTypes[0]!.id,
    plane: b.planes[0]!.id,
    input: b.inverters[0]!.inputs[0]!.id,
    zone: b.zones[0]!.id,
    logger: b.loggers[0]!.id,
    ...some,
  };
}

describe('a new site', () => {
  it('is made with an initiator at its switch and a zone, in commissioning', async () => {
    const made = await newSite({
      name: ' Ferry Sheds ',
      shutdownSwitchPlace: 'Beside the slipway door',
      temperatureMin: -8,
    });
    expect(made.status).toBe(200);
    site = made.data.id;
    const b = await built();
    expect(b.site).toMatchObject({
      name: 'Ferry Sheds',
      stage: 'commissioning',
      temperatureMin: -8,
      temperatureMax: null,
    });
    expect(b.initiators).toMatchObject([{ name: 'Main initiator', place: 'Beside the slipway door' }]);
    expect(b.zones).toMatchObject([{ name: 'Whole site', initiator: b.initiators[0]!.id }]);
  });

  it.each([
    [{ name: '' }, ['values.name']],
    [{ name: 'Ferry Sheds' }, ['values.name']],
    [{ name: 'X', latitude: null, longitude: 200 }, ['values.latitude', 'values.longitude']],
    [{ name: 'X', timeZone: 'Europe/Lowfield' }, ['values.timeZone']],
    [{ name: 'X', temperatureMin: 20, temperatureMax: 10 }, ['values.temperatureMax']],
    [{ name: 'X', reportIntervalS: 5, ruleSet: 'mine' }, ['values.ruleSet', 'values.reportIntervalS']],
  ])('%j is wrong at %j', async (values, fields) => {
    const reply = await newSite(values);
    expect([409, 422]).toContain(reply.status);
    expect(only(reply).sort()).toEqual([...fields].sort());
  });

  it('may have the name of another organisation’s, and stays behind the wall', async () => {
    const theirs = await newSite({ name: 'Ferry Sheds' }, stranger);
    expect(theirs.status).toBe(200);
    const seen = await call(getAsBuilt, { actor: technician, params: { site: theirs.data.id } });
    expect(seen.status).toBe(404);
    expect(
      (await add('plane', { name: 'P', surfaceTilt: 1, surfaceAzimuth: 1 }, { at: theirs.data.id })).status,
    ).toBe(404);
    expect((await change('site', site, { place: '' }, { place: 'mine' }, { actor: stranger })).status).toBe(
      404,
    );
  });
});

describe('parts', () => {
  it('are added one by one; a logger comes with its token, told once', async () => {
    expect((await add('plane', { name: 'South roof', surfaceTilt: 12, surfaceAzimuth: 180 })).status).toBe(
      200,
    );
    expect((await add('inverter', { name: 'W1', acPowerMax: 10_000, inputs: 3 })).status).toBe(200);
    const logger = await add('logger', { serial: 'lg-test-1' });
    expect(logger.data.token).toMatch(/^wl_/);
    const b = await built();
    expect(b.loggers).toMatchObject([{ serial: 'LG-TEST-1', lastSpokeAt: null }]);
    expect(b.inverters[0]?.inputs.map((i) => i.number)).toEqual([1, 2, 3]);
    expect(JSON.stringify(b)).not.toContain(logger.data.token);
    expect(
      (await add('sensor', { logger: b.loggers[0]!.id, plane: b.planes[0]!.id, number: 0 })).status,
    ).toBe(200);
  });

  it.each([
    ['plane', { name: 'South roof', surfaceTilt: 1, surfaceAzimuth: 1 }, 'values.name'],
    ['inverter', { name: 'W1', acPowerMax: 1000, inputs: 1 }, 'values.name'],
    ['initiator', { name: 'Main initiator' }, 'values.name'],
    ['logger', { serial: 'LG-TEST-1' }, 'values.serial'],
  ] as const)('%s %j: the name is taken', async (kind, values, field) => {
    const reply = await add(kind, values);
    expect(reply.status).toBe(409);
    expect(only(reply)).toEqual([field]);
  });

  it('a serial of a logger is taken everywhere, and does not say where', async () => {
    const { rows } = await db.owner.query<{ serial: string }>(
      'select serial from logger where site_id = $1 limit 1',
      [operating.id],
    );
    const reply = await add('logger', { serial: rows[0]!.serial });
    expect(reply.status).toBe(409);
    expect(reply.problem.detail).not.toContain('Weirside');
  });

  it('name only what is at this site and in this catalogue', async () => {
    const theirs = await built(operating.ref);
    const reply = await add('zone', { name: 'Z2', initiator: theirs.initiators[0]!.id });
    expect(only(reply)).toEqual(['values.initiator']);
  });
});

describe('strings', () => {
  it('ask for what their units need', async () => {
    const b = await built();
    const shutdownOnly = b.catalogue.unitTypes.find((t) => t.kind === 'shutdown_only')!.id;
    expect(only(await add('string', await stringValues({ logger: null })))).toEqual(['values.logger']);
    expect(only(await add('string', await stringValues({ unitType: shutdownOnly, logger: null })))).toEqual([
      'values.transmitters',
    ]);
    expect(only(await add('string', await stringValues({ moduleType: null, slots: 64 })))).toEqual([
      'values.slots',
    ]);
    expect((await built()).strings).toEqual([]);
  });

  it('are added several alike, with their places in the roster', async () => {
    const made = await add('string', await stringValues(), { alike: 3 });
    expect(made.data.ids).toHaveLength(3);
    const b = await built();
    expect(b.strings.map((s) => [s.name, s.slots.length])).toEqual([
      ['A1', 4],
      ['A2', 4],
      ['A3', 4],
    ]);
    const { rows } = await db.owner.query(
      'select roster_index from string where site_id = (select id from site where ref = $1) order by name',
      [site],
    );
    expect(rows).toEqual([{ roster_index: 0 }, { roster_index: 1 }, { roster_index: 2 }]);
    const again = await add('string', await stringValues({ name: 'A3' }));
    expect(only(again)).toEqual(['values.name']);
  });

  it('of units that tell nothing hear a transmitter, also when the transmitter is edited', async () => {
    const zone = (await built()).zones[0]!.id;
    const t1 = (await add('transmitter', { name: 'T1', zone })).data.ids[0]!;
    const shutdownOnly = (await built()).catalogue.unitTypes.find((t) => t.kind === 'shutdown_only')!.id;
    const made = await add(
      'string',
      await stringValues({ name: 'D1', unitType: shutdownOnly, logger: null, transmitters: [t1] }),
    );
    expect(made.status).toBe(200);
    const d1 = made.data.ids[0]!;
    expect(partOf(await built(), 'transmitter', t1)).toMatchObject({ strings: [d1] });
    const stranded = await change('transmitter', t1, { strings: [d1] }, { strings: [] });
    expect(stranded.status).toBe(422);
    expect(stranded.problem.detail).toContain('D1');
    expect((await remove('transmitter', t1)).problem.detail).toContain('D1');
    const bare = await change('string', d1, { transmitters: [t1] }, { transmitters: [] });
    expect(only(bare)).toEqual(['values.transmitters']);
    // to units that report, with a logger: one edit
    const b = await built();
    const monitored = b.catalogue.unitTypes.find((t) => t.kind === 'monitored')!.id;
    const now = partOf(b, 'string', d1)!;
    expect(only(await change('string', d1, now, { ...now, unitType: monitored }))).toEqual(['values.logger']);
    const both = await change('string', d1, now, {
      ...now,
      unitType: monitored,
      logger: b.loggers[0]!.id,
      transmitters: [],
    });
    expect(both.status).toBe(204);
    expect((await remove('transmitter', t1)).status).toBe(204);
  });

  it('change their count; a slot with a unit stays', async () => {
    const a1 = (await built()).strings[0]!;
    expect((await change('string', a1.id, { slots: 4 }, { slots: 6 })).status).toBe(204);
    const placed = await call(postPlacements, {
      actor: technician,
      params: { site },
      method: 'POST',
      body: { changes: [{ slot: { string: a1.id, position: 6 }, serial: 'form-0006', expected: null }] },
    });
    expect(placed.data).toMatchObject({ placed: 1 });
    expect(only(await change('string', a1.id, { slots: 6 }, { slots: 5 }, { reason: 'miscounted' }))).toEqual(
      ['values.slots'],
    );
    expect((await built()).strings[0]?.slots.map((s) => s.serial)).toEqual([
      null,
      null,
      null,
      null,
      null,
      'FORM-0006',
    ]);
    // the units are concerned: a reason is asked for
    expect(only(await change('string', a1.id, { slots: 6 }, { slots: 7 }))).toEqual(['reason']);
  });
});

describe('two people at one thing', () => {
  it('different fields go together', async () => {
    const plane = (await built()).planes[0]!;
    expect((await change('plane', plane.id, { surfaceTilt: 12 }, { surfaceTilt: 15 })).status).toBe(204);
    expect(
      (await change('plane', plane.id, { albedo: 0.2 }, { albedo: 0.3 }, { actor: manager })).status,
    ).toBe(204);
    expect((await built()).planes[0]).toMatchObject({ surfaceTilt: 15, albedo: 0.3 });
  });

  it('the same field: the second is told who set it to what, and nothing is written', async () => {
    const plane = (await built()).planes[0]!;
    await change(
      'plane',
      plane.id,
      { surfaceTilt: 15, surfaceAzimuth: 180 },
      { surfaceTilt: 20, surfaceAzimuth: 190 },
      { actor: manager },
    );
    const reply = await change(
      'plane',
      plane.id,
      { surfaceTilt: 15, name: 'South roof' },
      { surfaceTilt: 25, name: 'Southern roof' },
    );
    expect(reply.status).toBe(409);
    const { rows } = await db.owner.query<{ name: string }>('select name from person where id = $1', [
      manager.personId,
    ]);
    expect(reply.problem.fields).toEqual([
      {
        field: 'values.surfaceTilt',
        message: expect.stringMatching(
          new RegExp(`${rows[0]!.name} set it to "20" at \\d\\d:\\d\\d`),
        ) as string,
      },
    ]);
    expect((await built()).planes[0]).toMatchObject({ name: 'South roof', surfaceTilt: 20 });
    // merged: from what stands now
    expect(
      (
        await change(
          'plane',
          plane.id,
          { surfaceTilt: 20, name: 'South roof' },
          { surfaceTilt: 25, name: 'Southern roof' },
        )
      ).status,
    ).toBe(204);
  });

  it('at the same moment: one after the other, and the later one is told', async () => {
    const plane = (await built()).planes[0]!;
    const both = await Promise.all([
      change('plane', plane.id, { surfaceAzimuth: 190 }, { surfaceAzimuth: 170 }),
      change('plane', plane.id, { surfaceAzimuth: 190 }, { surfaceAzimuth: 175 }, { actor: manager }),
    ]);
    expect(both.map((r) => r.status).sort()).toEqual([204, 409]);
  });

  it('what somebody has deleted meanwhile is said, with who it was', async () => {
    const id = (await add('initiator', { name: 'Second initiator' })).data.ids[0]!;
    expect((await remove('initiator', id, { actor: manager })).status).toBe(204);
    const reply = await change('initiator', id, { place: '' }, { place: 'Yard' });
    expect(reply.status).toBe(409);
    expect(reply.problem.detail).toContain('has deleted this initiator');
  });
});

describe('deleting', () => {
  it('says what a part is in use by', async () => {
    const b = await built();
    expect((await remove('plane', b.planes[0]!.id)).problem.detail).toMatch(
      /in use by strings A1, A2, A3 and 1 more|in use by strings A1, A2, A3, D1/,
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
    const tilt = all.items.find((i) => i.action === 'plane_changed' && i.after.surfaceTilt === 20);
    expect(tilt).toMatchObject({ of: 'South roof', before: { surfaceTilt: 15, surfaceAzimuth: 180 } });
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
