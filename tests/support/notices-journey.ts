import type { BrowserContext, Page } from 'playwright-core';
import { expect } from 'vitest';
import { faultsShown } from './axe';
import { hydrated } from './browser';
import { press } from './keyboard';

export interface NoticesScene {
  /** Something of no hurry happens and is told. */
  work(): Promise<void>;
  /** A cause comes, and is told. */
  cause(headline: string): Promise<void>;
  hazard(headline: string): Promise<void>;
  /** The way out at the foot of the newest letter to the technician, as a path. */
  wayOut(): Promise<string>;
}

const unread = (page: Page, count: number) =>
  page.locator(`a[href="/notices"][data-unread="${count}"]`).waitFor({ state: 'attached' });

/**
 * A technician sees notices come while looking, reads them, chooses to get letters of causes at once, ends those by the
 * link in one without signing in, and takes that back.
 * @returns what axe and the width of the screen have against the pages
 */
export async function noticesJourney(
  page: Page,
  signedOut: BrowserContext,
  url: string,
  scene: NoticesScene,
): Promise<string[]> {
  const faults: string[] = [];
  const width = page.viewportSize()?.width ?? 0;
  await page.goto(`${url}/notices`);
  await hydrated(page);
  await page.getByRole('heading', { name: 'Nothing to tell you' }).waitFor();
  await scene.work();
  await unread(page, 1);
  const list = page.getByRole('list', { name: 'Notices, newest first' });
  await list.getByText('Planned work: gutters').waitFor();
  await scene.hazard('Unit 3 of A1 does not shut down');
  const card = page.getByRole('complementary', { name: 'Not shutting down' });
  await card.getByText('Unit 3 of A1 does not shut down').waitFor();
  await press(card.getByRole('button', { name: 'Not now' }));
  await page
    .getByRole('heading', { name: '1 unread notice says that a string is not shutting down' })
    .waitFor();
  expect(await list.locator('a[data-notice]').first().innerText()).toContain('does not shut down');
  // by keyboard: down to the next, m marks it as read
  await list.locator('a[data-notice]').first().focus();
  await page.keyboard.press('ArrowDown');
  await page.keyboard.press('m');
  await unread(page, 1);
  await press(page.getByRole('button', { name: 'Mark all as read' }));
  await page.getByRole('heading', { name: 'You have read every notice' }).waitFor();
  faults.push(...(await faultsShown(page, 'notices', width)));

  await press(page.getByRole('link', { name: 'Choose what you are told of' }));
  await page.waitForURL('**/account/notices');
  await hydrated(page);
  await page.getByLabel('How you are told: Causes').selectOption('at_once');
  await press(page.getByLabel('Quiet hours: no letters, but hazards'));
  await page.getByLabel('From').fill('06:00');
  await press(page.getByRole('button', { name: 'Save what you are told of' }));
  await page.getByText('Quiet hours that end when they begin').first().waitFor();
  await page.getByLabel('Quiet hours: no letters, but hazards').uncheck();
  await press(page.getByRole('button', { name: 'Save what you are told of' }));
  await page.getByText('is kept as you chose it').waitFor();
  faults.push(...(await faultsShown(page, 'what one is told of', width)));

  await scene.cause('Unit 5 of A1 is stuck');
  const anybody = await signedOut.newPage();
  const way = await scene.wayOut();
  const shown = await anybody.goto(url + way);
  expect(shown?.headers()).toMatchObject({ 'referrer-policy': 'no-referrer', 'x-robots-tag': 'noindex' });
  await press(anybody.getByRole('button', { name: 'End these letters' }));
  await anybody.getByRole('heading', { name: 'No more of these letters' }).waitFor();
  faults.push(...(await faultsShown(anybody, 'the way out of letters', width)));
  const how = async () => {
    await page.reload();
    await hydrated(page);
    return page.getByLabel('How you are told: Causes').inputValue();
  };
  expect(await how()).toBe('in_product');
  await press(anybody.getByRole('button', { name: 'Send them as before' }));
  await anybody.getByRole('heading', { name: 'Letters come as before' }).waitFor();
  expect(await how()).toBe('at_once');
  // as a mail program does it (RFC 8058)
  const oneClick = await signedOut.request.post(url + way, { form: { 'List-Unsubscribe': 'One-Click' } });
  expect(oneClick.status()).toBe(200);
  expect(await how()).toBe('in_product');
  return faults;
}
