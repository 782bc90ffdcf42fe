import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { AxeResults, RunOptions } from 'axe-core';
import type { CDPSession, Page } from 'playwright-core';
import { settled } from './browser';

const AXE = `${readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8')}
//# sourceURL=axe.js`;
const TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];

const inspectors = new WeakMap<Page, Promise<CDPSession>>();

/**
 * Puts axe into a page through the browser's inspector: an element would be refused by the page's policy, and what
 * Playwright evaluates is compiled anew for each page, while this is compiled once in a process.
 */
async function readAxe(page: Page): Promise<void> {
  const inspector = inspectors.get(page) ?? page.context().newCDPSession(page);
  inspectors.set(page, inspector);
  const { exceptionDetails } = await (await inspector).send('Runtime.evaluate', { expression: AXE });
  if (exceptionDetails)
    throw new Error(`axe: ${exceptionDetails.exception?.description ?? exceptionDetails.text}`);
}

async function faultsBy(page: Page, runOnly: RunOptions['runOnly']): Promise<string[]> {
  const known = await page.evaluate(() => 'axe' in globalThis);
  if (!known) await readAxe(page);
  // only what is wrong leaves the page: all that axe looked at is megabytes
  return page.evaluate(
    async (options) => {
      const { axe } = globalThis as unknown as { axe: { run: (o: RunOptions) => Promise<AxeResults> } };
      const { violations } = await axe.run(options);
      return violations.flatMap((v) =>
        v.nodes.map(
          (n) => `${v.id}: ${n.target.join(' ')} (${n.failureSummary?.split('\n')[1]?.trim() ?? v.help})`,
        ),
      );
    },
    {
      runOnly,
      resultTypes: ['violations'],
      preload: { assets: ['media'], timeout: 10_000 },
    } satisfies RunOptions,
  );
}

/** What axe finds against WCAG 2.2 AA and its best practices, one line a fault; empty: nothing. */
export const axeFaults = (page: Page): Promise<string[]> => faultsBy(page, { type: 'tag', values: TAGS });

/** What is wrong with a page as it stands on a screen `width` px wide: axe's faults, and a page wider than its screen. */
export async function faultsShown(page: Page, what: string, width: number): Promise<string[]> {
  await settled(page);
  const wide = await page.evaluate(() => document.documentElement.scrollWidth);
  return [
    ...(wide > width ? [`${what}: ${wide} px wide`] : []),
    ...(await axeFaults(page)).map((fault) => `${what}: ${fault}`),
  ];
}
