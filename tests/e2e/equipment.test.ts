import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Role } from '../../src/domain/access/permissions';
import { axeFaults } from '../support/axe';
import { hydrated, settled, signOnTo, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';
import { press } from '../support/keyboard';

/**
 * A technician on a phone enters a module from its datasheet, imports connectors from a file with faults, and archives;
 * two people change one type; a manager records a documented pair, and the design checks of a site follow.
 */
const GALLERY = 'Coopers Wharf Gallery';
const SHORT = { timeout: 20_000, interval: 200 };

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;
const contexts = new Map<Role, BrowserContext>();

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [GALLERY]);
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
  for (const role of ['technician', 'manager', 'analyst'] as const) {
    const context = await browser.newContext({
      viewport: role === 'technician' ? { width: 390, height: 844 } : { width: 1440, height: 900 },
      reducedMotion: 'reduce',
    });
    await signOnTo(context, site.url, role);
    contexts.set(role, context);
  }
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

async function open(role: Role, path: string): Promise<Page> {
  const context = contexts.get(role);
  if (!context) throw new Error(`nobody is signed in as ${role}`);
  const page = await context.newPage();
  await page.goto(site.url + path);
  await hydrated(page);
  return page;
}
const heading = async (page: Page) => (await page.locator('h1').innerText()).replaceAll('\u00a0', ' ');
const field = (page: Page, label: string) => page.getByLabel(label, { exact: true });
const faultless = async (page: Page) => {
  await settled(page);
  expect(await axeFaults(page)).toEqual([]);
};

const SHEET: readonly (readonly [label: string, value: string])[] = [
  ['Name', 'Mono 410, 108 half cells'],
  ['Open-circuit voltage voc', '37,4'],
  ['Short-circuit current isc', '13.9'],
  ['Voltage at maximum power vmp', '31.4'],
  ['Current at maximum power imp', '13.06'],
  ['Coefficient of voc', '-0.26'],
  ['Coefficient of isc', '0.045'],
  ['Coefficient of maximum power', '-0.34'],
  ['Cells in series', '54'],
  ['Length', '1.72'],
  ['Width', '1.13'],
];

describe('a module from its datasheet, on a phone', () => {
  it('shows its curve and how well it fits while it is typed; errors stand at their fields', async () => {
    const page = await open('technician', '/equipment');
    await expect.poll(() => heading(page), SHORT).toMatch(/module types/);
    expect(new URL(page.url()).pathname).toBe('/equipment/modules');
    await press(page.getByRole('link', { name: 'Enter a module type' }));
    await page.waitForURL('**/equipment/modules/new');
    await hydrated(page);
    const curve = page.locator('#curve');
    await curve.getByText('The curve appears when').waitFor();

    for (const [label, value] of SHEET) await field(page, label).fill(value);
    await curve.getByText('Fits well').waitFor();
    expect(await curve.getByRole('img').locator('visible=true').count()).toBe(2);
    expect(await curve.getByRole('row', { name: /^vmp/ }).innerText()).toMatch(/31\.40 V\s+31\.4\d V/);

    await field(page, 'Voltage at maximum power vmp').fill('38');
    await field(page, 'Current at maximum power imp').focus();
    await page.getByText('vmp (38 V) must be below voc (37.4 V)').waitFor();
    await curve.getByText('The points can’t be of one module').waitFor();
    await field(page, 'Voltage at maximum power vmp').fill('31.4');

    // a coefficient in V/K is asked about, and may not be saved unanswered
    await field(page, 'Coefficient of voc').fill('-0.097');
    await page.getByText('if the sheet says 0.097 V/K, type −0.259 %/K').waitFor();
    await press(page.getByRole('button', { name: 'Save the module type' }));
    await page.getByText('Decide what is worth a second look').waitFor();
    await faultless(page);
    await field(page, 'Coefficient of voc').fill('-0.259');
    await field(page, 'Maximum series fuse').fill('25');

    await press(page.getByRole('button', { name: 'Save the module type' }));
    await page.getByText('Mono 410, 108 half cells is saved').waitFor();
    await page.waitForURL(/\/equipment\/modules\/[0-9a-f-]{36}$/);
    await faultless(page);
    await page.reload();
    await hydrated(page);
    expect(await heading(page)).toBe('Mono 410, 108 half cells');
    expect(await field(page, 'Open-circuit voltage voc').inputValue()).toBe('37.4');
    await page.close();
  });

  it('is archived and found again among the archived', async () => {
    const page = await open('technician', '/equipment/modules');
    await press(page.getByRole('link', { name: 'Mono 410, 108 half cells' }));
    await page.waitForURL('**/equipment/modules/*-*');
    await hydrated(page);
    await press(page.getByRole('button', { name: 'Archive' }));
    await page.getByText('This type is archived').waitFor();
    await page.goto(`${site.url}/equipment/modules`);
    await hydrated(page);
    expect(await page.getByRole('link', { name: 'Mono 410' }).count()).toBe(0);
    await page.getByText('Archived', { exact: true }).click();
    await page.getByRole('link', { name: 'Mono 410' }).waitFor();
    await page.waitForURL(/show=archived/);
    await page.close();
  });
});

