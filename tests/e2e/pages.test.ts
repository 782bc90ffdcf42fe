import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Role } from '../../src/domain/access/permissions';
import { newToken, tokenHash } from '../../src/server/auth/secret-link';
import { axeFaults } from '../support/axe';
import { headingsOf, hydrated, settled, signedInContext, startLooking } from '../support/browser';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { startSite, type RunningSite } from '../support/server';
import { writeDays } from '../support/days';
import { standWatched, watchedPages, type Shown } from '../support/watched-pages';
import { command, stand } from '../support/standing';
import { ROUTES } from '../access/routes';

/** Every page, for somebody who may see it: axe, the console, the width of the screen. */
const HALL = 'Old Tannery Market Hall';
const CLINIC = 'Weirside Clinic';
const SCHOOL = 'Kestrel Row School';
const GALLERY = 'Coopers Wharf Gallery';
/** Links of the clinic. */
const SHARED = newToken();
const SCREEN = newToken();

let db: TestDatabase;
let fleet: TestFleet;
let site: RunningSite;
let browser: Browser;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, CLINIC, SCHOOL, GALLERY, 'Slate Lane Library']);
  // a moment ago: the running site judges what has long been silent for itself
  const at = new Date();
  await stand(db.owner, fleet.site(HALL), at, (string) => (string === 'B4' ? { state: 'unheard' } : null));
  await stand(db.owner, fleet.site(CLINIC), at);
  await stand(db.owner, fleet.site(SCHOOL), at, (string, position) =>
    string === 'A1' && position < 3 ? { state: 'shutdown', verdict: 'stuck' } : null,
  );
  const [zone] = [...fleet.site(SCHOOL).zones.keys()];
  if (zone) await command(db.owner, fleet.site(SCHOOL), zone, 'initiator', new Date(at.getTime() - 600_000));
  await writeDays(db.owner, fleet.site(CLINIC).id, {
    from: new Date(at.getTime() - 400 * 86_400_000).toISOString().slice(0, 10),
    count: 401,
    nameplate: 40_000,
    sun: 3,
    lost: 20,
  });
  await standWatched(db.owner, fleet.site(SCHOOL));
  for (const [token, kiosk] of [
    [SHARED, false],
    [SCREEN, true],
  ] as const)
    await db.owner.query(
      `insert into share_link (site_id, label, kiosk, token_hash, created_by)
       select $1, 'Lobby', $2, $3, id from person where email = 'manager@lowfield.example'`,
      [fleet.site(CLINIC).id, kiosk, tokenHash(token)],
    );
  site = await startSite(db, { WAKELINE_ROLES: 'web' });
  browser = await startLooking();
});
afterAll(async () => {
  await browser.close();
  await site.stop();
  await db.drop();
});

interface Look {
  width: number;
  scheme: 'light' | 'dark';
}
/** Each width and each scheme once: colours don't change with the width, nor widths with the colours. */
const LOOKS: readonly [Look, Look] = [
  { width: 1440, scheme: 'light' },
  { width: 390, scheme: 'dark' },
];
/** The order for a window's next page: it goes on in the look that it has, or the page before would be drawn once more. */
const order = new WeakMap<Page, readonly [Look, Look]>();
/** One page for each who looks: a new one would be a new process, which reads axe and the site's scripts anew. */
const windows = new Map<Role | null, Promise<Page>>();
function pageFor(role: Role | null): Promise<Page> {
  const options = { reducedMotion: 'reduce' } as const;
  const window =
    windows.get(role) ??
    (role ? signedInContext(browser, site.url, role, options) : browser.newContext(options)).then((context) =>
      context.newPage(),
    );
  windows.set(role, window);
  return window;
}
async function lookAs(page: Page, { width, scheme }: Look): Promise<void> {
  await page.setViewportSize({ width, height: 900 });
  await page.emulateMedia({ colorScheme: scheme });
}

