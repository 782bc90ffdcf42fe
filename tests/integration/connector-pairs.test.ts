import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { EquipmentFamily } from '../../src/domain/equipment/families';
import { GET as fileRoute } from '../../src/pages/api/attachments/[attachment]';
import { POST as pairRoute } from '../../src/pages/api/equipment/connector-pairs';
import { DELETE as endRoute } from '../../src/pages/api/equipment/connector-pairs/[pair]';
import { POST as filesRoute } from '../../src/pages/api/equipment/connector-pairs/[pair]/files';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { list as listOf, named as namedOf, problem } from '../support/equipment';
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

const list = (family: EquipmentFamily, actor = technician) => listOf(actor, family);
const named = (family: EquipmentFamily, name: string, actor = technician) => namedOf(actor, family, name);

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
