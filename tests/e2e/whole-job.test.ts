import type { Browser, BrowserContext, Page } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startSimulator, type Simulator } from '../../simulator/engine';
import type { FleetPlan, SitePlan } from '../../simulator/plant/plan';
import { BOTH_SIDES, MODULE_TYPES, MONO_430, UNIT_TYPES } from '../../simulator/scenarios/catalogue';
import { layOut } from '../../simulator/scenarios/lay-out';
import { PLACES, placeAtHour } from '../../simulator/scenarios/places';
import { CHECKS } from '../../src/domain/commissioning/checks/list';
import { COLUMN_LABELS } from '../../src/words/domain-import';
import type { AsBuilt, PartAdd } from '../../src/schemas/api/as-built';
import { axeFaults } from '../support/axe';
import { hydrated, settled, signOnTo, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, SECRET, testFleet, type TestFleet } from '../support/fleet';
import { pdfPages } from '../support/pdf';
import { openCapture, phoneOf, press } from '../support/phone';
import { startSite, type RunningSite } from '../support/server';

/**
 * The whole job on one phone: a new site from a file of serials to the papers in the owner's hands. The site itself is
 * the simulated plant, reached with the token that Wakeline made; the network goes in the middle.
 */
const NAME = 'Millrace Barn';
const STRINGS = ['K1', 'K2'];
const UNITS = 6;
const LONG = { timeout: 120_000, interval: 500 };
const SHORT = { timeout: 30_000, interval: 250 };

let db: TestDatabase;
let fleet: TestFleet;
let running: RunningSite;
let browser: Browser;
let plant: Simulator | undefined;
let plan: SitePlan;
let phone: BrowserContext;
let page: Page;
let site = '';
let token = '';
const faults: string[] = [];

beforeAll(async () => {
  const since = Math.floor(Date.now() / 1000);
  db = await testDatabase();
  fleet = await testFleet(db, ['Weirside Clinic'], since);
  running = await startSite(db);
  browser = await startBrowser();
  plan = layOut(
    {
      name: NAME,
      stage: 'commissioning',
      switchedOnOn: null,
      shutdownSwitchPlace: 'Beside the barn door',
      contactName: '',
      contactPhone: '',
      reportIntervalS: 10,
      moduleType: MONO_430,
      unitType: BOTH_SIDES,
      planes: [{ name: 'South roof', surfaceTilt: 15, surfaceAzimuth: 180, albedo: 0.2 }],
      initiators: [{ name: 'Main initiator', place: 'Beside the barn door' }],
      zones: [{ name: 'Whole site', initiator: 'Main initiator' }],
      gatewayNames: ['Gateway 1'],
      climate: { clearShare: 1, cloudyShare: 0, fairToday: true },
      blocks: [{ name: 'K', strings: 2, units: UNITS, plane: 'South roof', zone: 'Whole site', gateways: 1 }],
    },
    placeAtHour([...PLACES], since, 11),
    { modules: MODULE_TYPES, units: UNIT_TYPES },
  );
  phone = await phoneOf(browser, running.url, 'technician');
  page = await phone.newPage();
  page.setDefaultTimeout(20_000);
  page.on('pageerror', (error) => faults.push(error.message));
});
afterAll(async () => {
  await browser.close();
  await plant?.stop();
  await running.stop();
  await db.drop();
});

const plain = (text: string): string => text.replace(/[\u00a0\u202f]/g, ' ');
const heading = async (): Promise<string> => plain(await page.locator('h1').innerText());
const at = (path: string): string => `${running.url}/commissioning/${site}/${path}`;
const button = (name: string | RegExp) => page.getByRole('button', { name });
async function look(what: string): Promise<void> {
  await settled(page);
  expect(await axeFaults(page), what).toEqual([]);
  expect(await page.evaluate(() => document.documentElement.scrollWidth), `${what} is too wide`).toBe(390);
}
const post = async <T>(path: string, data: unknown): Promise<T> => {
  const response = await page.request.post(`${running.url}${path}`, {
    data,
    headers: { origin: running.url },
  });
  expect(response.ok(), await response.text()).toBe(true);
  return (await response.json()) as T;
};
const asBuilt = async (): Promise<AsBuilt> =>
  (await (await page.request.get(`${running.url}/api/sites/${site}/as-built`)).json()) as AsBuilt;
const initiatorOpen = () => plant?.truth(NAME).initiators[0]?.open;
async function operate(open: boolean): Promise<void> {
  const plantPage = await browser.newPage();
  await plantPage.goto(`${plant?.pageUrl ?? ''}sites/${plan.key}`);
  await plantPage.getByRole('button', { name: `${open ? 'Open' : 'Close'} Main initiator` }).click();
  await expect.poll(initiatorOpen, SHORT).toBe(open);
  await plantPage.close();
}

