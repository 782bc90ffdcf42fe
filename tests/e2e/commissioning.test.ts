import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Role } from '../../src/domain/access/permissions';
import { received, type Sent } from '../../src/schemas/api/causes-on-the-way';
import type { ShutdownNow } from '../../src/schemas/api/shutdown';
import type { Simulator } from '../../simulator/engine';
import { signedInContext, signInOn, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startPlant } from '../support/plant';
import { startSite, type RunningSite } from '../support/server';
import { press } from '../support/keyboard';

/**
 * The first day of a site, as three people see it: a technician calls the roll, opens and closes the initiator on
 * the plant's own page, an analyst finds the units that stay behind, an owner is kept to his page. The plant runs in
 * real time; only its units answer the roll call quicker than in life.
 */
const HALL = 'Old Tannery Market Hall';
const CLINIC = 'Weirside Clinic';
const PACE = 240;
/** In the demo these never answer: one's radio is dead, two serials of the drawing are nowhere on the roof. */
const MUTE = 3;
const STUCK = [5, 9];
const DESK = { viewport: { width: 1440, height: 1000 } };
const LONG = { timeout: 90_000, interval: 500 };
const SHORT = { timeout: 20_000, interval: 250 };

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let plant: Simulator;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, CLINIC]);
  site = await startSite(db);
  plant = await startPlant(fleet.plan, site, PACE);
  browser = await startBrowser();
});
afterAll(async () => {
  await browser.close();
  await plant.stop();
  await site.stop();
  await db.drop();
});

function signedIn(role: Role): Promise<BrowserContext> {
  return signedInContext(browser, site.url, role, DESK);
}
const plain = (text: string): string => text.replace(/\u00a0/g, ' ');
const heading = async (page: Page): Promise<string> => plain(await page.locator('h1').innerText());
const heardIn = (words: string): number =>
  Number(/^(\d+) of 184 units? ha/.exec(words)?.[1] ?? (words.startsWith('None') ? 0 : NaN));
const hallPath = () => `/sites/${fleet.site(HALL).ref}`;
const stringPath = (name: string) => `${hallPath()}/strings/${fleet.site(HALL).strings.get(name)?.ref ?? ''}`;
const truth = () => plant.truth(HALL);

