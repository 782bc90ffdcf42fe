import { chromium, type Browser, type Page } from 'playwright-core';

const FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

/** Debian's Chromium, without a window. The caller closes it. */
export const startBrowser = (): Promise<Browser> =>
  chromium.launch({
    executablePath: process.env.WAKELINE_CHROMIUM ?? '/usr/bin/chromium',
    headless: true,
    args: FLAGS,
  });

/** Waits until the islands of a page have taken over: what is done before falls on deaf ears. */
export const hydrated = (page: Page): Promise<unknown> =>
  page.waitForFunction(() => document.querySelectorAll('astro-island[ssr][client="load"]').length === 0);

/** Waits until type is loaded and a change of size or colours has been drawn. */
export const settled = (page: Page): Promise<unknown> =>
  page.evaluate(async () => {
    await document.fonts.ready;
    for (let frames = 0; frames < 3; frames++) await new Promise((drawn) => requestAnimationFrame(drawn));
    await Promise.all(document.getAnimations().map((a) => a.finished.catch(() => undefined)));
  });
