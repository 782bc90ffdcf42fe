import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { AxeResults, RunOptions } from 'axe-core';
import type { Page } from 'playwright-core';
import { settled } from './browser';

const AXE = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
const TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];

async function faultsBy(page: Page, runOnly: RunOptions['runOnly']): Promise<string[]> {
  const known = await page.evaluate(() => 'axe' in globalThis);
  if (!known) await page.evaluate(AXE); // an element would be refused by the page's policy
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
