import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { axeFaults } from '../support/axe';
import { hydrated, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { phoneOf } from '../support/phone';
import { startSite, type RunningSite } from '../support/server';
import { press } from '../support/keyboard';

/** On a roof with a phone: 14 shutdown-only units, keep-alive off, bright, and a meter that says 7.8 V. */
let db: TestDatabase;
let site: RunningSite;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  await testFleet(db, ['Weirside Clinic']);
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

const phone = (role: string, more: Parameters<Browser['newContext']>[0] = {}): Promise<BrowserContext> =>
  phoneOf(browser, site.url, role, more);
const answer = (page: Page): Promise<string> =>
  page
    .locator('#answer')
    .innerText()
    .then((text) => text.replace(/\u00a0/g, ' '));

describe('a reading on a phone', () => {
  it('is typed with a thumb, answered at once, kept in the address, and gone back from', async () => {
    const context = await phone('technician');
    const page = await context.newPage();
    const faults: string[] = [];
    page.on('pageerror', (error) => faults.push(error.message));
    page.on('console', (line) => line.type() === 'error' && faults.push(line.text()));
    await page.goto(`${site.url}/try-a-reading`);
    await hydrated(page);
    expect(await page.locator('main summary').first().innerText()).toMatch(/^14\sunits, shutdown-only/);
    for (const key of ['7', 'Decimal point', '8'])
      await page
        .getByRole('group', { name: 'Number pad' })
        .getByRole('button', { name: key, exact: true })
        .tap();
    expect(await page.getByLabel('Reading + to −, volts').inputValue()).toBe('7.8');
    const first = await answer(page);
    expect(first).toMatch(/%/);
    expect(first).toContain('All 14 units are in shutdown');
    expect(first).toContain('Does it follow the initiator?');
    await page.waitForURL(/v=7\.8/);

    // every target is large enough for a glove
    const small = await page.evaluate(() =>
      [...document.querySelectorAll('main button, main fieldset label:has(input), main summary, main select')]
        .map((e) => ({ words: e.textContent.trim(), box: e.getBoundingClientRect() }))
        .filter(({ box }) => box.width > 0 && box.height < 44)
        .map(({ words, box }) => `${words}: ${box.height}`),
    );
    expect(small).toEqual([]);
    expect(await axeFaults(page)).toEqual([]);

    await page.getByRole('button', { name: 'Done' }).tap();
    await page.getByText('on', { exact: true }).tap();
    await page.waitForURL(/commanded=released/);
    await expect.poll(() => answer(page)).toContain('keep-alive is present');
    await page.goBack();
    await page.waitForURL((url) => !url.search.includes('commanded'));
    await expect.poll(() => answer(page)).toBe(first);

    await page.getByRole('button', { name: 'Change the sign' }).tap();
    await expect.poll(() => answer(page)).toContain('The reading is negative');
    await page.getByLabel('Reading + to −, volts').fill('OL');
    await expect.poll(() => answer(page)).toContain('"OL" is no number');
    expect(await page.getByLabel('Reading + to −, volts').inputValue()).toBe('OL');
    await page.getByLabel('Reading + to −, volts').fill('8,4');
    await expect.poll(() => answer(page)).toContain('As expected');
    expect(await page.locator('main').innerText()).toContain('Shutdown is not isolation.');
    expect(await page.locator('main').innerText()).not.toMatch(/\bsafe\b/i);
    expect(faults).toEqual([]);
    await context.close();
  });

  it('stands in the first paint, where no script runs', async () => {
    const context = await phone('analyst', { javaScriptEnabled: false });
    const page = await context.newPage();
    await page.goto(`${site.url}/try-a-reading?v=7.8`);
    expect(await answer(page)).toContain('All 14 units are in shutdown');
    expect(await page.locator('main').innerText()).toContain('Shutdown is not isolation.');
    await page.getByLabel('Reading + to −, volts').fill('8,4');
    await press(page.getByRole('button', { name: 'Say what it means' }));
    await page.waitForURL(/v=8%2C4/);
    expect(await answer(page)).toContain('As expected');
    await context.close();
  });
});

it('an owner reads the methods and changes an example', async () => {
  const context = await phone('customer');
  const page = await context.newPage();
  await page.goto(`${site.url}/my-site`);
  await page.getByRole('contentinfo').getByRole('link', { name: 'How Wakeline judges' }).tap();
  await page.waitForURL(/\/methods$/);
  expect(await page.locator('h1').innerText()).toMatch(/judgements, each with its formula/);
  expect(await page.locator('math').count()).toBeGreaterThan(10);
  const sheet = page.locator('#yields');
  await sheet.scrollIntoViewIfNeeded();
  await page.waitForFunction(() => !document.querySelector('#yields astro-island[ssr]'));
  await sheet.getByLabel('AC energy of the hour').fill('30,4');
  await expect.poll(() => sheet.getByRole('status').innerText()).toContain('Performance ratio 100.0');
  expect(await axeFaults(page)).toEqual([]);
  expect(await page.getByRole('link', { name: 'Try it' }).count()).toBe(0);
  await context.close();
});
