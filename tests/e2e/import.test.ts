import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import bwipjs from 'bwip-js/node';
import type { APIRequestContext, Browser, BrowserContext, Page } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { PART_DEFAULTS } from '../../src/domain/commissioning/as-built/parts';
import type { AsBuilt, PartAdd, SiteCreated } from '../../src/schemas/api/as-built';
import { axeFaults } from '../support/axe';
import { hydrated, settled, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet } from '../support/fleet';
import { signInAt, startSite, type RunningSite } from '../support/server';
import { press } from '../support/keyboard';

/** A new roof: strings from a spreadsheet, the last serials read on the roof, the strings laid on the plan. */
let db: TestDatabase;
let running: RunningSite;
let browser: Browser;
let folder: string;
let url: string;
let site: string;
/** Serials of this run: a unit sits in one place, and a site that was used before has its own. */
const RUN = `R${String(Date.now()).slice(-7)}`;
const SEEN = `${RUN}-K2-6`;

/** What the camera sees: one label, for as long as it looks. */
async function labelFilm(text: string): Promise<string> {
  const code = await bwipjs.toBuffer({ bcid: 'datamatrix', text, scale: 8 });
  const frame = await sharp({ create: { width: 640, height: 480, channels: 3, background: '#d8d8d0' } })
    .composite([
      {
        input: await sharp(code)
          .flatten({ background: '#fff' })
          .extend({ top: 24, bottom: 24, left: 24, right: 24, background: '#fff' })
          .png()
          .toBuffer(),
      },
    ])
    .jpeg({ quality: 92 })
    .toBuffer();
  const file = path.join(folder, 'label.mjpeg');
  await writeFile(file, Buffer.concat(Array.from({ length: 30 }, () => frame)));
  return file;
}

/** Signed in once each: too many sign-ins in a row are refused. */
const cookies = new Map<string, Promise<string>>();
const cookieOf = (role: string): Promise<string> => {
  const known = cookies.get(role) ?? signInAt(url, `${role}@lowfield.example`, PASSWORD);
  cookies.set(role, known);
  return known;
};

/** A page's answer to what was done may take a while on a busy machine. */
const eventually = <T>(read: () => T | Promise<T>) => expect.poll(read, { timeout: 20_000 });

async function context(
  role: string,
  more: Parameters<Browser['newContext']>[0] = {},
): Promise<BrowserContext> {
  const made = await browser.newContext({ reducedMotion: 'reduce', permissions: ['camera'], ...more });
  const [name = '', value = ''] = (await cookieOf(role)).split('=');
  await made.addCookies([{ name, value, url }]);
  return made;
}
const PHONE = { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true };

/** A site with all that strings hang on (an initiator and a zone come with it), and no string. */
async function newSite(request: APIRequestContext): Promise<string> {
  const post = async <T>(address: string, data: unknown): Promise<T> => {
    const response = await request.post(`${url}${address}`, { data, headers: { origin: url } });
    expect(response.ok(), await response.text()).toBe(true);
    return (await response.json()) as T;
  };
  const values = {
    ...PART_DEFAULTS.site,
    name: `Ropewalk ${Date.now()}`,
    place: 'Tannersbrook',
    latitude: 51.5,
    longitude: -0.5,
    timeZone: 'Europe/London',
  };
  const { id } = await post<SiteCreated>('/api/sites', { values });
  const add = (kind: PartAdd['kind'], some: PartAdd['values']) =>
    post<{ ids: string[] }>(`/api/sites/${id}/as-built/parts`, { kind, values: some }).then(
      (r) => r.ids[0] ?? '',
    );
  await add('plane', { name: 'South roof', surfaceTilt: 20, surfaceAzimuth: 180, albedo: 0.2 });
  await add('inverter', { name: 'Inverter 1', inverterType: null, acPowerMax: 12000, inputs: 3 });
  await add('logger', { serial: `LG-E2E-${Date.now() % 1_000_000}` });
  return id;
}
const asBuilt = async (request: APIRequestContext): Promise<AsBuilt> =>
  (await (await request.get(`${url}/api/sites/${site}/as-built`)).json()) as AsBuilt;
