import { tmpdir } from 'node:os';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import type { LoadRun } from '../../simulator/load/run';
import { historyQuery } from '../../src/schemas/api/string';
import { paths } from '../../src/schemas/paths';
import { closePools } from '../../src/server/db/pools';
import type { Tx } from '../../src/server/db/transaction';
import { search } from '../../src/server/queries/search';
import { openCasesOfSite } from '../../src/server/services/cases';
import { siteStanding } from '../../src/server/services/causes-page';
import { lookAtFleet, readFleet, readShutdown } from '../../src/server/services/fleet';
import { readLowOutput } from '../../src/server/services/low-output';
import { readEvents, readSite } from '../../src/server/services/site-page';
import { knownString } from '../../src/server/services/string-axis';
import { readKnownHistory } from '../../src/server/services/string-history';
import { readKnownString } from '../../src/server/services/string-page';
import { percentile, usedBy } from './fleet/process';
import { plansOf } from './fleet/plans';
import { loadOn, lookerAt, printer, say, stageFleet, type Looker, type Staged } from './fleet/stage';
import { serve } from './ingest/server';

/**
 * Pages and answers over HTTP while the whole fleet reports, for one organisation that has all of it: at 1,000, 10,000 and
 * 100,000 units, beside as many readings a second as the largest of them sends, one a minute of each unit; so what grows is
 * what the size costs. With the plan of every query in a folder; fails where a plan reads a table of frames from end to end.
 * What a reading and a page cost at ten times the units, as ratios. `BENCH_SIZES` (units with commas), `BENCH_ROUNDS`.
 */
const PORT = Number(process.env.BENCH_PORT ?? 4441);
const SIZES = (process.env.BENCH_SIZES ?? '1000,10000,100000').split(',').map(Number);
const ROUNDS = Number(process.env.BENCH_ROUNDS ?? 40);
/** Before it counts, of each page: a process that has just come up has not compiled what it does often. */
const WARM_UP = 40;
const REPORT_EVERY_S = 60;
/** For what a reading costs: so many a second for so long. */
const BURST_READINGS_A_S = 10_000;
const BURST_S = 20;
/** The loggers' clocks run so much faster meanwhile. */
const SPEED = 10;
/** So long after the last logger came, what it had to say at first is done. */
const SETTLED_AFTER_S = 5;
const PLANS = process.env.BENCH_PLANS ?? path.join(tmpdir(), 'wakeline-plans');
/** What is aimed at, ms at p95. */
const AIMS = {
  fleet: 100,
  site: 80,
  string_day: 60,
  string_year: 60,
  shutdown: 100,
  search: 50,
  low_output: 100,
};
type Page = keyof typeof AIMS;
const PAGES = Object.keys(AIMS) as Page[];
const figure = printer('reads');

interface Places {
  sites: string[];
  strings: { site: string; string: string }[];
  serials: string[];
}

async function placesOf(db: pg.Client, organisationId: number): Promise<Places> {
  const { rows: strings } = await db.query<{ site: string; string: string }>(
    `select site.ref as site, s.ref as string from string s join site on site.id = s.site_id
     where site.organisation_id = $1 order by md5(s.id::text) limit 100`,
    [organisationId],
  );
  const { rows: units } = await db.query<{ serial: string }>(
    'select serial from unit where organisation_id = $1 order by md5(id::text) limit 100',
    [organisationId],
  );
  return {
    strings,
    sites: [...new Set(strings.map((s) => s.site))],
    serials: units.map((u) => u.serial),
  };
}

const of = <T>(list: readonly T[], i: number): T => {
  const item = list[i % list.length];
  if (item === undefined) throw new Error('The fleet is empty.');
  return item;
};

function addressOf(page: Page, places: Places, i: number): string {
  const { site, string } = of(places.strings, i);
  return {
    fleet: paths.fleet(),
    site: paths.site(of(places.sites, i)),
    string_day: `${paths.string(site, string)}?range=day`,
    string_year: `${paths.string(site, string)}?range=year&quantity=power`,
    shutdown: paths.shutdown(),
    search: `${paths.api.search()}?q=${of(places.serials, i).slice(0, 9)}`,
    low_output: paths.lowOutput(),
  }[page];
}

/** The same reading as the page does, for its plans. */
function reading(page: Page, places: Places, looker: Looker): (tx: Tx) => Promise<unknown> {
  const now = new Date();
  const { site, string } = of(places.strings, 7);
  const history = (query: object) => async (tx: Tx) => {
    const known = await knownString(tx, string, site);
    await readKnownString(tx, known, now);
    await readKnownHistory(tx, known, historyQuery.parse(query), now);
  };
  return {
    fleet: async (tx: Tx) => {
      await readFleet(tx, now);
      await lookAtFleet(tx, looker.personId, now);
    },
    site: async (tx: Tx) => {
      await readSite(tx, site, now);
      await openCasesOfSite(tx, site, now);
      await siteStanding(tx, site, now);
      await readEvents(tx, site, { kind: undefined, limit: 20 });
    },
    string_day: history({ range: 'day', quantity: 'voltage' }),
    string_year: history({ range: 'year', quantity: 'power' }),
    shutdown: (tx: Tx) => readShutdown(tx, now),
    search: (tx: Tx) => search(tx, of(places.serials, 7).slice(0, 9), 4),
    low_output: (tx: Tx) => readLowOutput(tx, now),
  }[page];
}

