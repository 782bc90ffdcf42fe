import sharp from 'sharp';
import type { Locator, Page } from 'playwright-core';
import { hydrated } from './browser';
import { press } from './keyboard';

/** The install checks of a string at the desk, by two people who meet at one of them. */

export interface Journey {
  url: string;
  /** Public identifier. */
  site: string;
  /** Called where a picture or a check of accessibility is worth it. */
  look: (page: Page, what: string) => Promise<void>;
}

const item = (page: Page, check: string): Locator => page.locator(`#check-${check}`);

export async function openChecks(page: Page, { url, site }: Journey, string: string): Promise<void> {
  await page.goto(`${url}/commissioning/${site}/checks?string=${string}`);
  await hydrated(page);
}

/** Waits until a note stands in the record: not in the field where it was typed, which goes when the save is done. */
async function recorded(check: Locator, note: string): Promise<void> {
  await check.getByLabel('Note').waitFor({ state: 'detached' });
  await check.getByRole('paragraph').filter({ hasText: note }).waitFor();
}

/** Both open the same check; the second is told what the first recorded, keeps what was typed, and saves it in its place. */
export async function meetAtOneCheck(
  page: Page,
  other: Page,
  journey: Journey,
  string: string,
): Promise<{ told: string }> {
  await openChecks(page, journey, string);
  await openChecks(other, journey, string);
  for (const [who, note] of [
    [page, 'one clip added'],
    [other, 'seen from the ladder'],
  ] as const) {
    await item(who, 'strain_relief')
      .getByRole('button', { name: /^Record/ })
      .click();
    await item(who, 'strain_relief').getByLabel('Note').fill(note);
  }
  await press(item(other, 'strain_relief').getByRole('button', { name: 'Save the check' }));
  await recorded(item(other, 'strain_relief'), 'seen from the ladder');
  await press(item(page, 'strain_relief').getByRole('button', { name: 'Save the check' }));
  const notice = item(page, 'strain_relief').getByRole('status').filter({ hasText: 'meanwhile' });
  await notice.waitFor();
  const told = await notice.innerText();
  await journey.look(page, 'two people at one check');
  await press(item(page, 'strain_relief').getByRole('button', { name: 'Save mine in place of theirs' }));
  await recorded(item(page, 'strain_relief'), 'one clip added');
  return { told };
}

/** A figure that is missing, one with a comma, one that contradicts a pass; photos, and a page that says it is one. */
export async function recordAndShow(
  page: Page,
  journey: Journey,
  string: string,
): Promise<{ refused: string }> {
  await openChecks(page, journey, string);
  const earth = item(page, 'earth_continuity');
  await press(earth.getByRole('button', { name: /^Record/ }));
  await earth.getByLabel('Resistance').fill('');
  await press(earth.getByRole('button', { name: 'Save the check' }));
  await earth.getByRole('alert').filter({ hasText: 'Resistance' }).waitFor();
  await earth.getByLabel('Resistance').fill('0,42');
  await press(earth.getByRole('button', { name: 'Save the check' }));
  await earth.getByText('Resistance 0.42').waitFor();

  const polarity = item(page, 'polarity');
  await press(polarity.getByRole('button', { name: /^Record/ }));
  await polarity.getByLabel('+ to −').fill('-520');
  await polarity.getByText('Do not connect it').waitFor();
  await journey.look(page, 'a contradicted pass');
  await press(polarity.getByRole('button', { name: 'Cancel' }));

  const photo = await sharp({ create: { width: 1200, height: 800, channels: 3, background: '#a63' } })
    .jpeg()
    .toBuffer();
  await earth.locator('input[type=file]').setInputFiles([
    { name: 'one.jpg', mimeType: 'image/jpeg', buffer: photo },
    { name: 'two.jpg', mimeType: 'image/jpeg', buffer: photo },
    { name: 'page.jpg', mimeType: 'image/jpeg', buffer: Buffer.from('<!doctype html><p>no photo</p>') },
  ]);
  await earth.locator('img').nth(1).waitFor();
  const refused = await earth.getByRole('alert').innerText();
  await press(earth.getByRole('button', { name: 'Leave it out' }));
  await earth.locator('img').first().click();
  await page.locator('dialog[open] img').waitFor();
  await journey.look(page, 'a photo large');
  await page.keyboard.press('Escape');
  return { refused };
}

/** A manager records the document for a pair that nobody had documented, and signs the string. */
export async function recordEvidenceAndSign(page: Page, journey: Journey, string: string): Promise<void> {
  await openChecks(page, journey, string);
  const pair = item(page, 'connectors');
  await page.getByText('a fire risk').first().waitFor();
  await press(pair.getByRole('button', { name: 'Record the document that allows this pair' }));
  await pair.getByLabel('Document', { exact: true }).fill('Joint declaration 12');
  await pair.getByLabel('Edition or date').fill('2026-02');
  await pair.getByLabel('Page or table').fill('page 3');
  await journey.look(page, 'evidence for a pair');
  await press(pair.getByRole('button', { name: 'Record the evidence' }));
  await pair.getByText('documented as intermatable. Joint declaration 12').waitFor();
  await press(page.getByRole('button', { name: `Sign ${string} off` }));
  await page.locator('#string').getByText('Signed by').waitFor();
}

/** The readings: what is not as expected, one of them opened. */
export async function readReadings(page: Page, { url, site, look }: Journey): Promise<{ open: string }> {
  await page.goto(`${url}/commissioning/${site}/readings`);
  await hydrated(page);
  await page.getByText(/^Not as expected/).click();
  await page.waitForURL('**/readings?show=odd');
  await press(page.getByRole('button', { name: /^D3/ }));
  await page.locator('#reading').waitFor();
  await look(page, 'a reading that is not as expected');
  return { open: await page.locator('#reading').innerText() };
}
