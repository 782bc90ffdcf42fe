import type { Browser, BrowserContext, Page } from 'playwright-core';
import sharp from 'sharp';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { axeFaults } from '../support/axe';
import { settled, signOnTo, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { PASSWORD, testFleet, type TestFleet } from '../support/fleet';
import { openCapture, phoneOf, press } from '../support/phone';
import { signInAt, startSite, type RunningSite } from '../support/server';

/** On a roof, with and without a network: nothing that is recorded is lost, and everything arrives once. */
const GALLERY = 'Coopers Wharf Gallery'; // shutdown-only
const CLINIC = 'Weirside Clinic'; // monitored
let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;
let photo: Buffer;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [GALLERY, CLINIC]);
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
  photo = await sharp({ create: { width: 800, height: 600, channels: 3, background: '#446688' } })
    .jpeg()
    .toBuffer();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});
beforeEach(async () => {
  for (const table of ['install_check', 'meter_reading', 'string_sign_off', 'attachment'])
    await db.owner.query(`delete from ${table}`);
});

const count = async (table: string): Promise<number> =>
  Number((await db.owner.query<{ n: string }>(`select count(*) as n from ${table}`)).rows[0]?.n);
/** Sentences of a page with ordinary blanks. */
const words = async (page: Page): Promise<string> =>
  (await page.locator('body').innerText()).replace(/[\u00a0\u202f]/g, ' ');
const waits = (page: Page, n: number) => page.getByRole('button', { name: `${n} waiting`, exact: true });
const nothingWaits = (page: Page) =>
  expect.poll(() => page.getByRole('button', { name: /^\d+ waiting$/ }).count()).toBe(0);

async function noFaults(page: Page, what: string): Promise<void> {
  await settled(page);
  expect(await axeFaults(page), what).toEqual([]);
  expect(await page.evaluate(() => document.documentElement.scrollWidth), `${what} is too wide`).toBe(390);
  const small = await page.evaluate(() =>
    [...document.querySelectorAll('button, a[href], summary, select, label:has(input[type=file])')]
      .filter((e) => !e.classList.contains('skip-link'))
      .map((e) => ({
        name: (e.getAttribute('aria-label') ?? e.textContent).trim(),
        box: e.getBoundingClientRect(),
      }))
      .filter(({ box }) => box.width > 0 && box.height < 44)
      .map(({ name, box }) => `${name}: ${box.height}`),
  );
  expect(small, `${what}: too small for a glove`).toEqual([]);
}

