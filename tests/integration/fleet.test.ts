import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { fleetFinding } from '../../src/features/fleet/finding';
import { fleetLines } from '../../src/features/fleet/list';
import { GET as fleetRoute } from '../../src/pages/api/fleet';
import { GET as csvRoute } from '../../src/pages/api/fleet.csv';
import { POST as acknowledgeRoute } from '../../src/pages/api/sites/[site]/acknowledge';
import { received, type Sent } from '../../src/schemas/api/causes-on-the-way';
import { acknowledgeReply, fleetNow, type FleetNow } from '../../src/schemas/api/fleet';
import { database } from '../../src/server/db/pools';
import { asActor, asIngest } from '../../src/server/db/transaction';
import { causesNow } from '../../src/server/services/causes';
import { lookAtFleet, readFleet } from '../../src/server/services/fleet';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';
import { command, stand } from '../support/standing';

const KESTREL = 'Kestrel Row School';
const QUAYSIDE = 'Quayside Cold Store';
const LANTERN = 'Lantern Works';
const CLINIC = 'Weirside Clinic';
const NETLOFT = 'Netloft Terrace';
const NOW = new Date();
const minutesAgo = (n: number) => new Date(NOW.getTime() - n * 60_000);

let db: TestDatabase;
let fleet: TestFleet;
let analyst: Actor;
let stranger: Actor;
let customer: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [KESTREL, QUAYSIDE, LANTERN, CLINIC, NETLOFT]);
  analyst = await fleet.actor('analyst@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  customer = await fleet.actor('customer@lowfield.example');
  await command(db.owner, fleet.site(KESTREL), 'Gym', 'initiator', minutesAgo(25), 'Gym initiator');
  await stand(db.owner, fleet.site(KESTREL), NOW, (string, position) =>
    string === 'C2' && (position === 3 || position === 11)
      ? { verdict: 'not_shutting_down', since: minutesAgo(24) }
      : string.startsWith('C')
        ? { state: 'shutdown' }
        : null,
  );
  await stand(db.owner, fleet.site(QUAYSIDE), NOW, (string) =>
    string === 'D1' || string === 'D2'
      ? { state: 'shutdown', verdict: 'stuck', since: minutesAgo(300) }
      : null,
  );
  for (const zone of fleet.site(LANTERN).zones.keys())
    await command(db.owner, fleet.site(LANTERN), zone, 'initiator', minutesAgo(60), 'Roof crew');
  await stand(db.owner, fleet.site(LANTERN), NOW, () => ({ state: 'shutdown' }));
  await stand(db.owner, fleet.site(CLINIC), NOW);
  await stand(db.owner, fleet.site(NETLOFT), NOW, () => ({ state: 'shutdown', verdict: 'stuck' }));
});
afterAll(() => db.drop());
beforeEach(() => db.owner.query(`delete from event; delete from audit_entry`));

const read = (actor: Actor): Promise<FleetNow> => asActor(actor, (tx) => readFleet(tx, NOW));
const hazardOf = async () => {
  const cause = (await read(analyst)).causes.find((c) => c.verdict === 'not_shutting_down');
  if (!cause) throw new Error('the scene has no hazard');
  return cause;
};
const takeOn = (actor: Actor, site: string, key: unknown, name = 'Sunniva Quill') =>
  ask(acknowledgeRoute, { actor, name, params: { site }, method: 'POST', body: { key } });

