import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { faultsShown } from '../support/axe';
import { signOnTo, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';
import { stand } from '../support/standing';
import { judgeLow, reportHours } from '../support/workbench-scene';
import { press } from '../support/keyboard';

/** An analyst goes from the list of low strings to one of them and hands on what they saw. */
const HALL = 'Old Tannery Market Hall';
const NOTE = 'Five and nine lie flat from here on.';

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;
let page: Page;
const noise: string[] = [];

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL]);
  const hall = fleet.site(HALL);
  const now = new Date(Math.floor(Date.now() / 60_000) * 60_000);
  // afternoon there: the hours that were reported are of today
  const ahead = now.getUTCHours() - 14;
  await db.owner.query('update site set time_zone = $1, stage = $2', [
    `Etc/GMT${ahead >= 0 ? '+' : ''}${ahead}`,
    'operating',
  ]);
  const id = (name: string) => hall.strings.get(name)?.id ?? 0;
  await reportHours(db, { siteId: hall.id, string: id('B3') }, now);
  await judgeLow(hall.id, [id('B2'), id('B3')], now); // the second is low
  await stand(db.owner, hall, now, (string, position) =>
    string === 'B3' && (position === 5 || position === 9) ? { state: 'shutdown', verdict: 'stuck' } : null,
  );
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
  const context = await browser.newContext({ viewport: { width: 1440, height: 1000 } });
  await context.grantPermissions(['clipboard-read', 'clipboard-write'], { origin: site.url });
  await signOnTo(context, site.url, 'analyst');
  page = await context.newPage();
  page.setDefaultTimeout(20_000);
  page.on('console', (m) => m.type() === 'error' && noise.push(m.text()));
  page.on('pageerror', (e) => noise.push(e.message));
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

const hydrated = () =>
  page.waitForFunction(() => document.querySelectorAll('astro-island[ssr]').length === 0);

