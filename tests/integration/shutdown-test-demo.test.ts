import knexFactory from 'knex';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { writeShutdownTests } from '../../seeds/records/shutdown-tests';
import type { ShutdownTestReport } from '../../src/schemas/api/shutdown-test';
import { asActor } from '../../src/server/db/transaction';
import { shutdownTestPage } from '../../src/server/services/shutdown-test-page';
import { shutdownTestList, shutdownTestReport } from '../../src/server/services/shutdown-test-report';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';

/** The tests that the demo brings with it hold what a test made through the pages holds. */
const SCHOOL = 'Kestrel Row School';
const HALL = 'Old Tannery Market Hall';
const NAMES = [SCHOOL, HALL, 'Coopers Wharf Gallery', 'Weirside Clinic', 'Quayside Cold Store'];
let db: TestDatabase;
let fleet: TestFleet;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, NAMES);
  const technician = await fleet.actor('technician@lowfield.example');
  const knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 1 } });
  await knex.transaction(async (tx) => {
    for (const name of NAMES)
      await writeShutdownTests(tx, fleet.plan, fleet.site(name), {
        id: technician.personId,
        name: 'Bram Ottersley',
      });
  });
  await knex.destroy();
});
afterAll(() => db.drop());

async function read(name: string) {
  const actor = await fleet.actor('manager@lowfield.example');
  return asActor(actor, async (tx) => {
    const list = await shutdownTestList(tx, fleet.site(name).ref, new Date());
    const reports: ShutdownTestReport[] = [];
    for (const t of list.tests.filter((x) => x.state === 'signed'))
      reports.push(await shutdownTestReport(tx, t.id));
    return { list, reports };
  });
}

it.each(NAMES.filter((n) => n !== HALL))('%s passed, and what is stored is what was signed', async (name) => {
  const { list, reports } = await read(name);
  expect(list.zones.map((z) => [z.result, z.untested])).toEqual(list.zones.map(() => ['passed', []]));
  expect(reports.length).toBeGreaterThanOrEqual(list.zones.length);
  for (const r of reports) {
    expect(r.matches).toBe(true);
    expect(r.record?.verdict.missing.filter((m) => !m.startsWith('Read'))).toEqual([]);
  }
  expect(list.tests.filter((t) => t.state === 'signed' && !t.superseded)).toHaveLength(list.zones.length);
});

it('the school’s gym failed once and was repeated for the string that had failed', async () => {
  const { reports } = await read(SCHOOL);
  const gym = reports.filter((r) => r.record?.facts.zone.name === 'Gym');
  const failed = gym.find((r) => r.record?.verdict.result === 'failed');
  expect(failed?.record?.verdict.treatAsLive).toEqual([
    expect.objectContaining({ name: 'C2', why: '2 units kept passing: position 3 and 11' }),
  ]);
  const repeat = gym.find((r) => r.follows?.test === failed?.id);
  expect(failed?.supersededBy?.test).toBe(repeat?.id);
  expect(repeat?.record?.verdict.strings.filter((s) => s.carriedFrom === null).map((s) => s.name)).toEqual([
    'C2',
  ]);
});

it('the site under commissioning has one prepared, and none signed', async () => {
  const { list, reports } = await read(HALL);
  expect(reports).toEqual([]);
  const draft = list.zones[0]?.draft;
  expect(draft?.startedBy).toBe('Bram Ottersley');
  const actor = await fleet.actor('technician@lowfield.example');
  const page = await asActor(actor, (tx) => shutdownTestPage(tx, draft!.ref, new Date(), ''));
  expect(page.record.caution?.name).toBe('Bram Ottersley');
  expect(page.record.rounds.every((r) => r.watchStarted === null)).toBe(true);
});
