import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { EquipmentFamily } from '../../src/domain/equipment/families';
import { GET as listRoute, POST as createRoute } from '../../src/pages/api/equipment/[family]';
import { GET as csvRoute } from '../../src/pages/api/equipment/[family].csv';
import {
  GET as typeRoute,
  PATCH as archiveRoute,
  PUT as changeRoute,
} from '../../src/pages/api/equipment/[family]/[type]';
import { POST as importRoute } from '../../src/pages/api/equipment/[family]/import';
import { DELETE as endRoute } from '../../src/pages/api/equipment/connector-pairs/[pair]';
import { POST as filesRoute } from '../../src/pages/api/equipment/connector-pairs/[pair]/files';
import { GET as fileRoute } from '../../src/pages/api/attachments/[attachment]';
import { POST as pairRoute } from '../../src/pages/api/equipment/connector-pairs';
import {
  catalogue,
  catalogueType,
  entrySaved,
  importPreview,
  type Catalogue,
  type CatalogueItem,
  type ImportPreview,
} from '../../src/schemas/api/equipment';
import { typedEntry } from '../../src/schemas/equipment-entry';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';

const CLINIC = 'Weirside Clinic';
const NETLOFT = 'Netloft Terrace';

let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;
let technician: Actor;
let stranger: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, NETLOFT]);
  manager = await fleet.actor('manager@lowfield.example');
  technician = await fleet.actor('technician@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
});
afterAll(() => db.drop());

async function list(family: EquipmentFamily, actor = technician): Promise<Catalogue> {
  return catalogue.parse(await (await ask(listRoute, { actor, params: { family } })).json());
}
async function named(family: EquipmentFamily, name: string, actor = technician): Promise<CatalogueItem> {
  const item = (await list(family, actor)).items.find((i) => i.entry.name === name);
  if (!item) throw new Error(`The catalogue has no ${name}.`);
  return item;
}
interface Problem {
  detail: string;
  fields: { field: string; message: string }[];
}
const problem = async (response: Response): Promise<Problem> => (await response.json()) as Problem;
const change = (
  family: EquipmentFamily,
  item: CatalogueItem,
  typed: Record<string, string>,
  more: object = {},
) =>
  ask(changeRoute, {
    actor: technician,
    params: { family, type: item.id },
    method: 'PUT',
    body: {
      typed: { ...typedEntry(family, item.entry), ...typed },
      accepted: [],
      version: item.version,
      ...more,
    },
  });
const audit = async (action: string) =>
  (
    await db.owner.query<{ subject: string; before: unknown; after: unknown; person_id: number }>(
      `select subject, before, after, person_id from audit_entry where action = $1 order by id desc`,
      [action],
    )
  ).rows;

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
    const refused = await change(
      'modules',
      await named('modules', 'Odd'),
      { connector: connector.id },
      {
        accepted: ['beta_voc', 'gamma_pmp'],
      },
    );
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

describe('import', () => {
  const send = (text: string, confirm?: string, family: EquipmentFamily = 'connectors') =>
    ask(importRoute, {
      actor: technician,
      params: { family },
      method: 'POST',
      body: confirm === undefined ? { text } : { text, confirm },
    });
  const preview = async (text: string, family: EquipmentFamily = 'connectors'): Promise<ImportPreview> =>
    importPreview.parse(await (await send(text, undefined, family)).json());

  it('marks each bad cell and writes nothing', async () => {
    const before = await list('connectors');
    const text =
      'Name;Maker;Type;Maximum voltage (V);Maximum current (A)\r\n' +
      'Good one;Sedge;S1;1500;30,5\r\nBad one;Sedge;;15000;thirty\r\nGood one;Sedge;S2;1000;30\r\n';
    const seen = await preview(text);
    expect(seen.counts).toEqual({ new: 1, changed: 0, unchanged: 0, faulty: 2 });
    expect(seen.rows.flatMap((r) => r.faults.map((f) => [r.row, f.column]))).toEqual([
      [3, 'Type'],
      [3, 'Maximum voltage (V)'],
      [3, 'Maximum current (A)'],
      [4, 'Name'],
    ]);
    for (const f of seen.rows.flatMap((r) => r.faults)) expect(f.remedy).not.toBe('');
    const refused = await send(text, seen.fingerprint);
    expect(refused.status).toBe(422);
    expect((await list('connectors')).items).toHaveLength(before.items.length);
  });

  it('takes all of a good file, shows what would change, and does nothing the second time', async () => {
    const text =
      'Name,Maker,Type,Maximum voltage (V),Maximum current (A)\n' +
      'Sedge one,Sedge,S1,1500,30\nHalyard 4,Tarn & Fell,Halyard 4,1500,40\n"Oxbow 30",Oxbow Electric,OX-30,1000,30\n';
    const seen = await preview(text);
    expect(seen.counts).toEqual({ new: 1, changed: 1, unchanged: 1, faulty: 0 });
    expect(seen.rows.find((r) => r.outcome === 'changed')).toMatchObject({
      name: 'Halyard 4',
      changes: [{ label: 'Maximum current', before: '35', after: '40' }],
      strings: 8,
    });
    expect((await named('connectors', 'Halyard 4')).entry.currentMax).toBe(35);
    const done = importPreview.parse(await (await send(text, seen.fingerprint)).json());
    expect(done.imported).toBe(true);
    const halyard = await named('connectors', 'Halyard 4');
    expect(halyard.entry).toMatchObject({ currentMax: 40, temperatureMax: 105 }); // no column: kept
    expect((await audit('equipment.change'))[0]).toMatchObject({ before: { currentMax: 35 } });
    expect((await preview(text)).counts).toEqual({ new: 0, changed: 0, unchanged: 3, faulty: 0 });
  });

  it('what was previewed is what is imported: a catalogue that has changed meanwhile asks to look again', async () => {
    const text = 'Name,Maker,Type,Maximum voltage (V),Maximum current (A)\nSedge two,Sedge,S2,1500,30\n';
    const seen = await preview(text);
    await change('connectors', await named('connectors', 'Oxbow 30'), { tool: 'Opening key OX-m' });
    expect((await send(text, seen.fingerprint)).status).toBe(409);
    expect((await list('connectors')).items.map((i) => i.entry.name)).not.toContain('Sedge two');
  });

  it.each<EquipmentFamily>(['modules', 'units', 'connectors', 'inverters'])(
    'reads back the download of %s without a change',
    async (family) => {
      const csv = await (
        await ask(csvRoute, { actor: technician, params: { family }, path: '/api/x?show=all' })
      ).text();
      const seen = await preview(csv, family);
      expect(seen.counts).toMatchObject({ new: 0, changed: 0, faulty: 0 });
      expect(seen.ignoredColumns).toEqual([]);
    },
  );

  it('refuses what is no table, with the remedy', async () => {
    for (const text of ['', 'Name\n', 'Name,Maker\n"never closed,Sedge\n']) {
      const response = await send(text);
      expect(response.status).toBe(422);
      expect((await problem(response)).detail.length).toBeGreaterThan(20);
    }
    const many = `Name\n${Array.from({ length: 2001 }, (_, i) => `n${i}`).join('\n')}\n`;
    expect((await send(many)).status).toBe(413);
    expect((await preview('Colour\nblue\n')).headerFaults).toHaveLength(1);
  });
});

