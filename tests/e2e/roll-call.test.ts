import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Simulator } from '../../simulator/engine';
import { axeFaults } from '../support/axe';
import { hydrated, signedInContext, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startPlant } from '../support/plant';
import { startSite, type RunningSite } from '../support/server';
import { press } from '../support/keyboard';

/**
 * What a roll call leaves to do, on a phone: a roll call started by a plain form, a stranger placed where its label was
 * misread, the walk with its ladder card, and two units in each other's place found by isolating a string on the
 * plant's own page.
 */
const HALL = 'Old Tannery Market Hall';
const PACE = 240;
const LONG = { timeout: 90_000, interval: 500 };
const SHORT = { timeout: 20_000, interval: 250 };

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let plant: Simulator;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL]);
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

function signedIn(script: boolean): Promise<BrowserContext> {
  return signedInContext(browser, site.url, 'technician', {
    viewport: { width: 390, height: 844 },
    javaScriptEnabled: script,
    reducedMotion: 'reduce',
  });
}
const at = (page: string): string => `${site.url}/commissioning/${fleet.site(HALL).ref}/${page}`;
const plain = (text: string): string => text.replace(/\u00a0/g, ' ').replace(/\u2011/g, '-');
const heading = async (page: Page): Promise<string> => plain(await page.locator('h1').innerText());
const drawn = (string: string, position: number): string =>
  fleet.site(HALL).plan.strings.find((s) => s.name === string)?.slots[position - 1]?.serial ?? '';
const serialAt = async (string: string, position: number): Promise<string | undefined> => {
  const { rows } = await db.owner.query<{ serial: string }>(
    `select u.serial from slot sl join placement p on p.slot_id = sl.id and p.placed_to is null
     join unit u on u.id = p.unit_id where sl.string_id = $1 and sl.position = $2`,
    [fleet.site(HALL).strings.get(string)?.id, position],
  );
  return rows[0]?.serial;
};
const strangerAt = (position: number): string =>
  fleet.site(HALL).plan.strangers.find((s) => s.seat?.position === position)?.serial ?? '';

describe('a roll call on a phone', () => {
  let context: BrowserContext;
  let page: Page;
  beforeAll(async () => {
    context = await signedIn(true);
    page = await context.newPage();
  });
  afterAll(() => context.close());

  it('starts by a plain form where no script runs, and keeps what was typed when something is missing', async () => {
    const bare = await signedIn(false);
    const form = await bare.newPage();
    await form.goto(at('roll-call'));
    await form.getByLabel('Who is on site').fill('Per Aalto');
    await press(form.getByRole('button', { name: 'Start the roll call' }));
    await form.locator('#run').getByText('Confirm that this person is on site now.').waitFor();
    expect(await form.getByLabel('Who is on site').inputValue()).toBe('Per Aalto');
    await press(form.getByLabel('This person is on site now'));
    await press(form.getByRole('button', { name: 'Start the roll call' }));
    await form.locator('#run').getByText('On site: Per Aalto').waitFor();
    await bare.close();
  });

  it('places a stranger where its label was misread, and its unit reports from there', async () => {
    await page.goto(at('roll-call'));
    await hydrated(page);
    await expect.poll(() => page.locator('#unknown li').count(), LONG).toBe(2);
    const stranger = strangerAt(2);
    await press(page.getByRole('button', { name: `Place ${stranger}` }));
    const dialog = page.getByRole('dialog');
    await expect.poll(() => dialog.innerText(), LONG).toContain('B1, position 2');
    expect(await dialog.innerText()).toContain('one character apart');
    await press(dialog.getByRole('button', { name: 'Take B1' }));
    const write = dialog.getByRole('button', { name: `Replace ${drawn('B1', 2)}` });
    await press(write);
    // what was seen on the module, why, and the physical check
    await expect.poll(() => dialog.getByRole('alert').count(), SHORT).toBe(3);
    expect(await axeFaults(page)).toEqual([]);
    await dialog.getByLabel('What you read on the module').fill(`label reads ${stranger}, third row`);
    await dialog.getByLabel('Why').fill('copied wrongly');
    await press(dialog.getByLabel('I have read'));
    await press(write);
    await page.getByText('The unit is replaced').waitFor();
    expect(await serialAt('B1', 2)).toBe(stranger);
    await expect.poll(() => page.locator('#unknown li').count(), SHORT).toBe(1);

    const string = fleet.site(HALL).strings.get('B1')?.ref ?? '';
    await expect
      .poll(async () => {
        const reply = await context.request.get(`${site.url}/api/strings/${string}`);
        const read = (await reply.json()) as { string: { slots: { position: number; state: string }[] } };
        return read.string.slots.find((s) => s.position === 2)?.state;
      }, LONG)
      .toBe('passing');
  });

  it('leads to the walk: stops to tick, kept across a reload, a ladder card of one screen', async () => {
    await expect.poll(() => heading(page), LONG).toContain('182 of 184');
    await press(page.getByRole('link', { name: 'Walk to them' }));
    await page.waitForURL(/walk$/);
    await hydrated(page);
    expect(await heading(page)).toBe('Two stops on two planes');
    expect(plain(await page.locator('header p').last().innerText())).toMatch(/B1-9.*C2-7|C2-7.*B1-9/);
    const roof = page.locator('#roof svg[role="img"]:visible');
    expect(await roof.getAttribute('aria-label')).toContain('B1: 9 unheard');
    await press(page.getByLabel('B1-9 is done'));
    await page.reload();
    await hydrated(page);
    await expect.poll(() => page.getByLabel('B1-9 is done').isChecked(), SHORT).toBe(true);
    expect(await axeFaults(page)).toEqual([]);
    await press(page.getByRole('button', { name: 'Leave out B1-9' }));
    await expect.poll(() => heading(page), SHORT).toBe('One stop on the east roof');
    await page.waitForURL(/stops=C2-7/);

    await page.goto(`${at('walk')}?view=card`);
    await hydrated(page);
    const card = plain(await page.locator('article').innerText());
    expect(card).toContain('2 spare units');
    expect(card).toContain('8.4 V'); // B1: fourteen units in shutdown
    expect(card).toContain('7.2 V'); // C2: twelve
    expect(await page.evaluate(() => document.documentElement.scrollHeight)).toBeLessThanOrEqual(844);
    expect(await axeFaults(page)).toEqual([]);
  });
});