const refOf = (name: string) => fleet.site(name).ref;
const stringOf = (name: string, string: string) => fleet.site(name).strings.get(string)?.ref ?? '';
const PAGES: readonly Shown[] = [
  { name: 'fleet', role: 'analyst', path: () => '/', file: 'index.astro' },
  { name: 'shutdown', role: 'analyst', path: () => '/shutdown', file: 'shutdown.astro' },
  { name: 'a reading', role: 'technician', path: () => '/try-a-reading', file: 'try-a-reading.astro' },
  { name: 'methods', role: 'analyst', path: () => '/methods', file: 'methods.astro' },
  {
    name: 'a reading to try',
    role: 'technician',
    path: () => '/try-a-reading?v=7.8&others=14%3A8.4',
    file: 'try-a-reading.astro',
  },
  { name: 'programming interface', role: 'analyst', path: () => '/developers', file: 'developers.astro' },
  { name: 'methods, for an owner', role: 'customer', path: () => '/methods', file: 'methods.astro' },
  { name: 'status', role: 'manager', path: () => '/status', file: 'status.astro' },
  {
    name: 'site',
    role: 'technician',
    path: () => `/sites/${refOf(SCHOOL)}`,
    file: 'sites/[site]/index.astro',
  },
  {
    name: 'site of shutdown-only units',
    role: 'technician',
    path: () => `/sites/${refOf(GALLERY)}`,
    file: 'sites/[site]/index.astro',
  },
  {
    name: 'string',
    role: 'analyst',
    path: () => `/sites/${refOf(SCHOOL)}/strings/${stringOf(SCHOOL, 'A1')}`,
    file: 'sites/[site]/strings/[string].astro',
  },
  { name: 'low strings', role: 'analyst', path: () => '/low-output', file: 'low-output.astro' },
  {
    name: 'the walk over a roof',
    role: 'technician',
    path: () => `/commissioning/${refOf(SCHOOL)}/walk`,
    file: 'commissioning/[site]/walk.astro',
  },
  {
    name: 'a ladder card',
    role: 'technician',
    path: () => `/commissioning/${refOf(SCHOOL)}/walk?view=card`,
    file: 'commissioning/[site]/walk.astro',
  },
  {
    name: 'who is in which string',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/membership`,
    file: 'commissioning/[site]/membership.astro',
  },
  {
    name: 'commissioning',
    role: 'technician',
    path: () => '/commissioning',
    file: 'commissioning/index.astro',
  },
  {
    name: 'roll call, for somebody who may start it',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/roll-call`,
    file: 'commissioning/[site]/roll-call.astro',
  },
  {
    name: 'roll call, for somebody who reads',
    role: 'analyst',
    path: () => `/commissioning/${refOf(HALL)}/roll-call?strings=missing`,
    file: 'commissioning/[site]/roll-call.astro',
  },
  { name: 'equipment', role: 'technician', path: () => '/equipment', file: 'equipment/index.astro' },
  {
    name: 'connectors and their pairs',
    role: 'manager',
    path: () => '/equipment/connectors',
    file: 'equipment/[family]/index.astro',
  },
  {
    name: 'a new module type',
    role: 'technician',
    path: () => '/equipment/modules/new',
    file: 'equipment/[family]/[type].astro',
  },
  {
    name: 'a new unit type',
    role: 'technician',
    path: () => '/equipment/units/new',
    file: 'equipment/[family]/[type].astro',
  },
  {
    name: 'types from a file',
    role: 'technician',
    path: () => '/equipment/inverters/import',
    file: 'equipment/[family]/import.astro',
  },
  {
    name: 'design checks',
    role: 'analyst',
    path: () => `/commissioning/${refOf(GALLERY)}/design?show=all`,
    file: 'commissioning/[site]/design.astro',
  },
  { name: 'the roofs of an owner', role: 'customer', path: () => '/my-site', file: 'my-site/index.astro' },
  { name: 'a roof', role: 'customer', path: () => `/my-site/${refOf(CLINIC)}`, file: 'my-site/[site].astro' },
  { name: 'a shared page', role: null, path: () => `/shared/${SHARED}`, file: 'shared/[token].astro' },
  { name: 'a lobby screen', role: null, path: () => `/shared/${SCREEN}`, file: 'shared/[token].astro' },
  {
    name: 'a link that is over',
    role: null,
    path: () => `/shared/${newToken()}`,
    file: 'shared/[token].astro',
    status: 404,
  },
  {
    name: 'a site on its way',
    role: 'manager',
    path: () => `/commissioning/${refOf(HALL)}`,
    file: 'commissioning/[site]/index.astro',
  },
  {
    name: 'the same for who only reads',
    role: 'analyst',
    path: () => `/commissioning/${refOf(HALL)}`,
    file: 'commissioning/[site]/index.astro',
  },
  {
    name: 'the as-built',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/as-built`,
    file: 'commissioning/[site]/as-built.astro',
  },
  {
    name: 'install checks',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/checks`,
    file: 'commissioning/[site]/checks.astro',
  },
  {
    name: 'meter readings',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/readings`,
    file: 'commissioning/[site]/readings.astro',
  },
  {
    name: 'who changed what',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/history`,
    file: 'commissioning/[site]/history.astro',
  },
  {
    name: 'serials from a file',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/import`,
    file: 'commissioning/[site]/import.astro',
  },
  {
    name: 'serials on the roof',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/serials`,
    file: 'commissioning/[site]/serials.astro',
  },
  {
    name: 'the roof plan',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/roof`,
    file: 'commissioning/[site]/roof.astro',
  },
  {
    name: 'the handover',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/handover`,
    file: 'commissioning/[site]/handover.astro',
  },
  {
    name: 'shutdown tests',
    role: 'technician',
    path: () => `/commissioning/${refOf(HALL)}/shutdown-test`,
    file: 'commissioning/[site]/shutdown-test/index.astro',
  },
  {
    name: 'a new site',
    role: 'technician',
    path: () => '/commissioning/new',
    file: 'commissioning/new.astro',
  },
  {
    name: 'the phone',
    role: 'technician',
    path: () => `/capture/${refOf(HALL)}`,
    file: 'capture/[site].astro',
  },
  { name: 'the phone without a site', role: null, path: () => '/capture', file: 'capture/index.astro' },
  { name: 'people', role: 'manager', path: () => '/people', file: 'people.astro' },
  { name: 'who did what', role: 'manager', path: () => '/audit', file: 'audit.astro' },
  ...watchedPages(() => refOf(SCHOOL)),
  { name: 'settings', role: 'manager', path: () => '/settings', file: 'settings.astro' },
  { name: 'figures', role: 'analyst', path: () => '/figures', file: 'figures.astro' },
  {
    name: 'figures of a site',
    role: 'manager',
    path: () => `/sites/${refOf(CLINIC)}/figures`,
    file: 'sites/[site]/figures.astro',
  },
  {
    name: 'a year of a site',
    role: 'analyst',
    path: () => `/sites/${refOf(CLINIC)}/figures?period=2025`,
    file: 'sites/[site]/figures.astro',
  },
  {
    name: 'loggers of a site',
    role: 'technician',
    path: () => `/sites/${refOf(CLINIC)}/loggers`,
    file: 'sites/[site]/loggers.astro',
  },
  {
    name: 'earlier readings of a site',
    role: 'analyst',
    path: () => `/sites/${refOf(CLINIC)}/history-import`,
    file: 'sites/[site]/history-import.astro',
  },
  { name: 'letters', role: 'manager', path: () => '/mail', file: 'mail.astro' },
  { name: 'an account', role: 'analyst', path: () => '/account', file: 'account.astro' },
  { name: 'the account of an owner', role: 'customer', path: () => '/account', file: 'account.astro' },
  { name: 'a forgotten password', role: null, path: () => '/forgot-password', file: 'forgot-password.astro' },
  {
    name: 'an invitation that is over',
    role: null,
    path: () => `/invitation/${newToken()}`,
    file: 'invitation/[token].astro',
    status: 404,
  },
  {
    name: 'a password link that is over',
    role: null,
    path: () => `/new-password/${newToken()}`,
    file: 'new-password/[token].astro',
    status: 404,
  },
  {
    name: 'an address to confirm',
    role: null,
    path: () => `/confirm-email/${newToken()}`,
    file: 'confirm-email/[token].astro',
  },
  { name: 'sign-in', role: null, path: () => '/sign-in', file: 'sign-in.astro' },
  { name: 'nothing here', role: 'analyst', path: () => '/nothing-here', file: '404.astro', status: 404 },
  {
    name: 'a refusal',
    role: 'customer',
    path: () => '/shutdown',
    file: 'problem.astro',
    status: 403,
  },
];