interface Cost {
  readingUs: number;
  /** Median, and what was sent. */
  pages: Record<Page, { ms: number; kB: number }>;
}

/**
 * CPU of the process for one reading, us: at each size the same readings a second, since what a process costs by itself
 * falls on as many of them, and once all loggers are there, since coming in happens once.
 */
async function costOfReading(staged: Staged, pid: number, size: number): Promise<number> {
  const burst = loadOn(staged, PORT, {
    duration: 120,
    ramp: BURST_S / 4,
    // by the interval, and no faster clock: that would run through the night, in which units say nothing
    interval: (size * SPEED) / BURST_READINGS_A_S,
    speed: SPEED,
    shutdowns: 0,
    stuck: 0,
    drain: 20,
  });
  await allConnected(burst);
  await sleep(SETTLED_AFTER_S * 1000);
  const before = { cpuS: usedBy(pid).cpuS, readings: burst.figures.acknowledgedReadings };
  await sleep(BURST_S * 1000);
  const readings = burst.figures.acknowledgedReadings - before.readings;
  const us = ((usedBy(pid).cpuS - before.cpuS) * 1e6) / Math.max(1, readings);
  await burst.stop();
  figure(`reading_${size}_cpu_us`, us, 'us', 3);
  figure(`reading_${size}_a_second`, readings / BURST_S, '1/s', 0);
  return us;
}

async function allConnected(load: LoadRun): Promise<void> {
  const deadline = Date.now() + 60_000;
  while (load.connected() < load.loggers.length && Date.now() < deadline) await sleep(200);
}

async function measure(db: pg.Client, size: number): Promise<Cost> {
  const staged = await stageFleet(size / 100);
  figure(`seed_${size}_s`, staged.seconds, 's');
  const server = await serve(PORT, 'ingest,web');
  try {
    const looker = await lookerAt(db, PORT);
    const places = await placesOf(db, looker.organisationId);
    const interval = Math.max(1, Math.round((REPORT_EVERY_S * size) / Math.max(...SIZES)));
    const load = loadOn(staged, PORT, { duration: 600, ramp: Math.max(2, size / 10_000), interval });
    await allConnected(load);
    say(`${load.connected()} loggers report; reading pages`);
    const pages = {} as Cost['pages'];
    for (const page of PAGES) {
      const took: number[] = [];
      let bytes = 0;
      for (let i = 0; i < WARM_UP + ROUNDS; i++) {
        const { ms, text } = await looker.get(addressOf(page, places, i * 7));
        bytes = Math.max(bytes, text.length);
        if (i >= WARM_UP) took.push(ms);
      }
      pages[page] = { ms: percentile(took, 0.5), kB: bytes / 1000 };
      figure(`${page}_${size}_p50_ms`, pages[page].ms, 'ms');
      figure(`${page}_${size}_p95_ms`, percentile(took, 0.95), 'ms');
      figure(`${page}_${size}_kb`, bytes / 1000, 'kB');
    }
    await load.stop();
    const readingUs = await costOfReading(staged, server.pid, size);
    const actor = { organisationId: looker.organisationId, sites: 'all' as const };
    const whole: string[] = [];
    for (const page of PAGES) {
      const planned = await plansOf(
        actor,
        reading(page, places, looker),
        path.join(PLANS, String(size), `${page}.txt`),
      );
      figure(`${page}_${size}_queries`, planned.queries, 'queries', 0);
      figure(`${page}_${size}_database_ms`, planned.ms, 'ms');
      whole.push(...planned.wholeFrames.map((table) => `${page}: ${table}`));
    }
    if (whole.length > 0)
      throw new Error(`Frames are read from end to end (plans in ${PLANS}): ${whole.join(', ')}`);
    return { readingUs, pages };
  } finally {
    await server.stop();
  }
}

const db = new pg.Client(process.env.DATABASE_URL);
await db.connect();
try {
  const costs: { size: number; cost: Cost }[] = [];
  for (const size of SIZES) costs.push({ size, cost: await measure(db, size) });
  // from each size to the next; a small fleet's page has fewer lines than fit on it, so also for as much of a page
  for (const [i, { size, cost }] of costs.entries()) {
    const smaller = costs[i - 1];
    if (!smaller) continue;
    const to = `${smaller.size}_to_${size}`;
    figure(`reading_growth_${to}`, cost.readingUs / smaller.cost.readingUs, 'ratio', 2);
    for (const page of PAGES) {
      const [now, before] = [cost.pages[page], smaller.cost.pages[page]];
      figure(`${page}_growth_${to}`, now.ms / before.ms, 'ratio', 2);
      figure(`${page}_growth_a_kb_${to}`, now.ms / now.kB / (before.ms / before.kB), 'ratio', 2);
    }
  }
  say(`plans are in ${PLANS}`);
} finally {
  await closePools();
  await db.end();
}
