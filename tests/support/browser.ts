import {
  chromium,
  type Browser,
  type BrowserContext,
  type BrowserContextOptions,
  type Page,
} from 'playwright-core';
import { chromiumAt } from '../../src/server/up/programs.mjs';
import { PASSWORD } from './fleet';
import { signInAt } from './server';

const FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  // pages of a test are short: what optimizing their scripts costs never comes back
  '--js-flags=--no-opt,--no-maglev',
];
/** Where it is measured what pages cost: scripts are optimized as they are for people. */
export const OPTIMIZING: readonly string[] = ['--js-flags='];

/** Debian's Chromium, without a window; `more` flags where a test needs a camera, say. The caller closes it. */
export const startBrowser = (more: readonly string[] = []): Promise<Browser> =>
  chromium.launch({
    executablePath: chromiumAt(),
    headless: true,
    args: [...FLAGS, ...more],
  });

/**
 * The same to look through page after page by axe: scripts that are compiled at once, if plainly, take a tenth less there.
 * In journeys, which read many scripts and run each once, they take more.
 */
export const startLooking = (): Promise<Browser> =>
  startBrowser(['--js-flags=--always-sparkplug,--no-opt,--no-maglev']);

/** How long a page may take to get ready, milliseconds. */
const READY_WITHIN_MS = 60_000;

/**
 * Waits until the islands of a page have taken over: what is done before falls on deaf ears. The page looks for itself:
 * each question from outside would have it read Playwright's scripts anew.
 */
export async function hydrated(page: Page): Promise<void> {
  const until = Date.now() + READY_WITHIN_MS;
  for (;;)
    try {
      await page.evaluate(async (untilMs) => {
        // no function in here has a name: what runs benches would want a helper for it that pages do not have
        for (;;) {
          const waiting = [...document.querySelectorAll('astro-island[client="load"]')].filter((island) => {
            if (island.hasAttribute('ssr')) return true;
            // the attribute goes when hydration begins; elements that React has taken over carry its mark
            // of a part that comes later it is the first element inside that carries it
            const firsts = [
              island.querySelector(':scope > :not(template, script, style, link)'),
              ...[...island.querySelectorAll('[data-later]')].map((part) => part.firstElementChild),
            ];
            return firsts.some(
              (first) => first && !Object.keys(first).some((key) => key.startsWith('__reactProps')),
            );
          });
          if (waiting.length === 0) return;
          if (Date.now() > untilMs)
            throw new Error(`never alive: ${waiting.map((i) => i.getAttribute('component-url'))}`);
          await new Promise((resolve) => setTimeout(resolve, 20));
        }
      }, until);
      return;
    } catch (error) {
      // the page was left for the next one while it was looked at
      if (!/context was destroyed|navigat/i.test(String(error)) || Date.now() > until) throw error;
      await page.waitForLoadState('domcontentloaded');
    }
}

/** Waits until type is loaded and a change of size or colours has been drawn. */
export const settled = (page: Page): Promise<unknown> =>
  page.evaluate(async () => {
    await document.fonts.ready;
    for (let frames = 0; frames < 3; frames++) await new Promise((drawn) => requestAnimationFrame(drawn));
    await Promise.all(document.getAnimations().map((a) => a.finished.catch(() => undefined)));
  });

/** How many headings of the first level a page has once the first is seen: what a phone keeps is read from its store. */
export const headingsOf = (page: Page): Promise<number> =>
  page.evaluate(async () => {
    const headings = document.getElementsByTagName('h1');
    const seen = () => headings[0]?.checkVisibility({ visibilityProperty: true }) ?? false;
    for (let tries = 0; !seen() && tries < 1000; tries++)
      await new Promise((resolve) => setTimeout(resolve, 20));
    return seen() ? headings.length : 0;
  });

/** Signs in as a person does, on the page; `who` is the name before the @ of the test fleet. */
export async function signInOn(page: Page, url: string, who: string): Promise<void> {
  await page.goto(`${url}/sign-in`);
  await page.getByLabel('E-mail').fill(`${who}@lowfield.example`);
  await page.getByLabel('Password').fill(PASSWORD);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL((shown) => !shown.pathname.startsWith('/sign-in'));
}

/** Puts somebody’s session into a phone or another browser, as a sign-in would. */
export async function signOnTo(context: BrowserContext, url: string, who: string): Promise<void> {
  const [name = '', value = ''] = (await signInAt(url, `${who}@lowfield.example`, PASSWORD)).split('=');
  await context.clearCookies();
  await context.addCookies([{ name, value, url }]);
}

/** A browser's window of its own in which somebody is signed in. The caller closes it. */
export async function signedInContext(
  browser: Browser,
  url: string,
  who: string,
  options: BrowserContextOptions,
): Promise<BrowserContext> {
  const context = await browser.newContext(options);
  await signOnTo(context, url, who);
  return context;
}