describe('connectors from a file', () => {
  it('marks each bad cell, writes nothing, and takes the corrected rows', async () => {
    const page = await open('technician', '/equipment/connectors/import');
    await page.locator('input[type=file]').setInputFiles({
      name: 'connectors.csv',
      mimeType: 'text/csv',
      buffer: Buffer.from(
        'Name;Maker;Type;Maximum voltage (V);Maximum current (A)\r\nSedge 1;Sedge;S1;1500;30,5\r\nSedge 2;Sedge;;15000;thirty\r\nHalyard 4;Tarn & Fell;Halyard 4;1500;40\r\n',
      ),
    });
    await expect.poll(() => heading(page), SHORT).toBe('One of 3 rows can’t be imported');
    const faults = page.locator('#faults');
    expect(await faults.getByRole('row').count()).toBe(4);
    expect(await faults.innerText()).toMatch(/"thirty" is no number\.\s*Type a number from 1 to 200 A\./);
    expect(await page.getByRole('button', { name: /^Import/ }).count()).toBe(0);
    await faultless(page);

    const rows = page.locator('#pasted');
    await rows.fill((await rows.inputValue()).replace(';;15000;thirty', ';S2;1000;30'));
    await press(page.getByRole('button', { name: 'Look again' }));
    await expect.poll(() => heading(page), SHORT).toBe('Two new, 1 to change');
    await page.getByText('Maximum current: 35 → 40').waitFor();
    await press(page.getByRole('button', { name: 'Import 3 rows' }));
    await expect.poll(() => heading(page), SHORT).toBe('Two new, 1 changed');
    await press(page.getByRole('link', { name: 'To the list' }));
    await page.getByRole('link', { name: 'Sedge 2' }).waitFor();
    await page.close();
  });

  it('refuses what is no text, in words', async () => {
    const page = await open('technician', '/equipment/units/import');
    await page.locator('input[type=file]').setInputFiles({
      name: 'units.xlsx',
      mimeType: 'text/csv',
      buffer: Buffer.from([0x50, 0x4b, 3, 4, 0, 0, 0, 0]),
    });
    await page.getByText('units.xlsx is no text. Save the spreadsheet as CSV').waitFor();
    await page.close();
  });
});

