import sharp from 'sharp';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { checkClosedCases } from '../../src/server/services/check-closed-cases';
import { faultsShown } from '../support/axe';
import { signedInContext, startBrowser } from '../support/browser';
import {
  addPhotos,
  assign,
  checkFirstLine,
  closeOnPage,
  meetAtOneCase,
  mention,
  moveOnBoard,
  openFromString,
  openPage,
} from '../support/cases-journey';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { pdfPages } from '../support/pdf';
import { startSite, type RunningSite } from '../support/server';
import { stand } from '../support/standing';

/** An analyst's case from a stuck unit to its end: what did not hold comes back by itself. */

const CLINIC = 'Weirside Clinic';
const now = new Date();
const later = new Date(now.getTime() + 4 * 3_600_000);
let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;
let mine: BrowserContext;
let theirs: BrowserContext;
let page: Page;
let string: { name: string; ref: string };
let technician: string;
let address = '';
let number = 0;

const standing = (at: Date, stuck: boolean) =>
  stand(db.owner, fleet.site(CLINIC), at, (name, position) =>
    stuck && name === string.name && position === 2 ? { state: 'shutdown', verdict: 'stuck' } : null,
  );

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC]);
  // daylight from now until later: the sun stands highest between them
  const noonAt = (now.getUTCHours() + now.getUTCMinutes() / 60 + 2) % 24;
  await db.owner.query(
    `update site set latitude = 0, longitude = $1, stage = 'operating', report_interval_s = 60`,
    [((15 * (12 - noonAt) + 540) % 360) - 180],
  );
  const plan = fleet.site(CLINIC).plan.strings.find((s) => s.kind === 'monitored');
  string = { name: plan?.name ?? '', ref: fleet.site(CLINIC).strings.get(plan?.name ?? '')?.ref ?? '' };
  await standing(now, true);
  const { rows } = await db.owner.query<{ name: string }>(
    `select name from person where email = 'technician@lowfield.example'`,
  );
  technician = rows[0]?.name ?? '';
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
  mine = await signedInContext(browser, site.url, 'analyst', { viewport: { width: 1440, height: 1000 } });
  theirs = await signedInContext(browser, site.url, 'manager', { viewport: { width: 1440, height: 1000 } });
  page = await mine.newPage();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

describe('a case', () => {
  it('is opened from a string, gone through, and given to somebody', async () => {
    address = await openFromString(page, site.url, string);
    await checkFirstLine(page);
    const buffer = await sharp({ create: { width: 900, height: 600, channels: 3, background: '#845' } })
      .jpeg()
      .toBuffer();
    await addPhotos(page, [
      { name: 'left half.jpg', mimeType: 'image/jpeg', buffer },
      { name: 'right half.jpg', mimeType: 'image/jpeg', buffer },
    ]);
    await mention(page, technician.slice(0, 3), technician);
    await assign(page, technician);
    const { rows } = await db.owner.query<{ number: number }>('select number from case_file where ref = $1', [
      address.slice(-36),
    ]);
    number = rows[0]?.number ?? 0;
  });

  it('loses nothing where two people change it', async () => {
    await meetAtOneCase(page, await theirs.newPage(), address);
  });

  it('is moved by key and by mouse; it comes back where the voltage did not, and stays where it did', async () => {
    await moveOnBoard(page, site.url, number);
    await standing(later, true);
    expect(await checkClosedCases(later)).toEqual({ checked: 1, reopened: 1 });
    await openPage(page, address);
    await page.getByText('It was closed and did not hold').waitFor();
    await page.locator('#history li', { hasText: 'is stuck in shutdown' }).first().waitFor();
    await closeOnPage(page, 'The unit was replaced.');
    await standing(later, false);
    expect(await checkClosedCases(later)).toEqual({ checked: 1, reopened: 0 });
    await openPage(page, address);
    await page.locator('header').getByText('Wakeline looked again: it held.').waitFor();
    await page.getByText('Before and after').first().waitFor();
  });

  it('gives its evidence to whoever is called next', async () => {
    const link = page.getByRole('link', { name: 'Evidence as PDF' });
    const reply = await mine.request.get(`${site.url}${await link.getAttribute('href')}`);
    expect(reply.status()).toBe(200);
    const text = (await pdfPages(await reply.body())).join(' ').replace(/\s+/g, ' ');
    for (const words of [
      `Evidence of case ${number}`,
      'The unit was replaced.',
      'left half.jpg',
      string.name,
    ])
      expect(text).toContain(words);
  });

  it.each([
    [1440, 'light'],
    [390, 'dark'],
  ] as const)('has nothing to complain of at %i px, %s', async (width, theme) => {
    const context = await signedInContext(browser, site.url, 'analyst', {
      viewport: { width, height: 900 },
      colorScheme: theme,
    });
    const shown = await context.newPage();
    const faults: string[] = [];
    for (const path of [
      '/cases',
      '/cases?look=list',
      `/cases/${address.slice(-36)}`,
      `/cases/new?string=${string.ref}`,
    ]) {
      await openPage(shown, `${site.url}${path}`);
      faults.push(...(await faultsShown(shown, path, width)));
    }
    expect(faults).toEqual([]);
    await context.close();
  });
});
