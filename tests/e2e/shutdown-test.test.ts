import type { Browser, BrowserContext, Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startSimulator, type Simulator } from '../../simulator/engine';
import { axeFaults } from '../support/axe';
import { hydrated, settled, signedInContext, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, SECRET, testFleet, type TestFleet } from '../support/fleet';
import { noonEverywhere } from '../support/noon';
import { startSite, type RunningSite } from '../support/server';
import { press } from '../support/keyboard';

/**
 * A shutdown test on a phone, from the first name to the signature: the plant's initiator is operated on the plant's own
 * page, the network goes and comes back, one unit keeps passing, and the test is repeated for its string.
 */
const CLINIC = 'Weirside Clinic';
const SHORT = { timeout: 20_000, interval: 250 };
const LONG = { timeout: 90_000, interval: 500 };

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let plant: Simulator;
let browser: Browser;
let phone: BrowserContext;
let page: Page;
let faultId: string;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC]);
  await noonEverywhere(db.owner);
  await db.owner.query('update site set report_interval_s = 10'); // as quick as a site may report
  site = await startSite(db);
  plant = await startSimulator({
    plan: fleet.plan,
    ingestUrl: `${site.url.replace('http', 'ws')}/ingest/v1`,
    secret: SECRET,
    port: 0,
  });
  faultId = plant.inject(CLINIC, { kind: 'not_shutting_down', string: 'A3', position: 4, claims: 'passing' });
  browser = await startBrowser();
  phone = await signedInContext(browser, site.url, 'technician', {
    viewport: { width: 390, height: 844 },
    hasTouch: true,
  });
  page = await phone.newPage();
});
afterAll(async () => {
  await browser.close();
  await plant.stop();
  await site.stop();
  await db.drop();
});

const plain = (text: string): string => text.replace(/\u00a0/g, ' ');
const heading = async (p = page): Promise<string> => plain(await p.locator('h1').innerText());
const listPath = () => `${site.url}/commissioning/${fleet.site(CLINIC).ref}/shutdown-test`;
const button = (name: string | RegExp): Locator => page.getByRole('button', { name });

/** Operates the initiator as a person does: on the plant's own page. */
async function operate(open: boolean): Promise<void> {
  const plantPage = await browser.newPage();
  await plantPage.goto(`${plant.pageUrl ?? ''}sites/${plant.site(CLINIC)?.plan.key ?? ''}`);
  await plantPage.getByRole('button', { name: `${open ? 'Open' : 'Close'} Main initiator` }).click();
  await expect.poll(() => plant.truth(CLINIC).initiators[0]?.open, SHORT).toBe(open);
  await plantPage.close();
}

/** Types what the meter at the inverter's end of a home run shows, and the seconds of a stopwatch where one is read. */
async function readMeter(string: string, moment: 'before' | 'after', stopwatchS?: number): Promise<void> {
  const volts = plant.truth(CLINIC).strings.find((s) => s.name === string)?.homeRun ?? 0;
  await press(
    button(
      moment === 'before'
        ? `Read before the command: ${string}`
        : `Add reading of ${string} after the command`,
    ),
  );
  const dialog = page.getByRole('dialog');
  await dialog.getByLabel('+ to −', { exact: true }).fill(volts.toFixed(1));
  await dialog.getByLabel('+ to earth', { exact: true }).fill((volts / 2).toFixed(1).replace('.', ','));
  await dialog.getByLabel('− to earth', { exact: true }).fill((-volts / 2).toFixed(1));
  if (stopwatchS !== undefined)
    await dialog.getByLabel('Read so long after the command').fill(String(stopwatchS));
  await press(dialog.getByRole('button', { name: 'Save this reading' }));
  await dialog.waitFor({ state: 'hidden' });
}
async function plan(): Promise<void> {
  await page.getByLabel('Who operates the initiator').fill('Ivo Brandt');
  await page.getByLabel('Make and model').fill('Hawkbill 15');
  await page.getByLabel('Serial number').fill('HB-20881');
  await page.getByLabel('Rated voltage').fill('1500');
  await page.getByLabel('Calibrated on').fill('2026-05-04');
  await press(page.getByLabel('Proved on a known source just now'));
}
async function accept(): Promise<void> {
  await press(page.getByLabel('I have read this'));
  await press(button('Accept and go on'));
  await press(button('Start watching'));
}
/** Enters a password and signs; gives the answer's status. */
async function trySigning(password: string): Promise<number> {
  await page.getByLabel('Your password again').fill(password);
  const [answer] = await Promise.all([
    page.waitForResponse((r) => r.url().endsWith('/sign')),
    press(button('Sign this test')),
  ]);
  return answer.status();
}
/** The last seconds may still trickle in: then the page asks to look again first. */
async function sign(): Promise<void> {
  await expect.poll(() => trySigning(PASSWORD), LONG).toBe(200);
  await page.getByRole('heading', { name: 'Signature' }).waitFor();
}

