import type { Page } from 'playwright-core';
import { paths } from '../../src/schemas/paths';
import { axeFaults } from './axe';
import { hydrated } from './browser';
import { PASSWORD } from './fleet';
import { press } from './keyboard';

/**
 * A signed-in person makes a token, reads with it what its scope allows, finds an operation on the page of the API, and
 * ends the token. Gives what was wrong, and what the API answered on the way.
 */
export async function tokenJourney(
  page: Page,
  url: string,
): Promise<{ faults: string[]; statuses: Record<string, number>; sites: string[] }> {
  const faults: string[] = [];
  const statuses: Record<string, number> = {};
  const name = `Trial ${Date.now()}`;
  await page.goto(url + paths.account());
  await hydrated(page);
  await press(page.getByRole('button', { name: 'Make a token' }));
  const form = page.getByRole('dialog', { name: 'Make a token' });
  await press(form.getByRole('button', { name: 'Make the token' }));
  await form.getByText('Give it a name: what will use it?').waitFor();
  faults.push(...(await axeFaults(page)));
  await form.getByLabel('Name').fill(name);
  await press(form.getByLabel('Units: where they are'));
  await form.getByLabel('Your password').fill('not my password');
  await press(form.getByRole('button', { name: 'Make the token' }));
  await form.getByText('This is not your password.').waitFor();
  await form.getByLabel('Your password').fill(PASSWORD);
  await press(form.getByRole('button', { name: 'Make the token' }));
  const made = page.getByRole('dialog', { name: 'Your new token' });
  const token = (await made.getByLabel('The token').textContent()) ?? '';
  faults.push(...(await axeFaults(page)));
  await press(made.getByRole('button', { name: 'I have kept it' }));
  await made.waitFor({ state: 'hidden' });
  if ((await page.content()).includes(token)) faults.push('the token is still on the page');

  const ask = (path: string) =>
    fetch(url + paths.api.v1(path), { headers: { authorization: `Bearer ${token}` } });
  const sites = await ask('/sites');
  statuses.sites = sites.status;
  const { data } = (await sites.json()) as { data: { name: string }[] };
  statuses.beyondItsScope = (await ask('/loggers')).status;

  await page.goto(url + paths.developers());
  await hydrated(page);
  await page.getByLabel('Find an operation').fill('shutdown-tests result');
  await page.getByText(/^2 of \d+ operations$/).waitFor();
  await page.getByRole('heading', { name: 'GET /shutdown-tests', exact: true }).waitFor();

  await page.goto(`${url}${paths.account()}#tokens`);
  await hydrated(page);
  const line = page.getByRole('listitem').filter({ hasText: name });
  await line.getByText(/^Used .* from /).waitFor();
  await press(line.getByRole('button', { name: `End the token ${name}` }));
  await press(page.getByRole('dialog').getByRole('button', { name: 'End the token' }));
  await page.getByText(`The token ${name} has ended.`).waitFor();
  await line.waitFor({ state: 'detached' });
  statuses.ended = (await ask('/sites')).status;
  return { faults, statuses, sites: data.map((s) => s.name) };
}