/** Everything that is wrong with a page, in each look; empty: nothing. */
async function faultsOf(page: Page, shown: Shown): Promise<string[]> {
  const faults: string[] = [];
  page.on('console', (m) => {
    // the browser itself reports the status of a page that is meant to be refused
    if (m.type() === 'error' && !(shown.status && /status of \d+/.test(m.text())))
      faults.push(`console: ${m.text()}`);
  });
  page.on('pageerror', (e) => faults.push(`script: ${e.message}`));
  const looks = order.get(page) ?? LOOKS;
  order.set(page, [looks[1], looks[0]]);
  await lookAs(page, looks[0]);
  const response = await page.goto(site.url + shown.path(), { waitUntil: 'load' });
  if (response?.status() !== (shown.status ?? 200)) faults.push(`status ${response?.status()}`);
  await hydrated(page); // without a word in the console
  const headings = await headingsOf(page);
  if (headings !== 1) faults.push(`${headings} headings of the first level`);
  for (const look of looks) {
    await lookAs(page, look);
    await settled(page);
    const wider = await page.evaluate(
      () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
    );
    const found = [...(wider > 0 ? [`${wider} px wider than the screen`] : []), ...(await axeFaults(page))];
    faults.push(...found.map((f) => `${look.width} px, ${look.scheme}: ${f}`));
  }
  return faults;
}

describe('on a desk in light and a phone in the dark', () => {
  it.each(PAGES)('$name', async (shown) => {
    const page = await pageFor(shown.role);
    try {
      expect(await faultsOf(page, shown)).toEqual([]);
    } finally {
      page.removeAllListeners(); // what is said after this is another test's
    }
  });
});

it('no page is left out', () => {
  // a fault has no page to look at; a shutdown test is looked at in its own journey, which has made one
  const elsewhere = ['500.astro', 'commissioning/[site]/shutdown-test/[test].astro'];
  const pages = ROUTES.filter((r) => r.file.endsWith('.astro') && !elsewhere.includes(r.file)).map(
    (r) => r.file,
  );
  expect([...new Set(PAGES.map((p) => p.file))].sort()).toEqual([...new Set(pages)].sort());
});