describe('the first day of a site', () => {
  let technician: BrowserContext;
  let roll: Page;
  /** Whether the page was ever loaded anew: what it shows must come by itself. */
  let loads = 0;

  beforeAll(async () => {
    technician = await browser.newContext(DESK);
    roll = await technician.newPage();
    await signInOn(roll, site.url, 'technician');
    roll.on('load', () => loads++);
  });

  it('begins with every unit unheard, and with the caution', async () => {
    await roll.goto(`${site.url}/commissioning`);
    await roll
      .getByRole('link', { name: /^Roll call/ })
      .first()
      .click();
    await roll.waitForURL(/roll-call$/);
    expect(await heading(roll)).toBe('None of 184 units has answered the roll call');
    expect(await roll.getByRole('note', { name: 'Safety caution' }).innerText()).toContain(
      'pass full module voltage',
    );
    loads = 0;
  });

  it('does not start without a name and without somebody on site', async () => {
    await press(roll.getByRole('button', { name: 'Start the roll call' }));
    await expect
      .poll(() => roll.getByRole('alert').allInnerTexts(), SHORT)
      .toEqual(['Enter the name of the person who is on site.', 'Confirm that this person is on site now.']);
    expect((await db.owner.query('select from roll_call')).rowCount).toBe(0);
  });

  it('is started by a named person on site, and the count rises without reload', async () => {
    await roll.getByLabel('Who is on site').fill('Per Aalto');
    await press(roll.getByLabel('This person is on site now'));
    await press(roll.getByRole('button', { name: 'Start the roll call' }));
    await roll.getByRole('heading', { name: 'The roll call is running' }).waitFor();
    expect(await roll.locator('#run').innerText()).toContain('On site: Per Aalto');

    const seen: number[] = [];
    await expect
      .poll(async () => {
        const heard = heardIn(await heading(roll));
        if (heard !== seen.at(-1)) seen.push(heard);
        return heard;
      }, LONG)
      .toBe(184 - MUTE);
    expect(seen.length).toBeGreaterThan(3);
    expect(seen).toEqual([...seen].sort((a, b) => a - b));
    expect(loads).toBe(0);
  });

  it('names those still to hear with their places, and strangers apart', async () => {
    const missing = roll.locator('#missing tbody tr');
    await expect.poll(() => missing.count(), SHORT).toBe(MUTE);
    const rows = await missing.allInnerTexts();
    expect(rows.map((r) => r.split(/\s+/).slice(0, 2).join('-')).sort()).toEqual(['B1-2', 'B1-9', 'C2-7']);
    expect(rows.every((r) => /row/.test(r))).toBe(true);
    await expect.poll(() => roll.locator('#unknown li').count(), LONG).toBe(2);
  });

  it('falls string by string, second by second, when the initiator is opened on site', async () => {
    const page = await technician.newPage();
    await page.goto(site.url + hallPath());
    const switches = await browser.newPage();
    await switches.goto(`${plant.pageUrl ?? ''}sites/${plant.site(HALL)?.plan.key ?? ''}`);
    await switches.getByRole('button', { name: 'Open Main initiator' }).click();

    // a unit that has not answered does not obey: its string stays live, and the page says so
    const trace = page.locator('#trace');
    await trace
      .getByText('12 of 13 strings fell to 30 V or less; C2 is still above it.')
      .waitFor({ timeout: 60_000 });
    await trace.getByText('The same as a table').click();
    await expect.poll(() => trace.locator('tbody tr').count(), SHORT).toBe(13);
    const rows = (await trace.locator('tbody tr').allInnerTexts()).map((r) => plain(r).split('\t'));
    const under = rows.filter((r) => /^after \d+ s$/.test(r[3] ?? '')).map((r) => r[0]);
    const dead = truth().strings.filter((s) => s.voltage <= 30);
    expect(under).toEqual(dead.map((s) => s.name));

    await expect.poll(() => heading(page), LONG).toMatch(/shutdown/i);
    await roll.locator('#run').getByText('goes into shutdown').waitFor();
    await switches.getByRole('button', { name: 'Close Main initiator' }).click();
    await switches.context().close();
    await page.close();
  });

  it('leaves two named units stuck, at their positions on the staircase', async () => {
    const page = await technician.newPage();
    await page.goto(site.url + stringPath('B3'));
    await expect.poll(() => heading(page), LONG).toMatch(/^Two of 14 units in B3 are stuck in shutdown/);
    const serials = STUCK.map(
      (p) => fleet.site(HALL).plan.strings.find((s) => s.name === 'B3')?.slots[p - 1]?.serial,
    );
    const body = plain(await page.locator('main').innerText());
    for (const serial of serials) expect(body).toContain(serial);
    const staircase = page.locator('svg[role="img"]:visible').first();
    expect(await staircase.getAttribute('aria-label')).toMatch(/5 and 9/);
    await page.close();
    // the roll call's comb of B3 shows them too, without reload
    const comb = roll.locator('#strings svg[role="img"]').nth(5);
    await expect.poll(() => comb.getAttribute('aria-label'), LONG).toContain('5 and 9 stuck');
    expect(loads).toBe(0);
  });

  it('and the analyst’s page lists exactly those', async () => {
    const analyst = await signedIn('analyst');
    const reply = await analyst.request.get(`${site.url}/api/shutdown`);
    const { causes } = received((await reply.json()) as Sent<ShutdownNow>);
    const stuck = causes.filter((c) => c.verdict === 'stuck' && c.siteName === HALL).flatMap((c) => c.units);
    expect(stuck.map((u) => `${u.stringName}-${u.position}`).sort()).toEqual(
      STUCK.map((p) => `B3-${p}`).sort(),
    );
    const inPlant = truth()
      .units.filter((u) => u.mode === 'shutdown' && u.heard)
      .map((u) => `${u.string}-${u.position}`);
    expect(inPlant.sort()).toEqual(STUCK.map((p) => `B3-${p}`).sort());

    const page = await analyst.newPage();
    await page.goto(`${site.url}/shutdown`);
    const main = plain(await page.locator('main').innerText());
    expect(main).toContain(HALL);
    expect(main).toContain('B3');
    await analyst.close();
  });

  it('stops when the technician stops it', async () => {
    await press(roll.getByRole('button', { name: 'Stop the roll call' }));
    await roll.getByRole('heading', { name: 'Start the roll call again' }).waitFor();
    await expect.poll(() => truth().loggers.every((l) => !l.listening), SHORT).toBe(true);
    expect(await roll.locator('header').last().innerText()).toContain('Bram Ottersley');
    await technician.close();
  });
});

describe('the owner of a roof', () => {
  it('sees his own page in sentences and is refused what is for staff', async () => {
    const owner = await signedIn('customer');
    const page = await owner.newPage();
    await page.goto(`${site.url}/my-site`);
    await page.waitForURL(`**/my-site/${fleet.site(CLINIC).ref}`); // of one roof there is no list
    expect(await heading(page)).not.toBe('');
    // nothing to operate: only a report of what looks wrong can be sent
    expect(await page.getByRole('button').allInnerTexts()).toEqual([expect.stringMatching(/^Send to /)]);

    await page.goto(site.url);
    await page.waitForURL(`**/my-site/${fleet.site(CLINIC).ref}`); // the bare address leads there
    for (const path of ['/commissioning', '/shutdown', hallPath(), `/sites/${fleet.site(CLINIC).ref}`]) {
      const response = await page.goto(site.url + path);
      expect(response?.status(), path).toBe(403);
      expect(await page.locator('body').innerText()).not.toContain(HALL);
    }
    for (const path of ['/api/fleet', '/api/shutdown', `/api/sites/${fleet.site(HALL).ref}`]) {
      const response = await owner.request.get(site.url + path);
      expect(response.status(), path).toBe(403);
    }
    const hidden = await owner.request.get(`${site.url}/api/my-site/${fleet.site(HALL).ref}`);
    expect(hidden.status()).toBe(404);
    const start = await owner.request.post(`${site.url}/api/sites/${fleet.site(CLINIC).ref}/roll-call`, {
      data: { personOnSite: 'Linnet Ashgrove', onSite: true },
      headers: { origin: site.url },
    });
    expect(start.status()).toBe(403);
    await owner.close();
  });
});