describe('two people and one type', () => {
  it('the second is told, keeps what was typed, and decides', async () => {
    const list = await open('manager', '/equipment/units');
    const href = (await list.getByRole('link', { name: 'Shutdown unit' }).getAttribute('href')) ?? '';
    await list.close();
    const first = await open('manager', href);
    const second = await open('technician', href);
    await field(first, 'Maximum current').fill('18');
    await first.getByText('10 strings at 1 site rest on this type').waitFor();
    await press(first.getByRole('button', { name: 'Save the change' }));
    await first.getByText('Shutdown unit is saved').waitFor();
    await field(second, 'Maximum input voltage').fill('75');
    await press(second.getByRole('button', { name: 'Save the change' }));
    await second.getByText('Somebody else saved this type first').waitFor();
    await second.getByText('Orla Nettlebeck changed this type').waitFor();
    await second.getByText('Saved by somebody else: 18').waitFor();
    expect(await field(second, 'Maximum input voltage').inputValue()).toBe('75');
    await faultless(second);
    await field(second, 'Maximum current').fill('18');
    await press(second.getByRole('button', { name: 'Save mine over it' }));
    await second.getByText('Shutdown unit is saved').waitFor();
    await first.reload();
    await hydrated(first);
    expect(await field(first, 'Maximum input voltage').inputValue()).toBe('75');
    expect(await field(first, 'Maximum current').inputValue()).toBe('18');
    await first.close();
    await second.close();
  });

  it('who may only read sees the form and can’t save', async () => {
    const page = await open('analyst', '/equipment/inverters');
    expect(await page.getByRole('link', { name: /Enter a/ }).count()).toBe(0);
    await press(page.getByRole('link', { name: 'Roof inverter 20 kW, 4 inputs' }));
    await page.waitForURL('**/equipment/inverters/*-*');
    await hydrated(page);
    expect(await field(page, 'Maximum DC voltage').isDisabled()).toBe(true);
    expect(await page.getByRole('button', { name: /Save|Archive/ }).count()).toBe(0);
    await faultless(page);
    await page.close();
  });
});

describe('design checks', () => {
  const path = () => `/commissioning/${fleet.site(GALLERY).ref}/design`;
  it('name a connector pair that no document allows, until a manager records one', async () => {
    const before = await open('technician', path());
    expect(await heading(before)).toBe('Ten of 10 strings are beyond a limit');
    await before.getByText('a fire risk, even where they click together').locator('visible=true').waitFor();
    await before
      .getByText('Identical connectors')
      .or(before.getByText('Fit identical connectors'))
      .first()
      .waitFor();
    await faultless(before);
    await before.close();

    const page = await open('manager', '/equipment/connectors');
    await press(page.getByRole('button', { name: 'Record a documented pair' }));
    const dialog = page.getByRole('dialog');
    await press(dialog.getByRole('button', { name: 'Record the pair' }));
    await dialog.getByText('Name the document.').waitFor();
    const choose = async (label: string, name: RegExp) => {
      const options = await dialog.getByLabel(label).locator('option').allInnerTexts();
      await dialog.getByLabel(label).selectOption({ label: options.find((o) => name.test(o)) ?? '' });
    };
    await choose('One half', /^Halyard 4 /);
    await choose('The other half', /^Oxbow 30 /);
    await dialog.getByLabel('Document', { exact: true }).fill('Joint statement of both makers');
    await dialog.getByLabel('Edition or date').fill('edition 2');
    await dialog.getByLabel('Page or table').fill('page 4');
    const evidence = (name: string, body: string) =>
      dialog
        .getByLabel('The document itself')
        .setInputFiles({ name, mimeType: 'application/pdf', buffer: Buffer.from(body) });
    await evidence('statement.pdf', '<html>not what its name says</html>');
    await faultless(page);
    await press(dialog.getByRole('button', { name: 'Record the pair' }));
    await dialog.getByText('The pair is recorded, its document is not here yet').waitFor();
    await dialog.getByText('This is a web page, whatever its name says').waitFor();
    await evidence('statement.pdf', '%PDF-1.4\n%%EOF\n');
    await press(dialog.getByRole('button', { name: 'Send the document again' }));
    await page
      .getByText('Joint statement of both makers, edition 2, page 4')
      .locator('visible=true')
      .waitFor();
    await page.getByRole('link', { name: 'statement.pdf' }).waitFor();
    await page.close();

    const after = await open('technician', path());
    expect(await heading(after)).toBe('10 strings stay within every limit');
    await after.getByText('All', { exact: true }).click();
    await after
      .getByText('Joint statement of both makers, edition 2, page 4')
      .locator('visible=true')
      .first()
      .waitFor();
    await after.waitForURL(/show=all/);
    await faultless(after);
    await after.close();
  });
});
