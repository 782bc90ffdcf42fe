import { chromium, type Browser } from 'playwright-core';

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
