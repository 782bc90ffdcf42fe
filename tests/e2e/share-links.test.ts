import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { signedInContext, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';
import { shareJourney } from '../support/share-journey';
import { stand } from '../support/standing';

const CLINIC = 'Weirside Clinic';
let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC]);
  await stand(db.owner, fleet.site(CLINIC), new Date());
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

it.each([
  ['a screen', 1920, 1080],
  ['a phone', 390, 844],
])('a site is shared, seen without signing in on %s, and no longer shared', async (_on, width, height) => {
  const desk = await signedInContext(browser, site.url, 'manager', {
    viewport: { width: Math.min(width, 1440), height: 900 },
    reducedMotion: 'reduce',
  });
  const lobby = await browser.newContext({ viewport: { width, height }, reducedMotion: 'reduce' });
  try {
    const faults = await shareJourney(await desk.newPage(), await lobby.newPage(), site.url, {
      ref: fleet.site(CLINIC).ref,
      name: CLINIC,
    });
    expect(faults).toEqual([]);
  } finally {
    await desk.close();
    await lobby.close();
  }
});
