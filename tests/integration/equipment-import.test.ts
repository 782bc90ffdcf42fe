import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { EquipmentFamily } from '../../src/domain/equipment/families';
import { GET as csvRoute } from '../../src/pages/api/equipment/[family].csv';
import { POST as importRoute } from '../../src/pages/api/equipment/[family]/import';
import { importPreview, type ImportPreview } from '../../src/schemas/api/equipment';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { catalogueOf, problem } from '../support/equipment';
import { testFleet, type TestFleet } from '../support/fleet';

const CLINIC = 'Weirside Clinic';
const NETLOFT = 'Netloft Terrace';

let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, NETLOFT]);
  technician = await fleet.actor('technician@lowfield.example');
});
afterAll(() => db.drop());

const { list, named, change, audit } = catalogueOf(() => ({ db, actor: technician }));

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