describe('a shutdown test on a phone', { timeout: 240_000 }, () => {
  it('begins from the list, whose heading says that nothing was tested', async () => {
    await page.goto(listPath());
    await hydrated(page);
    expect(await heading()).toBe('Whole roof has not been tested');
    expect(await axeFaults(page)).toEqual([]);
    await press(button('Start the test'));
    await page.waitForURL(/shutdown-test\/[0-9a-f-]{36}$/);
    await hydrated(page);
  });

  it('asks for names and the instrument, says what is missing, and keeps what was typed over a reload', async () => {
    await page.getByLabel('Who operates the initiator').fill('Ivo');
    await press(button('Save and read the caution'));
    await page.getByRole('alert').filter({ hasText: 'Enter make and model of the instrument.' }).waitFor();
    await page.reload();
    await hydrated(page);
    await expect.poll(() => page.getByLabel('Who operates the initiator').inputValue(), SHORT).toBe('Ivo');
    await plan();
    await settled(page);
    expect(await axeFaults(page)).toEqual([]);
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    await press(button('Save and read the caution'));
  });

  it('has the caution read and accepted, and offers no switch anywhere', async () => {
    await press(button('Accept and go on'));
    await page.getByText('Read the points, then tick the box.').waitFor();
    expect(await axeFaults(page)).toEqual([]);
    await accept();
    await page.getByText('Reports of the strings arrive.').waitFor();
    const names = await page.getByRole('button').allInnerTexts();
    expect(names.filter((n) => /\b(shut down|switch|open|close|trip|release (it|now))\b/i.test(n))).toEqual(
      [],
    );
    expect(await page.locator('main').innerText()).toContain('Wakeline switches nothing');
  });

  it('shows each string fall while a person reads the meter, the network away meanwhile', async () => {
    await readMeter('A1', 'before');
    await readMeter('A3', 'before');
    await operate(true);
    await press(button(/^Initiator operated now/));
    await expect.poll(() => page.locator('#strings').innerText(), LONG).toMatch(/30 V or less after \d+ s/);
    await phone.setOffline(true);
    await expect
      .poll(() => plant.truth(CLINIC).strings.find((s) => s.name === 'A1')!.homeRun < 30, LONG)
      .toBe(true);
    await readMeter('A1', 'after', 24);
    await page.getByText('1 entry waits on this phone').waitFor();
    // a reload without network would show nothing; what waits outlives it all the same
    await phone.setOffline(false);
    await expect.poll(() => page.getByText('waits on this phone').count(), LONG).toBe(0);
    await expect.poll(() => heading(), LONG).toBe('A3 did not shut down');
    await readMeter('A3', 'after');
    expect(await axeFaults(page)).toEqual([]);
    const readings = async () =>
      (await db.owner.query(`select from shutdown_test_act where kind = 'reading'`)).rowCount;
    await expect.poll(readings, LONG).toBe(4); // the last one is sent after its dialog has closed
  });

  it('tells a second person who is at it', async () => {
    const other = await signedInContext(browser, site.url, 'manager', {});
    const desk = await other.newPage();
    await desk.goto(page.url());
    await desk.getByText('Bram Ottersley is at this test too').waitFor();
    expect(await heading(desk)).toBe('A3 did not shut down');
    await other.close();
  });

  it('watches the return, and gives a verdict for string and unit', async () => {
    await operate(false);
    await press(button(/^Initiator released again now/));
    await page.getByText(/95 of 95 units that went have come back/).waitFor({ timeout: 120_000 });
    await press(button('End this round'));
    await press(button('Go to the verdict'));
    const live = page.getByRole('region', { name: 'Treat as live: A3' });
    expect(plain(await live.innerText())).toContain('1 unit kept passing: position 4');
    // no reading decides before the meter is proved again
    expect(plain(await page.locator('#results').innerText())).not.toMatch(/Passed/);
    await page.getByText('It read the known source right').click();
    await expect
      .poll(async () => plain(await page.locator('#results').innerText()), SHORT)
      .toMatch(/A1\s*✓\s*Passed/);
    expect(plain(await page.locator('#results').innerText())).toMatch(/A2\s*≈\s*Consistent, not decided/);
    expect(await axeFaults(page)).toEqual([]);
  });

  it('is signed with the password entered again, and with no other', async () => {
    await expect.poll(() => trySigning('not this one'), LONG).toBe(422);
    await page.getByText('This is not your password.', { exact: true }).waitFor();
    await sign();
    const text = plain(await page.locator('#signature').innerText());
    expect(text).toContain('They are the same.');
    expect(text).toMatch(/[0-9a-f]{64}/);
    await hydrated(page);
    await settled(page);
    expect(await axeFaults(page)).toEqual([]);
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
  });

  it('is repeated for the failed string only, and the newer one supersedes', async () => {
    const first = page.url();
    plant.clear(CLINIC, faultId);
    await press(button('Repeat for what is open'));
    await page.waitForURL((url) => url.href !== first && /shutdown-test\/[0-9a-f-]{36}$/.test(url.pathname));
    await hydrated(page);
    expect(await page.getByLabel('Who operates the initiator').inputValue()).toBe('Ivo Brandt');
    expect(await page.getByRole('checkbox', { checked: true, name: /^A\d$/ }).count()).toBe(1);
    await press(page.getByLabel('Proved on a known source just now'));
    await press(button('Save and read the caution'));
    await accept();
    await readMeter('A3', 'before');
    await operate(true);
    await press(button(/^Initiator operated now/));
    await expect
      .poll(() => plant.truth(CLINIC).strings.find((s) => s.name === 'A3')!.homeRun < 20, LONG)
      .toBe(true);
    await readMeter('A3', 'after', 24);
    await operate(false);
    await press(button(/^Initiator released again now/));
    await press(button('End this round'));
    await press(button('Go to the verdict'));
    await page.getByText('It read the known source right').click();
    await expect
      .poll(async () => plain(await page.locator('#results').innerText()), SHORT)
      .toMatch(/A3\s*✓\s*Passed/);
    await sign();
    await page.goto(first);
    await page.getByText(/^Superseded by the test of/).waitFor();
    await page.goto(listPath());
    await hydrated(page);
    expect(await heading()).toBe('Whole roof: no rated instrument has shown the shutdown');
    await page.getByText('Superseded', { exact: true }).first().click();
    await page.waitForURL(/show=superseded/);
    await expect.poll(() => page.locator('#tests tbody tr').count(), SHORT).toBe(1);
  });
});