describe('a technician on the roof', () => {
  let context: BrowserContext;
  let page: Page;
  const faults: string[] = [];
  const open = async (who: string, more: Parameters<Browser['newContext']>[0] = {}) => {
    context = await phoneOf(browser, site.url, who, more);
    page = await context.newPage();
    page.on('pageerror', (error) => faults.push(error.message));
  };

  it('reads, checks and photographs with the network gone, loads the page again, signs in again: all there once', async () => {
    await open('technician');
    const gallery = fleet.site(GALLERY);
    const names = [...gallery.strings.keys()];
    await openCapture(page, site.url, gallery.ref);
    await page.getByRole('heading', { level: 1, name: 'No string has a reading + to − yet' }).waitFor();
    await noFaults(page, 'the list');

    await context.setOffline(true);
    await page.getByRole('button', { name: `Readings of ${names[0]}`, exact: true }).tap();
    await page.getByText('keep-alive off', { exact: true }).tap();
    await press(page, '7.8');
    const answer = await words(page);
    expect(answer).toContain('are in shutdown');
    expect(answer).toMatch(/\d %/);
    expect(answer).toContain('Shutdown is not isolation.');
    expect(answer).not.toMatch(/\bsafe\b/i);
    expect(await page.getByRole('button', { name: 'Read it aloud' }).count()).toBe(1);
    await noFaults(page, 'a reading');
    // what is typed stands in the address: a phone that lets the page go brings it back, without a network too
    await page.reload();
    await page.getByLabel('Reading + to −, volts').waitFor();
    expect(await page.getByLabel('Reading + to −, volts').inputValue()).toBe('7.8');
    expect(await words(page)).toMatch(/As of \d\d:\d\d/);

    await page.getByRole('button', { name: 'Number pad' }).tap();
    await page.getByRole('button', { name: 'Next: + to earth' }).tap();
    await press(page, '0.2');
    await page.getByRole('button', { name: 'Next: − to earth' }).tap();
    await press(page, '0.1');
    await page.getByRole('button', { name: 'Change the sign' }).tap();
    await page.locator('input[type=file]').setInputFiles([
      { name: 'meter.jpg', mimeType: 'image/jpeg', buffer: photo },
      { name: 'leads.jpg', mimeType: 'image/jpeg', buffer: photo },
    ]);
    await page.getByText('Photo (2)').waitFor();
    await page.getByRole('button', { name: `Save and go to ${names[1]}` }).tap();
    await waits(page, 5).waitFor();
    await expect.poll(() => words(page)).toContain(`String ${names[1]}`);
    expect(await words(page)).toContain('No network since');

    // a sibling that was read a moment ago is used; a negative voltage is a finding, not bad input
    await press(page, '8.4');
    await expect.poll(() => words(page)).toContain(`Other strings used: ${names[0]} 7.8 V`);
    await page.getByRole('button', { name: 'Change the sign' }).tap();
    await expect.poll(() => words(page)).toMatch(/reversed.*do not connect/i);
    await page.getByRole('button', { name: 'Change the sign' }).tap();

    await page.getByText('Checks', { exact: true }).tap();
    await page.getByRole('button', { name: /^Order of leads/ }).tap();
    await page.getByRole('button', { name: 'Pass: Order of leads' }).tap();
    await waits(page, 6).waitFor();
    await page.getByRole('button', { name: /^Earth continuity/ }).tap();
    await page.getByRole('button', { name: 'Pass: Earth continuity' }).tap();
    await expect
      .poll(() => words(page))
      .toContain('Resistance is missing. Earth continuity can only pass with it.');
    await page.getByLabel('Resistance').focus();
    await press(page, '0.4');
    await page.locator('input[type=file]').setInputFiles({
      ...{ name: 'rail.jpg', mimeType: 'image/jpeg', buffer: photo },
    });
    await waits(page, 7).waitFor();
    await noFaults(page, 'a check');
    await page.getByRole('button', { name: 'Pass: Earth continuity' }).tap();
    await waits(page, 8).waitFor();

    await db.owner.query('delete from session'); // in the meantime the session has ended by age
    await page.reload();
    await waits(page, 8).tap();
    await page.getByRole('heading', { level: 1, name: 'Eight records wait to be sent' }).waitFor();
    await noFaults(page, 'what waits');
    await context.setOffline(false);
    await page.getByRole('link', { name: 'Sign in again' }).waitFor();
    expect([await count('meter_reading'), await count('install_check'), await count('attachment')]).toEqual([
      0, 0, 0,
    ]);
    await page.getByRole('link', { name: 'Sign in again' }).tap();
    await page.getByLabel('E-mail').fill('technician@lowfield.example');
    await page.getByLabel('Password').fill(PASSWORD);
    await page.getByRole('button', { name: 'Sign in' }).tap();
    await page.getByRole('heading', { level: 1, name: 'Nothing waits: the server has everything' }).waitFor();

    const readings = await db.owner.query(
      `select s.name, reading_kind as kind, voltage, supersedes from meter_reading r join string s on s.id = r.string_id order by r.id`,
    );
    expect(readings.rows).toEqual([
      { name: names[0], kind: 'positive_to_negative', voltage: 7.8, supersedes: null },
      { name: names[0], kind: 'positive_to_earth', voltage: 0.2, supersedes: null },
      { name: names[0], kind: 'negative_to_earth', voltage: -0.1, supersedes: null },
    ]);
    const checks = await db.owner.query(
      `select s.name, check_name as check, result, figures from install_check c join string s on s.id = c.string_id order by c.id`,
    );
    expect(checks.rows).toEqual([
      { name: names[1], check: 'lead_order', result: 'pass', figures: {} },
      { name: names[1], check: 'earth_continuity', result: 'pass', figures: { resistance: 0.4 } },
    ]);
    const photos = await db.owner.query(
      `select a.name, a.subject, (r.id is not null or c.id is not null) as known
       from attachment a left join meter_reading r on r.ref = a.subject_ref left join install_check c on c.ref = a.subject_ref order by a.id`,
    );
    expect(photos.rows).toEqual([
      { name: 'meter.jpg', subject: 'meter_reading', known: true },
      { name: 'leads.jpg', subject: 'meter_reading', known: true },
      { name: 'rail.jpg', subject: 'install_check', known: true },
    ]);
    expect(faults).toEqual([]);
    await context.close();
  });

  it('corrects a reading; the new one takes the place of the old', async () => {
    await open('technician');
    const clinic = fleet.site(CLINIC);
    const string = clinic.strings.get('A2')!;
    await openCapture(page, site.url, clinic.ref, `?string=${string.ref}`);
    await press(page, '480');
    await page.getByRole('button', { name: 'Save and go to A3' }).tap();
    await expect.poll(() => count('meter_reading')).toBe(1);
    await nothingWaits(page);
    await page.getByRole('button', { name: 'All strings' }).tap();
    await page.getByRole('button', { name: 'Readings of A2', exact: true }).tap();
    await page.getByRole('button', { name: 'Correct + to −' }).tap();
    expect(await page.getByLabel('Reading + to −, volts').inputValue()).toBe('480');
    await page.getByLabel('Reading + to −, volts').fill('488');
    await page.getByRole('button', { name: 'Save and go to A3' }).tap();
    await expect.poll(() => count('meter_reading')).toBe(2);
    const { rows } = await db.owner.query(
      `select n.voltage, o.voltage as before from meter_reading n join meter_reading o on o.id = n.supersedes`,
    );
    expect(rows).toEqual([{ voltage: 488, before: 480 }]);
    await context.close();
  });

  it('whose answers get lost, and whose page is closed in the middle, is stored once', async () => {
    await open('technician', { serviceWorkers: 'block' });
    const clinic = fleet.site(CLINIC);
    let lost = 0;
    await page.route('**/api/sites/*/readings', async (route) => {
      if (lost++ > 0) return route.continue();
      await route.fetch(); // it arrives, and the phone never hears
      await route.abort('connectionreset');
    });
    await page.goto(`${site.url}/capture/${clinic.ref}?string=${clinic.strings.get('A4')!.ref}`);
    await press(page, '470');
    await page.getByRole('button', { name: 'Save and go to A5' }).tap();
    await expect.poll(() => count('meter_reading')).toBe(1);
    await page.close();
    page = await context.newPage();
    await page.goto(`${site.url}/capture/${clinic.ref}`);
    await page.getByRole('heading', { level: 1 }).waitFor();
    await nothingWaits(page);
    expect(await count('meter_reading')).toBe(1);
    await context.close();
  });

  it('and another person on the same phone: neither sees nor sends what the first recorded', async () => {
    await open('technician');
    const clinic = fleet.site(CLINIC);
    await openCapture(page, site.url, clinic.ref, `?string=${clinic.strings.get('A1')!.ref}`);
    await context.setOffline(true);
    await press(page, '466');
    await page.getByRole('button', { name: 'Save and go to A2' }).tap();
    await waits(page, 1).waitFor();

    await signOnTo(context, site.url, 'manager');
    await context.setOffline(false); // the page of the first is still open: its record is refused for the other
    await expect.poll(() => words(page)).toContain('Another person is signed in on this phone');
    await page.goto(`${site.url}/capture/${clinic.ref}`);
    await expect.poll(() => words(page)).toContain('1 waiting from another person');
    expect(await words(page)).not.toContain('466');
    await page.goto(`${site.url}/capture/${clinic.ref}?part=waiting`);
    await page.getByRole('heading', { level: 1, name: 'Nothing waits: the server has everything' }).waitFor();
    expect(await count('meter_reading')).toBe(0);

    // signing out by the menu hides the sites that were kept, and not what waits
    await page.goto(site.url);
    await page.locator('[data-account-menu] summary').click();
    await page.getByRole('button', { name: 'Sign out' }).click();
    await page.waitForURL(/\/sign-in/);
    await context.setOffline(true);
    await page.goto(`${site.url}/capture/${clinic.ref}`);
    await page.getByRole('heading', { level: 1, name: 'Nobody is signed in on this phone' }).waitFor();
    expect(await words(page)).toContain('1 waiting from another person');
    await context.setOffline(false);
    await signOnTo(context, site.url, 'technician');
    await page.goto(`${site.url}/capture/${clinic.ref}`);
    await expect.poll(() => count('meter_reading')).toBe(1);
    const { rows } = await db.owner.query(
      `select p.email from meter_reading r join person p on p.id = r.person_id`,
    );
    expect(rows).toEqual([{ email: 'technician@lowfield.example' }]);
    await nothingWaits(page);
    await context.close();
  });

  it('is shown both versions where somebody was first, and why the server refuses', async () => {
    await open('technician');
    const clinic = fleet.site(CLINIC);
    const string = clinic.strings.get('A6')!;
    await openCapture(page, site.url, clinic.ref, `?string=${string.ref}&part=checks&check=labels`);
    await context.setOffline(true);
    await page.getByLabel('Note').fill('Marked at the inverter.');
    await page.getByRole('button', { name: 'Pass: Labels' }).tap();
    await waits(page, 1).waitFor();
    const record = (who: string, body: object) =>
      signInAt(site.url, `${who}@lowfield.example`, PASSWORD).then((cookie) =>
        fetch(`${site.url}/api/sites/${clinic.ref}/checks`, {
          method: 'POST',
          headers: { cookie, 'content-type': 'application/json', origin: site.url },
          body: JSON.stringify(body),
        }),
      );
    const theirs = await record('manager', {
      ...{ ref: crypto.randomUUID(), stringId: string.ref, check: 'labels', result: 'fail' },
      ...{ reason: 'None at the array.', at: new Date().toISOString() },
    });
    expect(theirs.status).toBe(201);
    // and a string that is gone by the time the phone comes back
    await page.getByRole('button', { name: 'All strings' }).tap();
    await page.getByRole('button', { name: 'Checks of A7', exact: true }).tap();
    await page.getByRole('button', { name: /^Strain relief/ }).tap();
    await page.getByRole('button', { name: 'Pass: Strain relief' }).tap();
    await waits(page, 2).waitFor();
    await db.owner.query(`update string set ref = gen_random_uuid() where id = $1`, [
      clinic.strings.get('A7')!.id,
    ]);

    await context.setOffline(false);
    await expect.poll(() => words(page)).toContain('2 records want your decision');
    await waits(page, 2).tap();
    await page.getByRole('heading', { level: 1, name: 'Two of 2 want your decision' }).waitFor();
    const shown = await words(page);
    expect(shown).toContain('None at the array.');
    expect(shown).toContain('Marked at the inverter.');
    await noFaults(page, 'decisions');
    await page.getByRole('button', { name: 'Put both into one record' }).tap();
    expect(await page.getByLabel('Reason (for fail and not applicable)').inputValue()).toBe(
      'None at the array.',
    );
    await page.getByRole('button', { name: 'Fail: Labels' }).tap();
    await expect.poll(() => count('install_check')).toBe(2);
    const { rows } = await db.owner.query(
      `select n.result, n.note, n.reason, o.result as before from install_check n join install_check o on o.id = n.supersedes`,
    );
    expect(rows).toEqual([
      { result: 'fail', note: 'Marked at the inverter.', reason: 'None at the array.', before: 'fail' },
    ]);
    await waits(page, 1).waitFor();
    await page.getByRole('button', { name: 'Leave it out' }).tap();
    await page.getByRole('button', { name: 'Yes, leave it out' }).tap();
    await nothingWaits(page);
    await context.close();
  });

  it('is told when the phone is full, and when it keeps nothing at all; what is typed stands', async () => {
    await open('technician', { serviceWorkers: 'block' });
    const clinic = fleet.site(CLINIC);
    const at = `${site.url}/capture/${clinic.ref}?string=${clinic.strings.get('A3')!.ref}`;
    await page.addInitScript(() => {
      IDBObjectStore.prototype.add = () => {
        throw new DOMException('no room', 'QuotaExceededError');
      };
    });
    await page.goto(at);
    await press(page, '455');
    await page.getByRole('button', { name: 'Save and go to A4' }).tap();
    await expect.poll(() => words(page)).toContain('The phone has no room left for this');
    expect(await page.getByLabel('Reading + to −, volts').inputValue()).toBe('455');
    await page.close();

    page = await context.newPage();
    await page.addInitScript(() => Object.defineProperty(window, 'indexedDB', { value: undefined }));
    await page.goto(at);
    await expect.poll(() => words(page)).toContain('This browser keeps nothing here');
    await press(page, '456');
    await page.getByRole('button', { name: 'Save and go to A4' }).tap();
    await expect.poll(() => count('meter_reading')).toBe(1); // with a network it is sent all the same
    await context.close();
  });

  it('signs the checks off when nothing blocks, with a network only', async () => {
    await open('technician', { colorScheme: 'dark' });
    const clinic = fleet.site(CLINIC);
    const string = clinic.strings.get('A8')!;
    const cookie = await signInAt(site.url, 'technician@lowfield.example', PASSWORD);
    const CHECKS = [
      'lead_order',
      'orientation',
      'face',
      'mounting',
      'connectors',
      'strain_relief',
      'labels',
      'serials',
    ];
    for (const check of [...CHECKS, 'polarity', 'earth_continuity', 'voltage_to_earth', 'insulation']) {
      const reply = await fetch(`${site.url}/api/sites/${clinic.ref}/checks`, {
        method: 'POST',
        headers: { cookie, 'content-type': 'application/json', origin: site.url },
        body: JSON.stringify({
          ...{ ref: crypto.randomUUID(), stringId: string.ref, check, result: 'not_applicable' },
          ...{ reason: 'A test of the signature.', at: new Date().toISOString() },
        }),
      });
      expect(reply.status).toBe(201);
    }
    await openCapture(page, site.url, clinic.ref, `?string=${string.ref}&part=checks`);
    const sign = page.getByRole('button', { name: /^Sign off the checks of A8 as / });
    await sign.waitFor();
    await noFaults(page, 'the sign-off');
    await context.setOffline(true);
    await page.getByRole('button', { name: /^String current/ }).tap();
    await page.getByLabel('Reason (for fail and not applicable)').fill('The inverter is not there yet.');
    await page.getByRole('button', { name: 'Not applicable: String current' }).tap();
    await waits(page, 1).waitFor();
    expect(await sign.isDisabled()).toBe(true);
    await context.setOffline(false);
    await nothingWaits(page);
    await expect.poll(() => sign.isEnabled()).toBe(true);
    await sign.tap();
    await expect.poll(() => count('string_sign_off')).toBe(1);
    await expect.poll(() => words(page)).toMatch(/Signed by .+, \d/);
    await context.close();
  });
});
