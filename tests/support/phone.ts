import type { Browser, BrowserContext, Page } from 'playwright-core';
import { hydrated, signOnTo } from './browser';

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
