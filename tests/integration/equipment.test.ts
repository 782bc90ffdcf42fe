import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { POST as createRoute } from '../../src/pages/api/equipment/[family]';
import { GET as csvRoute } from '../../src/pages/api/equipment/[family].csv';
import {
  GET as typeRoute,
  PATCH as archiveRoute,
  PUT as changeRoute,
} from '../../src/pages/api/equipment/[family]/[type]';
import { catalogueType, entrySaved } from '../../src/schemas/api/equipment';
import { typedEntry } from '../../src/schemas/equipment-entry';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { catalogueOf, problem } from '../support/equipment';
import { testFleet, type TestFleet } from '../support/fleet';

const CLINIC = 'Weirside Clinic';
const NETLOFT = 'Netloft Terrace';

let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let stranger: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, NETLOFT]);
  technician = await fleet.actor('technician@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
});
afterAll(() => db.drop());

const { list, named, change, audit } = catalogueOf(() => ({ db, actor: technician }));

describe('the catalogue', () => {
  it('knows how each type is used', async () => {
    const module = await named('modules', 'Mono 430, 108 half cells');
    expect(module).toMatchObject({ strings: 8, sites: 1, types: 0, archivedAt: null });
    expect((await named('units', 'Reporting unit, both sides')).strings).toBe(8);
    expect((await named('modules', 'Poly 285, 60 cells')).strings).toBe(0);
    const inverters = (await list('inverters')).items.filter((i) => i.strings > 0);
    expect(inverters.reduce((n, i) => n + i.strings, 0)).toBe(8);
    const halyard = await named('connectors', 'Halyard 4');
    expect(halyard.types).toBeGreaterThan(0);
    expect(halyard.strings).toBe(8);
  });

  it('takes a new type, tells what is wrong at each field, and asks for a word on what is unusual', async () => {
    const base = typedEntry('modules', (await named('modules', 'Mono 430, 108 half cells')).entry);
    const post = (typed: Record<string, string>, accepted: string[] = []) =>
      ask(createRoute, {
        actor: technician,
        params: { family: 'modules' },
        method: 'POST',
        body: { typed: { ...base, ...typed }, accepted },
      });
    const wrong = await post({ name: '', vmpRef: '50', vocRef: 'x' });
    expect(wrong.status).toBe(422);
    expect((await problem(wrong)).fields.map((f) => f.field)).toEqual(['name', 'vocRef']);
    const clash = await post({ name: 'MONO 430, 108 half cells', vmpRef: '50' });
    expect((await problem(clash)).fields.map((f) => f.field)).toEqual(['name', 'vmpRef']);
    const odd = await post({ name: 'Odd', betaVoc: '-0,6' });
    expect((await problem(odd)).fields.map((f) => f.field)).toEqual([
      'accepted.beta_voc',
      'accepted.gamma_pmp',
    ]);
    const kept = await post({ name: 'Odd', betaVoc: '-0,6' }, ['beta_voc', 'gamma_pmp']);
    expect(kept.status).toBe(200);
    const { id } = entrySaved.parse(await kept.json());
    expect((await named('modules', 'Odd')).entry.betaVoc).toBe(-0.006);
    expect((await audit('equipment.create'))[0]).toMatchObject({
      subject: `module_type ${id}`,
      person_id: technician.personId,
      after: { name: 'Odd', betaVoc: -0.006 },
    });
  });

  it('audits a change with before and after, and tells the sites that rest on the type', async () => {
    const listener = await db.owner.connect();
    const heard: string[] = [];
    listener.on('notification', (n) => heard.push(`${n.channel} ${n.payload}`));
    await listener.query('listen as_built; listen changed');
    const item = await named('modules', 'Mono 430, 108 half cells');
    const saved = await change('modules', item, { noct: '44' });
    expect(saved.status).toBe(200);
    await listener.query('select 1');
    listener.release(true);
    const { id } = fleet.site(CLINIC);
    expect(heard).toContain(`as_built ${id}`);
    expect(heard.some((h) => h.startsWith('changed') && h.includes(String(id)))).toBe(true);
    expect((await audit('equipment.change'))[0]).toMatchObject({ before: { noct: 43 }, after: { noct: 44 } });
    const now = catalogueType.parse(
      await (
        await ask(typeRoute, { actor: technician, params: { family: 'modules', type: item.id } })
      ).json(),
    );
    expect(now.changedBy).toBe('Bram Ottersley');
    expect(now.item.entry.noct).toBe(44);
  });

  it('of two who change one type, the second is told what now stands, and nothing is overwritten', async () => {
    const item = await named('units', 'Reporting unit, output side');
    expect((await change('units', item, { currentMax: '21' })).status).toBe(200);
    const late = await change('units', item, { voltageInMax: '85' });
    expect(late.status).toBe(409);
    const { detail, fields } = await problem(late);
    expect(detail).toMatch(/Bram Ottersley/);
    expect(fields).toEqual([
      { field: 'voltageInMax', message: 'now 80' },
      { field: 'currentMax', message: 'now 21' },
    ]);
    const stands = await named('units', 'Reporting unit, output side');
    expect(stands.entry).toMatchObject({ currentMax: 21, voltageInMax: 80 });
    expect((await change('units', stands, { voltageInMax: '85' })).status).toBe(200);
  });

  it('a kind that strings rest on stays; one that nobody uses may change', async () => {
    const used = await named('units', 'Reporting unit, both sides');
    const refused = await change('units', used, { kind: 'optimizing' });
    expect(refused.status).toBe(422);
    expect((await problem(refused)).fields).toEqual([
      { field: 'kind', message: expect.stringContaining('8 strings rest on it') as string },
    ]);
    const free = await named('units', 'Optimizing unit');
    expect((await change('units', free, { kind: 'monitored' })).status).toBe(200);
    expect(
      (await change('units', await named('units', 'Optimizing unit'), { kind: 'optimizing' })).status,
    ).toBe(200);
  });

  it('archives a type in use and brings it back; what rests on it goes on', async () => {
    const item = await named('modules', 'Mono 430, 108 half cells');
    const patch = (archived: boolean) =>
      ask(archiveRoute, {
        actor: technician,
        params: { family: 'modules', type: item.id },
        method: 'PATCH',
        body: { archived },
      });
    expect((await patch(true)).status).toBe(200);
    expect((await patch(true)).status).toBe(200);
    expect(await audit('equipment.archive')).toHaveLength(1);
    const archived = await named('modules', 'Mono 430, 108 half cells');
    expect(archived.archivedAt).not.toBeNull();
    expect(archived.strings).toBe(8);
    const csv = await (await ask(csvRoute, { actor: technician, params: { family: 'modules' } })).text();
    expect(csv).not.toContain('Mono 430');
    await patch(false);
    expect((await named('modules', 'Mono 430, 108 half cells')).archivedAt).toBeNull();
  });

  it('an archived connector can’t be chosen anew', async () => {
    const connector = await named('connectors', 'Halyard 6, wide contact');
    await ask(archiveRoute, {
      actor: technician,
      params: { family: 'connectors', type: connector.id },
      method: 'PATCH',
      body: { archived: true },
    });
    const refused = await change('modules', await named('modules', 'Odd'), { connector: connector.id }, [
      'beta_voc',
      'gamma_pmp',
    ]);
    expect((await problem(refused)).fields).toMatchObject([{ field: 'connector' }]);
  });
});