describe('documented pairs', () => {
  const record = async (second: string, actor = manager) => {
    const first = await named('connectors', 'Halyard 4');
    const other = await named('connectors', second);
    return ask(pairRoute, {
      actor,
      method: 'POST',
      body: { first: other.id, second: first.id, document: 'Statement', edition: '2', page: 'page 4' },
    });
  };
  it('are recorded by a manager, once at a time, and can be ended', async () => {
    expect((await record('Oxbow 30', technician)).status).toBe(403);
    const made = await record('Oxbow 30');
    expect(made.status).toBe(200);
    const { id } = (await made.json()) as { id: string };
    expect((await record('Oxbow 30')).status).toBe(409);
    expect((await list('connectors')).pairs.find((p) => p.id === id)).toMatchObject({
      evidence: 'Statement, 2, page 4',
      recordedBy: 'Orla Nettlebeck',
      endedAt: null,
    });
    const end = () => ask(endRoute, { actor: manager, params: { pair: id }, method: 'DELETE' });
    expect((await ask(endRoute, { actor: stranger, params: { pair: id }, method: 'DELETE' })).status).toBe(
      404,
    );
    expect((await end()).status).toBe(204);
    expect((await end()).status).toBe(404);
    expect((await record('Oxbow 30')).status).toBe(200);
    expect((await list('connectors', stranger)).pairs.map((p) => p.id)).not.toContain(id);
  });
  it('keep the document that they rest on, once, for the organisation alone', async () => {
    const pair = (await list('connectors')).pairs.find((p) => p.endedAt === null);
    if (!pair) throw new Error('no pair is in force');
    const ref = randomUUID();
    const pdf = '%PDF-1.4\n1 0 obj\n<<>>\nendobj\ntrailer\n<<>>\n%%EOF\n';
    const send = (actor: Actor, body: string, name = 'statement.pdf') =>
      ask(filesRoute, {
        actor,
        params: { pair: pair.id },
        path: `/api/x?ref=${ref}&name=${name}`,
        method: 'POST',
        body,
      });
    expect((await send(technician, pdf)).status).toBe(403);
    expect((await send(stranger, pdf)).status).toBe(404);
    const html = await send(manager, '<!doctype html><p>not a document</p>', 'statement.jpg');
    expect(html.status).toBe(422);
    expect((await problem(html)).detail).toMatch(/web page, whatever its name says/);
    expect((await send(manager, pdf)).status).toBe(201);
    expect((await send(manager, pdf)).status).toBe(200);
    expect((await send(manager, `${pdf}another`)).status).toBe(409);
    const seen = (await list('connectors')).pairs.find((p) => p.id === pair.id);
    expect(seen?.files).toEqual([{ id: ref, name: 'statement.pdf' }]);
    const read = (actor: Actor) => ask(fileRoute, { actor, params: { attachment: ref } });
    expect(await (await read(technician)).text()).toBe(pdf);
    expect((await read(stranger)).status).toBe(404);
  });
  it('need two different types', async () => {
    const response = await record('Halyard 4');
    expect(response.status).toBe(422);
    expect((await problem(response)).fields).toMatchObject([{ field: 'second' }]);
  });
});
