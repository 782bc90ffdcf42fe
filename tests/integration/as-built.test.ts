import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { partOf } from '../../src/schemas/as-built-values';
import { GET as getAsBuilt } from '../../src/pages/api/sites/[site]/as-built/index';
import { POST as postPlacements } from '../../src/pages/api/sites/[site]/placements';
import type { SeededSite } from '../../seeds/plant/seeded';
import { call, newSite, only, siteForms, strangerIn } from '../support/as-built';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';

let db: TestDatabase;
let technician: Actor;
let manager: Actor;
let stranger: Actor;
/** A site of the demo. */
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
});
afterAll(() => db.drop());

describe('a new site', () => {
  it('is made with an initiator at its switch and a zone, in commissioning', async () => {
    const made = await newSite(technician, {
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
    const reply = await newSite(technician, values);
    expect([409, 422]).toContain(reply.status);
    expect(only(reply).sort()).toEqual([...fields].sort());
  });

  it('may have the name of another organisation’s, and stays behind the wall', async () => {
    const theirs = await newSite(stranger, { name: 'Ferry Sheds' });
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

  it('alike go on successive inputs where that is wanted, and say where the inputs end', async () => {
    const made = await add('string', await stringValues({ name: 'E1' }), { alike: 3, inTurn: true });
    const b = await built();
    const strings = made.data.ids.map((id) => b.strings.find((s) => s.id === id));
    expect(strings.map((s) => s?.input)).toEqual(b.inverters[0]?.inputs.map((i) => i.id));
    const tooMany = await add('string', await stringValues({ name: 'F1' }), { alike: 4, inTurn: true });
    expect(only(tooMany)).toEqual(['values.input']);
    for (const id of made.data.ids) expect((await remove('string', id)).status).toBe(204);
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
