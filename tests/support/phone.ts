import type { Browser, BrowserContext, Page } from 'playwright-core';
import { hydrated } from './browser';
import { PASSWORD } from './fleet';
import { signInAt } from './server';

/** A phone in a hand: 390 px, touch, and whoever is signed in on it. */
export async function phoneOf(
  browser: Browser,
  url: string,
  who: string,
  more: Parameters<Browser['newContext']>[0] = {},
): Promise<BrowserContext> {
  const context = await browser.newContext({
    viewport: { width: 390, height: 844 },
    hasTouch: true,
    isMobile: true,
    reducedMotion: 'reduce',
    ...more,
  });
  await signOnTo(context, url, who);
  return context;
}

/** Puts somebody’s session into a phone or another browser, as a sign-in would. */
export async function signOnTo(context: BrowserContext, url: string, who: string): Promise<void> {
  const [name = '', value = ''] = (await signInAt(url, `${who}@lowfield.example`, PASSWORD)).split('=');
  await context.clearCookies();
  await context.addCookies([{ name, value, url }]);
}

/** Opens the phone's page and waits until the phone could do without a network. */
export async function openCapture(page: Page, url: string, site: string, more = ''): Promise<void> {
  await page.goto(`${url}/capture/${site}${more}`);
  await page.evaluate(async () => {
    await navigator.serviceWorker.ready;
    while (!navigator.serviceWorker.controller) await new Promise((soon) => setTimeout(soon, 50));
  });
}

/** Types on the number pad that stands open. */
export async function press(page: Page, text: string): Promise<void> {
  await hydrated(page); // a key that is pressed before is nobody's
  const pad = page.getByRole('group', { name: 'Number pad' });
  for (const key of text)
    await pad.getByRole('button', { name: key === '.' ? 'Decimal point' : key, exact: true }).tap();
}
