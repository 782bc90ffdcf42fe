import type { Browser, BrowserContext, Page } from 'playwright-core';
import { WebSocket } from 'ws';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { buildSite, changeUnits, meetAtOnePlane, type Journey } from '../support/as-built-journey';
import { faultsShown } from '../support/axe';
import { hydrated, signedInContext, startBrowser } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';

/** A site by forms, from its name to a serial in every slot; then units change places, and two people meet at one part. */

let db: TestDatabase;
let site: RunningSite;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  await testFleet(db, ['Weirside Clinic']);
  site = await startSite(db);
  browser = await startBrowser();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

function signedIn(
  who: 'technician' | 'manager',
  width: number,
  theme: 'light' | 'dark',
): Promise<BrowserContext> {
  return signedInContext(browser, site.url, who, {
    viewport: { width, height: width < 500 ? 844 : 1000 },
    colorScheme: theme,
  });
}

/** The first message that a logger gets for its hello. */
function rosterFor(
  token: string,
  serial: string,
): Promise<{ type: string; strings: { name: string; serials: string[] }[] }> {
  return new Promise((resolve, reject) => {
    const ws = new WebSocket(`${site.url.replace('http', 'ws')}/ingest/v1`, {
      headers: { authorization: `Bearer ${token}` },
    });
    ws.once('error', reject);
    ws.once('open', () =>
      ws.send(
        JSON.stringify({
          type: 'hello',
          protocol: 1,
          logger: serial,
          firmware: 'x',
          clock: Math.floor(Date.now() / 1000),
        }),
      ),
    );
    ws.once('message', (data) => {
      ws.close();
      resolve(JSON.parse(String(data)) as Awaited<ReturnType<typeof rosterFor>>);
    });
  });
}

describe.each([
  [390, 'light', 'PHONE'],
  [1440, 'dark', 'DESK'],
] as const)('at %i px, %s', (width, theme, tag) => {
  let context: BrowserContext;
  let page: Page;
  let token = '';
  const faults: string[] = [];
  const journey = (): Journey => ({
    url: site.url,
    siteName: `Ferry Sheds ${tag}`,
    loggerSerial: `LG-${tag}`,
    serials: tag,
    look: async (shown, what) => {
      faults.push(...(await faultsShown(shown, what, width)));
    },
  });

  beforeAll(async () => {
    context = await signedIn('technician', width, theme);
    page = await context.newPage();
    page.setDefaultTimeout(15_000);
  });
  afterAll(() => context.close());

  it('a technician enters a new site by forms, to a serial in every slot', async () => {
    token = await buildSite(page, journey());
    const { rows } = await db.owner.query<{ placed: number; slots: number }>(
      `select count(p.id)::int as placed, count(*)::int as slots from site join slot on slot.site_id = site.id
       left join placement p on p.slot_id = slot.id and p.placed_to is null where site.name = $1`,
      [`Ferry Sheds ${tag}`],
    );
    expect(rows).toEqual([{ placed: 8, slots: 8 }]);
  });

  it('its logger comes with the token that was shown once, and gets this as-built', async () => {
    const roster = await rosterFor(token, `LG-${tag}`);
    expect(roster).toMatchObject({ type: 'roster' });
    expect(roster.strings.map((s) => [s.name, s.serials[0]])).toEqual([
      ['A1', `${tag}-A1-1`],
      ['A2', `${tag}-A2-1`],
    ]);
  });

  it('swaps two units and replaces one, with the reason; the history shows a unit’s life', async () => {
    await changeUnits(page, journey());
  });

  it('two people at one plane: the second is told who changed what, and keeps what was typed', async () => {
    const other = await signedIn('manager', width, theme);
    const theirs = await other.newPage();
    theirs.setDefaultTimeout(15_000);
    await page
      .getByRole('navigation', { name: 'Where this page is' })
      .getByRole('link', { name: 'As-built' })
      .click();
    await page.waitForURL('**/as-built');
    await hydrated(page);
    await meetAtOnePlane(page, theirs, journey());
    const { rows } = await db.owner.query<{ tilt: number; name: string }>(
      `select surface_tilt as tilt, p.name from plane p join site on site.id = p.site_id where site.name = $1`,
      [`Ferry Sheds ${tag}`],
    );
    expect(rows).toEqual([{ tilt: 17, name: 'Southern roof' }]);
    await other.close();
  });

  it('no page was too wide, and axe found nothing', () => {
    expect(faults).toEqual([]);
  });
});
