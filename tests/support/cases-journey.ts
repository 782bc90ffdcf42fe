import type { Page } from 'playwright-core';
import { expect } from 'vitest';
import { hydrated } from './browser';
import { press } from './keyboard';

/** What an analyst does with a case in the browser; each step waits for what only the finished act shows. */

const SOON = { timeout: 15_000, interval: 150 };

export async function openPage(page: Page, url: string): Promise<void> {
  await page.goto(url);
  await hydrated(page);
}

/** From the string to a case about its second position. */
export async function openFromString(
  page: Page,
  url: string,
  string: { ref: string; name: string },
): Promise<string> {
  await openPage(page, `${url}/cases/new?string=${string.ref}`);
  const title = page.getByLabel('Title');
  expect(await title.inputValue()).toMatch(new RegExp(`${string.name}.+stuck`));
  await title.fill(`String ${string.name}: second position flat`);
  await page.getByLabel('What is wrong').fill('It gave half a volt all morning.');
  await page.getByLabel('Kind').selectOption('stuck');
  await page.getByRole('checkbox', { name: `Position 2 of ${string.name}` }).check({ force: true });
  await press(page.getByRole('button', { name: 'Open the case' }));
  await page.waitForURL(/\/cases\/[0-9a-f-]{36}$/);
  await hydrated(page);
  await page
    .getByRole('heading', { level: 1, name: `String ${string.name}: second position flat` })
    .waitFor();
  return page.url();
}

export async function checkFirstLine(page: Page): Promise<void> {
  const list = page.locator('#checklist');
  await press(list.getByRole('checkbox').first());
  await list.getByText('Looked at by').waitFor();
  await list.getByText('1 of 6 looked at').waitFor();
}

export async function addPhotos(
  page: Page,
  photos: { name: string; mimeType: string; buffer: Buffer }[],
): Promise<void> {
  await page.locator('#photos input[type=file]').last().setInputFiles(photos);
  await expect.poll(() => page.locator('#photos img').count(), SOON).toBe(photos.length);
}

/** Names somebody with @ by the keyboard alone. */
export async function mention(page: Page, first: string, whole: string): Promise<void> {
  await page.keyboard.press('c');
  await expect.poll(() => page.evaluate(() => document.activeElement?.id), SOON).toBe('comment');
  await page.keyboard.type(`Can you look, @${first}`);
  await page.getByRole('listbox').getByRole('option', { name: whole }).waitFor();
  await page.keyboard.press('Enter');
  await page.keyboard.type('before noon?');
  await page.keyboard.press('Control+Enter');
  await page.locator('#history li strong', { hasText: `@${whole}` }).waitFor();
  await page.locator('#history li').getByText(`Can you look, @${whole} before noon?`).waitFor();
}

export async function assign(page: Page, name: string): Promise<void> {
  await page.getByLabel('Assigned to').selectOption({ label: name });
  await page.locator('header').getByText(`${name} has it`).waitFor();
}

/** Two people change the same case; the second sends the own words over what the first wrote. */
export async function meetAtOneCase(page: Page, other: Page, address: string): Promise<void> {
  await openPage(other, address);
  await page.keyboard.press('Escape');
  await press(page.getByRole('button', { name: 'Change', exact: true }));
  await page.locator('#what textarea').fill('Half a volt all morning, and a browned half.');
  await press(other.getByRole('button', { name: 'Change', exact: true }));
  await other.getByLabel('Title').fill('Second position flat since dawn');
  await press(other.getByRole('button', { name: 'Save' }));
  await other.getByRole('heading', { level: 1, name: 'Second position flat since dawn' }).waitFor();
  await press(page.getByRole('button', { name: 'Save' }));
  const told = page.getByRole('alert').filter({ hasText: 'changed this case meanwhile' });
  await told.getByText('Second position flat since dawn').waitFor();
  expect(await page.locator('#what textarea').inputValue()).toBe(
    'Half a volt all morning, and a browned half.',
  );
  await press(told.getByRole('button', { name: 'Send mine over it' }));
  await told.waitFor({ state: 'detached' });
  // the form is gone, both changes stand
  await page.locator('#what p', { hasText: 'Half a volt all morning, and a browned half.' }).waitFor();
  await page.getByRole('heading', { level: 1, name: 'Second position flat since dawn' }).waitFor();
}

/** On the board: to "waiting" by a key, to "done" by dragging, with what was done. */
export async function moveOnBoard(page: Page, url: string, number: number): Promise<void> {
  await openPage(page, `${url}/cases`);
  const card = (column: number) => page.locator(`[data-column="${column}"] li`, { hasText: `#${number} ` });
  await card(0).locator('a').focus();
  await page.keyboard.press(']');
  await card(1).waitFor();
  await card(1).dragTo(page.locator('[data-column="2"]'));
  const dialog = page.getByRole('dialog', { name: `Close case ${number}: done` });
  await dialog.getByLabel('What was done').fill('Short leads mated anew.');
  await press(dialog.getByRole('button', { name: 'Close the case' }));
  await card(2).waitFor();
}

export async function closeOnPage(page: Page, note: string): Promise<void> {
  await page.getByLabel('State').selectOption('done');
  const dialog = page.getByRole('dialog');
  await dialog.getByLabel('What was done').fill(note);
  await press(dialog.getByRole('button', { name: 'Close the case' }));
  await page.locator('#history li', { hasText: note }).waitFor();
}