describe('from a low string to a link that shows what was seen', () => {
  it('lists the string with what it looks like, and keeps the filters under a name', async () => {
    await page.goto(`${site.url}/low-output?case=none`);
    await hydrated();
    await page.getByRole('heading', { name: 'One of 2 strings makes less than it should' }).waitFor();
    await press(page.getByRole('button', { name: 'Save this view' }));
    await page.getByLabel('Name of the view').fill('Not taken up');
    await press(page.getByRole('button', { name: 'Save the view' }));
    await page.getByRole('link', { name: 'Not taken up' }).waitFor();
    expect(await page.getByRole('link', { name: 'Open a case' }).getAttribute('href')).toContain('string=');
    expect(await faultsShown(page, 'low strings', 1440)).toEqual([]);
    await press(page.getByRole('link', { name: 'B3', exact: true }));
    await page.waitForURL(/\/strings\//);
  });

  it('shows the staircase of the minute to which the history is dragged', async () => {
    const string = fleet.site(HALL).strings.get('B3')?.ref ?? '';
    await page.goto(`${site.url}/sites/${fleet.site(HALL).ref}/strings/${string}`);
    await hydrated();
    const canvas = page.locator('#history canvas').first();
    await canvas.scrollIntoViewIfNeeded();
    // the chart knows its axis once its first picture is drawn
    await page.locator('#history canvas').first().waitFor();
    const plot = await canvas.boundingBox();
    if (!plot) throw new Error('no chart');
    const y = plot.y + plot.height * 0.4;
    await expect
      .poll(
        async () => {
          await page.mouse.move(plot.x + plot.width * 0.5, y);
          await page.mouse.down();
          await page.mouse.move(plot.x + plot.width * 0.45, y, { steps: 4 });
          await page.mouse.up();
          return /[?&]at=\d+/.test(page.url());
        },
        { timeout: 15_000, interval: 300 },
      )
      .toBe(true);
    await page.getByRole('heading', { name: /^Voltage staircase at / }).waitFor();
    const before = page.url();
    await page.getByLabel('Moment of the staircase').focus();
    await page.keyboard.press('ArrowLeft');
    await page.waitForURL((url) => url.href !== before);
  });

  it('draws the chosen units, pins a note, and copies a link that shows the same', async () => {
    await page.locator('#units').scrollIntoViewIfNeeded();
    await page.locator('#units-chosen').scrollIntoViewIfNeeded();
    await page.locator('#units-chosen').getByRole('checkbox', { name: 'Position 7' }).check({ force: true });
    await page.waitForURL(/units=5%2C7%2C9/);
    await page.locator('#units-chosen').getByText('Position 7', { exact: true }).first().waitFor();
    const notes = page.locator('#notes');
    await notes.scrollIntoViewIfNeeded();
    await press(notes.getByRole('button', { name: 'Pin a note' }));
    await notes.getByLabel('Note').fill(NOTE);
    await press(notes.getByRole('button', { name: 'Pin the note' }));
    await notes.locator('li', { hasText: NOTE }).waitFor();
    expect(await faultsShown(page, 'a string', 1440)).toEqual([]);
    const title = await page.locator('#staircase-title').innerText();
    await press(page.getByRole('button', { name: 'Copy link' }));
    await page.getByRole('button', { name: 'Link copied' }).waitFor();
    const link = await page.evaluate(() => navigator.clipboard.readText());
    expect(link).toMatch(/on=\d{4}-\d{2}-\d{2}&at=\d+&units=5%2C7%2C9/);
    await page.goto(link);
    await hydrated();
    await page.getByRole('heading', { name: title, exact: true }).waitFor();
    await page.locator('#units').scrollIntoViewIfNeeded();
    await page.locator('#units-chosen').scrollIntoViewIfNeeded();
    expect(
      await page.locator('#units-chosen').getByRole('checkbox', { name: 'Position 7' }).isChecked(),
    ).toBe(true);
    await page.locator('#notes').scrollIntoViewIfNeeded();
    await page.locator('#notes li', { hasText: NOTE }).waitFor();
  });

  it('reads on a phone, the readings first', async () => {
    await page.setViewportSize({ width: 390, height: 844 });
    expect(await faultsShown(page, 'a string on a phone', 390)).toEqual([]);
    const top = async (id: string) => (await page.locator(id).boundingBox())?.y ?? NaN;
    expect(await top('#readings')).toBeLessThan(await top('#staircase'));
    expect(await top('#staircase')).toBeLessThan(await top('#history'));
    expect(noise).toEqual([]);
  });
});

describe('a list of low strings that is longer than a page', () => {
  const rows = () => page.locator('#low tbody tr').count();

  beforeAll(async () => {
    const { rows: made } = await db.owner.query<{ id: number }>(
      `insert into string (site_id, name, plane_id, input_id, zone_id, logger_id, roster_index, unit_type_id, kind, slots)
       select site_id, 'L' || n, plane_id, input_id, zone_id, logger_id, 1000 + n, unit_type_id, kind, slots
       from string, generate_series(1, 60) n where id = $1 returning id`,
      [fleet.site(HALL).strings.get('B3')?.id],
    );
    const columns =
      'site_id, day, outcome, method, ratio, z, loss_wh, expected_wh, signature, finding, judged_at';
    await db.owner.query(
      `insert into output_day (string_id, ${columns})
       select made, ${columns} from output_day, unnest($1::int4[]) made where string_id = $2 and outcome = 'low'`,
      [made.map((m) => m.id), fleet.site(HALL).strings.get('B3')?.id],
    );
  });

  it('is sent with its first rows, and has the others once somebody asks', async () => {
    await page.setViewportSize({ width: 1440, height: 1000 });
    await page.goto(`${site.url}/low-output?sort=string&order=up`);
    await hydrated();
    await page.getByText('61 of 61', { exact: true }).waitFor();
    expect(await rows()).toBe(50);
    expect((await page.content()).includes('L60')).toBe(false);
    await press(page.getByRole('button', { name: 'Show more strings (50 of 61 shown)' }));
    await expect.poll(rows).toBe(61);
    expect(await faultsShown(page, 'all low strings', 1440)).toEqual([]);
  });

  it('is searched as a whole; without an answer it says that others are missing', async () => {
    await page.goto(`${site.url}/low-output?sort=string&order=up`);
    await hydrated();
    await page.route('**/api/low-output', (route) => route.fulfill({ status: 500, body: 'no' }));
    await page.getByLabel('Find by site, string, plane or words').fill('L60');
    await page.getByText('The other strings could not be read: only the first ones are listed').waitFor();
    expect(await page.getByText('None of the first strings is like that').count()).toBe(1);
    await page.unroute('**/api/low-output');
    await press(page.getByRole('button', { name: 'Try again' }));
    await page.getByText('1 of 61', { exact: true }).waitFor();
    expect(await rows()).toBe(1);
    expect(noise.filter((line) => !line.includes('500'))).toEqual([]);
  });
});