describe('a new site on one phone', { timeout: 240_000 }, () => {
  it('begins with its name and its place', async () => {
    await page.goto(`${running.url}/commissioning`);
    await hydrated(page);
    await page.getByRole('link', { name: 'Begin a site' }).tap();
    await page.waitForURL('**/commissioning/new');
    await hydrated(page);
    await page.fill('[name="name"]', NAME);
    await page.fill('[name="place"]', plan.place);
    await page.fill('[name="latitude"]', String(plan.latitude));
    await page.fill('[name="longitude"]', String(plan.longitude));
    await page.selectOption('[name="timeZone"]', plan.timeZone);
    await page.fill('[name="shutdownSwitchPlace"]', plan.shutdownSwitchPlace);
    await page.fill('[name="reportIntervalS"]', String(plan.reportIntervalS));
    await look('a new site');
    await page.getByRole('button', { name: 'Create the site' }).tap();
    await page.waitForURL('**/as-built');
    site = /commissioning\/([0-9a-f-]{36})\//.exec(page.url())?.[1] ?? '';

    // the forms of each part have a journey of their own
    const add = (kind: PartAdd['kind'], values: PartAdd['values']) =>
      post<{ ids: string[]; token: string | null }>(`/api/sites/${site}/as-built/parts`, { kind, values });
    await add('plane', { name: 'South roof', surfaceTilt: 15, surfaceAzimuth: 180, albedo: 0.2 });
    await add('inverter', { name: 'Inverter 1', inverterType: null, acPowerMax: 5000, inputs: 2 });
    const logger = await add('logger', { serial: plan.loggers[0]?.serial ?? '' });
    token = logger.token ?? '';
    expect(token).toMatch(/^wl_/);
  });

  it('gets its strings and serials from a file', async () => {
    await page.goto(at('import'));
    await hydrated(page);
    const header = (['string', 'position', 'serial', 'plane', 'inverter', 'input', 'zone'] as const).map(
      (key) => COLUMN_LABELS[key],
    );
    const rows = plan.strings.flatMap((s, i) =>
      s.slots.map((slot, n) => [s.name, n + 1, slot.serial, 'South roof', 'Inverter 1', i + 1, 'Whole site']),
    );
    const text = [header, ...rows].map((row) => row.join(';')).join('\r\n');
    await page
      .getByLabel('A file: CSV or tab-separated')
      .setInputFiles({ name: 'serials.csv', mimeType: 'text/csv', buffer: Buffer.from(text) });
    await button('Make them').tap();
    await page.getByLabel('Unit type', { exact: true }).selectOption(BOTH_SIDES);
    await page.getByLabel('Module type', { exact: true }).selectOption(MONO_430);
    await expect.poll(heading, SHORT).toMatch(/^12 rows would make/);
    await look('the preview');
    await page.getByLabel('Why', { exact: true }).fill('List of the installer');
    await button('Import 12 rows').tap();
    await expect.poll(heading, SHORT).toBe('12 rows are in the as-built');
    const { strings } = await asBuilt();
    expect(strings.map((s) => [s.name, s.slots[0]?.serial])).toEqual(
      plan.strings.map((s) => [s.name, s.slots[0]?.serial]),
    );
  });

  it('is checked and read with the network gone, and all of it arrives once', async () => {
    await openCapture(page, running.url, site);
    await phone.setOffline(true);
    const volts = UNITS * (MODULE_TYPES.find((m) => m.name === MONO_430)?.vocRef ?? 0) * 0.97;
    await page.getByRole('button', { name: 'Readings of K1', exact: true }).tap();
    await press(page, volts.toFixed(1));
    await expect.poll(async () => plain(await page.locator('main').innerText())).toContain('As expected');
    await button('Save and go to K2').tap();
    await press(page, (volts + 0.6).toFixed(1));
    await button(/^Save/).tap();
    for (const string of STRINGS) await checks(string);
    await page.reload();
    await expect.poll(() => button(/^\d+ waiting$/).count(), SHORT).toBe(1);
    expect((await db.owner.query('select from install_check')).rowCount).toBe(0);
    await phone.setOffline(false);
    await expect.poll(() => button(/^\d+ waiting$/).count(), LONG).toBe(0);
    const { rows } = await db.owner.query<{ checks: number; readings: number; photos: number }>(
      `select (select count(*)::int from install_check) as checks, (select count(*)::int from meter_reading) as readings,
              (select count(*)::int from attachment) as photos`,
    );
    expect(rows[0]).toEqual({ checks: 2 * CHECKED, readings: 2, photos: 1 });
    for (const string of STRINGS) {
      await page.goto(`${running.url}/capture/${site}`);
      await page.getByRole('button', { name: `Checks of ${string}`, exact: true }).tap();
      const sign = button(new RegExp(`^Sign off the checks of ${string} as `));
      await expect.poll(() => sign.isEnabled(), SHORT).toBe(true);
      await sign.tap();
      await page
        .getByText(/Signed by .+/)
        .first()
        .waitFor();
    }
  });

  it('answers the roll call of its own logger, whose token was made here', async () => {
    const { organisations, ...rest } = fleet.plan;
    const [first] = organisations;
    if (!first) throw new Error('the fleet has no organisation');
    const own: FleetPlan = { ...rest, organisations: [{ ...first, sites: [plan] }] };
    plant = await startSimulator({
      plan: own,
      ingestUrl: `${running.url.replace('http', 'ws')}/ingest/v1`,
      secret: SECRET,
      tokens: { [plan.loggers[0]?.serial ?? '']: token },
      port: 0,
      pace: 240,
    });
    await page.goto(at('roll-call'));
    await hydrated(page);
    await page.getByLabel('Who is on site').fill('Per Aalto');
    await page.getByLabel('This person is on site now').check();
    await button('Start the roll call').tap();
    await expect.poll(heading, LONG).toBe('All 12 units have answered the roll call');
    await look('the roll call');
    await button('Stop the roll call').tap();
    await expect.poll(() => button('Stop the roll call').count(), SHORT).toBe(0);
  });

  it('shuts down before a rated instrument, and is signed for', async () => {
    await page.goto(at('shutdown-test'));
    await hydrated(page);
    await button('Start the test').tap();
    await page.waitForURL(/shutdown-test\/[0-9a-f-]{36}$/);
    await hydrated(page);
    await page.getByLabel('Who operates the initiator').fill('Ivo Brandt');
    await page.getByLabel('Make and model').fill('Hawkbill 15');
    await page.getByLabel('Serial number').fill('HB-20881');
    await page.getByLabel('Rated voltage').fill('1500');
    await page.getByLabel('Calibrated on').fill('2026-05-04');
    await page.getByLabel('Proved on a known source just now').check();
    await button('Save and read the caution').tap();
    await page.getByLabel('I have read this').check();
    await button('Accept and go on').tap();
    await button('Start watching').tap();
    await page.getByText('Reports of the strings arrive.').waitFor({ timeout: 90_000 });
    for (const string of STRINGS) await meter(string, 'before');
    await operate(true);
    await button(/^Initiator operated now/).tap();
    await expect.poll(() => plant?.truth(NAME).strings.every((s) => s.homeRun < 20), LONG).toBe(true);
    for (const string of STRINGS) await meter(string, 'after');
    await operate(false);
    await button(/^Initiator released again now/).tap();
    await page.getByText(/12 of 12 units that went have come back/).waitFor({ timeout: 150_000 });
    await button('End this round').tap();
    await button('Go to the verdict').tap();
    await page.getByText('It read the known source right').tap(); // no reading decides before
    for (const string of STRINGS)
      await expect
        .poll(async () => plain(await page.locator('#results').innerText()), SHORT)
        .toMatch(new RegExp(`${string}\\s*✓\\s*Passed`));
    // figures may still come in: what is signed is what is shown
    await expect
      .poll(async () => {
        const signed = page.getByRole('heading', { name: 'Signature' });
        if ((await signed.count()) > 0) return 1;
        const soon = { timeout: 2000 };
        await page
          .getByLabel('Your password again')
          .fill(PASSWORD, soon)
          .catch(() => undefined);
        await button('Sign this test')
          .click(soon)
          .catch(() => undefined);
        return signed.count();
      }, LONG)
      .toBe(1);
  });

  it('is handed over: papers are made, the owner is written to and finds them', async () => {
    await db.owner.query(
      `insert into site_access select p.id, s.id from person p, site s where p.email = 'customer@lowfield.example' and s.ref = $1`,
      [site],
    );
    await page.goto(`${running.url}/commissioning/${site}`);
    await hydrated(page);
    expect(await heading()).toBe(`${NAME} is ready to be handed over`);
    await look('the steps');
    await page.goto(at('handover'));
    await hydrated(page);
    await look('the handover');
    await button('Hand the site over').tap();
    await expect.poll(heading, LONG).toBe(`${NAME} was handed over with version 1`);
    const { rows } = await db.owner.query<{ stage: string; subject: string; to: string }>(
      `select site.stage, message.subject, message.to_address as to from site join message on message.site_id = site.id where site.ref = $1`,
      [site],
    );
    expect(rows).toEqual([
      { stage: 'operating', subject: `${NAME}: your papers are ready`, to: 'customer@lowfield.example' },
    ]);

    await signOnTo(phone, running.url, 'customer');
    await page.goto(`${running.url}/my-site/${site}`);
    await hydrated(page);
    const href = await page.getByRole('link', { name: 'Handover papers, PDF' }).getAttribute('href');
    const pdf = await page.request.get(`${running.url}${href ?? ''}`);
    expect(pdf.headers()['content-type']).toBe('application/pdf');
    const text = (await pdfPages(await pdf.body())).join(' ').replace(/\s+/g, ' ');
    for (const words of [
      NAME,
      plan.strings[1]?.slots[5]?.serial ?? 'none',
      'Signed by Bram Ottersley',
      'Whole site: passed',
      'Hawkbill 15, serial HB-20881',
      'None. Every step was done before the handover.',
    ])
      expect(text).toContain(words);
    expect(faults).toEqual([]);
  });
});

