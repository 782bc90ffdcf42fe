import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { signedInContext, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';
import { tokenJourney } from '../support/token-journey';

const CLINIC = 'Weirside Clinic';
let db: TestDatabase;
let site: RunningSite;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  await testFleet(db, [CLINIC]);
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

it('a token is made on a phone, reads what it may, and ends', async () => {
  const phone = await signedInContext(browser, site.url, 'manager', {
    viewport: { width: 390, height: 844 },
    reducedMotion: 'reduce',
  });
  try {
    const { faults, statuses, sites } = await tokenJourney(await phone.newPage(), site.url);
    expect(faults).toEqual([]);
    expect(statuses).toEqual({ sites: 200, beyondItsScope: 403, ended: 401 });
    expect(sites).toEqual([CLINIC]);
  } finally {
    await phone.close();
  }
});