describe('another organisation', () => {
  it('has its own catalogue and can neither see nor change this one', async () => {
    const ours = await named('modules', 'Odd');
    expect((await list('modules', stranger)).items.map((i) => i.id)).not.toContain(ours.id);
    const params = { family: 'modules', type: ours.id };
    for (const response of [
      await ask(typeRoute, { actor: stranger, params }),
      await ask(changeRoute, {
        actor: stranger,
        params,
        method: 'PUT',
        body: { typed: typedEntry('modules', ours.entry), accepted: [], version: ours.version },
      }),
      await ask(archiveRoute, { actor: stranger, params, method: 'PATCH', body: { archived: true } }),
    ])
      expect(response.status).toBe(404);
    // and can't name a connector of ours either
    const theirs = await named('modules', 'Poly 285, 60 cells', stranger);
    const connector = await named('connectors', 'Halyard 4');
    const refused = await ask(changeRoute, {
      actor: stranger,
      params: { family: 'modules', type: theirs.id },
      method: 'PUT',
      body: {
        typed: { ...typedEntry('modules', theirs.entry), connector: connector.id },
        accepted: [],
        version: theirs.version,
      },
    });
    expect(refused.status).toBe(422);
  });
  it('may use the same names', async () => {
    expect((await named('modules', 'Poly 285, 60 cells', stranger)).id).not.toBe(
      (await named('modules', 'Poly 285, 60 cells')).id,
    );
  });
});
