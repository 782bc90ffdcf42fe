import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { axeFaults } from '../support/axe';
import { hydrated, signInOn, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';
import { press } from '../support/keyboard';

/** An analyst imports the readings of an earlier logger and takes them back; a technician changes a logger's token. */
let db: TestDatabase;
let running: RunningSite;
let browser: Browser;
let site: string;
let serial: string;

beforeAll(async () => {
  db = await testDatabase();
  const clinic = (await testFleet(db, ['Weirside Clinic'])).site('Weirside Clinic');
  site = clinic.ref;
  serial = [...clinic.loggers.keys()][0] ?? '';
  [running, browser] = await Promise.all([startSite(db), startBrowser()]);
});
afterAll(async () => {
  await browser.close();
  await running.stop();
  await db.drop();
});

async function as(who: string, address: string): Promise<Page> {
  const page = await (await browser.newContext({ reducedMotion: 'reduce' })).newPage();
  await signInOn(page, running.url, who);
  await page.goto(running.url + address);
  await hydrated(page);
  return page;
}
const heading = (page: Page, text: RegExp) => page.getByRole('heading', { level: 1, name: text }).waitFor();

/** Two days of two strings, one column each, as a spreadsheet with decimal commas writes them; one cell is no number. */
function earlier(): string {
  const rows = ['Time;A1 power (kW);A2 power (kW)'];
  for (const date of ['04.05.2024', '05.05.2024'])
    for (let q = 0; q < 32; q++)
      rows.push(
        `${date} ${String(8 + Math.floor(q / 4)).padStart(2, '0')}:${String((q % 4) * 15).padStart(2, '0')};3,25;3,5`,
      );
  return rows.join('\r\n').replace('08:15;3,25', '08:15;no signal');
}

it('earlier readings: seen before they are kept, shown apart, taken back whole', async () => {
  const page = await as('analyst', `/sites/${site}/history-import`);
  const file = { name: 'earlier.csv', mimeType: 'text/csv', buffer: Buffer.from(earlier()) };
  await page.getByLabel('A file: CSV or tab-separated').setInputFiles(file);
  await heading(page, /127\sreadings would come in/);
  const bad = page.getByRole('table', { name: 'Cells that would be left out' });
  expect(await bad.getByText('"no signal" is no number.').count()).toBe(1);
  expect(await page.getByLabel('Before decimals stands').inputValue()).toBe('comma');
  expect(await axeFaults(page)).toEqual([]);

  await press(page.getByRole('button', { name: /^Import 127/ }));
  await heading(page, /127\sreadings are imported/);
  const figures = `${running.url}/sites/${site}/figures?period=2024-05`;
  const other = await page.context().newPage();
  await other.goto(figures);
  // 31 + 32 quarters at 3.25 kW, 64 at 3.5 kW
  await other.getByRole('heading', { name: /Imported: 107\skWh on 2\sdays/ }).waitFor();

  await press(page.getByRole('button', { name: 'Take earlier.csv back' }));
  await press(page.getByRole('button', { name: 'Take it back' }));
  await page.getByRole('table', { name: 'Imported files' }).getByText('taken back').waitFor();
  await other.goto(figures);
  expect(await other.getByText('Imported:').count()).toBe(0);
  await page.context().close();
});

it('a token: made beside the old one, shown once, and the old one ended', async () => {
  const page = await as('technician', `/sites/${site}/loggers`);
  const tokens = page.getByRole('table', { name: `Tokens of logger ${serial}` });
  await press(page.getByRole('button', { name: 'Make a new token' }));
  await page.getByLabel('Name').fill('new cabinet');
  await page.getByLabel('The one before ends').selectOption({ label: 'in a day' });
  await page.getByLabel('Why').fill('yearly change');
  await press(page.getByRole('button', { name: 'Make the token' }));
  await page.getByText('It is shown this once.').waitFor();
  expect(await page.getByText(/^wl_[\w-]{43}$/).count()).toBe(1);
  await press(page.getByRole('button', { name: 'I have it' }));
  await tokens.getByText(/ends in /).waitFor();
  expect(await tokens.getByText('new cabinet').count()).toBe(1);
  expect(await page.getByText(/^wl_/).count()).toBe(0);

  await press(tokens.getByRole('button', { name: 'End now: this token' }));
  await page.getByLabel('Why').fill('the old logger is gone');
  await press(page.getByRole('button', { name: 'End it now' }));
  await tokens.getByText(/ended$/).waitFor();
  expect(await axeFaults(page)).toEqual([]);
  await page.context().close();
});
