import process from 'node:process';
import pg from 'pg';
import type { Page } from 'playwright-core';
import { closePools } from '../../src/server/db/pools';
import { hydrated, OPTIMIZING, signedInContext, startBrowser } from '../support/browser';
import type { TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { pageWeights } from '../support/page-weight';
import { startSite } from '../support/server';
import { stand } from '../support/standing';
import { streamOf } from './pages/stream';
import { forget, seenBy, slowDown, watch, type Seen } from './pages/watch';

/**
 * What pages cost a browser. Scripts of every page by the build itself; the rest in Chromium against the built site on
 * 127.0.0.1: the string page's largest paint and layout shift, interactions while fifty changes a second come over
 * /live, long tasks while a year's chart pans. Two to three minutes. `--weights`: only the scripts.
 */
const SITE = 'Kestrel Row School';
const PER_SECOND = 50;
const ROUNDS = 3;
const YEAR_DAYS = 365;

const figure = (name: string, value: number, unit: string, digits = 1) =>
  process.stdout.write(`pages.${name} ${value.toFixed(digits)} ${unit}\n`);
const nameOf = (page: string): string => page.replace(/\.astro$/, '').replace(/\W+/g, '_');
const median = (values: number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1] ?? NaN;

async function weights(): Promise<void> {
  for (const { page, first, chart } of await pageWeights()) {
    figure(`${nameOf(page)}.first`, first / 1000, 'kB');
    if (chart > 0) figure(`${nameOf(page)}.with_chart`, (first + chart) / 1000, 'kB');
  }
}

/** The longest wait that 95 of 100 interactions keep below; what the browser does not tell of took under 16 ms. */
function p95(seen: Seen, made: number): number {
  const told = [...seen.interactions].sort((a, b) => b - a);
  return told[Math.floor(made * 0.05)] ?? 16;
}

/** Types, chooses and taps as a person at a list does. Gives the number of interactions. */
async function use(page: Page): Promise<number> {
  let made = 0;
  const search = page.locator('main input[type=search]').first();
  const choices = page.locator('main input[type=radio]');
  for (let round = 0; round < ROUNDS; round++) {
    if (await search.isVisible()) {
      await search.focus();
      for (const key of ['a', 'r', 'Backspace', 'Backspace']) {
        await page.keyboard.press(key, { delay: 60 });
        made++;
      }
    }
    const several = Math.min(3, await choices.count());
    for (let k = 0; k < several; k++) {
      await choices.nth(k).focus();
      await page.keyboard.press('Space', { delay: 60 });
      made++;
    }
    for (let k = 0; k < 6; k++) {
      await page.locator('main h1').first().click();
      await page.keyboard.press('Tab', { delay: 60 });
      made += 2;
    }
  }
  return made;
}

const db = new pg.Pool({ connectionString: process.env.DATABASE_URL, max: 2 });
const env = Object.fromEntries(
  ['DATABASE_URL', 'DATABASE_URL_APP', 'DATABASE_URL_INGEST', 'DATABASE_ONE_ROLE'].map((name) => [
    name,
    process.env[name] ?? '',
  ]),
);

async function inTheBrowser(): Promise<void> {
  const fleet = await testFleet({ url: env.DATABASE_URL, owner: db } as unknown as TestDatabase, [
    SITE,
    'Weirside Clinic',
  ]);
  const school = fleet.site(SITE);
  const now = new Date();
  for (const name of [SITE, 'Weirside Clinic']) await stand(db, fleet.site(name), now);
  const string = school.strings.get('A1');
  if (!string) throw new Error('The site has no string A1.');
  await db.query(
    `insert into string_day (day, string_id, site_id, frames, voltage_avg, voltage_max, energy)
     select current_date - d, $1, $2, 1440, 52000 + 900 * sin(d / 11.0), 54000, 21000 + 9000 * sin(d / 58.0)
     from generate_series(1, $3::int4) d on conflict do nothing`,
    [string.id, school.id, YEAR_DAYS],
  );
  const site = await startSite({ env } as unknown as TestDatabase, { WAKELINE_ROLES: 'web' });
  const browser = await startBrowser(OPTIMIZING);
  try {
    const sitePath = `/sites/${school.ref}`;
    const stringPath = `${sitePath}/strings/${string.ref}`;
    const opened = async (times: number): Promise<Page> => {
      const context = await signedInContext(browser, site.url, 'analyst', {
        viewport: { width: 1440, height: 900 },
      });
      // what runs this bench gives functions their names by a helper that pages do not have
      await context.addInitScript('globalThis.__name ??= (f) => f');
      const page = await context.newPage();
      await watch(page);
      await slowDown(page, times);
      return page;
    };
    const go = async (page: Page, path: string): Promise<void> => {
      await page.goto(`${site.url}${path}`, { waitUntil: 'load' });
      await hydrated(page);
    };

    await (await opened(1)).goto(`${site.url}${stringPath}`); // the server's own first time
    const paints: Seen[] = [];
    for (let k = 0; k < ROUNDS; k++) {
      const page = await opened(4);
      await go(page, stringPath);
      await page.locator('canvas').first().waitFor();
      paints.push(await seenBy(page));
      await page.context().close();
    }
    if (paints.some((p) => p.largestPaint === 0))
      throw new Error('the browser told of no paint: nothing of this run counts');
    figure('string.largest_paint_at_4x', median(paints.map((p) => p.largestPaint)), 'ms', 0);
    figure('string.layout_shift', Math.max(...paints.map((p) => p.shift)), 'score', 4);

    const live: readonly [name: string, path: string, topic: RegExp, size: number][] = [
      ['fleet', '/', /^fleet$/, 1000],
      ['site', sitePath, /^site:/, 250], // of 20 units: 5,000
      ['shutdown', '/shutdown', /^fleet$/, 1000],
      ['string', stringPath, /^string:/, 1],
    ];
    for (const [name, path, topic, size] of live)
      for (const times of [1, 4]) {
        const page = await opened(times);
        const stream = await streamOf(page, topic, size);
        await go(page, path);
        await stream.begun;
        const stop = stream.start(PER_SECOND);
        await forget(page);
        const made = await use(page);
        const seen = await seenBy(page);
        const sent = stop();
        figure(`${name}.interaction_p95_at_${times}x`, p95(seen, made), 'ms', 0);
        figure(`${name}.long_tasks_at_${times}x`, seen.longTasks.length, 'tasks', 0);
        if (times === 1) figure(`${name}.changes`, sent, 'changes', 0);
        await page.context().close();
      }

    const page = await opened(1);
    await go(page, `${stringPath}?range=year`);
    const canvas = page.locator('canvas').first();
    await canvas.scrollIntoViewIfNeeded();
    const box = await canvas.boundingBox();
    if (!box) throw new Error('The chart is not drawn.');
    await page.getByRole('button', { name: 'Zoom in' }).first().click();
    await forget(page);
    const y = box.y + box.height - 20; // the slider below the plot
    await page.mouse.move(box.x + box.width / 2, y);
    await page.mouse.down();
    for (let k = 0; k < 120; k++)
      await page.mouse.move(box.x + box.width / 2 + Math.sin(k / 10) * box.width * 0.2, y);
    await page.mouse.up();
    const { longTasks } = await seenBy(page);
    figure('year_pan.long_tasks', longTasks.length, 'tasks', 0);
    figure('year_pan.longest_task', Math.max(0, ...longTasks), 'ms', 0);
  } finally {
    await browser.close();
    await site.stop();
  }
}

try {
  await weights();
  if (!process.argv.includes('--weights')) await inTheBrowser();
} finally {
  await Promise.all([db.end(), closePools()]);
}
