import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { hydrated, signOnTo, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';
import { command, stand } from '../support/standing';
import { press } from '../support/keyboard';

/** An analyst at the fleet: filters in the address, keys, search, a hazard taken on, what a site has to tell. */
const SCHOOL = 'Kestrel Row School';
const CLINIC = 'Weirside Clinic';
const LIBRARY = 'Slate Lane Library';
const SOON = { timeout: 20_000, interval: 200 };

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;
let page: Page;
const noise: string[] = [];

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [SCHOOL, CLINIC, LIBRARY]);
  const at = new Date();
  await command(db.owner, fleet.site(SCHOOL), 'Gym', 'initiator', new Date(at.getTime() - 1_500_000));
  await stand(db.owner, fleet.site(SCHOOL), at, (string, position) =>
    string === 'C2' && (position === 3 || position === 11)
      ? { verdict: 'not_shutting_down' }
      : string.startsWith('C')
        ? { state: 'shutdown' }
        : null,
  );
  await stand(db.owner, fleet.site(CLINIC), at);
  await stand(db.owner, fleet.site(LIBRARY), at);
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
  const context = await browser.newContext({ viewport: { width: 1440, height: 1000 } });
  await signOnTo(context, site.url, 'analyst');
  page = await context.newPage();
  page.on('console', (m) => m.type() === 'error' && noise.push(m.text()));
  page.on('pageerror', (e) => noise.push(e.message));
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

const rows = () => page.locator('tbody tr').count();
/** The islands have taken over: only then do keys and buttons do anything. */
async function open(path: string): Promise<void> {
  await page.goto(`${site.url}${path}`);
  await page.waitForFunction(() => document.querySelectorAll('astro-island[ssr]').length === 0);
}

describe('the fleet', () => {
  it('says the hazard before anything runs in the browser', async () => {
    const html = await page.request.get(site.url, { headers: { cookie: await cookieHeader() } });
    expect(await html.text()).toContain(`Two units at ${SCHOOL} did not shut down`);
  });

  it('keeps filters in the address, and goes back through them', async () => {
    await open('/');
    await expect.poll(rows, SOON).toBe(3);
    await page.getByRole('radio', { name: 'Needs attention' }).check({ force: true });
    await expect.poll(rows, SOON).toBe(1);
    await page.waitForURL(`${site.url}/?show=attention`);
    await page.goBack();
    await expect.poll(rows, SOON).toBe(3);
    await open('/?q=clinic');
    expect(await rows()).toBe(1);
    expect(await page.getByRole('link', { name: 'CSV' }).getAttribute('href')).toContain('q=clinic');
    await page.getByRole('searchbox', { name: 'Filter sites by name or place' }).fill('nowhere');
    await press(page.getByRole('button', { name: 'Show all sites' }));
    await expect.poll(rows, SOON).toBe(3);
  });

  it('is walked by arrow keys, and searched by a stroke', async () => {
    await open('/?sort=name');
    await page.locator('tbody a').first().focus();
    await page.keyboard.press('ArrowDown');
    expect(await page.evaluate(() => document.activeElement?.textContent)).toBe(LIBRARY);
    await page.keyboard.press('/');
    await page.keyboard.type('kestrel c2');
    await page.getByRole('option', { name: /String C2/ }).waitFor();
    await page.keyboard.press('Enter');
    await page.waitForURL(/\/strings\//);
  });

  it('puts a name to a hazard and brings up whom to call', async () => {
    await open('/');
    await press(page.getByRole('button', { name: 'Acknowledge and call the site' }));
    await page.getByRole('link', { name: 'Call +00 555 0102' }).waitFor();
    await expect
      .poll(() => page.evaluate(() => document.activeElement?.getAttribute('href')), SOON)
      .toBe('tel:+005550102');
    await open('/shutdown');
    expect(await page.getByText('has it since').count()).toBe(1);
    expect(await page.getByRole('button', { name: 'Acknowledge and call the site' }).count()).toBe(0);
    const { rows: events } = await db.owner.query(`select detail ->> 'person' as person from event`);
    expect(events).toEqual([{ person: 'Sunniva Quill' }]);
  });
});

describe('a site', () => {
  it('tells what happened there, by kind', async () => {
    await open(`/sites/${fleet.site(SCHOOL).ref}`);
    expect(await page.getByRole('heading', { level: 1 }).textContent()).toBe(
      'Two of 312 units did not shut down',
    );
    await hydrated(page);
    await page.getByLabel('Kind').selectOption('hazard_acknowledged');
    await expect.poll(() => page.url(), SOON).toContain('kind=hazard_acknowledged');
    const events = page.getByRole('list', { name: 'Events, newest first' });
    await events.getByText('Sunniva Quill took on').waitFor();
    await expect.poll(() => events.getByRole('listitem').count(), SOON).toBe(1);
  });

  it('left no error in the console', () => {
    expect(noise).toEqual([]);
  });
});

const cookieHeader = async (): Promise<string> =>
  (await page.context().cookies(site.url)).map((c) => `${c.name}=${c.value}`).join('; ');

describe('the state of the installation', () => {
  it('is read again by itself, and says where that failed', async () => {
    const context = await browser.newContext();
    await signOnTo(context, site.url, 'manager');
    const status = await context.newPage();
    await status.clock.install();
    await status.goto(`${site.url}/status`);
    const said = () => status.getByText(/^As of/).textContent();
    const before = await said();
    const later = async () => {
      await status.clock.runFor(31_000); // the server's own clock goes on as it does
      return said();
    };
    await expect.poll(later, SOON).not.toBe(before);
    const failed = status.getByText('It could not be read again since then');
    expect(await failed.isVisible()).toBe(false);
    await status.route('**/status', (route) => route.abort());
    await status.clock.runFor(31_000);
    await failed.waitFor();
    await status.unroute('**/status');
    await status.clock.runFor(31_000);
    await failed.waitFor({ state: 'hidden' });
    await context.close();
  });
});
