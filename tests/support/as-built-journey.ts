import type { Page } from 'playwright-core';
import { hydrated } from './browser';
import { press } from './keyboard';

/** A new site by forms, from its name to a serial in every slot, as a person would do it. */

export interface Journey {
  url: string;
  siteName: string;
  loggerSerial: string;
  /** First letters of the serials. */
  serials: string;
  /** Called where a picture or a check of accessibility is worth it. */
  look: (page: Page, what: string) => Promise<void>;
}

const dialog = (page: Page) => page.locator('dialog[open]');
const field = (page: Page, name: string) => dialog(page).locator(`[name="${name}"]`);

async function saved(page: Page): Promise<void> {
  await dialog(page).waitFor({ state: 'detached' });
}

export async function buildSite(
  page: Page,
  { url, siteName, loggerSerial, serials, look }: Journey,
): Promise<string> {
  await page.goto(`${url}/commissioning`);
  await hydrated(page);
  await page.locator('a[href="/commissioning/new"]').first().click();
  await page.waitForURL('**/commissioning/new');
  await hydrated(page);

  // nothing filled in: every fault at its field, and what was typed stays
  await page.fill('[name="place"]', 'Saltmarsh');
  await page.fill('[name="longitude"]', '181');
  await press(page.getByRole('button', { name: 'Create the site' }));
  await page.locator('[name="name"][aria-invalid="true"]').waitFor();
  await look(page, 'new-site-faults');
  await page.fill('[name="name"]', siteName);
  await page.fill('[name="latitude"]', '51,42');
  await page.fill('[name="longitude"]', '−2,61');
  await page.selectOption('[name="timeZone"]', 'Europe/London');
  await page.fill('[name="temperatureMin"]', '−9');
  await page.fill('[name="shutdownSwitchPlace"]', 'Beside the slipway door');
  await page.fill('[name="contactName"]', 'Idony Marrable');
  await press(page.getByRole('button', { name: 'Create the site' }));
  await page.waitForURL('**/as-built');
  await hydrated(page);
  await look(page, 'as-built-empty');

  await press(page.getByRole('button', { name: 'Add a plane' }).first());
  await field(page, 'name').fill('South roof');
  await field(page, 'surfaceTilt').fill('12');
  await field(page, 'surfaceAzimuth').fill('185');
  await look(page, 'plane');
  await field(page, 'surfaceAzimuth').press('Enter');
  await saved(page);

  await press(page.getByRole('button', { name: 'Add an inverter' }).first());
  await field(page, 'name').fill('Inverter 1');
  await field(page, 'acPowerMax').fill('12000');
  await field(page, 'inputs').fill('2');
  await field(page, 'inputs').press('Enter');
  await saved(page);

  await press(page.getByRole('button', { name: 'Add a logger' }).first());
  await field(page, 'serial').fill(loggerSerial);
  await field(page, 'serial').press('Enter');
  await dialog(page).getByText('It is shown this once.').waitFor();
  const token = await dialog(page).locator('code').first().innerText();
  await look(page, 'token');
  await press(dialog(page).getByRole('button', { name: 'I have it' }));
  await saved(page);

  await press(page.getByRole('button', { name: 'Add strings' }));
  await field(page, 'name').fill('A1');
  await field(page, 'slots').fill('4');
  await field(page, 'unitType').selectOption({ label: 'Reporting unit, both sides' });
  await field(page, 'moduleType').selectOption({ index: 1 });
  await field(page, 'input').selectOption({ label: 'Inverter 1, input 1' });
  await field(page, 'alike').fill('2');
  await look(page, 'strings');
  await press(dialog(page).getByRole('button', { name: 'Add the strings' }));
  await saved(page);
  await page
    .getByRole('heading', { level: 1, name: /2.strings, 8.slots; no slot has a serial yet/ })
    .waitFor();

  for (const string of ['A1', 'A2']) {
    await press(page.getByRole('button', { name: string, exact: true }));
    for (let position = 1; position <= 4; position++) {
      await field(page, `slot-${position}`).fill(`${serials}-${string}-${position}`.toLowerCase());
      await page.keyboard.press('Enter'); // as a scanner does
    }
    if (string === 'A2') {
      // one of them sits in A1 already
      await field(page, 'slot-3').fill(`${serials}-A1-3`);
      await press(dialog(page).getByRole('button', { name: 'Save the slots' }));
      await dialog(page).getByText('sits in A1, position 3').first().waitFor();
      await look(page, 'slots-fault');
      await field(page, 'slot-3').fill(`${serials}-A2-3`);
    }
    await press(dialog(page).getByRole('button', { name: 'Save the slots' }));
    await dialog(page).getByText('Saved', { exact: true }).waitFor();
    await look(page, `slots-${string}`);
    await press(dialog(page).getByRole('button', { name: 'Close' }).last());
    await saved(page);
  }
  await page.getByRole('heading', { level: 1, name: /every slot has a serial/ }).waitFor();
  await look(page, 'as-built');
  return token;
}

/** Swaps two units and replaces a third: the history tells who, what and why. */
export async function changeUnits(page: Page, { serials, look }: Journey): Promise<void> {
  await press(page.getByRole('button', { name: 'A1', exact: true }));
  await field(page, 'slot-1').fill(`${serials}-A1-2`);
  await field(page, 'slot-2').fill(`${serials}-A1-1`);
  await field(page, 'slot-4').fill(`${serials}-NEW`);
  await press(dialog(page).getByRole('button', { name: 'Save the slots' }));
  await dialog(page).locator('[name="reason"][aria-invalid="true"]').waitFor();
  await field(page, 'reason').fill('labels mixed up, one cracked');
  await press(dialog(page).getByRole('button', { name: 'Save the slots' }));
  await dialog(page).getByText('Saved', { exact: true }).waitFor();
  await press(dialog(page).getByRole('link', { name: 'History' }));
  await page.waitForURL('**/history?string=*');
  await page.getByText('labels mixed up, one cracked').first().waitFor();
  await hydrated(page);
  await page.getByLabel('Serial, name or reason').fill(`${serials}-a1-1`);
  await page.getByText('sits in A1, position 2', { exact: false }).waitFor();
  await look(page, 'history');
}

/** `mine` and `theirs` edit the tilt of one plane; mine comes second, is told, and is merged with their new name. */
export async function meetAtOnePlane(mine: Page, theirs: Page, { look }: Journey): Promise<void> {
  await theirs.goto(mine.url());
  await hydrated(theirs);
  const edit = (page: Page) => press(page.getByRole('button', { name: 'Edit plane South roof' }));
  await edit(mine);
  await edit(theirs);
  await field(theirs, 'surfaceTilt').fill('15');
  await field(theirs, 'name').fill('Southern roof');
  await press(dialog(theirs).getByRole('button', { name: 'Save' }));
  await saved(theirs);
  await field(mine, 'surfaceTilt').fill('17');
  await press(dialog(mine).getByRole('button', { name: 'Save' }));
  await dialog(mine)
    .getByText(/set it to "15" at \d\d:\d\d/)
    .waitFor();
  await look(mine, 'clash');
  await press(dialog(mine).getByRole('button', { name: 'Keep what I typed and go on' }));
  await mine.waitForFunction(
    () => document.querySelector<HTMLInputElement>('dialog[open] [name="name"]')?.value === 'Southern roof',
  );
  await press(dialog(mine).getByRole('button', { name: 'Save' }));
  await saved(mine);
  await mine.getByRole('button', { name: 'Edit plane Southern roof' }).waitFor();
}