describe('two units in each other’s place', () => {
  let context: BrowserContext;
  let page: Page;
  beforeAll(async () => {
    context = await signedIn(true);
    page = await context.newPage();
    await page.goto(at('membership'));
    await hydrated(page);
  });
  afterAll(() => context.close());

  it('are found when a person isolates one string: who kept its current, who fell with it', async () => {
    const option = page.locator('#isolate-string option', { hasText: /^C3\b/ });
    await page.getByLabel('String to isolate').selectOption((await option.getAttribute('value')) ?? '');
    await press(page.getByRole('button', { name: 'Start watching' }));
    await expect.poll(() => page.getByRole('alert').count(), SHORT).toBe(2);
    await page.getByLabel('Who isolates it').fill('Per Aalto');
    await press(page.getByLabel('A qualified person'));
    await press(page.getByRole('button', { name: 'Start watching' }));
    await expect.poll(() => heading(page), SHORT).toBe('Watching C3: nothing has fallen yet');

    const id = plant.inject(HALL, { kind: 'string_isolated', string: 'C3' });
    await expect.poll(() => heading(page), LONG).toBe('C3-4 kept its current; D1-4 went to zero with C3');
    expect(await axeFaults(page)).toEqual([]);
    await press(page.getByRole('button', { name: 'Stop watching and keep the result' }));
    await page.locator('#isolations').waitFor();
    plant.clear(HALL, id);
    const { rows } = await db.owner.query<{ person_on_site: string; outcome: string }>(
      `select person_on_site, finding ->> 'outcome' as outcome from isolation`,
    );
    expect(rows).toEqual([{ person_on_site: 'Per Aalto', outcome: 'told' }]);
  });

  it('and are exchanged on the drawing after a review of both, which the plant then agrees with', async () => {
    const [c, d] = [drawn('C3', 4), drawn('D1', 4)];
    await page.locator('#isolations').getByRole('button', { name: 'Review the move' }).click();
    const dialog = page.getByRole('dialog');
    expect(await dialog.innerText()).toContain('from its string');
    await dialog.getByLabel('What you read on the module').fill('both labels read at their modules');
    await dialog.getByLabel('Why').fill('isolating C3 showed it');
    await press(dialog.getByLabel('I have read both labels'));
    await press(dialog.getByRole('button', { name: 'Exchange the two units' }));
    await page.getByText('The two units are exchanged on the as-built').waitFor();
    expect([await serialAt('C3', 4), await serialAt('D1', 4)]).toEqual([d, c]);
    const seat = plant.truth(HALL).units.find((u) => u.serial === d)?.seat;
    expect(seat).toEqual({ string: 'C3', position: 4 });
    await expect.poll(() => heading(page), SHORT).not.toContain('kept its current');
  });
});