describe('the fleet', () => {
  it('answers in the agreed shape with the figures that judgement wrote', async () => {
    const response = await ask(fleetRoute, { actor: analyst });
    const body = fleetNow.parse(received((await response.json()) as Sent<FleetNow>));
    const kestrel = body.sites.find((s) => s.name === KESTREL);
    expect(kestrel?.counts).toMatchObject({
      units: 312,
      passing: 194,
      shutdown: 118,
      notShuttingDown: 2,
      stuck: 0,
    });
    expect(kestrel?.commands).toMatchObject([{ where: 'Gym', inForce: 'initiator', by: 'Gym initiator' }]);
    expect(kestrel?.inShutdownSince).toBeNull();
    expect(body.sites.find((s) => s.name === LANTERN)?.inShutdownSince).toBe(minutesAgo(60).toISOString());
    expect(body.contacts.find((c) => c.siteId === kestrel?.id)).toMatchObject({
      name: 'Ansel Thwaite',
      phone: '+00 555 0102',
    });
  });

  it('finds the hazard first, and the transmitter behind twenty stuck units', async () => {
    const { sites, causes } = await read(analyst);
    expect(fleetFinding(sites, causes).heading).toBe(`Two units at ${KESTREL} did not shut down`);
    const hazard = causes.find((c) => c.verdict === 'not_shutting_down');
    expect(hazard?.units.map((u) => [u.stringName, u.position])).toEqual([
      ['C2', 3],
      ['C2', 11],
    ]);
    expect(hazard?.since).toBe(new Date(Math.floor(minutesAgo(24).getTime() / 1000) * 1000).toISOString());
    const stuck = causes.find((c) => c.verdict === 'stuck');
    expect(stuck).toMatchObject({ siteName: QUAYSIDE, sharedPart: { kind: 'transmitter', name: 'T4' } });
    expect(stuck?.units).toHaveLength(20);
    const view = { q: '', stage: 'any', show: 'all', sort: 'need', order: 'down' } as const;
    expect(fleetLines(sites, causes, view).map((l) => l.site.name)).toEqual([
      KESTREL,
      QUAYSIDE,
      LANTERN,
      CLINIC,
    ]);
  });

  it('explains the same to whoever serves every organisation and names the sites', async () => {
    const ids = [KESTREL, QUAYSIDE, LANTERN, CLINIC].map((name) => fleet.site(name).id);
    const told = await asIngest((tx) => causesNow(tx, NOW, ids));
    expect(told).toEqual((await read(analyst)).causes);
    expect(told.length).toBeGreaterThan(1);
  });

  it('shows nothing of another organisation, and nothing to a customer or to nobody', async () => {
    const foreign = await read(stranger);
    expect(foreign.sites.map((s) => s.name)).toEqual([NETLOFT]);
    expect(foreign.causes.every((c) => c.siteName === NETLOFT)).toBe(true);
    expect(foreign.contacts).toHaveLength(1);
    expect((await ask(fleetRoute, { actor: customer })).status).toBe(403);
    expect((await ask(csvRoute, { actor: customer })).status).toBe(403);
    expect((await ask(fleetRoute, { actor: null })).status).toBe(401);
  });

  it('takes a fixed number of statements, however many sites', async () => {
    const count = async (actor: Actor) => {
      let statements = 0;
      const counting = () => void statements++;
      database('web').on('query', counting);
      await read(actor);
      database('web').removeListener('query', counting);
      return statements;
    };
    await read(analyst);
    await read(stranger);
    const many = await count(analyst);
    expect(many).toBeGreaterThan(3);
    expect(await count(stranger)).toBe(many);
  });
});

describe('the fleet as CSV', () => {
  it('has the rows that the view shows, in its order', async () => {
    const text = await (
      await ask(csvRoute, { actor: analyst, path: '/api/fleet.csv?show=attention' })
    ).text();
    const lines = text.trim().split('\r\n');
    expect(lines[0]).toMatch(/^site,place,stage,time zone,strings,units,passing/);
    expect(lines.slice(1).map((l) => l.split(',')[0])).toEqual([KESTREL, QUAYSIDE]);
    expect(lines[1]).toContain('2 did not shut down');
    const byName = await ask(csvRoute, { actor: analyst, path: '/api/fleet.csv?sort=name&q=w' });
    expect(
      (await byName.text())
        .trim()
        .split('\r\n')
        .slice(1)
        .map((l) => l.split(',')[0]),
    ).toContain(CLINIC);
  });

  it('refuses a filter that does not exist, naming it', async () => {
    const response = await ask(csvRoute, { actor: analyst, path: '/api/fleet.csv?stage=finished' });
    expect(response.status).toBe(422);
    expect(((await response.json()) as { fields: { field: string }[] }).fields[0]?.field).toBe('query.stage');
  });
});