const serialsOf = async (request: APIRequestContext, name: string): Promise<(string | null)[]> =>
  (await asBuilt(request)).strings.find((s) => s.name === name)?.slots.map((s) => s.serial) ?? [];

function listen(page: Page): string[] {
  const faults: string[] = [];
  page.on('pageerror', (error) => faults.push(error.message));
  page.on('console', (line) => {
    if (line.type() === 'error' && !/Failed to load resource|ERR_INTERNET_DISCONNECTED/.test(line.text()))
      faults.push(line.text());
  });
  return faults;
}

beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'wakeline-e2e-'));
  db = await testDatabase();
  await testFleet(db, ['Weirside Clinic']);
  running = await startSite(db, { WAKELINE_ROLES: 'web' });
  ({ url } = running);
  browser = await startBrowser([
    '--use-fake-ui-for-media-stream',
    '--use-fake-device-for-media-stream',
    `--use-file-for-fake-video-capture=${await labelFilm(SEEN)}`,
  ]);
  const made = await context('technician');
  site = await newSite(made.request);
  await made.close();
});
afterAll(async () => {
  await browser.close();
  await running.stop();
  await db.drop();
  await rm(folder, { recursive: true });
});

describe('strings and serials from a file', () => {
  it('are matched, mended on the spot, looked at, and written with a reason; twice is once', async () => {
    const desk = await context('technician', { viewport: { width: 1440, height: 1000 } });
    const page = await desk.newPage();
    const faults = listen(page);
    await page.goto(`${url}/commissioning/${site}/import`);
    await hydrated(page);
    expect(await page.locator('h1').innerText()).toBe('Strings and serials from a file');
    expect(await axeFaults(page)).toEqual([]);

    // semicolons, decimal commas, Western European letters, a serial misread, a position twice, names above only
    const rows = ['Strang;Pos.;Seriennummer;Dachfläche;MPPT;x'];
    for (let i = 1; i <= 6; i++)
      rows.push(
        `${i === 1 ? 'K1' : ''};${i === 5 ? 4 : i};${i === 3 ? `${RUN}:K1:3` : `${RUN}-K1-${i}`};Süd;1;${i},5`,
      );
    for (let i = 1; i <= 6; i++)
      rows.push(`${i === 1 ? 'K2' : ''};${i};${i > 4 ? '' : `${RUN}-K2-${i}`};Süd;2;${i},5`);
    const bytes = Buffer.from(rows.join('\r\n'), 'latin1');
    await page
      .getByLabel('A file: CSV or tab-separated')
      .setInputFiles({ name: 'strings.csv', mimeType: 'text/csv', buffer: bytes });
    await page.getByText('Windows-1252').waitFor();
    await press(page.getByLabel('Blank string cells mean the string above'));
    await page.getByLabel('plane “Süd”').selectOption('South roof');
    await press(page.getByRole('button', { name: 'Make them' }));
    await page.getByLabel('Unit type', { exact: true }).selectOption('Reporting unit, output side');
    await page.getByLabel('Module type', { exact: true }).selectOption('Mono 430, 108 half cells');
    await eventually(() => page.locator('h1').innerText()).toMatch(/^\d cells of 12 rows need a look/);
    expect(await axeFaults(page)).toEqual([]);
    await press(page.getByRole('button', { name: `Write ${RUN}-K1-3` }));
    await page.getByLabel('Cell in row 6, position').fill('5');
    await page.getByLabel('Cell in row 6, position').press('Enter');

    await eventually(() => page.locator('h1').innerText()).toBe('12 rows would make 12 changes');
    await press(page.getByRole('button', { name: 'Import 12 rows' }));
    await page.getByText('Say why, in a few words').waitFor();
    await page.getByLabel('Why', { exact: true }).fill('List of the installer');
    expect(await axeFaults(page)).toEqual([]);
    await press(page.getByRole('button', { name: 'Import 12 rows' }));
    await eventually(() => page.locator('h1').innerText()).toBe('12 rows are in the as-built');
    expect(await serialsOf(page.request, 'K1')).toEqual([1, 2, 3, 4, 5, 6].map((n) => `${RUN}-K1-${n}`));
    expect(await serialsOf(page.request, 'K2')).toEqual([
      `${RUN}-K2-1`,
      `${RUN}-K2-2`,
      `${RUN}-K2-3`,
      `${RUN}-K2-4`,
      null,
      null,
    ]);

    // what comes out goes in again and changes nothing
    const csv = await page.request.get(`${url}/api/sites/${site}/as-built.csv`);
    await page.reload();
    await hydrated(page);
    await page
      .getByLabel('A file: CSV or tab-separated')
      .setInputFiles({ name: 'as-built.csv', mimeType: 'text/csv', buffer: await csv.body() });
    await eventually(() => page.locator('h1').innerText()).toBe('Nothing to change');
    expect(faults).toEqual([]);
    await desk.close();
  });

  it('are refused by name where a file is none', async () => {
    const desk = await context('technician', PHONE);
    const page = await desk.newPage();
    await page.goto(`${url}/commissioning/${site}/import`);
    await hydrated(page);
    const file = page.getByLabel('A file: CSV or tab-separated');
    await file.setInputFiles({
      name: 'strings.xlsx',
      mimeType: '',
      buffer: Buffer.from([0x50, 0x4b, 3, 4, 1, 2]),
    });
    await page.getByText('Save the sheet as CSV (UTF-8)').waitFor();
    await file.setInputFiles({
      name: 'wrong.csv',
      mimeType: '',
      buffer: Buffer.from('colour;size\nred;1\n'),
    });
    await eventually(() => page.locator('h1').innerText()).toContain('Which column is the string');
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    expect(await axeFaults(page)).toEqual([]);
    await desk.close();
  });
});

