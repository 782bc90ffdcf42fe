import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { shutdownFinding } from '../../src/features/shutdown/finding';
import { heldSites, shutdownGroups } from '../../src/features/shutdown/groups';
import { GET as shutdownRoute } from '../../src/pages/api/shutdown';
import { GET as csvRoute } from '../../src/pages/api/shutdown.csv';
import { received, type Sent } from '../../src/schemas/api/causes-on-the-way';
import { shutdownNow, type ShutdownNow } from '../../src/schemas/api/shutdown';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';
import { command, stand } from '../support/standing';

const HALL = 'Old Tannery Market Hall';
const MILLRACE = 'Millrace Housing';
const LANTERN = 'Lantern Works';
const GALLERY = 'Coopers Wharf Gallery';
const CLINIC = 'Weirside Clinic';
const NETLOFT = 'Netloft Terrace';
const NOW = new Date();
const minutesAgo = (n: number) => new Date(NOW.getTime() - n * 60_000);

let db: TestDatabase;
let fleet: TestFleet;
let analyst: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, MILLRACE, LANTERN, GALLERY, CLINIC, NETLOFT]);
  analyst = await fleet.actor('analyst@lowfield.example');
  await stand(db.owner, fleet.site(HALL), NOW, (string, position) =>
    string === 'B3' && (position === 5 || position === 9)
      ? { state: 'shutdown', verdict: 'stuck', since: minutesAgo(position === 5 ? 40 : 35) }
      : null,
  );
  // a gateway is gone, and with it all that came by it
  const millrace = fleet.site(MILLRACE);
  const dead = 3;
  const behind = new Map(
    millrace.plan.strings.map((s) => [s.name, s.slots.map((slot) => slot.gateway === dead)]),
  );
  await stand(db.owner, millrace, NOW, (string, position) =>
    behind.get(string)?.[position - 1] ? { state: 'silent', via: dead } : null,
  );
  await db.owner.query(`update gateway set last_heard_at = $1 where site_id = $2 and number = $3`, [
    minutesAgo(41),
    millrace.id,
    dead,
  ]);
  for (const zone of fleet.site(LANTERN).zones.keys())
    await command(db.owner, fleet.site(LANTERN), zone, 'initiator', minutesAgo(60), 'Roof crew');
  await stand(db.owner, fleet.site(LANTERN), NOW, (string, position) =>
    string === fleet.site(LANTERN).plan.strings[0]?.name && position === 1
      ? { state: 'silent', verdict: 'unconfirmed', since: minutesAgo(58) }
      : { state: 'shutdown' },
  );
  // positions unknown: the string as a whole
  const [firstString] = fleet.site(GALLERY).strings.values();
  await db.owner.query(
    `insert into string_judgement (string_id, site_id, judged_at, state, verdict, since, finding, finding_since, evidence)
     values ($1, $2, $3, '{}', '{}', '{}', 'stuck_positions_unknown', $4, $5)`,
    [
      firstString?.id,
      fleet.site(GALLERY).id,
      NOW,
      minutesAgo(90),
      JSON.stringify({
        units: {},
        finding: {
          scope: 'string',
          measuredV: 410,
          expectedV: 480,
          thresholdV: 30,
          thresholdSource: 'a setting',
          units: 2,
          unitsRange: [2, 3],
          ofN: 14,
          atS: Math.floor(NOW.getTime() / 1000),
          confidence: 0.8,
          couldBe: [],
        },
      }),
    ],
  );
  await stand(db.owner, fleet.site(CLINIC), NOW);
  await stand(db.owner, fleet.site(NETLOFT), NOW, () => ({ state: 'shutdown', verdict: 'stuck' }));
});
afterAll(() => db.drop());

const read = async (actor: Actor) =>
  shutdownNow.parse(received((await (await ask(shutdownRoute, { actor })).json()) as Sent<ShutdownNow>));

describe('the Shutdown page', () => {
  it('lists exactly the two stuck units with string, position and serial, oldest cause first', async () => {
    const { causes } = await read(analyst);
    const stuck = shutdownGroups(causes, { q: '', show: 'stuck' })[0]?.causes ?? [];
    expect(stuck.map((c) => c.siteName)).toEqual([GALLERY, HALL]);
    const hall = stuck[1];
    const slots = fleet.site(HALL).plan.strings.find((s) => s.name === 'B3')?.slots;
    expect(hall?.units.map((u) => [u.stringName, u.position, u.serial])).toEqual([
      ['B3', 5, slots?.[4]?.serial],
      ['B3', 9, slots?.[8]?.serial],
    ]);
    expect(stuck[0]?.units).toMatchObject([{ position: null, serial: null }]);
  });

  it('keeps shutdown on purpose apart, with what nobody can confirm beside it', async () => {
    const { causes, sites } = await read(analyst);
    const { purpose, lost } = heldSites(sites);
    expect(purpose.map((h) => h.site.name)).toEqual([LANTERN]);
    expect(purpose[0]?.commands[0]).toMatchObject({ inForce: 'initiator', by: 'Roof crew' });
    expect(lost).toEqual([]);
    expect(causes.filter((c) => c.siteName === LANTERN).map((c) => c.verdict)).toEqual(['unconfirmed']);
    expect(shutdownFinding(sites, causes).sentence).toContain(`${LANTERN} is in shutdown on purpose`);
  });

  it('names the silent gateway, says that its units cannot be confirmed, and that they are not stuck', async () => {
    const { causes } = await read(analyst);
    const silent = causes.filter((c) => c.siteName === MILLRACE);
    expect(silent).toHaveLength(1);
    expect(silent[0]).toMatchObject({ verdict: 'silent', sharedPart: { kind: 'gateway' } });
    expect(silent[0]?.units).toHaveLength(48);
  });

  it('has no site at which nothing holds, and none of another organisation', async () => {
    const { sites, contacts } = await read(analyst);
    expect(sites.map((s) => s.name).sort()).toEqual([GALLERY, HALL, LANTERN, MILLRACE].sort());
    expect(contacts).toHaveLength(4);
    const foreign = await read(await fleet.actor('manager@harbourline.example'));
    expect(foreign.sites.map((s) => s.name)).toEqual([NETLOFT]);
  });

  it('is not for customers, nor for nobody', async () => {
    const customer = await fleet.actor('customer@lowfield.example');
    for (const route of [shutdownRoute, csvRoute]) {
      expect((await ask(route, { actor: customer })).status).toBe(403);
      expect((await ask(route, { actor: null })).status).toBe(401);
    }
  });

  it('gives the same as CSV, a row a unit, filtered alike', async () => {
    const response = await ask(csvRoute, { actor: analyst, path: '/api/shutdown.csv?show=stuck&q=B3' });
    expect(response.headers.get('content-disposition')).toMatch(/attachment; filename="shutdown-.*\.csv"/);
    const lines = (await response.text()).trim().split('\r\n');
    expect(lines).toHaveLength(3);
    expect(lines[1]).toMatch(new RegExp(`^stuck,${HALL},B3,5,`));
    expect((await ask(csvRoute, { actor: analyst, path: '/api/shutdown.csv?show=ok' })).status).toBe(422);
  });
});
