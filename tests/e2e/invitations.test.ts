import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import type { Role } from '../../src/domain/access/permissions';
import { faultsShown } from '../support/axe';
import { hydrated, signedInContext, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';
import { stand } from '../support/standing';
import { press } from '../support/keyboard';

const CLINIC = 'Weirside Clinic';
const SECRET = 'ladder gate seven rivers';
let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;
let desk: BrowserContext;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC]);
  await stand(db.owner, fleet.site(CLINIC), new Date());
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startBrowser();
  desk = await signedInContext(browser, site.url, 'manager', { reducedMotion: 'reduce' });
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

async function invite(role: Role, email: string): Promise<string> {
  const page = await desk.newPage();
  await page.goto(`${site.url}/people`);
  await hydrated(page);
  await press(page.getByRole('button', { name: 'Invite somebody' }));
  const dialog = page.getByRole('dialog');
  await dialog.getByLabel('E-mail').fill(email);
  await dialog.getByLabel('Name').fill(`New ${role}`);
  await press(dialog.getByRole('radio', { name: new RegExp(`^${role}|${role}:`, 'i') }));
  if (role === 'customer') await press(dialog.getByRole('checkbox', { name: CLINIC }));
  await press(dialog.getByRole('button', { name: /^(Send|Invite)/ }));
  await page.getByText(email).first().waitFor();
  await page.close();
  const { rows } = await db.owner.query<{ text: string }>(
    'select text_body as text from message where to_address = $1',
    [email],
  );
  return /\/invitation\/[\w-]+/.exec(rows[0]?.text ?? '')?.[0] ?? '';
}

/** Name, password, button: by the keyboard alone, from the field that has the focus. */
async function begin(page: Page, secret: string): Promise<void> {
  await page.getByLabel('Password').focus();
  await page.keyboard.type(secret);
  await page.keyboard.press('Enter');
}

it.each([
  ['manager', 1440, 'site'],
  ['technician', 390, 'site'],
  ['analyst', 1440, 'site'],
  ['customer', 390, 'roof'],
] as const)('a %s comes in by the letter, once, and sees what is theirs', async (role, width, lands) => {
  const email = `new.${role}@lowfield.example`;
  const link = await invite(role, email);
  expect(link).not.toBe('');
  const context = await browser.newContext({ viewport: { width, height: 844 }, reducedMotion: 'reduce' });
  try {
    const page = await context.newPage();
    await page.goto(site.url + link);
    const faults = await faultsShown(page, 'the invitation', width);
    await begin(page, 'password');
    await page.getByRole('alert').waitFor();
    await begin(page, SECRET);
    await page.waitForURL((shown) => !shown.pathname.startsWith('/invitation'));
    await page.getByRole('heading', { level: 1 }).waitFor();
    await page.getByText(CLINIC).first().waitFor();
    faults.push(...(await faultsShown(page, 'the first look', width)));
    expect(faults).toEqual([]);
    expect(new URL(page.url()).pathname).toMatch(lands === 'roof' ? /^\/my-site/ : /^\/$/);
    const people = await page.goto(`${site.url}/people`);
    expect(people?.status()).toBe(role === 'manager' ? 200 : 403);
    // the letter's link is used up
    expect((await page.goto(site.url + link))?.status()).toBe(404);
    if (role === 'customer') await report(page);
  } finally {
    await context.close();
  }
});

/** What looks wrong goes to whoever looks after the roof, and comes back with a number. */
async function report(page: Page): Promise<void> {
  await page.goto(`${site.url}/my-site/${fleet.site(CLINIC).ref}`);
  await hydrated(page);
  const words = 'A cable hangs over the gutter since the storm.';
  const box = page.getByLabel('What looks wrong');
  await box.scrollIntoViewIfNeeded();
  await page.locator('astro-island[client="visible"][ssr]').first().waitFor({ state: 'detached' });
  await box.fill(words);
  await press(page.getByRole('button', { name: /^Send to/ }));
  await page.getByRole('list', { name: 'What you reported' }).getByText(words).waitFor();
  expect(await box.inputValue()).toBe('');
  const { rows } = await db.owner.query(
    `select c.origin, c.state, c.before is not null as figures from case_file c where c.what = $1`,
    [words],
  );
  expect(rows).toEqual([{ origin: 'customer', state: 'open', figures: true }]);
  await press(page.getByRole('radio', { name: 'Each month' }));
  await page.getByText('on the first of the month').waitFor();
  expect((await db.owner.query('select every from roof_letter')).rows).toEqual([{ every: 'month' }]);
}