describe('taking a hazard on', () => {
  it('puts a name to it, gives the number to call, and writes an event and an audit entry', async () => {
    const cause = await hazardOf();
    const response = await takeOn(analyst, cause.siteId, cause.key);
    expect(response.status).toBe(200);
    const { acknowledgement, contact } = acknowledgeReply.parse(await response.json());
    expect(acknowledgement).toMatchObject({ key: cause.key, siteId: cause.siteId, person: 'Sunniva Quill' });
    expect(contact.phone).toBe('+00 555 0102');
    expect((await read(analyst)).acknowledgements).toEqual([acknowledgement]);
    const { rows: events } = await db.owner.query(`select kind, detail ->> 'person' as person from event`);
    expect(events).toEqual([{ kind: 'hazard_acknowledged', person: 'Sunniva Quill' }]);
    const { rows: audit } = await db.owner.query(`select action, person_id, subject from audit_entry`);
    expect(audit).toEqual([
      { action: 'hazard.acknowledge', person_id: analyst.personId, subject: `site ${cause.siteId}` },
    ]);
  });

  it('stays with the first; the second is told who has it', async () => {
    const cause = await hazardOf();
    await takeOn(analyst, cause.siteId, cause.key);
    const second = await takeOn(
      await fleet.actor('technician@lowfield.example'),
      cause.siteId,
      cause.key,
      'Bram Ottersley',
    );
    expect(acknowledgeReply.parse(await second.json()).acknowledgement.person).toBe('Sunniva Quill');
    expect((await db.owner.query('select from event')).rowCount).toBe(1);
  });

  it('counts only for the units that were there: one that joins later asks anew', async () => {
    const cause = await hazardOf();
    await db.owner.query(
      `insert into event (at, organisation_id, site_id, kind, detail)
       select $1, organisation_id, id, 'hazard_acknowledged', jsonb_build_object('key', $2::text, 'person', 'Somebody')
       from site where name = $3`,
      [minutesAgo(600), cause.key, KESTREL],
    );
    expect((await read(analyst)).acknowledgements).toEqual([]);
  });

  it('says that it has ended, or that no such site is there, and refuses strangers alike', async () => {
    const cause = await hazardOf();
    expect((await takeOn(analyst, cause.siteId, 'stuck:unit:none')).status).toBe(409);
    const foreign = await takeOn(stranger, cause.siteId, cause.key);
    const unknown = await takeOn(stranger, '11111111-1111-4111-8111-111111111111', cause.key);
    expect([foreign.status, unknown.status]).toEqual([404, 404]);
    expect(((await foreign.json()) as { detail: string }).detail).toBe(
      ((await unknown.json()) as { detail: string }).detail,
    );
    expect((await takeOn(customer, cause.siteId, cause.key)).status).toBe(403);
    expect((await takeOn(analyst, cause.siteId, '')).status).toBe(422);
    expect((await takeOn(analyst, 'no-uuid', cause.key)).status).toBe(404);
    expect((await db.owner.query('select from event')).rowCount).toBe(0);
  });
});

describe('since you last looked', () => {
  const look = (actor: Actor, at: Date) => asActor(actor, (tx) => lookAtFleet(tx, actor.personId, at));
  const happened = (kind: string, at: Date, site: string, positions: number[]) =>
    db.owner.query(
      `insert into event (at, recorded_at, organisation_id, site_id, kind, detail)
       select $1, $1, organisation_id, id, $2, jsonb_build_object('positions', $3::int[]) from site where name = $4`,
      [at, kind, positions, site],
    );

  it('tells a person who comes back what happened meanwhile, gravest first, of their own sites only', async () => {
    const manager = await fleet.actor('manager@lowfield.example');
    expect(await look(manager, minutesAgo(200))).toBeNull();
    expect(await look(manager, minutesAgo(190))).toBeNull();
    await happened('units_silent', minutesAgo(195), CLINIC, [1]);
    await happened('units_recovered', minutesAgo(80), CLINIC, [1, 2, 3]);
    await happened('units_stuck', minutesAgo(90), QUAYSIDE, [1, 2]);
    await happened('units_stuck', minutesAgo(70), QUAYSIDE, [4]);
    await happened('units_stuck', minutesAgo(70), NETLOFT, [4]);
    await happened('inverter_status', minutesAgo(70), CLINIC, []);
    const missed = await look(manager, minutesAgo(10));
    expect(missed?.since).toBe(minutesAgo(190).toISOString());
    expect(missed?.items.map((i) => [i.kind, i.siteName, i.events, i.units])).toEqual([
      ['units_stuck', QUAYSIDE, 2, 3],
      ['units_recovered', CLINIC, 1, 3],
    ]);
    expect(missed?.more).toBe(0);
    // the same visit goes on: the answer stays
    expect((await look(manager, minutesAgo(5)))?.since).toBe(minutesAgo(190).toISOString());
  });
});