describe('serials on the roof', () => {
  it('are typed and read by the camera, wait without a network, and are taken back', async () => {
    const phone = await context('technician', PHONE);
    const page = await phone.newPage();
    const faults = listen(page);
    const k2 = (await asBuilt(page.request)).strings.find((s) => s.name === 'K2')?.id ?? '';
    await page.goto(`${url}/commissioning/${site}/serials?string=${k2}`);
    await hydrated(page);
    expect(await page.locator('h1').innerText()).toBe('K2, position 5 of 6');
    const field = page.getByLabel('Serial', { exact: true });
    await field.fill(`${RUN}-K1-1`);
    await page.getByRole('button', { name: 'Save and go on' }).tap();
    await page.getByText(`${RUN}-K1-1 is entered at K1, position 1.`).waitFor();
    expect(await axeFaults(page)).toEqual([]);

    await phone.setOffline(true);
    await field.fill(`${RUN}-k2-5`.toLowerCase());
    await page.getByRole('button', { name: 'Save and go on' }).tap();
    await eventually(() => page.locator('h1').innerText()).toBe('K2, position 6 of 6');
    await page.getByText('1 serial waits on this phone').waitFor();
    expect((await serialsOf(page.request, 'K2'))[4]).toBeNull();
    await phone.setOffline(false);
    await page.reload();
    await hydrated(page);
    await eventually(() => serialsOf(page.request, 'K2')).toContain(`${RUN}-K2-5`);

    await page.getByRole('button', { name: 'Read with the camera' }).tap();
    await eventually(() => field.inputValue()).toBe(SEEN);
    expect(await axeFaults(page)).toEqual([]);
    await page.getByRole('button', { name: 'Save and go on' }).tap();
    await eventually(async () => (await serialsOf(page.request, 'K2'))[5]).toBe(SEEN);
    await page.getByRole('button', { name: 'Undo' }).tap();
    await eventually(async () => (await serialsOf(page.request, 'K2'))[5]).toBeNull();
    const small = await page.evaluate(() =>
      [...document.querySelectorAll('main button, main select, main input:not([type=checkbox])')]
        .map((e) => ({ words: e.textContent, box: e.getBoundingClientRect() }))
        .filter(({ box }) => box.width > 0 && box.height < 44)
        .map(({ words, box }) => `${words}: ${box.height}`),
    );
    expect(small).toEqual([]);
    expect(faults).toEqual([]);
    await phone.close();
  });

  it('tell the second of two who read the same slot, and keep what both read', async () => {
    const [mine, theirs] = [await context('technician', PHONE), await context('manager')];
    const page = await mine.newPage();
    const k2 = (await asBuilt(page.request)).strings.find((s) => s.name === 'K2')?.id ?? '';
    await page.goto(`${url}/commissioning/${site}/serials?string=${k2}`);
    await hydrated(page);
    const response = await theirs.request.post(`${url}/api/sites/${site}/placements`, {
      headers: { origin: url },
      data: { changes: [{ slot: { string: k2, position: 6 }, serial: `${RUN}-THEIRS` }], reason: '' },
    });
    expect(response.ok()).toBe(true);
    await page.getByRole('button', { name: /^Position 6:/ }).tap();
    await page.getByLabel('Serial', { exact: true }).fill(`${RUN}-MINE`);
    await page.getByRole('button', { name: 'Save and go on' }).tap();
    await page.getByText(`${RUN}-MINE at K2, position 6 was not kept.`).waitFor();
    await page.getByText(`${RUN}-THEIRS`).first().waitFor();
    expect(await axeFaults(page)).toEqual([]);
    await page.getByLabel('Why yours is right').fill('Read twice');
    await page.getByRole('button', { name: `Put ${RUN}-MINE there` }).tap();
    await eventually(async () => (await serialsOf(page.request, 'K2'))[5]).toBe(`${RUN}-MINE`);
    await Promise.all([mine.close(), theirs.close()]);
  });
});

