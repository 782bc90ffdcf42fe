import knexFactory from 'knex';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { seedCommissioningRecords } from '../../seeds/records/commissioning';
import { faultsShown } from '../support/axe';
import { signedInContext, startBrowser } from '../support/browser';
import {
  meetAtOneCheck,
  openChecks,
  readReadings,
  recordAndShow,
  recordEvidenceAndSign,
  type Journey,
} from '../support/checks-journey';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';

/** Install checks and meter readings at the desk, on what a technician has recorded on the roof so far. */

const HALL = 'Old Tannery Market Hall';
let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL]);
  const hall = fleet.site(HALL);
  await db.owner.query(
    `insert into connector_type (organisation_id, name, maker, family, voltage_max, current_max)
     select $1, 'Plug ' || f, 'Maker ' || f, f, 1500, 40 from unnest('{P8,Q9}'::text[]) f`,
    [hall.organisationId],
  );
  const knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 1 } });
  try {
    await knex.transaction((tx) => seedCommissioningRecords(tx, fleet.seeded, Math.floor(Date.now() / 1000)));
  } finally {
    await knex.destroy();
  }
  site = await startSite(db);
  browser = await startBrowser();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

function signedIn(who: string, width: number, theme: 'light' | 'dark'): Promise<BrowserContext> {
  return signedInContext(browser, site.url, who, { viewport: { width, height: 900 }, colorScheme: theme });
}

describe.each([
  [1440, 'light', 'B4'],
  [390, 'dark', 'D2'],
] as const)('at %i px, %s', (width, theme, string) => {
  let mine: BrowserContext;
  let theirs: BrowserContext;
  let page: Page;
  let manager: Page;
  const faults: string[] = [];
  const journey = (): Journey => ({
    url: site.url,
    site: fleet.site(HALL).ref,
    look: async (shown, what) => {
      faults.push(...(await faultsShown(shown, what, width)));
    },
  });
  beforeAll(async () => {
    mine = await signedIn('technician', width, theme);
    theirs = await signedIn('manager', width, theme);
    page = await mine.newPage();
    manager = await theirs.newPage();
    for (const p of [page, manager]) p.setDefaultTimeout(15_000);
  });
  afterAll(async () => {
    await mine.close();
    await theirs.close();
  });

  it('two people at one check: the second is told, and loses nothing', async () => {
    const { told } = await meetAtOneCheck(page, manager, journey(), string);
    expect(told).toContain('Orla Nettlebeck recorded this meanwhile');
    expect(told).toContain('seen from the ladder');
    const { rows } = await db.owner.query<{ note: string; first: boolean }>(
      `select k.note, k.supersedes is null as first from install_check k join string s on s.id = k.string_id
       where s.name = $1 and s.site_id = $2 and k.check_name = 'strain_relief' order by k.id`,
      [string, fleet.site(HALL).id],
    );
    expect(rows).toEqual([
      { note: 'seen from the ladder', first: true },
      { note: 'one clip added', first: false },
    ]);
  });

  it('figures are checked before they are sent, photos are shown, a web page is none', async () => {
    const { refused } = await recordAndShow(page, journey(), string);
    expect(refused).toContain('This is a web page');
  });

  it('the matrix can be searched by address, and axe finds nothing on it', async () => {
    await page.goto(`${site.url}/commissioning/${fleet.site(HALL).ref}/checks?show=blocked&find=d1`);
    await journey().look(page, 'the matrix');
    expect(await page.locator('table tbody tr').count()).toBe(1);
  });

  it('readings that are not as expected are found and explained, never called safe', async () => {
    const { open } = await readReadings(page, journey());
    expect(open).toContain('A lead is open');
    expect(open).not.toMatch(/\bsafe\b/i);
  });

  it('no page was too wide, and axe found nothing', () => {
    expect(faults).toEqual([]);
  });
});

describe('a pair of connectors without a document', () => {
  it('blocks the signature until a manager records one', async () => {
    const context = await signedIn('manager', 1440, 'light');
    const page = await context.newPage();
    page.setDefaultTimeout(15_000);
    const journey: Journey = { url: site.url, site: fleet.site(HALL).ref, look: () => Promise.resolve() };
    const analyst = await signedIn('analyst', 1440, 'light');
    const reader = await analyst.newPage();
    await openChecks(reader, journey, 'B3');
    expect(await reader.getByRole('button', { name: /^Record|^Sign/ }).count()).toBe(0);
    await recordEvidenceAndSign(page, journey, 'B3');
    const { rows } = await db.owner.query<{ name: string }>(
      `select p.name from string_sign_off f join person p on p.id = f.person_id join string s on s.id = f.string_id
       where s.name = 'B3' and s.site_id = $1`,
      [fleet.site(HALL).id],
    );
    expect(rows).toEqual([{ name: 'Orla Nettlebeck' }]);
    await context.close();
    await analyst.close();
  });
});