/** Those that pass without a figure. */
const PLAIN_CHECKS = CHECKS.filter((c) => !c.mayFollow && c.figures.every((f) => !f.needed)).map(
  (c) => c.name,
);
/** The plain ones, connector pairs, earth continuity, voltages to earth, insulation. */
const CHECKED = PLAIN_CHECKS.length + 4;

/** Every check of a string that a signature asks for, as a thumb does them. */
async function checks(string: string): Promise<void> {
  await page.goto(`${running.url}/capture/${site}`);
  await page.getByRole('button', { name: `Checks of ${string}`, exact: true }).tap();
  const row = (name: string) => page.getByRole('heading', { level: 3 }).filter({ hasText: name }).first();
  const open = async (name: string) => {
    const toggle = row(name).getByRole('button');
    if ((await toggle.getAttribute('aria-expanded')) !== 'true') await toggle.tap();
  };
  /** Records it, and waits until the list shows it: the next one then stands open. */
  const record = async (name: string, how: string | RegExp, shown = 'pass') => {
    await button(how).last().tap();
    await expect.poll(async () => plain(await row(name).innerText()), SHORT).toContain(shown);
  };
  for (const name of PLAIN_CHECKS) {
    await open(name);
    await record(name, `Pass: ${name}`);
  }
  await open('Connector pairs');
  await page.getByLabel('Module lead', { exact: true }).selectOption({ index: 1 });
  await page.getByLabel('Unit lead towards the module', { exact: true }).selectOption({ index: 1 });
  if (string === 'K1') {
    const photo = await sharp({ create: { width: 640, height: 480, channels: 3, background: '#405060' } })
      .jpeg()
      .toBuffer();
    const waiting = () => button(/^\d+ waiting$/).innerText();
    const before = await waiting();
    await page
      .locator('input[type=file]')
      .setInputFiles({ name: 'pair.jpg', mimeType: 'image/jpeg', buffer: photo });
    await expect.poll(waiting, SHORT).not.toBe(before);
  }
  await record('Connector pairs', 'Pass: Connector pairs');
  await open('Earth continuity');
  await page.getByRole('textbox', { name: 'Resistance' }).fill('0.3');
  await record('Earth continuity', 'Pass: Earth continuity');
  await open('+ and − to earth');
  await page.getByRole('textbox', { name: '+ to −' }).fill('290');
  await page.getByRole('textbox', { name: '+ to earth' }).fill('0.3');
  await page.getByRole('textbox', { name: '− to earth' }).fill('-0.2');
  await record('+ and − to earth', 'Pass: + and − to earth');
  await open('Insulation resistance');
  await record('Insulation resistance', /^Not applicable: .* allows/, 'not applicable');
}

/** What the meter at the inverter's end of a home run shows; the seconds by the stopwatch of who reads. */
async function meter(string: string, moment: 'before' | 'after'): Promise<void> {
  const volts = plant?.truth(NAME).strings.find((s) => s.name === string)?.homeRun ?? 0;
  await button(
    moment === 'before' ? `Read before the command: ${string}` : `Add reading of ${string} after the command`,
  ).tap();
  const dialog = page.getByRole('dialog');
  await dialog.getByLabel('+ to −', { exact: true }).fill(volts.toFixed(1));
  await dialog.getByLabel('+ to earth', { exact: true }).fill((volts / 2).toFixed(1));
  await dialog.getByLabel('− to earth', { exact: true }).fill((-volts / 2).toFixed(1));
  if (moment === 'after') await dialog.getByLabel('Read so long after the command').fill('24');
  await dialog.getByRole('button', { name: 'Save this reading' }).click();
  await dialog.waitFor({ state: 'hidden' });
}