describe('the roof', () => {
  it('is drawn and strings are laid on it with a thumb and with keys, and kept in one go', async () => {
    const phone = await context('technician', PHONE);
    const page = await phone.newPage();
    const faults = listen(page);
    await page.goto(`${url}/commissioning/${site}/roof`);
    await hydrated(page);
    expect(await page.locator('h1').innerText()).toContain('has no outline yet');
    await page.getByLabel('Width').fill('14,5');
    await page.getByLabel('Depth').fill('9');
    await page.getByRole('button', { name: 'Draw it' }).tap();
    const corner = page.getByRole('button', { name: /^Point 3 at 14.5 m east/ });
    await corner.focus();
    await page.keyboard.press('Shift+ArrowUp');
    await page.getByRole('button', { name: /^Point 3 at 14.5 m east, 10 m north/ }).waitFor();
    expect(await axeFaults(page)).toEqual([]);

    await page.getByText('Strings', { exact: true }).tap();
    const roof = page.getByRole('group', { name: /^Roof from above/ });
    await settled(page);
    const box = await roof.boundingBox();
    await roof.tap({ position: { x: (box?.width ?? 0) * 0.3, y: (box?.height ?? 0) * 0.3 } });
    await eventually(() => page.getByLabel('First module, east').inputValue()).not.toBe('');
    await page.getByLabel('Modules in a row').fill('3');
    await page.getByLabel('Strings alike').fill('2');
    await page.getByRole('button', { name: 'Lay 2 strings' }).tap();
    expect(await page.getByLabel('Position 5 in words').inputValue()).toMatch(
      /row, second from the west end$/,
    );
    await page.getByRole('button', { name: 'Undo' }).tap();
    await page.getByRole('button', { name: 'Redo' }).tap();
    expect(await axeFaults(page)).toEqual([]);
    await page.getByRole('button', { name: 'Save the outline and 2 strings' }).tap();
    await page.getByText('The roof is kept').waitFor();
    await page.reload();
    expect(await page.locator('h1').innerText()).toBe('All 2 strings are on the roof');
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    expect(faults).toEqual([]);
    await phone.close();
  });
});
