import type { Page } from 'playwright-core';
import { expect } from 'vitest';
import { faultsShown } from './axe';
import { hydrated } from './browser';
import { press } from './keyboard';

/**
 * A manager shares a site for a lobby, somebody who is not signed in looks at it, the manager ends it.
 * @returns what axe and the width of the screen have against it
 */
export async function shareJourney(
  manager: Page,
  anybody: Page,
  url: string,
  site: { ref: string; name: string },
): Promise<string[]> {
  const label = `Lobby ${site.ref.slice(0, 4)}`;
  const faults: string[] = [];
  await manager.goto(`${url}/my-site/${site.ref}`);
  await hydrated(manager);
  await press(manager.getByRole('button', { name: 'Share this page' }));
  const dialog = manager.getByRole('dialog');
  await press(dialog.getByRole('button', { name: 'Make the link' }));
  await dialog.getByText('A label is missing.').waitFor();
  await dialog.getByLabel('Label').fill(label);
  await press(dialog.getByLabel(/A lobby screen/));
  await press(dialog.getByRole('button', { name: 'Make the link' }));
  const { pathname } = new URL(await dialog.getByLabel(`Link of “${label}”`).inputValue());
  await press(dialog.getByRole('button', { name: 'Done' }));

  const shown = await anybody.goto(url + pathname);
  expect(shown?.status()).toBe(200);
  expect(shown?.headers()).toMatchObject({ 'referrer-policy': 'no-referrer', 'x-robots-tag': 'noindex' });
  await hydrated(anybody);
  await anybody.getByRole('heading', { level: 1 }).waitFor();
  expect(await anybody.getByText(site.name).count()).toBe(1);
  // there is nothing to operate, and nowhere to go
  expect(await anybody.locator('button, input, select, form, a:not(.skip-link)').count()).toBe(0);
  const width = anybody.viewportSize()?.width ?? 0;
  faults.push(...(await faultsShown(anybody, 'the lobby screen', width)));

  await press(manager.getByRole('button', { name: `End it: ${label}` }));
  await press(dialog.getByRole('button', { name: 'End it' }));
  await manager.getByRole('button', { name: `End it: ${label}` }).waitFor({ state: 'detached' });
  await press(manager.locator('summary', { hasText: /Ended and run out/ }));
  await manager.getByText(label).first().waitFor();
  faults.push(...(await faultsShown(manager, 'the manager’s sheet', manager.viewportSize()?.width ?? 0)));
  expect((await anybody.goto(url + pathname))?.status()).toBe(404);
  await anybody.getByRole('heading', { name: 'Nothing is shared here' }).waitFor();
  return faults;
}
